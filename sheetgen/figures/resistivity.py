"""Resistivity against temperature: Bloch–Grüneisen through the reference point, and every measured point."""

from __future__ import annotations

import numpy as np

from sheetgen.figures.layout import single
from sheetgen.figures.plot import Axis, Curve, Figure, Panel, Plot, Points, Rule, keys_of
from sheetgen.figures.scales import decades
from sheetgen.figures.stamp import stamp
from sheetgen.figures.subject import Subject, si_arrays
from sheetgen.figures.words import kelvin, number

MICROOHM_CENTIMETRE = 1e-8
TEMPERATURES = np.geomspace(1.0, 1000.0, 121)
TEMPERATURE_AXIS = Axis("*T* / K", 1, 1000, "log")


def draw(subject: Subject) -> Figure | None:
    """ρ(T) of one material."""
    return stamp(plot(subject)) if subject.has("resistivity_from_debye") else None


def plot(subject: Subject) -> Plot:
    """The law and the measurements on logarithmic axes, over the three decades where metals are used."""
    law = subject.curve("resistivity_from_debye", temperature=TEMPERATURES) / MICROOHM_CENTIMETRE
    residual = subject.input("measured_residual_resistivity") / MICROOHM_CENTIMETRE
    layers = [Curve("Bloch–Grüneisen", TEMPERATURES, law)]
    if residual > 0:
        layers += [
            Curve("phonons alone", TEMPERATURES, np.maximum(law - residual, 0), "three"),
            Rule("residual", y=residual, look="level"),
        ]
    layers += _measured(subject)
    axis = Axis("*ρ* / (µΩ cm)", *_range(subject, law, residual), "log")
    panel = Panel(single(2), TEMPERATURE_AXIS, axis, tuple(layers), keys_of(tuple(layers)), 3)
    title = f"Resistivity against temperature: {subject.name}"
    return Plot("resistivity", subject.slug, title, _words(subject, residual), (panel,))


def _measured(subject: Subject) -> list[Points]:
    reference = subject.reference_resistivity
    others = [value for value in subject.measured("resistivity") if value is not reference]
    groups = (("measured", others, "two"), ("reference", [reference], "open"))
    return [_points(subject, name, values, look) for name, values, look in groups if values]


def _points(subject: Subject, name: str, values: list, look: str) -> Points:
    resistivities, uncertainties = si_arrays(values, MICROOHM_CENTIMETRE)
    temperatures = np.array([subject.temperature_of(value) for value in values])
    return Points(name, temperatures, resistivities, look, uncertainties)


def _range(subject: Subject, law: np.ndarray, residual: float) -> tuple[float, float]:
    """All measurements, and three decades below the reference where nothing was measured further down."""
    measured = np.array([value.si for value in subject.measured("resistivity")]) / MICROOHM_CENTIMETRE
    floor = residual if residual > 0 else max(law.min(), subject.reference_resistivity.si / MICROOHM_CENTIMETRE / 1e3)
    return decades([*measured[measured > 0], floor * 0.8, law.max()], least=2)


def _words(subject: Subject, residual: float) -> str:
    reference = subject.reference_resistivity
    count = len(subject.measured("resistivity"))
    return (
        f"Resistivity of {subject.phrase} from 1 to 1000 kelvin by the Bloch–Grüneisen law through "
        f"{number(reference.si / MICROOHM_CENTIMETRE)} microohm centimetre at "
        f"{kelvin(subject.temperature_of(reference))}"
        + (f", with a residual part of {number(residual)} microohm centimetre" if residual > 0 else "")
        + f"; {count} measured {'value' if count == 1 else 'values'} with standard uncertainties."
    )
