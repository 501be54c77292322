"""Number against number: which of two editions' entries belong together, and whether one moved."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Mapping
from typing import Any

from sheetgen.errata.model import AXES, Point
from sheetgen.quantities.inputs import NEARBY
from sheetgen.records import si_factor
from sheetgen.records.unreadable import UnreadableError

SIGNIFICANT = 6  # digits printed of a number without an uncertainty
Entry = Mapping[str, Any]
Pair = tuple[Point, "Entry | None", "Entry | None"]


def entries_of(material: Mapping[str, Any]) -> dict[Point, Entry]:
    """Every number of a material's data by its place."""
    found: dict[Point, Entry] = {}
    parts = [(None, material["quantities"])]
    parts += [(specimen["name"], specimen["quantities"]) for specimen in material.get("specimens", ())]
    for specimen, quantities in parts:
        for id, stated in quantities.items():
            for entry in stated if isinstance(stated, list) else [stated]:
                _add(found, id, specimen, entry)
    return found


def checks_of(material: Mapping[str, Any]) -> dict[Point, Entry]:
    """Every check of an assumption by its place."""
    found: dict[Point, Entry] = {}
    for check in material.get("assumptions", ()):
        _add(found, check["id"], check.get("specimen"), check)
    return found


def _add(found: dict[Point, Entry], id: str, specimen: str | None, entry: Entry) -> None:
    axis = next((axis for axis in AXES if axis in entry), None)
    at = float(entry[axis]) if axis else None
    repeat = 0
    while (point := Point(id, specimen, axis, at, repeat)) in found:
        repeat += 1
    found[point] = entry


def paired(old: dict[Point, Entry], new: dict[Point, Entry], by_resistivity: Iterable[str] = ()) -> Iterator[Pair]:
    """Entries of the same place side by side, in the order of the new edition, then those that are gone.

    The quantities named in `by_resistivity` have one entry for each resistivity: where one was taken at another
    temperature than its predecessor, what is left over on both sides may belong together.
    """
    gone = {point: entry for point, entry in old.items() if point not in new}
    successors: dict[Point, Point] = {}
    for id in by_resistivity:
        fresh = [point for point in new if point.quantity == id and point not in old]
        successors |= _predecessors(fresh, [point for point in gone if point.quantity == id])
    for point, entry in new.items():
        yield point, old.get(successors.get(point, point)), entry
    taken = set(successors.values())
    yield from ((point, entry, None) for point, entry in gone.items() if point not in taken)


def _predecessors(fresh: list[Point], left: list[Point]) -> dict[Point, Point]:
    """Which of the entries left over each fresh one replaces: one at nearly its temperature, else by their order."""
    found: dict[Point, Point] = {}
    fresh, left = ([point for point in points if point.at is not None] for points in (fresh, left))
    for point in fresh:
        near = [one for one in left if one not in found.values() and abs(one.at - point.at) <= NEARBY]
        if near:
            found[point] = min(near, key=lambda one: abs(one.at - point.at))
    fresh = [point for point in fresh if point not in found]
    left = [point for point in left if point not in found.values()]
    return found | (dict(zip(fresh, left, strict=True)) if len(fresh) == len(left) else {})


def in_unit(entry: Entry, unit: str) -> Entry:
    """The entry in another unit of its kind; as it is where the units do not fit together."""
    if entry["unit"] == unit or isinstance(entry["value"], list):
        return entry
    try:
        factor = si_factor(entry["unit"]) / si_factor(unit)
    except UnreadableError:
        return entry
    scaled = {key: entry[key] * factor for key in ("value", "standard_uncertainty") if key in entry}
    return {**entry, **scaled, "unit": unit}


def last_digit(value: float, spread: float | None) -> float:
    """One unit of the last digit that is printed: the second of the uncertainty, else the sixth of the value.

    JCGM 100:2008, 7.2.6: two digits of a standard uncertainty are enough.
    """
    if spread:
        power = math.floor(math.log10(spread)) - 1
        # 0.0996 is printed as 0.10: its second digit lies one place higher.
        return 10.0 ** (power + 1 if round(spread / 10.0**power) >= 100 else power)
    return 10.0 ** (math.floor(math.log10(abs(value))) - SIGNIFICANT + 1) if value else 0.0


def moved_beyond(old: Entry, new: Entry) -> str | None:
    """What a number moved beyond ("uncertainty", "rounding", "its uncertainty" or "list"); None where it stands.

    Both entries are in one unit.
    """
    if isinstance(old["value"], list) or isinstance(new["value"], list):
        return None if _same_list(old["value"], new["value"]) else "list"
    change = abs(new["value"] - old["value"])
    spread, later = old.get("standard_uncertainty"), new.get("standard_uncertainty")
    finest = min(last_digit(old["value"], spread), last_digit(new["value"], later))
    if old["unit"] != new["unit"] or change > finest / 2:
        return "uncertainty" if spread and change > spread else "rounding"
    return None if _same_spread(spread, later) else "its uncertainty"


def _same_spread(old: float | None, new: float | None) -> bool:
    if not old or not new:
        return not old and not new
    return abs(new - old) <= min(last_digit(0.0, old), last_digit(0.0, new)) / 2


def _same_list(old: Any, new: Any) -> bool:
    before, after = flat(old), flat(new)
    if len(before) != len(after):
        return False
    pairs = zip(before, after, strict=True)
    return all(abs(b - a) <= min(last_digit(a, None), last_digit(b, None)) / 2 for a, b in pairs)


def flat(value: Any) -> list[float]:
    """The numbers of a value: itself, or those in its list."""
    items = value if isinstance(value, list) else [value]
    return [part for item in items for part in (item.values() if isinstance(item, dict) else [item])]
