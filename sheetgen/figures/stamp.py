"""The data of one material put into a frame: the finished SVG, and the CSV of the points that it draws."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from xml.sax.saxutils import escape, quoteattr

import numpy as np

from sheetgen.figures import style
from sheetgen.figures.frames import frame, spec_of, text_element
from sheetgen.figures.marks import bar_path, marker_path
from sheetgen.figures.plot import Area, Curve, Figure, Note, Panel, Plot, Points, Rule, Shape
from sheetgen.figures.scales import place, value
from sheetgen.figures.table import Series, csv_of
from sheetgen.figures.thinning import clip, runs, thin

_CLASSES = re.compile(r'class="([^"]*)"')
UNIT = style.UNITS_PER_POINT
MILLIMETRES_PER_POINT = 25.4 / 72


@dataclass
class Line:
    """One unbroken polyline on its way to paper, in points from the lower left corner."""

    element: int
    x: np.ndarray
    y: np.ndarray


def stamp(plot: Plot) -> Figure:
    """Draw a plot into its frame; the same plot gives the same bytes, in any process."""
    series: list[Series] = []
    drawn = "".join(_panel(panel, number, plot.height, series) for number, panel in enumerate(plot.panels))
    svg = _document(plot, frame(spec_of(plot)) + drawn)
    return Figure(plot.id, plot.title, plot.description, svg.encode(), csv_of(plot.panels, series).encode())


def _document(plot: Plot, content: str) -> str:
    name = f"{plot.owner}-{plot.id}"
    layers = (layer for panel in plot.panels for layer in panel.layers)
    linked = any(getattr(layer, "links", ()) or getattr(layer, "link", "") for layer in layers)
    width, height = round(style.WIDTH * UNIT), round(plot.height * UNIT)
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" class="sheetgen-figure" role="{"group" if linked else "img"}" '
        f'width="{style.WIDTH * MILLIMETRES_PER_POINT:.1f}mm" height="{plot.height * MILLIMETRES_PER_POINT:.1f}mm" '
        f'viewBox="0 0 {width} {height}" aria-labelledby="{name}-title {name}-desc">'
        f'<title id="{name}-title">{escape(plot.title)}</title>'
        f'<desc id="{name}-desc">{escape(plot.description)}</desc>'
        f"<style>{style.sheet(_classes(content))}</style>"
        f'<path class="gr" d="M0 0H{width}V{height}H0z"/>{content}</svg>\n'
    )


def _classes(content: str) -> frozenset[str]:
    return frozenset(name for names in set(_CLASSES.findall(content)) for name in names.split()) | {"gr"}


def _panel(panel: Panel, number: int, height: float, series: list[Series]) -> str:
    """The layers of a panel in their order; curves and areas are decimated together, in one pass."""
    elements: list[str] = []
    lines: list[Line] = []
    owners: list[tuple[int, str, Curve | Area]] = []
    for layer in panel.layers:
        if isinstance(layer, (Curve, Area, Shape)):
            lines += (Line(len(owners), x, y) for x, y in _outlines(panel, layer))
            owners.append((len(elements), "l-" if isinstance(layer, Curve) else "a-", layer))
            elements.append("")
        else:
            elements.append(_DRAWN[type(layer)](panel, layer, number, height, series))
    if lines:
        for owner, path in _thinned(panel, lines, owners, number, height, series):
            index, prefix, layer = owner
            elements[index] = f'<path class="{prefix}{layer.look}" d="{path}"/>'
    return "".join(elements)


def _outlines(panel: Panel, layer: Curve | Area) -> Iterator[tuple[np.ndarray, np.ndarray]]:
    left, bottom, width, tall = panel.box
    if isinstance(layer, Shape):
        return iter(((place(panel.x, layer.x, left, width), place(panel.y, layer.y, bottom, tall)),))
    if isinstance(layer, Curve):
        x, y = place(panel.x, layer.x, left, width), place(panel.y, layer.y, bottom, tall)
    else:
        along = place(panel.x, layer.x, left, width)
        x = np.concatenate((along, along[::-1]))
        y = np.concatenate((place(panel.y, layer.upper, bottom, tall), place(panel.y, layer.lower, bottom, tall)[::-1]))
        return iter(((x.clip(left, left + width), y.clip(bottom, bottom + tall)),))
    x, y = clip(x, y, bottom, bottom + tall)
    y, x = clip(y, x, left, left + width)
    return iter(runs(x, y))


def _thinned(panel, lines, owners, number, height, series) -> Iterator[tuple[tuple, str]]:
    lengths = [len(line.x) for line in lines]
    starts = np.concatenate(([0], np.cumsum(lengths)[:-1]))
    x = np.concatenate([line.x for line in lines])
    y = np.concatenate([line.y for line in lines])
    keep = np.flatnonzero(thin(x, y, starts))
    bounds = np.searchsorted(keep, (*starts, len(x))).tolist()
    x, y = x[keep], y[keep]
    whole = np.empty((len(keep), 2), dtype=int)
    whole[:, 0] = np.rint(x * UNIT)
    whole[:, 1] = np.rint((height - y) * UNIT)
    steps = np.diff(whole, axis=0).ravel().tolist()
    left, bottom, width, tall = panel.box
    values_x, values_y = value(panel.x, x, left, width).tolist(), value(panel.y, y, bottom, tall).tolist()
    paths: dict[int, str] = {}
    for index, line in enumerate(lines):
        first, last = bounds[index], bounds[index + 1]
        layer = owners[line.element][2]
        end = "z" if not isinstance(layer, Curve) or layer.closed else ""
        moves = " ".join(map(str, steps[2 * first : 2 * last - 2]))
        path = f"M{whole[first, 0]} {whole[first, 1]}l{moves}{end}"
        paths[line.element] = paths.get(line.element, "") + path
        if not layer.unlisted:
            if isinstance(layer, Area):
                # The outline runs along the upper edge first: that is the curve which the table gives.
                last = first + int(np.searchsorted(keep[first:last] - starts[index], lengths[index] // 2))
            series.append(Series(layer.name, number, values_x[first:last], values_y[first:last]))
    return ((owners[element], path) for element, path in paths.items())


def _draw_points(panel: Panel, layer: Points, number: int, height: float, series: list[Series]) -> str:
    left, bottom, width, tall = panel.box
    x, y = place(panel.x, layer.x, left, width), place(panel.y, layer.y, bottom, tall)
    seen = (x > left - 0.01) & (x < left + width + 0.01) & (y > bottom - 0.01) & (y < bottom + tall + 0.01)
    if not layer.unlisted:
        series.append(
            Series(
                layer.name,
                number,
                *(np.asarray(given, dtype=float)[seen].tolist() for given in (layer.x, layer.y)),
                *(
                    None if given is None else np.asarray(given, dtype=float)[seen].tolist()
                    for given in (layer.x_uncertainty, layer.y_uncertainty)
                ),
                [name for name, shown in zip(layer.names, seen, strict=True) if shown] if layer.names else None,
            )
        )
    bars = _bars(panel, layer, x, y, seen, height)
    markers = {i: marker_path(layer.look, x[i], height - y[i]) for i in np.flatnonzero(seen).tolist()}
    if not layer.links:
        return bars + (f'<path class="m-{layer.look}" d="{"".join(markers.values())}"/>' if markers else "")
    return bars + "".join(
        f"<a href={quoteattr(layer.links[i][0])}><title>{escape(layer.links[i][1])}</title>"
        f'<path class="m-{layer.look}" d="{path}"/></a>'
        for i, path in markers.items()
    )


def _bars(panel: Panel, layer: Points, x, y, seen, height: float) -> str:
    """Error bars of one standard uncertainty, cut at the panel; none where they would hide inside the marker."""
    left, bottom, width, tall = panel.box
    ink = style.MARKERS[layer.look][1]
    bars = []
    for axis, start, length, data, given, along in (
        (panel.x, left, width, layer.x, layer.x_uncertainty, "x"),
        (panel.y, bottom, tall, layer.y, layer.y_uncertainty, "y"),
    ):
        if given is None:
            continue
        data, given = np.asarray(data, dtype=float), np.asarray(given, dtype=float)
        low, high = place(axis, data - given, start, length), place(axis, data + given, start, length)
        low, high = np.where(np.isnan(low), start, low).clip(start), high.clip(None, start + length)
        for i in np.flatnonzero(seen & (high - low > 2 * style.RADIUS)).tolist():
            ends = (low[i], height - y[i], high[i], height - y[i])
            bars.append(bar_path(*(ends if along == "x" else (x[i], height - low[i], x[i], height - high[i]))))
    return f'<path class="e-{ink}" d="{"".join(bars)}"/>' if bars else ""


def _draw_rule(panel: Panel, layer: Rule, number: int, height: float, series: list[Series]) -> str:
    left, bottom, width, tall = panel.box
    upright = layer.x is not None
    axis, start, length = (panel.x, left, width) if upright else (panel.y, bottom, tall)
    at = float(place(axis, layer.x if upright else layer.y, start, length))
    if not start - 0.01 <= at <= start + length + 0.01:
        return ""
    if layer.name:
        series.append(Series(layer.name, number, [layer.x] if upright else [], [] if upright else [layer.y]))
    u, top, low = UNIT, round((height - bottom - tall) * UNIT), round((height - bottom) * UNIT)
    if upright:
        return f'<path class="l-{layer.look}" d="M{round(at * u)} {low}V{top}"/>'
    level, start, end = round((height - at) * u), round(left * u), round((left + width) * u)
    return f'<path class="l-{layer.look}" d="M{start} {level}H{end}"/>'


def _draw_note(panel: Panel, layer: Note, number: int, height: float, series: list[Series]) -> str:
    left, bottom, width, tall = panel.box
    x = float(place(panel.x, layer.x, left, width)) + layer.dx
    y = height - float(place(panel.y, layer.y, bottom, tall)) - layer.dy
    anchor = {"middle": "mi", "end": "en"}.get(layer.anchor, "")
    ink = "" if layer.ink == "ink" else f"t-{layer.ink}"
    text = text_element(x, y, layer.text, " ".join(filter(None, ("no", anchor, ink))))
    return f"<a href={quoteattr(layer.link)}>{text}</a>" if layer.link else text


_DRAWN = {Points: _draw_points, Rule: _draw_rule, Note: _draw_note}
