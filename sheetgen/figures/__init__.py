"""The figures of a handbook: what each shows is built from the sheet, how it looks stands in one style module.

A figure is a `Plot` (axes and layers of data); `stamp` puts its data into a frame that matplotlib draws once per
kind of figure and axis ranges. A figure that means nothing for a material is not drawn.
"""

from __future__ import annotations

from importlib import import_module

from sheetgen.figures.plot import Figure

__all__ = ["Figure", "draw_all", "draw_handbook", "draw_ranking"]

# In the order of the sheet: one module each, with one function `draw(subject)`.
MODULES = (
    "parabola",
    "bands",
    "zone",
    "density_of_states",
    "counting",
    "resistivity",
    "optics",
    "heat",
    "chemical_potential",
    "film",
    "confrontation",
)


def draw_all(sheet, handbook) -> list[Figure]:
    """Every figure that a sheet has, in the order of the sheet."""
    from sheetgen.figures.subject import Subject

    subject = Subject(sheet, handbook)
    drawn = (import_module(f"sheetgen.figures.{name}").draw(subject) for name in MODULES)
    return [figure for figure in drawn if figure is not None]


def draw_handbook(handbook, root: str = "../../") -> list[Figure]:
    """The figures of the whole handbook; `root` leads from where they are shown to the top of the site."""
    return import_module("sheetgen.figures.overview").draw_handbook(handbook, root)


def draw_ranking(handbook, id: str, root: str = "../../") -> Figure | None:
    """All materials ranked by one quantity; None where fewer than two state it."""
    return import_module("sheetgen.figures.ranking").draw(handbook, id, root)
