"""Where panels stand on the width of a column, in points, so that labels and legends have room."""

from __future__ import annotations

from collections.abc import Iterable

from sheetgen.figures.plot import Layer, keys_of
from sheetgen.figures.style import HEIGHT, WIDTH

LEFT, RIGHT, BOTTOM, TOP = 40.0, 9.0, 28.0, 8.0
LEGEND_ROW = 10.0
Box = tuple[float, float, float, float]


def single(rows: int = 0, height: float = HEIGHT, left: float = LEFT) -> Box:
    """One panel under a legend of some rows."""
    return left, BOTTOM, WIDTH - left - RIGHT, height - BOTTOM - TOP - LEGEND_ROW * rows


def stacked(
    upper: float, lower: float, rows: tuple[int, int] = (0, 0), left: float = LEFT, shared: bool = False
) -> tuple[float, Box, Box]:
    """Two panels above each other with drawing areas of these heights; returns the figure's height and the boxes.

    `rows` are the rows of their legends; with `shared` the upper one leaves the x axis to the lower one.
    """
    low = (left, BOTTOM, WIDTH - left - RIGHT, lower)
    start = BOTTOM + lower + TOP + LEGEND_ROW * rows[1] + (4.0 if shared else BOTTOM)
    high = (left, start, WIDTH - left - RIGHT, upper)
    return start + upper + TOP + LEGEND_ROW * rows[0], high, low


def rows_for(layers: Iterable[Layer], columns: int) -> int:
    """Rows that the legend of these layers takes."""
    return -(-len(keys_of(tuple(layers))) // columns)
