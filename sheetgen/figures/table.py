"""The points of a figure as CSV: one line a point, a header with each quantity and its unit."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import lru_cache
from itertools import chain

from sheetgen.figures.markup import plain
from sheetgen.figures.plot import Panel


@dataclass(frozen=True)
class Series:
    """The drawn points of one layer in the units of its axes; an empty list is a coordinate that it does not have."""

    name: str
    panel: int
    x: list[float]
    y: list[float]
    x_uncertainty: list[float] | None = None
    y_uncertainty: list[float] | None = None
    names: list[str] | None = None


def csv_of(panels: tuple[Panel, ...], series: Iterable[Series]) -> str:
    """The table: a column `series`, then the axes of each panel; axes of the same label share a column.

    Uncertainties stand in columns of their own, `u(…)`, where a layer has any.
    """
    series = [one for one in series if one.name or one.names]
    columns: list[str] = []
    slots = {}
    for number, panel in enumerate(panels):
        labels = [axis.column or plain(axis.label) for axis in (panel.x, panel.y)]
        for one in series:
            if one.panel == number:
                wanted = labels + [
                    f"u({label})"
                    for label, given in zip(labels, (one.x_uncertainty, one.y_uncertainty), strict=True)
                    if given is not None
                ]
                columns += [label for label in wanted if label not in ("", "u()", *columns)]
        slots[number] = labels
    lines = [",".join(map(_quoted, ("series", *columns)))]
    for one in series:
        lines += _lines(one, slots[one.panel], columns)
    return "\n".join(lines) + "\n"


def _lines(one: Series, labels: list[str], columns: list[str]) -> list[str]:
    given = {
        labels[0]: one.x,
        labels[1]: one.y,
        f"u({labels[0]})": one.x_uncertainty,
        f"u({labels[1]})": one.y_uncertainty,
    }
    filled = [given.get(column) for column in columns]
    numbers = [column for column in filled if column]
    pattern = "".join(",%.6g" if column else "," for column in filled)
    rows = list(zip(*numbers, strict=True))
    if one.names is not None:
        return [_quoted(name) + pattern % row for name, row in zip(one.names, rows, strict=True)]
    # One format for all rows takes half the time of one for each.
    pattern = _quoted(one.name).replace("%", "%%") + pattern
    return ["\n".join([pattern] * len(rows)) % tuple(chain.from_iterable(rows))] if rows else []


@lru_cache(maxsize=4096)
def _quoted(text: str) -> str:
    text = plain(text)
    return '"' + text.replace('"', '""') + '"' if any(mark in text for mark in ',"\n') else text
