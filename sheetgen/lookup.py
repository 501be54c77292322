"""Numbers of sheets for other programs: one with all that is known of it, arrays and tables of many."""

from __future__ import annotations

import importlib
import math
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING, Any

import numpy as np

from sheetgen.faults import did_you_mean
from sheetgen.records.units import dimension_matches, si_factor

if TYPE_CHECKING:
    from sheetgen.sheet import Sheet

AXES = {"temperature": "K", "edge": "nm", "photon_energy": "eV"}
_KEYWORDS = {"temperature": "at", "edge": "edge", "photon_energy": "photon_energy"}
_SAME = 1e-6  # K, nm or eV within which two points of an axis are the same
_FIELDS = ("value", "standard_uncertainty", "standing")


class NotFoundError(KeyError):
    """A material, quantity, specimen or temperature that the handbook does not have: one line that says what it has."""

    def __str__(self) -> str:
        return str(self.args[0]) if self.args else ""


class NotDerivedError(LookupError):
    """A quantity for which the record does not suffice: one line that says what is missing."""


@dataclass(frozen=True)
class StatedNumber:
    """One number as a sheet states it.

    `value`, `standard_uncertainty` and `coverage_interval` (95 %, where draws were asked for) are in `unit`; an
    uncertainty is None where no input has one. `standing` says how the number does against measurement. Where it
    was taken stands in `temperature` (K), `edge` (nm) or `photon_energy` (eV); all three are None for a number that
    does not depend on them. `budget` has each input's share of the variance.
    """

    material: str
    quantity: str
    value: float
    unit: str
    standard_uncertainty: float | None
    standing: str
    temperature: float | None = None
    edge: float | None = None
    photon_energy: float | None = None
    specimen: str | None = None
    coverage_interval: tuple[float, float] | None = None
    assumes: tuple[str, ...] = ()
    depends_on: tuple[str, ...] = ()
    budget: Mapping[str, float] = field(default_factory=dict, hash=False)

    def __float__(self) -> float:
        return self.value

    @property
    def relative_uncertainty(self) -> float | None:
        """Standard uncertainty over the size of the value; None where there is none, or the value is 0."""
        if self.standard_uncertainty is None or self.value == 0:
            return None
        return self.standard_uncertainty / abs(self.value)

    def in_unit(self, unit: str) -> StatedNumber:
        """The same number in another unit; raises ValueError for one that measures something else, or is none."""
        if not dimension_matches(unit, self.unit):
            raise ValueError(f"{self.quantity} is in '{self.unit}', which '{unit}' does not measure")
        factor = si_factor(self.unit) / si_factor(unit)
        u, ends = self.standard_uncertainty, self.coverage_interval
        return replace(
            self,
            value=self.value * factor,
            unit=unit,
            standard_uncertainty=None if u is None else u * factor,
            coverage_interval=None if ends is None else (ends[0] * factor, ends[1] * factor),
        )


def stated_numbers(sheet: Sheet, id: str, specimen: str | None = None) -> tuple[StatedNumber, ...]:
    """Every entry of a quantity of a sheet, or of one of its specimens; empty where it is absent.

    Raises NotFoundError for a quantity or a specimen that there is not, and for one that is not a number.
    """
    part = sheet.data if specimen is None else _specimen(sheet, specimen)
    stated = part["quantities"].get(id)
    if stated is None:
        _check_known(sheet, id, specimen)
        return ()
    entries = stated if isinstance(stated, list) else [stated]
    if any(isinstance(entry["value"], list) for entry in entries):
        raise NotFoundError(f"{id} is a list in itself; take sheet.entries('{id}').")
    return tuple(_stated(sheet.record.slug, id, entry, specimen) for entry in entries)


def find_number(sheet: Sheet, id: str, points: Mapping[str, float | None], specimen: str | None) -> StatedNumber:
    """The entry of a quantity at the given points of its axes; `points` has a value or None for each of AXES.

    Raises NotFoundError and NotDerivedError.
    """
    numbers = stated_numbers(sheet, id, specimen)
    if not numbers:
        missing = sheet.missing if specimen is None else sheet.specimen_missing.get(specimen, {})
        dimension = sheet.record.electrons.dimension
        reason = missing.get(id, f"it is not defined in {dimension} dimensions")
        raise NotDerivedError(f"{sheet.record.name} has no {id}: {reason}")
    for axis in ("edge", "photon_energy"):
        if points[axis] is not None and getattr(numbers[0], axis) is None:
            raise NotFoundError(f"{id} is not stated by {axis.replace('_', ' ')}; leave {axis} out.")
    axes = [axis for axis in AXES if getattr(numbers[0], axis) is not None]
    if not axes:
        return numbers[0]
    axis = axes[0]
    point = points[axis]
    if point is None:
        if axis == "temperature" and (len(numbers) == 1 or _leads_with_reference(sheet, id)):
            return numbers[0]
        raise NotFoundError(f"{id} is stated at {_listed(numbers, axis)}; say which with {_KEYWORDS[axis]}=.")
    found = next((one for one in numbers if math.isclose(getattr(one, axis), point, abs_tol=_SAME)), None)
    if found is None:
        unit = AXES[axis]
        raise NotFoundError(f"{id} is stated at {_listed(numbers, axis)}, and not at {point:g} {unit}.")
    return found


