"""Density of states: the filled part at absolute zero, and the thermal edge at the tabulated temperatures."""

from __future__ import annotations

import numpy as np
from scipy import constants as c
from scipy.special import expit

from sheetgen.figures.layout import rows_for, single
from sheetgen.figures.plot import Area, Axis, Curve, Figure, Note, Panel, Plot, Rule, keys_of
from sheetgen.figures.scales import FINE_STEPS, snap_up
from sheetgen.figures.stamp import stamp
from sheetgen.figures.subject import Subject
from sheetgen.figures.words import energy, energy_unit, enumeration, kelvin, number

# States per electronvolt and cubic (square) nanometre.
UNIT = {3: c.e * 1e-27, 2: c.e * 1e-18}
LABEL = {3: "*g* / (eV⁻¹ nm⁻³)", 2: "*g* / (eV⁻¹ nm⁻²)"}
LOOKS = ("two", "three", "four", "ink")


def draw(subject: Subject) -> Figure | None:
    """The density of states of one material."""
    return stamp(plot(subject)) if subject.has("fermi_energy", "density_of_states") else None


def plot(subject: Subject) -> Plot:
    """g(E) with the part that is filled at T = 0, and the filled part at each tabulated temperature."""
    level = subject.si("fermi_energy")
    joules, name = energy_unit(level)
    end = snap_up(1.25 * level / joules) * joules
    energies, states = density_of_states(subject, end)
    filled_energy, filled_states = density_of_states(subject, level)
    unit = UNIT[subject.dimension]
    top = snap_up(1.12 * float(states.max()) * unit, FINE_STEPS)
    layers = [
        Area("filled at *T* = 0", filled_energy / joules, 0 * filled_states, filled_states * unit),
        Curve("all states", energies / joules, states * unit, "thin"),
    ]
    for index, temperature in list(enumerate(subject.temperatures))[: len(LOOKS)]:
        filled_part = states * occupation(energies, subject.si("chemical_potential", index), temperature)
        layers.append(Curve(f"filled at {kelvin(temperature)}", energies / joules, filled_part * unit, LOOKS[index]))
    layers.append(Rule("Fermi level", x=level / joules, look="rule"))
    layers.append(Note(f"*E*_{{F}} = {energy(level)}", level / joules, top, "end", dx=-3, dy=-9, ink="ink"))
    x, y = Axis(f"*E* / {name}", 0, end / joules), Axis(LABEL[subject.dimension], 0, top)
    panel = Panel(single(rows_for(layers, 3)), x, y, tuple(layers), keys_of(tuple(layers)), 3)
    return Plot("density-of-states", subject.slug, f"Density of states: {subject.name}", _words(subject), (panel,))


def density_of_states(subject: Subject, end: float) -> tuple[np.ndarray, np.ndarray]:
    """Energies from the band bottom to an end (J) and the density of states there, in SI units.

    The states at an energy are those at the Fermi level of the same gas diluted until its level is that energy.
    """
    level, density = subject.si("fermi_energy"), subject.si(subject.density_name)
    wavevectors = np.linspace(1e-3, 1.0, 360) * np.sqrt(end / level)
    given = {subject.density_name: density * wavevectors**subject.dimension}
    return subject.curve("fermi_energy", **given), subject.curve("density_of_states", **given)


def occupation(energy: np.ndarray, chemical_potential: float, temperature: float) -> np.ndarray:
    """The filled share of the states at an energy (J) by Fermi and Dirac; at T = 0 a step."""
    if temperature == 0:
        return np.heaviside(chemical_potential - energy, 0.5)
    return expit((chemical_potential - energy) / (c.k * temperature))


def _words(subject: Subject) -> str:
    shape = {3: "rising as the square root of the energy", 2: "the same at every energy"}[subject.dimension]
    return (
        f"Free-electron density of states of {subject.phrase}, {shape}; at the Fermi energy of "
        f"{energy(subject.si('fermi_energy'))} it is "
        f"{number(subject.si('density_of_states') * UNIT[subject.dimension])} per electronvolt and "
        f"{'cubic' if subject.dimension == 3 else 'square'} nanometre. The filled part is shown at absolute zero "
        f"and at {enumeration([kelvin(t) for t in subject.temperatures[: len(LOOKS)]])}."
    )
