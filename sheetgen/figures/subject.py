"""What a figure asks of a sheet: the material's numbers in SI units, and its quantities as functions of others."""

from __future__ import annotations

from functools import cache, cached_property

import numpy as np

from sheetgen.figures.words import in_sentence
from sheetgen.quantities.inputs import INPUTS, reference_resistivity, temperature_of

_PICKS = {field.name: field.pick for field in INPUTS if field.scope == "material"}


class Subject:
    """One material of a handbook, as figures see it.

    A formula stands only in its declaration. A curve is that declaration evaluated once more with an array in
    the place of one of the numbers that it rests on: `subject.curve("fermi_energy", fermi_wavevector=k)`.
    """

    def __init__(self, sheet, handbook):
        self.sheet, self.handbook, self.record = sheet, handbook, sheet.record
        self.slug, self.name = sheet.record.slug, sheet.record.name
        self.dimension = sheet.record.electrons.dimension
        plans = handbook.registry.plans
        self._plans = tuple(plans[scope, self.dimension] for scope in ("material", "specimen"))

    @property
    def phrase(self) -> str:
        """The name as it stands within a sentence."""
        return in_sentence(self.name)

    def si(self, id: str, index: int = 0) -> float:
        """A number of the sheet in SI units; NaN where it is absent."""
        return float(self.sheet.si(id, index))

    def has(self, *ids: str) -> bool:
        """Whether the sheet states all of these."""
        return all(np.isfinite(self.si(id)) for id in ids)

    def curve(self, id: str, **given) -> np.ndarray:
        """A quantity (or a step on the way to one) with other values of what it rests on, all in SI units.

        What does not change is taken from the sheet, or else worked out from the record's inputs.
        """
        plan = next(plan for plan in self._plans if id in plan.definitions)
        changed = frozenset().union(*(plan.readers.get(name, frozenset()) for name in given))
        known = {name: np.asarray(values, dtype=float).reshape(1, 1, -1) for name, values in given.items()}
        return np.asarray(self._value(id, plan, changed, known)).reshape(-1)

    def _value(self, name: str, plan, changed: frozenset[str], known: dict) -> np.ndarray:
        """Shape (1, 1, entries), as declarations expect: draws, materials, entries."""
        if name not in known:
            definition = plan.definitions.get(name)
            if definition is None:
                known[name] = self._entries(name)
            elif name not in changed and definition.listed_by is None and np.isfinite(stated := self._stated(name)):
                known[name] = np.full((1, 1, 1), stated)
            else:
                parameters = [self._value(parameter, plan, changed, known) for parameter in definition.parameters]
                known[name] = np.asarray(definition.function(*parameters))
        return known[name]

    @cache  # noqa: B019 - a subject lives as long as the drawing of its sheet
    def _stated(self, name: str) -> float:
        return self.si(name)

    @cache  # noqa: B019
    def _entries(self, name: str) -> np.ndarray:
        pick = _PICKS.get(name)
        entries = pick(self.record, self.handbook.imprint) if pick else ()
        numbers = [float("nan") if entry is None else float(getattr(entry, "si", entry)) for entry in entries]
        return np.array(numbers or [float("nan")]).reshape(1, 1, -1)

    def input(self, name: str) -> float:
        """The first entry of an input of the record in SI units; NaN where there is none."""
        return float(self._entries(name)[0, 0, 0])

    def number(self, name: str) -> float:
        """A step on the way to the sheet's numbers, in SI units."""
        return float(self.curve(name)[0])

    @cached_property
    def density_name(self) -> str:
        """Id of the density: per volume, in two dimensions per area."""
        return "electron_density" if self.dimension == 3 else "sheet_density"

    @property
    def temperatures(self) -> tuple[float, ...]:
        """The tabulated temperatures in K, the reference first."""
        return tuple(self.handbook.imprint.temperatures)

    @property
    def reference_resistivity(self):
        """The resistivity that the sheet's transport numbers take, or None."""
        return reference_resistivity(self.record, self.handbook.imprint)

    def measured(self, key: str) -> tuple:
        """The measured values of one key of the record, in its order."""
        return self.record.measured.get(key, ())

    def temperature_of(self, value) -> float:
        """Temperature of a measurement in K; one that states none counts as taken at the reference temperature."""
        return temperature_of(value, self.handbook.imprint)


def si_arrays(values, unit: float) -> tuple[np.ndarray, np.ndarray]:
    """Values of a record and their standard uncertainties (0 where none is stated) in multiples of an SI unit."""
    numbers = np.array([value.si for value in values]) / unit
    return numbers, np.array([value.si_uncertainty or 0.0 for value in values]) / unit
