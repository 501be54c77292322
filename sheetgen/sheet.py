"""One sheet: everything the handbook states about one material, as data."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from scipy import constants as c

from sheetgen.draws import Interval, draw_intervals
from sheetgen.lookup import StatedNumber, find_number, stated_numbers
from sheetgen.quantities import Definition, Registry
from sheetgen.quantities.batch import input_titles
from sheetgen.quantities.inputs import PHOTON_ENERGIES
from sheetgen.quantities.structure import CELL_CONSTANTS, OF_THE_CELL
from sheetgen.records import Imprint, Record, Specimen, Value
from sheetgen.records.units import si_factor
from sheetgen.standing import AssumptionCheck, Confrontation, Limits, PlainAnswer, plain_answer, thresholds
from sheetgen.standing.answer import Judged
from sheetgen.standing.confrontation import confront, confront_specimen
from sheetgen.standing.crosschecks import Subject, crosschecks
from sheetgen.standing.entries import axis_of, deciding, entry_standing
from sheetgen.standing.grading import ADJUST
from sheetgen.standing.limits import Indicators
from sheetgen.uncertainty import Derived, Number

CONSTANTS = "CODATA 2022"  # the set that SciPy carries; a test holds it to that
PRINTED_UNITS = {"temperature": "K", "edge": "nm", "photon_energy": "eV"}
AXIS_UNITS = {"temperature": ("temperature", 1.0), "resistivity": ("temperature", 1.0), "edge": ("edge", 1e-9),
              "photon_energy": ("photon_energy", c.e)}  # fmt: skip


@dataclass(frozen=True)
class Derivation:
    """A batch that has been evaluated, with the indicators of its assumptions; `draws` is how many to check it by."""

    derived: Derived
    indicators: Indicators
    registry: Registry
    imprint: Imprint
    draws: int = 0
    seed: int = 0

    def limits(self, row: int, material: Limits | None = None) -> Limits:
        """The assumptions of one row; a specimen's with those of its material behind them."""
        return Limits(self.indicators, row, self.imprint, self.registry, material)


