"""What a bound handbook has before and after its sheets: title page and contents; methods, sources and index."""

from __future__ import annotations

import base64
from collections.abc import Mapping, Sequence
from typing import Any

from markupsafe import Markup

from sheetgen.pages import citations, entries, numbers, reference, words
from sheetgen.pages import front as front_page
from sheetgen.pages.changes import date_of
from sheetgen.paper import codes, sheets
from sheetgen.paper.typesetting import Manuscript

# What the contents say of each material besides its page.
SUMMARY = ("electron_density", "fermi_energy", "fermi_wavevector", "fermi_velocity")
LINK = "sheetgen:"


def front(handbook: Any, first_pages: Sequence[int], behind: Mapping[str, int]) -> Manuscript:
    """Title page and contents; `first_pages` of the sheets, `behind` the pages of the parts that follow them."""
    address = sheets.page_address(handbook.imprint, "index.html")
    columns = [_column(id, handbook) for id in SUMMARY]
    materials = [
        {
            "record": sheet.record,
            "draft": front_page.is_draft(sheet),
            "cells": [cells[row] for *_, cells in columns],
            "page": first_pages[row],
        }
        for row, sheet in enumerate(handbook.sheets)
    ]
    return _manuscript(
        "front",
        handbook,
        address=address,
        code=codes.data_address(address) if address else "",
        logo=_logo(handbook.imprint.look.logo),
        columns=columns,
        materials=materials,
        parts=[(words_of, anchor, behind[anchor]) for anchor, words_of in PARTS.items()],
        citation=front_page.citation(handbook),
    )


PARTS = {
    "methods": "Methods",
    "assumptions": "Assumptions and their bounds",
    "standing": "What the standings mean",
    "sources": "Sources",
    "index": "Index of quantities",
}


def back(handbook: Any, first_page: int) -> Manuscript:
    """Methods, sources and index of quantities; the pages count from `first_page`."""
    known = citations.all_sources(handbook)
    return _manuscript(
        "back",
        handbook,
        first_page=first_page,
        parts=PARTS,
        index=sorted(_indexed(handbook), key=lambda entry: entry[0].casefold()),
        named=lambda text: _named(text, known),
        reference_list=reference.sources(handbook)["sources"],
        **reference.methods(handbook),
    )


def folios(handbook: Any, roman: int, pages: int) -> str:
    """Pages with nothing on them but their numbers in the handbook."""
    template = sheets.press(handbook).render("paper/folios.html", roman=roman, pages=pages, language="en")
    return template.decode()


def _manuscript(name: str, handbook: Any, **context: Any) -> Manuscript:
    imprint = handbook.imprint
    html = sheets.press(handbook).render(
        f"paper/{name}.html",
        imprint=imprint,
        language=words.language(imprint.language),
        created=date_of(imprint),
        link=LINK,
        **context,
    )
    return Manuscript(name, sheets.plainer(html.decode()))


def _logo(logo: tuple[str, bytes] | None) -> str:
    """A group's logo as a data address, "" where it has none."""
    if logo is None:
        return ""
    name, content = logo
    kind = "image/svg+xml" if name.endswith(".svg") else "image/png"
    return f"data:{kind};base64,{base64.b64encode(content).decode()}"


def _column(id: str, handbook: Any) -> tuple[str, str, Markup, list[Markup]]:
    """Symbol and title of a quantity, what it is counted in, and its number for each sheet."""
    definition = handbook.registry.definitions_of(id)[0]
    preference = entries.Preference(handbook.imprint.units)
    first = [next(iter(sheet.entries(id)), None) for sheet in handbook.sheets]
    # A two-dimensional gas may state the same quantity in another unit; such a cell has no place in this column.
    fitting = [entry if entry and entry["unit"] == definition.unit else None for entry in first]
    power, cells = numbers.column([preference.number(id, entry) if entry else None for entry in fitting])
    counted_in = words.over(power, numbers.unit(preference.of(id, definition.unit)))
    return definition.symbol, definition.title, counted_in, cells


def _indexed(handbook: Any) -> list[tuple[str, str, str]]:
    """(title, symbol, id) of every quantity that the methods define."""
    registry = handbook.registry
    ids = dict.fromkeys([*registry.published(), *registry.published("specimen")])
    return [(registry.definitions_of(id)[0].title, registry.definitions_of(id)[0].symbol, id) for id in ids]


def _named(text: str, known: Mapping[str, Any]) -> str:
    """A text that names sources by their keys, with authors and year instead."""
    for key in sorted(citations.keys_in(text, known), key=len, reverse=True):
        text = text.replace(key, citations.citation(key, known).label)
    return text
