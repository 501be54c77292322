"""The data of one material put into a frame: the finished SVG, and the CSV of the points that it draws."""

from __future__ import annotations

from xml.sax.saxutils import escape

from sheetgen.figures import style
from sheetgen.figures.drawings import drawn
from sheetgen.figures.frames import classes_of, frame, spec_of
from sheetgen.figures.outlines import Outlined, outlines
from sheetgen.figures.plot import Figure, Plot
from sheetgen.figures.table import csv_of

MILLIMETRES_PER_POINT = 25.4 / 72


def stamp(plot: Plot) -> Figure:
    """Draw a plot into its frame; the same plot gives the same bytes, in any process."""
    paths, series = outlines(plot)
    elements = []
    for number, panel in enumerate(plot.panels):
        for place, layer in enumerate(panel.layers):
            if isinstance(layer, Outlined):
                # A curve that lies outside its panel has no path.
                elements.append(paths.get((number, place), ""))
            else:
                elements.append(drawn(panel, layer, number, plot.height, series))
    svg = _document(plot, "".join(elements))
    return Figure(plot.id, plot.title, plot.description, svg.encode(), csv_of(plot.panels, series).encode())


def _document(plot: Plot, content: str) -> str:
    name = f"{plot.owner}-{plot.id}"
    around = frame(spec_of(plot))
    classes = around.classes | classes_of(content)
    width, height = (round(length * style.UNITS_PER_POINT) for length in (style.WIDTH, plot.height))
    # A picture is one thing to a screen reader; one with links is a group of them.
    role = "group" if "<a " in content else "img"
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" class="sheetgen-figure" role="{role}" '
        f'width="{style.WIDTH * MILLIMETRES_PER_POINT:.1f}mm" height="{plot.height * MILLIMETRES_PER_POINT:.1f}mm" '
        f'viewBox="0 0 {width} {height}" aria-labelledby="{name}-title {name}-desc">'
        f'<title id="{name}-title">{escape(plot.title)}</title>'
        f'<desc id="{name}-desc">{escape(plot.description)}</desc>'
        f"<style>{style.sheet(classes)}</style>"
        f'<path class="gr" d="M0 0H{width}V{height}H0z"/>{around.elements}{content}</svg>\n'
    )
