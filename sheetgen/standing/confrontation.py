"""Each number held against what was measured of the same material."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from math import hypot

from scipy import constants

from sheetgen.quantities import Definition
from sheetgen.quantities.inputs import NEARBY, nearest, reference_resistivity, resistivities, temperature_of
from sheetgen.records import Imprint, OpticalPoint, Record, Value
from sheetgen.standing.grading import OUTSIDE, UNCHECKED, Thresholds
from sheetgen.standing.limits import Limits
from sheetgen.uncertainty import Derived, Number


@dataclass(frozen=True)
class Confrontation:
    """One number beside its measurement; `model`, `measured` and their uncertainties in SI.

    `entry` is the entry of the quantity that the model was taken from; `reason` says in a few words what the
    standing rests on.
    """

    quantity: str
    title: str
    unit: str
    measured: float
    measured_uncertainty: float | None
    model: float | None
    model_uncertainty: float | None
    ratio: float | None
    ratio_uncertainty: float | None
    standing: str
    ratio_name: str
    meaning: str
    reason: str
    sources: tuple[str, ...]
    recalled: bool
    entry: int = 0
    temperature: float | None = None
    photon_energy: float | None = None
    specimen: str | None = None


@dataclass(frozen=True)
class Measurement:
    """A measured value in SI, ready to be held against the model."""

    value: float
    uncertainty: float | None
    sources: tuple[str, ...]
    recalled: bool = False


@dataclass(frozen=True)
class Case:
    """One pairing to judge: the entry of the quantity, and the model in its place where it is another's.

    `entry` is None where the model cannot be taken; `why` says what it needs.
    """

    definition: Definition
    measurement: Measurement
    entry: int | None = 0
    model: tuple[str, int] | None = None
    why: str = "the model needs an input that the record does not have"
    temperature: float | None = None
    photon_energy: float | None = None
    specimen: str | None = None
    unit: str = ""


class Confronter:
    """Judges the cases of one row of a batch."""

    def __init__(self, derived: Derived, row: int, limits: Limits, bounds: Thresholds):
        self.derived, self.row, self.limits, self.bounds = derived, row, limits, bounds

    def judge(self, case: Case) -> Confrontation:
        """The ratio measured / model, its uncertainty and the standing by the rule of `Thresholds`."""
        model = self._model(case)
        measured = case.measurement
        ratio = uncertainty = None
        if model is not None and model.value != 0:
            ratio = measured.value / model.value
            uncertainty = ratio_uncertainty(measured, model)
        standing, reason = self._standing(case, ratio, uncertainty)
        comparison = case.definition.comparison
        return Confrontation(
            quantity=case.definition.id,
            title=case.definition.title,
            unit=case.unit or case.definition.unit,
            measured=measured.value,
            measured_uncertainty=measured.uncertainty,
            model=None if ratio is None else model.value,
            model_uncertainty=None if ratio is None else model.standard_uncertainty,
            ratio=ratio,
            ratio_uncertainty=uncertainty,
            standing=standing,
            ratio_name=comparison.ratio,
            meaning="" if ratio is None else comparison.meaning(ratio),
            reason=reason,
            sources=measured.sources,
            recalled=measured.recalled,
            entry=case.entry or 0,
            temperature=case.temperature,
            photon_energy=case.photon_energy,
            specimen=case.specimen,
        )

    def _model(self, case: Case) -> Number | None:
        if case.entry is None:
            return None
        id, entry = case.model or (case.definition.id, case.entry)
        return self.derived.number(id, self.row, entry)

    def _standing(self, case: Case, ratio: float | None, uncertainty: float | None) -> tuple[str, str]:
        if ratio is None:
            return UNCHECKED, case.why
        broken = self.limits.broken(case.definition, case.entry)
        if broken is not None:
            return OUTSIDE, f"{broken.title.lower()} is broken: {broken.indicator} = {broken.value:.3g}"
        return self.bounds.grade(ratio, uncertainty or 0.0), case.definition.comparison.ratio


def ratio_uncertainty(measured: Measurement, model: Number) -> float | None:
    """Standard uncertainty of measured / model from both sides; None where neither states one."""
    parts = (measured.uncertainty, model.standard_uncertainty)
    if parts == (None, None):
        return None
    ratio = measured.value / model.value
    return hypot((parts[0] or 0.0) / model.value, ratio * (parts[1] or 0.0) / model.value)


def confront(
    derived: Derived, row: int, limits: Limits, imprint: Imprint, bounds: Thresholds
) -> tuple[Confrontation, ...]:
    """Every measurement of one material held against its number, in the order of the sheet."""
    record = derived.batch.records[row]
    confronter = Confronter(derived, row, limits, bounds)
    cases = [
        case
        for definition in derived.plan.definitions.values()
        if definition.published and definition.comparison is not None
        for case in _cases(definition, record, derived, row, imprint)
    ]
    return tuple(confronter.judge(case) for case in cases)


def confront_specimen(
    derived: Derived, row: int, limits: Limits, imprint: Imprint, bounds: Thresholds
) -> tuple[Confrontation, ...]:
    """The measured resistivity of a film held against the model at the same temperature."""
    specimen = derived.batch.specimens[row]
    if specimen.form != "film" or specimen.resistivity is None:
        return ()
    measured = specimen.resistivity
    at = temperature_of(measured, imprint)
    # Entry 1 of the film lines takes the bulk resistivity near the temperature of the specimen's own.
    exists = derived.value("film_resistivity", row, 1) is not None
    case = Case(
        derived.plan.definitions["film_resistivity"],
        _measurement(measured),
        1 if exists else None,
        why="the model needs a bulk resistivity within 5 K, a thickness, and surfaces or grains",
        temperature=at,
        specimen=specimen.name,
    )
    return (Confronter(derived, row, limits, bounds).judge(case),)


def _cases(definition: Definition, record: Record, derived: Derived, row: int, imprint: Imprint) -> Iterator[Case]:
    special = {
        "electron_thermal_conductivity": _heat_conduction,
        "resistivity_from_debye": _other_resistivities,
        "normal_reflectance": _reflectances,
    }
    if definition.id in special:
        yield from special[definition.id](definition, record, derived, row, imprint)
        return
    for value in record.measured.get(definition.held_against, ()):
        yield _plain(definition, value, derived, row, imprint)


def _plain(definition: Definition, value: Value, derived: Derived, row: int, imprint: Imprint) -> Case:
    entry, temperature = 0, value.temperature
    if definition.listed_by == "temperature":
        temperature = temperature_of(value, imprint)
        entry = _entry(derived, "temperature", row, temperature)
    return Case(definition, _measurement(value), entry, temperature=temperature)


def _other_resistivities(definition, record, derived, row, imprint) -> Iterator[Case]:
    for value in resistivities(record, imprint):
        if value is not reference_resistivity(record, imprint):
            at = temperature_of(value, imprint)
            entry = _entry(derived, "temperature", row, at)
            yield Case(
                definition,
                _measurement(value),
                entry,
                why="the model needs a reference resistivity and a Debye temperature",
                temperature=at,
            )


def _heat_conduction(definition, record, derived, row, imprint) -> Iterator[Case]:
    """κ is held as the Lorenz number κρ/T, with the resistivity taken within 5 K of it."""
    values = resistivities(record, imprint)
    for conductivity in record.measured.get("thermal_conductivity", ()):
        at = temperature_of(conductivity, imprint)
        resistivity = nearest(values, at, imprint)
        if resistivity is None:
            why = f"no resistivity within {NEARBY:g} K of {at:g} K"
            yield Case(definition, _measurement(conductivity), None, why=why, temperature=at)
            continue
        lorenz = derived.plan.definitions["lorenz_number"]
        yield Case(
            definition,
            _lorenz_measured(conductivity, resistivity, at),
            values.index(resistivity),
            model=(lorenz.id, 0),
            temperature=at,
            unit=lorenz.unit,
        )


def _lorenz_measured(conductivity: Value, resistivity: Value, temperature: float) -> Measurement:
    product = conductivity.si * resistivity.si / temperature
    parts = [v.si_uncertainty / v.si for v in (conductivity, resistivity) if v.si_uncertainty is not None]
    sources = tuple(dict.fromkeys(conductivity.sources + resistivity.sources))
    recalled = conductivity.recalled or resistivity.recalled
    return Measurement(product, abs(product) * hypot(*parts) if parts else None, sources, recalled)


def _reflectances(definition, record, derived, row, imprint) -> Iterator[Case]:
    for point in record.optical:
        entry = _entry(derived, "photon_energy", row, point.photon_energy.si)
        why = "the model needs a reference resistivity and a density of electrons"
        energy = point.photon_energy.si / constants.e
        yield Case(definition, reflectance(point), entry, why=why, photon_energy=energy)


def reflectance(point: OpticalPoint) -> Measurement:
    """Reflectance at normal incidence from a measured refractive index n + ik (Fresnel)."""
    n, k = point.n.si, point.k.si
    front, back = (n - 1) ** 2 + k**2, (n + 1) ** 2 + k**2
    by_n, by_k = 4 * (n**2 - k**2 - 1) / back**2, 8 * n * k / back**2
    u_n, u_k = point.n.si_uncertainty, point.k.si_uncertainty
    uncertainty = None if (u_n, u_k) == (None, None) else hypot(by_n * (u_n or 0.0), by_k * (u_k or 0.0))
    sources = tuple(dict.fromkeys(point.n.sources + point.k.sources))
    return Measurement(front / back, uncertainty, sources, point.n.recalled or point.k.recalled)


def _measurement(value: Value) -> Measurement:
    return Measurement(value.si, value.si_uncertainty, value.sources, value.recalled)


def _entry(derived: Derived, axis: str, row: int, at: float) -> int | None:
    """The entry of an axis that lies at a point of it."""
    for entry in range(derived.entries(axis)):
        there = derived.value(axis, row, entry)
        if there is not None and abs(there - at) <= 1e-12 * abs(at):
            return entry
    return None
