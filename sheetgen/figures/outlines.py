"""Curves, areas and shapes of a figure as SVG paths: placed, clipped at their panels and decimated in one pass."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from sheetgen.figures.plot import Area, Curve, Panel, Plot, Shape
from sheetgen.figures.scales import place, value
from sheetgen.figures.style import UNITS_PER_POINT
from sheetgen.figures.table import Series
from sheetgen.figures.thinning import clip, runs, thin

Outlined = Curve | Area | Shape
PREFIXES = {Curve: "l", Area: "a", Shape: "a"}


@dataclass(frozen=True)
class Line:
    """One unbroken polyline on its way to paper, in points from the lower left corner."""

    panel: int
    place: int
    layer: Outlined
    x: np.ndarray
    y: np.ndarray


def outlines(plot: Plot) -> tuple[dict[tuple[int, int], str], list[Series]]:
    """(Panel, place of the layer in it) → its SVG path; and the points that are drawn, for the table."""
    lines = [line for number, panel in enumerate(plot.panels) for line in _lines(panel, number)]
    if not lines:
        return {}, []
    lengths = [len(line.x) for line in lines]
    starts = np.cumsum([0, *lengths[:-1]])
    x, y = np.concatenate([line.x for line in lines]), np.concatenate([line.y for line in lines])
    keep = np.flatnonzero(thin(x, y, starts))
    bounds = np.searchsorted(keep, (*starts, len(x))).tolist()
    x, y = x[keep], y[keep]
    return _paths(plot.height, lines, bounds, x, y), list(_series(plot, lines, bounds, x, y, keep, starts))


def _lines(panel: Panel, number: int) -> Iterator[Line]:
    """The unbroken pieces of a panel's curves, areas and shapes."""
    chosen = [(place_, layer) for place_, layer in enumerate(panel.layers) if type(layer) in PREFIXES]
    if not chosen:
        return
    left, bottom, width, tall = panel.box
    ends = np.cumsum([_size(layer) for _, layer in chosen]).tolist()
    x = place(panel.x, np.concatenate([_along(layer) for _, layer in chosen]), left, width)
    y = place(panel.y, np.concatenate([_up(layer) for _, layer in chosen]), bottom, tall)
    # One look at all of them: most panels hold their curves whole. A NaN fails it.
    whole = x.min() >= left and x.max() <= left + width and y.min() >= bottom and y.max() <= bottom + tall
    for (place_, layer), start, end in zip(chosen, [0, *ends], ends, strict=False):
        piece = x[start:end], y[start:end]
        for run in (piece,) if whole else _within(layer, *piece, panel.box):
            yield Line(number, place_, layer, *run)


def _size(layer: Outlined) -> int:
    return len(layer.x) * (2 if isinstance(layer, Area) else 1)


def _along(layer: Outlined) -> np.ndarray:
    return np.concatenate((layer.x, layer.x[::-1])) if isinstance(layer, Area) else layer.x


def _up(layer: Outlined) -> np.ndarray:
    return np.concatenate((layer.upper, layer.lower[::-1])) if isinstance(layer, Area) else layer.y


def _within(layer: Outlined, x: np.ndarray, y: np.ndarray, box) -> list[tuple[np.ndarray, np.ndarray]]:
    left, bottom, width, tall = box
    if isinstance(layer, Shape):
        return [(x, y)]
    if isinstance(layer, Area):
        return [(x.clip(left, left + width), y.clip(bottom, bottom + tall))]
    x, y = clip(x, y, bottom, bottom + tall)
    y, x = clip(y, x, left, left + width)
    return runs(x, y)


def _paths(height: float, lines: list[Line], bounds: list[int], x, y) -> dict[tuple[int, int], str]:
    """Short paths: whole hundredths of a point, an absolute start and relative steps."""
    corners = np.empty((len(x), 2), dtype=int)
    corners[:, 0] = np.rint(x * UNITS_PER_POINT)
    corners[:, 1] = np.rint((height - y) * UNITS_PER_POINT)
    steps = list(map(str, (corners[1:] - corners[:-1]).ravel().tolist()))
    begun = corners[bounds[:-1]].tolist()
    strings: dict[tuple[int, int], list[str]] = {}
    for line, (start_x, start_y), first, last in zip(lines, begun, bounds, bounds[1:], strict=False):
        end = "z" if not isinstance(line.layer, Curve) or line.layer.closed else ""
        path = f"M{start_x} {start_y}l{' '.join(steps[2 * first : 2 * last - 2])}{end}"
        strings.setdefault((line.panel, line.place), [line.layer]).append(path)
    return {
        key: f'<path class="{PREFIXES[type(layer)]}-{layer.look}" d="{"".join(paths)}"/>'
        for key, (layer, *paths) in strings.items()
    }


def _series(plot: Plot, lines: list[Line], bounds: list[int], x, y, keep, starts) -> Iterator[Series]:
    """The drawn points in the units of their axes; of an area its upper edge, with which its outline begins."""
    number = -1
    for index, line in enumerate(lines):
        if line.panel != number:
            number, offset = line.panel, bounds[index]
            panel = plot.panels[number]
            left, bottom, width, tall = panel.box
            end = bounds[sum(other.panel <= number for other in lines)]
            values_x = value(panel.x, x[offset:end], left, width).tolist()
            values_y = value(panel.y, y[offset:end], bottom, tall).tolist()
        if line.layer.name and not line.layer.unlisted:
            first, last = bounds[index], bounds[index + 1]
            if isinstance(line.layer, Area):
                last = first + int(np.searchsorted(keep[first:last] - starts[index], len(line.x) // 2))
            part = slice(first - offset, last - offset)
            yield Series(line.layer.name, number, values_x[part], values_y[part])
