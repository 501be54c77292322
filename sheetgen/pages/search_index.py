"""What the search of the handbook finds: materials, quantities with their symbols, assumptions, sources, pages."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any
from urllib.parse import quote

from . import citations, words
from .tables import symbol_marked

PAGES = (
    ("Periodic table", "periodic-table.html", "elements shaded by a quantity"),
    ("Side by side", "side-by-side.html", "compare materials"),
    ("Figures of the handbook", "figures.html", "plots"),
    ("Methods", "methods.html", "formulas definitions assumptions standing"),
    ("Limits of use", "limits.html", "what to use scale or leave"),
    ("Sources", "sources.html", "references bibliography literature"),
    ("Changes", "changes.html", "errata edition history"),
)


def index(handbook: Any) -> list[tuple[str, str, str, str, str]]:
    """(kind, title, symbol or formula, address from the top of the site, further words) of all that can be found."""
    return [*_materials(handbook), *_quantities(handbook), *_assumptions(handbook), *_sources(handbook), *_pages()]


def _materials(handbook: Any) -> Iterator[tuple[str, str, str, str, str]]:
    for sheet in handbook.sheets:
        record = sheet.record
        lattice = f"{record.crystal.lattice} {words.lattice_words(record.crystal.lattice)}" if record.crystal else ""
        specimens = " ".join(specimen.name for specimen in record.specimens)
        more = " ".join(filter(None, [*record.composition, lattice, specimens]))
        yield "material", record.name, record.formula, f"materials/{record.slug}.html", more


def _quantities(handbook: Any) -> Iterator[tuple[str, str, str, str, str]]:
    registry = handbook.registry
    for id in dict.fromkeys([*registry.published(), *registry.published("specimen")]):
        definition = registry.definitions_of(id)[0]
        more = f"{id.replace('_', ' ')} {definition.section}"
        yield "quantity", definition.title, symbol_marked(definition.symbol), f"quantities/{id}.html", more


def _assumptions(handbook: Any) -> Iterator[tuple[str, str, str, str, str]]:
    for assumption in {assumption.id: assumption for assumption in handbook.registry.assumptions}.values():
        address = f"methods.html#assumption-{quote(assumption.id)}"
        yield "assumption", assumption.title, "", address, f"{assumption.id.replace('_', ' ')} {assumption.sentence}"


def _sources(handbook: Any) -> Iterator[tuple[str, str, str, str, str]]:
    known = citations.all_sources(handbook)
    for key, source in known.items():
        who = citations.citation(key, known).label
        yield "source", f"{who}: {source.title}", "", f"sources.html#{quote(key)}", f"{key} {' '.join(source.authors)}"


def _pages() -> Iterator[tuple[str, str, str, str, str]]:
    for title, address, more in PAGES:
        yield "page", title, "", address, more
