"""Figures that stand in a page rather than beside it: those of the whole handbook, and each quantity's ranking."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

from markupsafe import Markup

from sheetgen.figures import draw_handbook, draw_ranking
from sheetgen.figures.style import whole_sheet

# With more materials a picture of all of them has more rows than a reader can follow; the table has them all.
MOST_ROWS = 150
# From the folder of a figure to the top of the site.
ROOT = "../../"


@dataclass(frozen=True)
class Plate:
    """A figure set in a page: the picture as part of the page, and where its files are."""

    id: str
    title: str
    description: str
    picture: Markup
    svg: str
    csv: str


class Gallery:
    """The figures of a handbook that are not those of one sheet; each is drawn once."""

    def __init__(self, handbook: Any):
        self.handbook = handbook
        few = len(handbook.sheets) <= MOST_ROWS
        self.of_handbook = draw_handbook(handbook, ROOT) if few else []
        numbers = [id for id, found in handbook.registry.published().items() if few and found.form == "number"]
        drawn = ((id, draw_ranking(handbook, id, ROOT)) for id in numbers)
        self.rankings = {id: figure for id, figure in drawn if figure is not None}

    def files(self) -> Iterator[tuple[str, bytes]]:
        """(path, content) of every picture with its data, and of the style sheet of pictures within pages."""
        yield "style/figures.css", whole_sheet().encode()
        for figure in self.of_handbook:
            yield f"figures/handbook/{figure.id}.svg", figure.svg
            yield f"figures/handbook/{figure.id}.csv", figure.csv
        for id, figure in self.rankings.items():
            yield f"figures/quantities/{id}.svg", figure.svg
            yield f"figures/quantities/{id}.csv", figure.csv

    def plates(self) -> list[Plate]:
        """The figures of the handbook for a page at the top of the site, their links alive."""
        return [
            Plate(drawn.id, drawn.title, drawn.description, inline(drawn.svg, ""), *_paths("handbook", drawn.id, ""))
            for drawn in self.of_handbook
        ]

    def ranking(self, id: str) -> Plate | None:
        """The ranking for the page of its quantity, without links: the table beside it has the same ones."""
        figure = self.rankings.get(id)
        if figure is None:
            return None
        picture = _LINK.sub("", inline(figure.svg, "../")).replace('role="group"', 'role="img"', 1)
        paths = _paths("quantities", id, "../")
        return Plate(figure.id, figure.title, figure.description, Markup(picture), *paths)  # noqa: S704, our own SVG


_STYLE = re.compile(r"<style>.*?</style>", re.DOTALL)
_LINK = re.compile(r"</?a\b[^>]*>")
_NOTE = re.compile(r'<text(?=[^>]* class="(?:[^"]* )?no[ "])')


def inline(svg: bytes, root: str) -> Markup:
    """A figure as part of a page: its rules are in a style sheet (pages allow none inline), its links lead from there.

    Its texts were escaped when it was drawn.
    """
    text = _STYLE.sub("", svg.decode(), count=1).replace(f'href="{ROOT}', f'href="{root}')
    # The rim of a note lies under its letters; a style sheet of a page has no word for that.
    return Markup(_NOTE.sub('<text paint-order="stroke"', text.strip()))  # noqa: S704


def _paths(folder: str, id: str, root: str) -> tuple[str, str]:
    return f"{root}figures/{folder}/{id}.svg", f"{root}figures/{folder}/{id}.csv"
