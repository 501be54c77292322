"""The figures of a handbook: what each shows is built from the sheet, how it looks stands in one style module.

A figure is a `Plot` (axes and layers of data); `stamp` puts its data into a frame that matplotlib draws once per
kind of figure and axis ranges. A figure that means nothing for a material is not drawn.
"""

from __future__ import annotations

from importlib import import_module

from sheetgen.figures.plot import Figure

__all__ = ["Figure", "draw_all"]

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
