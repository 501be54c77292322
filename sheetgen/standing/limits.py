"""The assumptions held against their indicators, for one material or specimen."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from scipy import constants as c

from sheetgen.quantities import Assumption, Definition, Registry
from sheetgen.quantities.evaluate import indicator
from sheetgen.records import Imprint
from sheetgen.standing.grading import BROKEN, grade_indicator
from sheetgen.uncertainty import Derived

SAME = 1e-9  # relative difference within which two temperatures or photon energies are the same


@dataclass(frozen=True)
class AssumptionCheck:
    """One evaluation of an assumption; `at` is the temperature (K), photon energy (eV) or specimen it was taken at."""

    id: str
    title: str
    sentence: str
    indicator: str
    value: float
    bound: float | None
    standing: str
    source: str
    covers: tuple[str, ...]
    axis: str | None = None
    at: float | str | None = None
    listed_by: str | None = None
    entry: int = 0
    quantity: str | None = None

    def as_json(self) -> dict:
        """The entry of the data file."""
        where = {} if self.axis is None else {self.axis: self.at}
        entry = {"id": self.id, "indicator": self.indicator, "value": self.value, "bound": self.bound}
        return {**entry, "standing": self.standing, **where}


class Indicators:
    """The indicators of all assumptions of a plan over a whole batch, evaluated once."""

    def __init__(self, derived: Derived):
        self.derived = derived
        given = {name: value[None] for name, value in derived.values.items()}
        self.values = {id(a): indicator(a, given)[0] for a in derived.plan.assumptions}
        self.own = {
            (id(a), quantity): indicator(a, {**given, "photon_energy": given[quantity]})[0]
            for a in derived.plan.assumptions
            if a.listed_by == "photon_energy"
            for quantity in self._energies(a)
        }

    def _energies(self, assumption: Assumption) -> list[str]:
        """Quantities that are photon energies themselves and so are judged at their own."""
        return [
            d.id
            for d in self.derived.plan.definitions.values()
            if assumption.id in d.assumes and d.listed_by is None and d.stated_at is None
        ]


class Limits:
    """All evaluations of the assumptions for one row of a batch."""

    def __init__(
        self, indicators: Indicators, row: int, imprint: Imprint, registry: Registry, material: Limits | None = None
    ):
        """`material` holds the limits of the material that a specimen is made of: they bind its lines as well."""
        self._material = material
        self._indicators, self._row, self._imprint, self._registry = indicators, row, imprint, registry
        self._derived = indicators.derived
        self.checks = tuple(check for a in self._derived.plan.assumptions for check in self._evaluations(a))

    def broken(self, definition: Definition, entry: int) -> AssumptionCheck | None:
        """The first broken assumption that an entry of a quantity rests on, or None."""
        for check in self.checks:
            if check.standing == BROKEN and check.id in definition.assumes and self._concerns(check, definition, entry):
                return check
        return None if self._material is None else self._material.broken(definition, 0)

    def _evaluations(self, assumption: Assumption) -> Iterator[AssumptionCheck]:
        values = self._indicators.values[id(assumption)]
        covers = self._registry.resting_on(assumption.id)
        own = [quantity for key, quantity in self._indicators.own if key == id(assumption)]
        shared = tuple(quantity for quantity in covers if quantity not in own)
        for entry in range(values.shape[1]):
            value = float(values[self._row, entry])
            if value == value:
                axis, at = self._where(assumption.listed_by, entry)
                yield self._graded(assumption, value, axis=axis, at=at, entry=entry, covers=shared)
        for quantity in own:
            value = float(self._indicators.own[id(assumption), quantity][self._row, 0])
            if value == value:
                energy = self._derived.value(quantity, self._row) / c.e
                place = {"axis": "photon_energy", "at": energy, "quantity": quantity, "covers": (quantity,)}
                yield self._graded(assumption, value, **place)

    def _where(self, listed_by: str | None, entry: int) -> tuple[str | None, float | str | None]:
        """The axis as the data file names it, and the point on it."""
        if listed_by == "specimen":
            return listed_by, self._derived.batch.specimens[self._row].name
        if listed_by == "photon_energy":
            return listed_by, self._derived.value("photon_energy", self._row, entry) / c.e
        if listed_by == "resistivity":
            return "temperature", self._derived.value("resistivity_temperature", self._row, entry)
        return (listed_by, self._derived.value("temperature", self._row, entry)) if listed_by else (None, None)

    def _graded(self, assumption: Assumption, value: float, **place) -> AssumptionCheck:
        standing, bound = grade_indicator(assumption, value, self._imprint.thresholds)
        return AssumptionCheck(
            id=assumption.id,
            title=assumption.title,
            sentence=assumption.sentence,
            indicator=assumption.indicator,
            value=value,
            bound=bound,
            standing=standing,
            source=assumption.source,
            listed_by=assumption.listed_by,
            **place,
        )

    def _concerns(self, check: AssumptionCheck, definition: Definition, entry: int) -> bool:
        """Whether a check was taken where the entry of the quantity lies."""
        if check.quantity is not None:
            return check.quantity == definition.id
        if definition.id not in check.covers:
            return False
        if check.listed_by == definition.listed_by == "resistivity":
            return check.entry == entry
        if check.axis == "temperature":
            return _same(check.at, self._temperature_of(definition, entry))
        if check.axis == "photon_energy":
            return _same(check.at, self._photon_energy_of(definition, entry))
        return True

    def _temperature_of(self, definition: Definition, entry: int) -> float | None:
        if definition.listed_by == "temperature":
            return self._derived.value("temperature", self._row, entry)
        if definition.listed_by == "resistivity":
            return self._derived.value("resistivity_temperature", self._row, entry)
        return self._imprint.reference_temperature

    def _photon_energy_of(self, definition: Definition, entry: int) -> float | None:
        if definition.listed_by == "photon_energy":
            return self._derived.value("photon_energy", self._row, entry) / c.e
        return definition.stated_at


def _same(one: float | None, other: float | None) -> bool:
    return one is not None and other is not None and abs(one - other) <= SAME * max(abs(one), abs(other))