def column(sheets: Sequence[Sheet], id: str, unit: str, what: str, points: Mapping[str, float | None]) -> np.ndarray:
    """One entry of a quantity for each sheet: floats with NaN, or standings with "", where there is none."""
    if what not in _FIELDS:
        raise ValueError(f"what={what!r}; expected one of {', '.join(_FIELDS)}")
    found = [_number_or_none(sheet, id, points) for sheet in sheets]
    # In two dimensions some quantities are per area: those do not belong into a column that is per volume.
    fitting = [None if number is None or not dimension_matches(number.unit, unit) else number for number in found]
    if what == "standing":
        return np.array(["" if number is None else number.standing for number in fitting], dtype=object)
    values = [None if number is None else getattr(number.in_unit(unit), what) for number in fitting]
    return np.array([math.nan if value is None else value for value in values], dtype=float)


def frame(sheets: Iterable[Sheet], ids: Sequence[str]) -> Any:
    """A pandas DataFrame with one line for each number; raises ImportError where pandas is not installed."""
    try:
        pandas = importlib.import_module("pandas")
    except ImportError as error:
        raise ImportError(
            "a table needs pandas, which is not installed: pip install pandas. "
            "handbook.array() and the site's data/handbook.csv do without it."
        ) from error
    rows = [_row(sheet, number) for sheet in sheets for number in _all_numbers(sheet, ids)]
    columns = ["material", "name", "formula", "specimen", "quantity", "value", "standard_uncertainty", "unit",
               "standing", *AXES]  # fmt: skip
    table = pandas.DataFrame(rows, columns=columns)
    return table.astype(dict.fromkeys(("value", "standard_uncertainty", *AXES), float))


def _all_numbers(sheet: Sheet, ids: Sequence[str]) -> Iterator[StatedNumber]:
    parts = [(None, sheet.data["quantities"])]
    parts += [(part["name"], part["quantities"]) for part in sheet.data["specimens"]]
    for specimen, quantities in parts:
        for id, stated in quantities.items():
            entries = stated if isinstance(stated, list) else [stated]
            if (not ids or id in ids) and not isinstance(entries[0]["value"], list):
                yield from (_stated(sheet.record.slug, id, entry, specimen) for entry in entries)


def _row(sheet: Sheet, number: StatedNumber) -> dict[str, Any]:
    axes = {axis: getattr(number, axis) for axis in AXES}
    return {
        "material": number.material,
        "name": sheet.record.name,
        "formula": sheet.record.formula,
        "specimen": number.specimen,
        "quantity": number.quantity,
        "value": number.value,
        "standard_uncertainty": number.standard_uncertainty,
        "unit": number.unit,
        "standing": number.standing,
        **axes,
    }


def _number_or_none(sheet: Sheet, id: str, points: Mapping[str, float | None]) -> StatedNumber | None:
    """None where the sheet lacks the quantity, or the temperature; what no sheet could have is an error."""
    numbers = stated_numbers(sheet, id)
    here = {axis for axis in AXES if numbers and getattr(numbers[0], axis) is not None}
    if not numbers or ("temperature" in here and points["temperature"] is not None and not _at(numbers, points)):
        return None
    if points["temperature"] is None and here == {"temperature"} and not _leads_with_reference(sheet, id):
        return None
    return find_number(sheet, id, points, None)


def _at(numbers: Sequence[StatedNumber], points: Mapping[str, float | None]) -> bool:
    return any(math.isclose(one.temperature or 0.0, points["temperature"] or 0.0, abs_tol=_SAME) for one in numbers)


def _leads_with_reference(sheet: Sheet, id: str) -> bool:
    """Whether the first entry is the one at the reference temperature: not so without a reference resistivity."""
    definition = sheet.registry[id]
    return definition.listed_by != "resistivity" or not math.isnan(sheet.input_si("has_reference_resistivity"))


def _stated(slug: str, id: str, entry: Mapping[str, Any], specimen: str | None) -> StatedNumber:
    ends = entry.get("coverage_interval")
    return StatedNumber(
        material=slug,
        quantity=id,
        value=float(entry["value"]),
        unit=entry["unit"],
        standard_uncertainty=entry.get("standard_uncertainty"),
        standing=entry["standing"],
        **{axis: None if entry.get(axis) is None else float(entry[axis]) for axis in AXES},
        specimen=specimen,
        coverage_interval=None if ends is None else (ends[0], ends[1]),
        assumes=tuple(entry["assumes"]),
        depends_on=tuple(entry["depends_on"]),
        budget=dict(entry.get("budget", {})),
    )


def _specimen(sheet: Sheet, name: str) -> Mapping[str, Any]:
    parts = {part["name"]: part for part in sheet.data["specimens"]}
    if name not in parts:
        known = f"It has {', '.join(parts)}." if parts else "It has none."
        raise NotFoundError(f"{sheet.record.name} has no specimen '{name}'. {known}{did_you_mean(name, parts)}")
    return parts[name]


def _check_known(sheet: Sheet, id: str, specimen: str | None) -> None:
    known = sheet.registry.published("material" if specimen is None else "specimen")
    if id not in known:
        whose = "The handbook has" if specimen is None else "Specimens have"
        raise NotFoundError(f"{whose} no quantity '{id}'.{did_you_mean(id, known)}")


def _listed(numbers: Sequence[StatedNumber], axis: str) -> str:
    return f"{', '.join(f'{getattr(one, axis):g}' for one in numbers)} {AXES[axis]}"