class Row:
    """One row of a derivation: a material, or one of its specimens."""

    def __init__(self, derivation: Derivation, row: int, scope: str, material: Row | None = None):
        self.derivation, self.row, self.scope = derivation, row, scope
        self.derived, self.imprint = derivation.derived, derivation.imprint
        self.limits = derivation.limits(row, None if material is None else material.limits)
        self.record: Record = self.derived.batch.records[row]
        self.specimen: Specimen | None = self.derived.batch.specimens[row]

    @cached_property
    def definitions(self) -> dict[str, Definition]:
        """The published definitions that apply here, in the order of the sheet."""
        order = self.derivation.registry.published(self.scope)
        plan = self.derived.plan.definitions
        fitting = (id for id in order if id in plan)
        return {id: plan[id] for id in fitting if self.specimen is None or self.specimen.form in plan[id].forms}

    @cached_property
    def confrontations(self) -> tuple[Confrontation, ...]:
        """Every measurement held against its number, in the order of the sheet."""
        judge = confront if self.specimen is None else confront_specimen
        found = judge(self.derived, self.row, self.limits, self.imprint, thresholds(self.imprint))
        order = {id: position for position, id in enumerate(self.definitions)}
        return tuple(sorted(found, key=lambda confrontation: order[confrontation.quantity]))

    @cached_property
    def intervals(self) -> dict[str, list[Interval | None]]:
        """Quantity → coverage interval of each entry; empty where no draws were asked for."""
        if not self.derivation.draws:
            return {}
        return draw_intervals(self.derived, self.row, self.derivation.draws, self.derivation.seed)

    @cached_property
    def stated(self) -> dict[str, list[int]]:
        """Quantity → its entries that are stated: present, and not only there for a measurement."""
        return {id: self._stated(definition) for id, definition in self.definitions.items()}

    def _stated(self, definition: Definition) -> list[int]:
        if definition.form != "number":
            return [0] if np.isfinite(self.derived.values[definition.id][self.row]).any() else []
        most = self.derived.entries(definition.id)
        limit = {
            "temperature": len(self.imprint.temperatures),
            "photon_energy": len(PHOTON_ENERGIES),
            "resistivity": most,
            "edge": most,
        }
        entries = range(min(most, limit.get(definition.listed_by, 1)))
        return [entry for entry in entries if self.derived.value(definition.id, self.row, entry) is not None]

    @cached_property
    def decided(self) -> dict[str, dict[int, Confrontation]]:
        """Quantity → entry → the confrontation that decides its standing."""
        held = {confrontation.quantity for confrontation in self.confrontations}
        return {
            id: deciding(d, self.stated[d.id], self.confrontations, self.derived, self.row, self.imprint)
            for id, d in self.definitions.items()
            if id in held
        }

    def quantities(self) -> dict[str, dict | list[dict]]:
        """The `quantities` of the data file: absent ones left out."""
        stated: dict[str, dict | list[dict]] = {}
        for id, definition in self.definitions.items():
            entries = [self._entry(definition, entry) for entry in self.stated[definition.id]]
            if entries:
                listed = definition.listed_by is not None and self.specimen is None
                stated[id] = entries if listed else entries[0]
        return stated

    def judged(self) -> Iterator[Judged]:
        """The stated quantities by standing: one for all entries of a list that share it, one for each to scale."""
        for id, definition in self.definitions.items():
            decided = self.decided.get(id, {})
            groups: dict[str | tuple[str, int], list[int]] = {}
            for entry in self.stated[definition.id]:
                standing = entry_standing(definition, entry, decided, self.limits)
                # Each entry to scale has a factor of its own.
                groups.setdefault((standing, entry) if standing == ADJUST else standing, []).append(entry)
            for key, entries in groups.items():
                standing = key if isinstance(key, str) else key[0]
                broken = self.limits.broken(definition, entries[0])
                where = self._places(definition, entries)
                yield Judged(definition, standing, where, decided.get(entries[0]), broken)

    def _places(self, definition: Definition, entries: list[int]) -> str:
        """Where the entries of a list lie, as a reader would say it: "77 K, 293.15 K"."""
        if definition.listed_by is None:
            return ""
        name, unit = AXIS_UNITS[definition.listed_by]
        values = [tidy(self.derived.value(axis_of(definition), self.row, entry) / unit) for entry in entries]
        return ", ".join(f"{value:g} {PRINTED_UNITS[name]}" for value in dict.fromkeys(values))

    def missing(self) -> dict[str, str]:
        """Quantity → why it is not stated, for all that could be."""
        return {
            id: self._why(definition)
            for id, definition in self.definitions.items()
            if not self.stated[definition.id]
        }

    def _entry(self, definition: Definition, entry: int) -> dict:
        number = self._number(definition, entry)
        standing = entry_standing(definition, entry, self.decided.get(definition.id, {}), self.limits)
        factor = si_factor(definition.unit)
        where = {}
        if definition.listed_by is not None and self.specimen is None:
            name, unit = AXIS_UNITS[definition.listed_by]
            where[name] = tidy(self.derived.value(axis_of(definition), self.row, entry) / unit)
        stated = {**where, "value": self._value(definition, number, factor), "unit": definition.unit}
        if number is not None and number.standard_uncertainty is not None:
            stated["standard_uncertainty"] = number.standard_uncertainty / factor
        stated["assumes"] = list(definition.assumes)
        stated["depends_on"] = self._depends_on(definition, entry)
        if number is not None and number.budget:
            stated["budget"] = number.budget
        if definition.id in self.intervals and (interval := self.intervals[definition.id][entry]) is not None:
            stated["coverage_interval"] = [interval.low / factor, interval.high / factor]
            stated["first_order"] = interval.first_order
        return {**stated, "standing": standing}

    def _number(self, definition: Definition, entry: int) -> Number | None:
        return self.derived.number(definition.id, self.row, entry) if definition.form == "number" else None

    def _value(self, definition: Definition, number: Number | None, factor: float):
        if number is not None:
            value = number.value / factor
            return value if definition.carries_uncertainty else tidy(value)
        values = self.derived.values[definition.id][self.row]
        if definition.form == "shells":
            pairs = values.reshape(-1, 2)
            return [{"distance": d / factor, "count": tidy(n)} for d, n in pairs.tolist() if np.isfinite(d)]
        return [value / factor for value in values.tolist() if np.isfinite(value)]

    def _depends_on(self, definition: Definition, entry: int) -> list[str]:
        """Published quantities and inputs of the record that a quantity is computed from, steps in between aside."""
        found: dict[str, None] = {}
        waiting = list(definition.parameters)[::-1]
        while waiting:
            name = waiting.pop()
            step = self.derived.plan.definitions.get(name)
            if step is None:
                found.update(dict.fromkeys(self._input_ids(name, definition, entry)))
            elif step.published:
                found[name] = None
            else:
                waiting += step.parameters[::-1]
        return list(found)

    def _input_ids(self, name: str, definition: Definition, entry: int) -> list[str]:
        if name in OF_THE_CELL:
            return [id for id in CELL_CONSTANTS if id in self.record.inputs]
        ids = self.derived.batch.ids.get(name)
        if ids is None:
            return []
        here = ids[self.row]
        if name != "valence":
            position = entry if definition.listed_by == "resistivity" and entry < len(here) else 0
            here = here[position : position + 1]
        return [id for id in here if id is not None]

    def recalled(self) -> dict[str, tuple[str, ...]]:
        """Quantity → the inputs quoted from memory that it rests on, near or far."""
        recalled = {id for id, value in self.record.inputs.items() if value.recalled}
        found = {}
        for id, definition in self.definitions.items():
            entries = self.stated[definition.id]
            names = self.derived.plan.inputs_of(id)
            ids = [i for name in names for entry in entries for i in self._input_ids(name, definition, entry)]
            if on := tuple(dict.fromkeys(i for i in ids if i in recalled)):
                found[id] = on
        return found

    def _why(self, definition: Definition) -> str:
        lacking = list(dict.fromkeys(self._lacking(definition)))
        if lacking:
            return f"needs {' and '.join(lacking)}"
        return definition.absent or "is not defined for these values"

    def _lacking(self, definition: Definition) -> Iterator[str]:
        """What the record does not have, among all that a quantity rests on and cannot do without."""
        values, titles = self.derived.values, input_titles()
        for name in definition.reads:
            if np.isfinite(values[name][self.row]).any():
                continue
            step = self.derived.plan.definitions.get(name)
            if step is None:
                yield from filter(None, [titles[name]])
            else:
                yield from self._lacking(step)


