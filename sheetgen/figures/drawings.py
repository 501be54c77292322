"""Points, rules and notes of a panel as SVG, and the rows that they have in the table."""

from __future__ import annotations

from xml.sax.saxutils import escape, quoteattr

import numpy as np

from sheetgen.figures import style
from sheetgen.figures.frames import text_element
from sheetgen.figures.marks import bar_path, marker_path
from sheetgen.figures.plot import Note, Panel, Points, Rule
from sheetgen.figures.scales import place, place_one
from sheetgen.figures.table import Series

UNIT = style.UNITS_PER_POINT


def drawn(panel: Panel, layer: Points | Rule | Note, number: int, height: float, series: list[Series]) -> str:
    """One layer of panel `number` of a figure of some height in points; its rows are added to the series."""
    return _DRAWN[type(layer)](panel, layer, number, height, series)


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
    at = place_one(axis, layer.x if upright else layer.y, start, length)
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
    x = place_one(panel.x, layer.x, left, width) + layer.dx
    y = height - place_one(panel.y, layer.y, bottom, tall) - layer.dy
    anchor = {"middle": "mi", "end": "en"}.get(layer.anchor, "")
    ink = "" if layer.ink == "ink" else f"t-{layer.ink}"
    text = text_element(x, y, layer.text, " ".join(filter(None, ("no", anchor, ink))))
    return f"<a href={quoteattr(layer.link)}>{text}</a>" if layer.link else text


_DRAWN = {Points: _draw_points, Rule: _draw_rule, Note: _draw_note}
