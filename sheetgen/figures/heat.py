"""Heat capacity: electrons, lattice and their sum with the crossing; and C/T against T², the way γ is measured."""

from __future__ import annotations

import numpy as np

from sheetgen.figures.layout import stacked
from sheetgen.figures.plot import Axis, Curve, Figure, Panel, Plot, Points, Rule, keys_of
from sheetgen.figures.scales import decades, snap_up
from sheetgen.figures.stamp import stamp
from sheetgen.figures.subject import Subject, si_arrays
from sheetgen.figures.words import number

TEMPERATURES = np.geomspace(1.0, 1000.0, 101)
SQUARES = np.linspace(0.0, 20.0, 21)
MILLI = 1e-3


def draw(subject: Subject) -> Figure | None:
    """Heat capacities of one material."""
    needed = ("electron_heat_capacity", "lattice_heat_capacity", "heat_coefficient")
    return stamp(plot(subject)) if subject.has(*needed) else None


def plot(subject: Subject) -> Plot:
    """The two parts over three decades of temperature, and the first 4.5 K as C/T against T²."""
    height, upper, lower = stacked(92, 86, (2, 1))
    layers, straight = _capacities(subject), _over_temperature(subject)
    joined = np.concatenate([layer.y for layer in layers if isinstance(layer, Curve)])
    top = snap_up(1.05 * max(float(np.max(layer.y)) for layer in straight if not isinstance(layer, Rule)))
    panels = (
        Panel(
            upper,
            Axis("*T* / K", 1, 1000, "log"),
            Axis("*C* / (J mol⁻¹ K⁻¹)", *decades(np.maximum(joined, 1e-5), every=1), "log"),
            layers,
            keys_of(layers),
            3,
        ),
        Panel(
            lower,
            Axis("*T*² / K²", 0, 20),
            Axis("*C*/*T* / (mJ mol⁻¹ K⁻²)", 0, top),
            straight,
            tuple(key for key in keys_of(straight) if key.name not in {layer.name for layer in layers}),
            3,
        ),
    )
    return Plot("heat", subject.slug, f"Heat capacity: {subject.name}", _words(subject), panels, height)


def _capacities(subject: Subject) -> tuple:
    electrons = subject.curve("electron_heat_capacity", temperature=TEMPERATURES)
    lattice = subject.curve("lattice_heat_capacity", temperature=TEMPERATURES)
    layers = [
        Curve("sum", TEMPERATURES, electrons + lattice, "thin"),
        Curve("electrons", TEMPERATURES, electrons, "one"),
        Curve("lattice", TEMPERATURES, lattice, "three"),
    ]
    coefficient = subject.input("measured_heat_coefficient")
    if np.isfinite(coefficient):
        layers.append(Curve("electrons, *γT* with measured *γ*", TEMPERATURES, coefficient * TEMPERATURES, "two"))
    crossing = subject.si("heat_crossover_temperature")
    if np.isfinite(crossing):
        level = subject.curve("lattice_heat_capacity", temperature=np.array([crossing]))
        layers.append(Points("crossing", np.array([crossing]), level, "open"))
    return tuple(layers)


def _over_temperature(subject: Subject) -> tuple:
    """C/T; its limit at T = 0 is γ, which is the sheet's own number."""
    temperatures = np.sqrt(SQUARES[1:])
    electrons = subject.curve("electron_heat_capacity", temperature=temperatures) / temperatures
    lattice = subject.curve("lattice_heat_capacity", temperature=temperatures) / temperatures
    electrons = np.concatenate(([subject.si("heat_coefficient")], electrons)) / MILLI
    lattice = np.concatenate(([0.0], lattice)) / MILLI
    layers = [Curve("sum", SQUARES, electrons + lattice, "thin"), Curve("electrons", SQUARES, electrons, "one")]
    measured = subject.measured("heat_coefficient")
    if measured:
        coefficients, uncertainties = si_arrays(measured, MILLI)
        layers += [
            Curve("sum with measured *γ*", SQUARES, coefficients[0] + lattice, "two"),
            Points("*γ* measured", np.zeros(len(measured)), coefficients, "two", uncertainties),
        ]
    return tuple(layers)


def _words(subject: Subject) -> str:
    text = (
        f"Molar heat capacity of {subject.phrase} from 1 to 1000 kelvin: free electrons, Debye lattice and their sum; "
        f"below, C/T against T squared, which starts at the model's heat coefficient of "
        f"{number(subject.si('heat_coefficient') / MILLI)} millijoule per mole and kelvin squared"
    )
    measured = subject.input("measured_heat_coefficient") / MILLI
    text += f" (measured {number(measured)})." if np.isfinite(measured) else "."
    crossing = subject.si("heat_crossover_temperature")
    return text + (f" The two parts are equal at {number(crossing)} kelvin." if np.isfinite(crossing) else "")
