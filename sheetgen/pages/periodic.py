"""The periodic table as a way into the handbook."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

from sheetgen.records.elements import elements

GROUPS = 18
# Lanthanoids and actinoids stand in rows of their own below, from the third column on.
SERIES = {57: "57–71", 89: "89–103"}
_NOBLE = (0, 2, 10, 18, 36, 54, 86, 118)


@dataclass
class Place:
    """One place of the table: the element, and the sheets about it as pure matter, with their row in the tables."""

    symbol: str = ""
    number: int = 0
    series: str = ""
    sheets: list[tuple[int, Any]] = field(default_factory=list)


def context(handbook: Any) -> dict[str, Any]:
    """The names that the template of the periodic table uses."""
    pure: dict[str, list[tuple[int, Any]]] = {}
    compounds = []
    for row, sheet in enumerate(handbook.sheets):
        if len(sheet.record.composition) == 1:
            pure.setdefault(next(iter(sheet.record.composition)), []).append((row, sheet.record))
        else:
            compounds.append((row, sheet.record))
    return {"periods": periods(pure), "compounds": compounds, "groups": range(1, GROUPS + 1)}


def periods(pure: dict[str, list[tuple[int, Any]]]) -> list[tuple[str, list[Place | None]]]:
    """(name, 18 places) of each row: seven periods, then the two series; None where there is no element."""
    names = [*map(str, range(1, 8)), "lanthanoids", "actinoids"]
    rows: list[list[Place | None]] = [[None] * GROUPS for _ in names]
    for symbol, element in elements().items():
        row, column = position(element.number)
        rows[row][column] = Place(symbol, element.number, sheets=pure.get(symbol, []))
    for first, text in SERIES.items():
        rows[5 if first == 57 else 6][2] = Place(series=text)
    return list(zip(names, rows, strict=True))


def position(number: int) -> tuple[int, int]:
    """(row, column) of an element, both from 0; rows 7 and 8 are the lanthanoids and actinoids."""
    period = next(period for period in range(1, 8) if number <= _NOBLE[period])
    place = number - _NOBLE[period - 1]
    length = _NOBLE[period] - _NOBLE[period - 1]
    if length == 32 and 3 <= place <= 17:
        return period + 1, place - 1
    leading = 1 if length == 2 else 2
    return period - 1, place - 1 if place <= leading else GROUPS - 1 - (length - place)
