"""Short citations of sources, and which values each source supplies."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Any
from urllib.parse import urlsplit

from markupsafe import Markup

from . import numbers, words


@dataclass(frozen=True)
class Citation:
    """A source as cited on a page: its key, authors and year, and whether the handbook lists it."""

    key: str
    label: str
    known: bool


def citation(key: str, sources: dict[str, Any]) -> Citation:
    """The short form of a source, as 'Straumanis & Yu 1969'; its key where the handbook does not list it."""
    source = sources.get(key)
    if source is None:
        return Citation(key, key, False)
    names = [_family(author) for author in source.authors]
    who = {0: source.title or key, 1: names[0] if names else ""}.get(len(names))
    if who is None:
        who = " & ".join(names) if len(names) == 2 else f"{names[0]} et al."
    return Citation(key, f"{who} {source.year}".strip(), True)


def _family(author: str) -> str:
    """The family name: what stands before a comma, else the last word."""
    return author.partition(",")[0].strip() if "," in author else author.split()[-1] if author.split() else author


def safe_link(link: str | None) -> str | None:
    """A link that may stand on a page: http or https with a host, else none."""
    if not link:
        return None
    try:
        parts = urlsplit(link)
    except ValueError:
        return None
    return link if parts.scheme in ("http", "https") and parts.netloc else None


@dataclass(frozen=True)
class Supplied:
    """One value that a source supplies: of which material, which input, how much."""

    slug: str
    material: str
    input: str
    value: Markup
    recalled: bool


def supplied_by(sheets: Iterable[Any]) -> dict[str, list[Supplied]]:
    """Source key → the values that it supplies, in the order of the sheets."""
    found: dict[str, list[Supplied]] = {}
    for sheet in sheets:
        names = tuple(specimen.name for specimen in sheet.record.specimens)
        for identifier, given in sheet.data["inputs"].items():
            number = numbers.printed(given["value"], given.get("standard_uncertainty"))
            value = numbers.with_unit(number, given["unit"])
            for key in given.get("sources", ()):
                label = words.input_words(identifier, names)
                found.setdefault(key, []).append(
                    Supplied(sheet.record.slug, sheet.record.name, label, value, bool(given.get("recalled")))
                )
    return found