class Sheet:
    """What one sheet states.

    `data` is the content of its data file; the other attributes hold what only the page shows: `recalled` maps a
    quantity to the inputs quoted from memory that it rests on, `missing` one to why it is absent.
    """

    def __init__(self, material: Row, specimens: Sequence[Row], edition: str):
        self.record = material.record
        self._derived, self._row = material.derived, material.row
        self.registry: Registry = material.derivation.registry
        self.missing = material.missing()
        self.recalled = material.recalled()
        rows = [material, *specimens]
        self.confrontations = tuple(one for row in rows for one in row.confrontations)
        self.checks: tuple[AssumptionCheck, ...] = tuple(check for row in rows for check in row.limits.checks)
        self.answer: PlainAnswer = plain_answer(list(material.judged()))
        self.specimen_missing = {row.specimen.name: row.missing() for row in specimens}
        self.data = self._data(material, specimens, edition)
        self.crosschecks = crosschecks(
            Subject(self.record, material.imprint, self.confrontations, self.si("nearest_neighbour_distance"))
        )

    def __repr__(self) -> str:
        return f"<Sheet {self.record.slug!r}>"

    def number(
        self,
        id: str,
        *,
        at: float | None = None,
        edge: float | None = None,
        photon_energy: float | None = None,
        specimen: str | None = None,
    ) -> StatedNumber:
        """One number with its uncertainty and standing, in the unit of its quantity.

        `at` is a temperature in K that the handbook tabulates (without it, the reference one), or of a
        measured resistivity where the quantity is listed by that; it is of no account for a quantity that does not
        depend on temperature, whose answer has `temperature` None. `edge` (nm) and `photon_energy` (eV) choose from
        the lists along these; `specimen` is the name of a specimen whose own number is wanted.

        Raises NotFoundError for a word or point that is not there, NotDerivedError where an input is missing.
        """
        points = {"temperature": at, "edge": edge, "photon_energy": photon_energy}
        return find_number(self, id, points, specimen)

    def numbers(self, id: str, *, specimen: str | None = None) -> tuple[StatedNumber, ...]:
        """Every entry of a quantity, in the order of the sheet; empty where it is absent. Raises NotFoundError."""
        return stated_numbers(self, id, specimen)

    def si(self, id: str, index: int = 0) -> float:
        """One published entry in SI, NaN where it is absent."""
        values = self.list_si(id)
        return float(values[index]) if index < len(values) else float("nan")

    def list_si(self, id: str) -> np.ndarray:
        """The published entries in SI, in order; empty where the quantity is absent."""
        definition = self._derived.plan.definitions.get(id)
        scale = np.nan if definition is None else si_factor(definition.unit)
        return np.array([entry["value"] for entry in self.entries(id)], dtype=float) * scale

    def input_si(self, name: str) -> float:
        """The first entry of an input in SI ("measured_debye_temperature" or "debye_temperature"), NaN without one."""
        known = self._derived.values
        value = self._derived.value(f"measured_{name}" if f"measured_{name}" in known else name, self._row)
        return float("nan") if value is None else value

    def entries(self, id: str) -> list[dict]:
        """The entries of a quantity in the data: one for a single number, none where it is absent."""
        stated = self.data["quantities"].get(id, [])
        return stated if isinstance(stated, list) else [stated]

    def _data(self, material: Row, specimens: Sequence[Row], edition: str) -> dict:
        record = self.record
        return {
            "slug": record.slug,
            "name": record.name,
            "formula": record.formula,
            "edition": edition,
            "constants": CONSTANTS,
            "inputs": {id: _input(value) for id, value in record.inputs.items()},
            "quantities": material.quantities(),
            "held_against": [_held(one, material.imprint.reference_temperature) for one in self.confrontations],
            "assumptions": [check.as_json() for check in self.checks],
            "specimens": [
                {"name": row.specimen.name, "form": row.specimen.form, "quantities": row.quantities()}
                for row in specimens
            ],
        }


