"""A plot drawn whole by matplotlib, axes and data: what stamping is held against, in looks and in time."""

from __future__ import annotations

import io

import matplotlib as mpl
import numpy as np

from sheetgen.figures import style
from sheetgen.figures.canvas import SETTINGS, CompactRenderer, figure_of
from sheetgen.figures.frames import spec_of
from sheetgen.figures.plot import Area, Curve, Plot, Points, Rule, Shape
from sheetgen.figures.stamp import stamp


def add_layers(plot: Plot):
    """The matplotlib figure of a plot with every undecimated point of its curves and areas."""
    figure = figure_of(spec_of(plot))
    for axes, panel in zip(figure.axes, plot.panels, strict=True):
        axes.set_xlim(panel.x.low, panel.x.high)
        axes.set_ylim(panel.y.low, panel.y.high)
        for layer in panel.layers:
            _add(axes, layer)
    return figure


def _add(axes, layer) -> None:
    colours = style.LIGHT
    if isinstance(layer, Curve):
        stroke = style.STROKES[layer.look]
        axes.plot(layer.x, layer.y, color=colours[stroke.ink], lw=stroke.width, gid=f"l-{layer.look}")
    elif isinstance(layer, (Area, Shape)):
        x, y = (layer.x, layer.y) if isinstance(layer, Shape) else _outline(layer)
        axes.fill(x, y, color=colours[layer.look], alpha=0.2, lw=0, gid=f"a-{layer.look}")
    elif isinstance(layer, Points):
        ink = colours[style.MARKERS[layer.look][1]]
        axes.plot(layer.x, layer.y, "o", color=ink, ms=2 * style.RADIUS, gid=f"m-{layer.look}")
    elif isinstance(layer, Rule):
        draw = axes.axvline if layer.x is not None else axes.axhline
        at = layer.x if layer.x is not None else layer.y
        draw(at, color=colours["faint"], lw=0.7, gid=f"l-{layer.look}")


def _outline(area: Area) -> tuple[np.ndarray, np.ndarray]:
    return np.concatenate((area.x, area.x[::-1])), np.concatenate((area.upper, area.lower[::-1]))


def svg(plot: Plot) -> bytes:
    """The picture as matplotlib's own SVG writer makes it, text as text."""
    with mpl.rc_context({**SETTINGS, "svg.fonttype": "none", "svg.hashsalt": "sheetgen"}):
        file = io.BytesIO()
        add_layers(plot).savefig(file, format="svg", metadata={"Date": None})
    return file.getvalue()


def same_look(plot: Plot) -> bytes:
    """The plot drawn whole by matplotlib, in our classes and style sheet, so that only the drawing differs."""
    with mpl.rc_context(SETTINGS):
        renderer = CompactRenderer(plot.height)
        add_layers(plot).draw(renderer)
    head, _, _ = stamp(plot).svg.partition(b'<path class="gr"')
    return head + renderer.elements().encode() + b"</svg>"


def curve_paths(plot: Plot) -> list[tuple[str, np.ndarray]]:
    """Class and polyline of each curve within its panel, in points from the top left, as matplotlib places them."""
    drawn = []
    with mpl.rc_context(SETTINGS):
        figure = add_layers(plot)
        figure.draw(CompactRenderer(plot.height))
        for axes, panel in zip(figure.axes, plot.panels, strict=True):
            left, bottom, width, tall = panel.box
            for line in axes.lines:
                # Rules have an axis of their own for one coordinate.
                if (line.get_gid() or "").startswith("l-") and line.get_transform() == axes.transData:
                    x, y = line.get_transform().transform(np.column_stack(line.get_data())).T
                    inside = (x >= left) & (x <= left + width) & (y >= bottom) & (y <= bottom + tall)
                    drawn.append((line.get_gid(), np.column_stack((x, plot.height - y))[inside]))
    return drawn
