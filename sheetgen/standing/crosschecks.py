"""Does a record fit itself? Each check compares inputs with one another and says with numbers what does not fit."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from math import hypot

from sheetgen.faults import Fault, FaultLog, did_you_mean
from sheetgen.quantities.inputs import NEARBY, resistance_key, resistivities, temperature_of
from sheetgen.records import Imprint, Record, Value
from sheetgen.standing.confrontation import Confrontation
from sheetgen.standing.grading import OUTSIDE, UNCHECKED

DENSITY = 0.02  # common practice, no source: larger differences are a wrong cell, weight or phase
NEAREST = (1.4, 6.5)  # Å; between twice the smallest and twice the largest metallic radius, common practice
LORENZ = (0.5, 2.0)  # common practice, no source
CURVE = (0.75, 1.35)  # measured resistivity over the Bloch–Grüneisen curve, common practice
HEAT = (0.1, 25.0)  # measured over free-electron heat coefficient, common practice
APART = 60.0  # K between the cell and the reference resistivity, over which the density changes by a percent


@dataclass(frozen=True)
class Subject:
    """What the checks look at: a record, its confrontations, and the distances of its crystal in SI."""

    record: Record
    imprint: Imprint
    confrontations: tuple[Confrontation, ...]
    nearest_neighbour: float

    def ratios(self, quantity: str) -> Iterator[tuple[Confrontation, Value]]:
        """The confrontations of a quantity that have a ratio, each with the value it was measured as."""
        for confrontation in self.confrontations:
            if confrontation.quantity == quantity and confrontation.ratio is not None:
                value = self._value(quantity, confrontation)
                if value is not None and confrontation.standing not in (OUTSIDE, UNCHECKED):
                    yield confrontation, value

    def _value(self, quantity: str, confrontation: Confrontation) -> Value | None:
        keys = {"electron_thermal_conductivity": "thermal_conductivity", "resistivity_from_debye": "resistivity"}
        values = self.record.measured.get(keys.get(quantity, quantity), ())
        at = confrontation.temperature
        fitting = [v for v in values if at is None or abs(temperature_of(v, self.imprint) - at) < 1e-6]
        return (fitting or list(values) or [None])[0]


def crosschecks(subject: Subject) -> list[Fault]:
    """What does not fit, as remarks; those that the imprint makes faults are faults."""
    strict = subject.imprint.remarks_as_faults
    found = []
    for name, check in CHECKS.items():
        severity = "fault" if name in strict else "remark"
        found += [Fault(value.place, f"{name}: {message}", severity) for value, message in check(subject)]
    return found


def check_names(imprint: Imprint, log: FaultLog) -> None:
    """Note a fault for each check that the imprint names and that does not exist."""
    for name in imprint.remarks_as_faults:
        if name not in CHECKS:
            expected = ", ".join(CHECKS)
            guess = did_you_mean(name, CHECKS)
            log.fault(
                imprint.place, f"remarks as faults: no check is named '{name}'; expected one of {expected}.{guess}"
            )


def _density(subject: Subject) -> Iterator[tuple[Value, str]]:
    for confrontation, value in subject.ratios("mass_density"):
        if abs(confrontation.ratio - 1) > DENSITY:
            yield (
                value,
                f"the measured density {value.text} is {_percent(confrontation.ratio)} the X-ray density "
                f"{confrontation.model / 1000:.4g} g/cm³ of the cell; expected within {DENSITY:.0%}. "
                "Check the cell, its temperature and the phase.",
            )


def _nearest(subject: Subject) -> Iterator[tuple[Value, str]]:
    distance = subject.nearest_neighbour * 1e10
    low, high = NEAREST
    if subject.record.crystal is not None and not low <= distance <= high:
        yield (
            subject.record.crystal.a,
            f"the nearest neighbours are {distance:.3g} Å apart; expected between {low:g} and {high:g} Å. "
            "Check the cell constants and the positions.",
        )


def _rising(subject: Subject) -> Iterator[tuple[Value, str]]:
    values = resistivities(subject.record, subject.imprint)
    ordered = sorted(values, key=lambda value: temperature_of(value, subject.imprint))
    for colder, warmer in zip(ordered, ordered[1:], strict=False):
        here, there = (temperature_of(value, subject.imprint) for value in (colder, warmer))
        drop = colder.si - warmer.si
        noise = 2 * hypot(colder.si_uncertainty or 0.0, warmer.si_uncertainty or 0.0)
        if there > here and drop > noise and subject.record.electrons.valence is not None:
            yield (
                warmer,
                f"{resistance_key(subject.record).replace('_', ' ')} {warmer.text} at {there:g} K is below "
                f"{colder.text} at {here:g} K; expected to rise with temperature in a metal. "
                "Check both and their units.",
            )


def _lorenz(subject: Subject) -> Iterator[tuple[Value, str]]:
    yield from _ratio(
        subject, "electron_thermal_conductivity", LORENZ, "the Lorenz number κρ/T over the theoretical one",
        f"Check that κ and ρ are of one sample, within {NEARBY:g} K",
    )  # fmt: skip


def _curve(subject: Subject) -> Iterator[tuple[Value, str]]:
    yield from _ratio(
        subject, "resistivity_from_debye", CURVE, "resistivity over the Bloch–Grüneisen curve through the reference",
        "Check the value, its temperature, the residual resistivity and the Debye temperature",
    )  # fmt: skip


def _heat(subject: Subject) -> Iterator[tuple[Value, str]]:
    yield from _ratio(
        subject, "heat_coefficient", HEAT, "heat coefficient over that of free electrons",
        "Check that it is per mole of formula units and not per gram",
    )  # fmt: skip


def _ratio(subject: Subject, quantity: str, bounds, name: str, mend: str) -> Iterator[tuple[Value, str]]:
    low, high = bounds
    for confrontation, value in subject.ratios(quantity):
        if not low <= confrontation.ratio <= high:
            at = "" if confrontation.temperature is None else f" at {confrontation.temperature:g} K"
            yield value, f"{name}{at} is {confrontation.ratio:.3g}; expected {low:g} to {high:g}. {mend}."


def _temperatures(subject: Subject) -> Iterator[tuple[Value, str]]:
    crystal, reference = subject.record.crystal, subject.imprint.reference_temperature
    if crystal is None or crystal.a.temperature is None or not resistivities(subject.record, subject.imprint):
        return
    if abs(crystal.a.temperature - reference) > APART:
        yield (
            crystal.a,
            f"the cell is given at {crystal.a.temperature:g} K, the reference temperature is {reference:g} K; expected "
            f"within {APART:g} K. The density, and with it each number, is that of the cell.",
        )


def _percent(ratio: float) -> str:
    return f"{abs(ratio - 1):.1%} {'above' if ratio > 1 else 'below'}"


CHECKS: dict[str, Callable[[Subject], Iterator[tuple[Value, str]]]] = {
    "density": _density,
    "neighbours": _nearest,
    "resistivity slope": _rising,
    "Lorenz ratio": _lorenz,
    "resistivity curve": _curve,
    "heat coefficient": _heat,
    "temperatures": _temperatures,
}