def tidy(number: float) -> float | int:
    """A number freed of the last bits that a change of unit leaves: 77, not 77.00000000000001."""
    rounded = float(f"{number:.12g}")
    return int(rounded) if rounded.is_integer() and abs(rounded) < 1e15 else rounded


def _input(value: Value) -> dict:
    stated: dict = {"value": value.value, "unit": value.unit}
    if value.standard_uncertainty is not None:
        stated["standard_uncertainty"] = value.standard_uncertainty
    if value.temperature is not None:
        stated["temperature"] = tidy(value.temperature)
    return {**stated, "sources": list(value.sources), "recalled": value.recalled}


def _held(confrontation: Confrontation, reference_temperature: float) -> dict:
    factor = si_factor(confrontation.unit)
    stated: dict = {"quantity": confrontation.quantity}
    if confrontation.ratio is not None:
        stated["model"] = confrontation.model / factor
    stated |= {"measured": confrontation.measured / factor, "unit": confrontation.unit}
    if confrontation.ratio is not None:
        stated["ratio"] = confrontation.ratio
    stated |= {"standing": confrontation.standing, "sources": list(confrontation.sources)}
    axes = ("temperature", "photon_energy", "specimen")
    where = {axis: at for axis in axes if (at := getattr(confrontation, axis)) is not None}
    # A measurement that states no temperature counts as taken at the reference temperature.
    where = where or {"temperature": reference_temperature}
    stated |= {axis: at if isinstance(at, str) else tidy(at) for axis, at in where.items()}
    return stated
