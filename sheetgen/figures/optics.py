"""Reflectance and permittivity against photon energy, with the plasma edge and the measured optical constants."""

from __future__ import annotations

import numpy as np
from scipy import constants as c

from sheetgen.figures.layout import stacked
from sheetgen.figures.markup import plain
from sheetgen.figures.plot import Area, Axis, Curve, Figure, Key, Panel, Plot, Points, Rule, keys_of
from sheetgen.figures.scales import FINE_STEPS, snap_up
from sheetgen.figures.stamp import stamp
from sheetgen.figures.subject import Subject
from sheetgen.figures.words import number
from sheetgen.physics import drude

PERMITTIVITY_RANGE = (-20.0, 10.0)


def draw(subject: Subject) -> Figure | None:
    """Reflectance and permittivity of one material."""
    return stamp(plot(subject)) if subject.has("normal_reflectance", "plasma_energy") else None


def plot(subject: Subject) -> Plot:
    """Two panels over the same photon energies."""
    end = snap_up(1.3 * subject.si("plasma_energy") / c.e, FINE_STEPS)
    # Dense where the damping bends the curves, at the low end, and even elsewhere.
    energies = np.union1d(np.linspace(end / 400, end, 180), np.geomspace(end / 4000, end / 10, 40))
    height, upper, lower = stacked(80, 88, (2, 2), shared=True)
    x = Axis("*ħω* / eV", 0, end)
    above = Axis("", 0, end, blank=True, column=plain(x.label))
    reflectance, permittivity = _reflectance(subject, energies), _permittivity(subject, energies)
    panels = (
        Panel(upper, above, Axis("*R*", 0, 1.05), reflectance, keys_of(reflectance), 3),
        Panel(lower, x, Axis("*ε*", *PERMITTIVITY_RANGE), permittivity, _keys(permittivity), 2),
    )
    title = f"Reflectance and permittivity: {subject.name}"
    return Plot("optics", subject.slug, title, _words(subject), panels, height)


def _keys(permittivity: tuple) -> tuple[Key, ...]:
    """The upper panel's legend names the shading and the edge already."""
    return tuple(key for key in keys_of(permittivity) if "part" in key.name)


def _reflectance(subject: Subject, energies: np.ndarray) -> tuple:
    model = subject.curve("normal_reflectance", photon_energy=energies * c.e)
    layers = [*_threshold(subject, energies[-1]), Curve("Drude", energies, model)]
    if subject.has("plasma_edge_energy"):
        layers.append(Rule("plasma edge", x=subject.si("plasma_edge_energy") / c.e))
    if subject.record.optical:
        measured, index = _measured(subject)
        layers.append(Points("measured", measured, drude.normal_reflectance(index), "two"))
    return tuple(layers)


def _permittivity(subject: Subject, energies: np.ndarray) -> tuple:
    model = drude.permittivity(
        energies * c.e / c.hbar,
        subject.number("bare_plasma_frequency"),
        subject.number("reference_relaxation_time"),
        subject.input("background_permittivity"),
    )
    layers = [
        *_threshold(subject, energies[-1]),
        Rule("", y=0.0, look="axis"),
        Curve("real part", energies, model.real),
        Curve("imaginary part", energies, model.imag, "three"),
    ]
    if subject.has("plasma_edge_energy"):
        layers.append(Rule("", x=subject.si("plasma_edge_energy") / c.e))
    if subject.record.optical:
        measured, index = _measured(subject)
        layers += [
            Points("real part, measured", measured, (index**2).real, "two"),
            Points("imaginary part, measured", measured, (index**2).imag, "ring"),
        ]
    return tuple(layers)


def _measured(subject: Subject) -> tuple[np.ndarray, np.ndarray]:
    points = subject.record.optical
    energies = np.array([point.photon_energy.si for point in points]) / c.e
    return energies, np.array([complex(point.n.si, point.k.si) for point in points])


def _threshold(subject: Subject, end: float) -> list[Area]:
    """The energies at which transitions between bands add to what free electrons do."""
    start = subject.input("measured_interband_threshold") / c.e
    if not start < end:
        return []
    x = np.array([start, 1e3])
    return [Area("interband transitions", x, np.full(2, -1e9), np.full(2, 1e9), "faint", unlisted=True)]


def _words(subject: Subject) -> str:
    text = (
        f"Normal reflectance of {subject.phrase} and the real and imaginary parts of its permittivity by the Drude "
        f"model, against photon energy; plasmon energy {number(subject.si('plasma_energy') / c.e)} eV"
    )
    if subject.has("plasma_edge_energy"):
        text += f", reflectance edge {number(subject.si('plasma_edge_energy') / c.e)} eV"
    threshold = subject.input("measured_interband_threshold") / c.e
    if np.isfinite(threshold):
        text += f", interband transitions from {number(threshold)} eV on (shaded)"
    count = len(subject.record.optical)
    return text + (f"; {count} points from measured optical constants." if count else ".")
