"""The pages by which a reader finds and compares: further leaves of the table, periodic table, side by side, search."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from typing import Any

from . import front, periodic
from .gallery import Gallery
from .search_index import index
from .tables import Tables, as_script


def finding(
    handbook: Any, figures: Mapping[str, Sequence[Any]], gallery: Gallery, page: Callable[..., bytes]
) -> Iterator[tuple[str, bytes]]:
    """(path, content) of these pages and of the tables that their scripts read; `page` sets a template."""
    yield from Tables(handbook).files(figures)
    yield "tables/search.js", as_script("search", index(handbook))
    for number, path in enumerate(front.leaves(handbook)[1:], 2):
        yield path, page("materials.html", "", **front.leaf(handbook, number))
    yield "periodic-table.html", page("periodic-table.html", "", **periodic.context(handbook))
    yield "side-by-side.html", page("side-by-side.html", "", count=len(handbook.sheets))
    yield "search.html", page("search.html", "", **_contents(handbook))
    yield "figures.html", page("figures.html", "", plates=gallery.plates())
    yield from gallery.files()


def _contents(handbook: Any) -> dict[str, Any]:
    """What a reader without a script has in the place of the search: every quantity by section."""
    sections: dict[str, list[Any]] = {}
    for id in handbook.registry.published():
        definition = handbook.registry.definitions_of(id)[0]
        sections.setdefault(definition.section, []).append(definition)
    return {"sections": sections}
