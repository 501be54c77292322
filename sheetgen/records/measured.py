"""What the model is held against: the measured values of a record, and which resistivity is the reference."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from sheetgen.records.measures import MEASURED, OPTICAL
from sheetgen.records.model import OpticalPoint, Value
from sheetgen.records.nodes import Table
from sheetgen.records.spelling import written_key
from sheetgen.records.unreadable import shown
from sheetgen.records.values import Origin, Reader

# A value counts as taken at the reference temperature when it is this near (K).
REFERENCE_WINDOW = 5.0
RESISTIVE = {3: "resistivity", 2: "sheet_resistance"}
# Values that mean little without the temperature at which they were taken.
_AT_A_TEMPERATURE = (
    "resistivity",
    "sheet_resistance",
    "hall_coefficient",
    "thermal_conductivity",
    "thermopower",
)


def read_measured(table: Table, dimension: int, reader: Reader) -> dict[str, tuple[Value, ...]]:
    """The measured values by key; a key of which nothing could be read is left out."""
    measured = {}
    for key, entry in table.entries.items():
        if key not in MEASURED:
            continue
        values = reader.values(entry.node, MEASURED[key], written_key(key))
        if values:
            measured[key] = tuple(values)
        if key in _AT_A_TEMPERATURE:
            _remark_missing_temperature(values, written_key(key), reader)
    _check_dimension(table, dimension, reader)
    return measured


def read_optical(table: Table, reader: Reader) -> tuple[OpticalPoint, ...]:
    """The measured refractive indices, in the order of the record."""
    listing = table.node("refractive_index")
    points = [_optical_point(item, reader) for item in listing.items] if listing else []
    return tuple(point for point in points if point)


def _optical_point(table: Table, reader: Reader) -> OpticalPoint | None:
    origin = reader.origin(table, Origin())
    values = [reader.value(table.entries[key].node, OPTICAL[key], written_key(key), origin) for key in OPTICAL]
    return None if None in values else OpticalPoint(*values, place=table.place)


def _remark_missing_temperature(values: Iterable[Value], name: str, reader: Reader) -> None:
    for value in values:
        if value.temperature is None:
            counted = f"{name} has no temperature; it counts as taken at the reference temperature"
            reader.remark(value.place, f"{counted}. Add 'at: 293 K' or the like.")


def _check_dimension(table: Table, dimension: int, reader: Reader) -> None:
    wrong = {
        3: {"sheet_resistance": "resistivity"},
        2: {"resistivity": "sheet resistance", "residual_resistivity": "sheet resistance"},
    }
    for key, instead in wrong[dimension].items():
        if entry := table.entries.get(key):
            reader.fault(
                entry.key.place,
                f"{shown(entry.key.text)} does not belong to a gas of {dimension} dimensions; expected '{instead}'."
                " Give that, or correct 'dimension' under 'electrons'.",
            )


def reference_index(values: Sequence[Value], reference: float) -> int | None:
    """Which value counts as the one at the reference temperature (K): the nearest within 5 K, the first of equals."""
    distances = [abs((reference if value.temperature is None else value.temperature) - reference) for value in values]
    near = [index for index, distance in enumerate(distances) if distance <= REFERENCE_WINDOW]
    return min(near, key=distances.__getitem__, default=None)


def check_residual(measured: dict[str, tuple[Value, ...]], reference: float, reader: Reader) -> None:
    """A fault where a residual resistivity lies above the reference resistivity."""
    resistivities = measured.get("resistivity", ())
    index = reference_index(resistivities, reference)
    for residual in measured.get("residual_resistivity", ()) if index is not None else ():
        if residual.si > resistivities[index].si:
            above = f"{shown(residual.text)} is above the reference resistivity {shown(resistivities[index].text)}"
            mend = "expected less. Check both numbers and their units."
            reader.fault(residual.place, f"residual resistivity: {above}; {mend}")


def measured_inputs(measured: dict[str, tuple[Value, ...]], reference: float) -> dict[str, Value]:
    """Every measured value by its id: bare for the one that stands for the key, else with `@` and its kelvins."""
    inputs: dict[str, Value] = {}
    for key, values in measured.items():
        bare = reference_index(values, reference) if key in RESISTIVE.values() else 0
        for index, value in enumerate(values):
            name = f"measured.{key}"
            if index != bare:
                kelvins = reference if value.temperature is None else value.temperature
                name = _unused(f"{name}@{kelvins:g}", inputs)
            inputs[name] = value
    return inputs


def optical_inputs(points: Iterable[OpticalPoint]) -> dict[str, Value]:
    """Every value of the measured refractive indices by its id, counted from 1."""
    return {
        f"measured.refractive_index.{number}.{key}": getattr(point, key)
        for number, point in enumerate(points, start=1)
        for key in OPTICAL
    }


def _unused(name: str, taken: dict[str, Value]) -> str:
    count, free = 1, name
    while free in taken:
        count += 1
        free = f"{name}#{count}"
    return free
