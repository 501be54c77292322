"""Short citations of sources, and which values each source supplies."""

from __future__ import annotations

import re
import textwrap
from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache
from importlib import resources
from pathlib import Path
from typing import Any
from urllib.parse import quote, urlsplit

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
    return Citation(key, _label(source.authors, source.year, source.title) or key, True)


def citations(keys: Iterable[str], sources: dict[str, Any]) -> tuple[Citation, ...]:
    """Short forms of several sources."""
    return tuple(citation(key, sources) for key in keys)


@cache
def _label(authors: tuple[str, ...], year: str, title: str) -> str:
    names = [_family(author) for author in authors]
    if not names:
        who = _short_title(title)
    elif len(names) == 1:
        who = names[0]
    elif len(names) == 2 and names[1] != "others":  # BibTeX's word for further authors
        who = " & ".join(names)
    else:
        who = f"{names[0]} et al."
    return f"{who} {year}".strip()


def order(source: Any) -> tuple[str, ...]:
    """By what a list of sources is sorted: family names, or the title where there are none, then the year."""
    names = [_family(author).casefold() for author in source.authors]
    return (" ".join(names) or source.title.casefold(), source.year, source.key)


def _short_title(title: str) -> str:
    """A title without its subtitle, its first words where it is still long."""
    return textwrap.shorten(re.split(r": | \(", title)[0], 40, placeholder="…")


def _family(author: str) -> str:
    """The family name: what stands before a comma, else the last word."""
    return author.partition(",")[0].strip() if "," in author else author.split()[-1] if author.split() else author


@cache
def methods_sources() -> dict[str, Any]:
    """The publications that the formulas are taken from."""
    from sheetgen.faults import FaultLog
    from sheetgen.records.sources import read_sources

    path = Path(str(resources.files("sheetgen.quantities") / "methods.bib"))
    log = FaultLog()
    found = read_sources(path.read_text(encoding="utf-8"), path, log)
    log.raise_if_any()
    return found


def all_sources(handbook: Any) -> dict[str, Any]:
    """The handbook's sources and those of the methods, each key once, the handbook's own first."""
    return {**handbook.sources, **{k: s for k, s in methods_sources().items() if k not in handbook.sources}}


_KEY = re.compile(r"[\w:.+/-]*\w")


def keys_in(text: str, sources: dict[str, Any]) -> list[str]:
    """The keys of sources that a text names, in order."""
    return [word for word in _KEY.findall(text) if word in sources]


def linked(text: str, sources: dict[str, Any], root: str) -> Markup:
    """A text that names sources by their keys, each key replaced by a link with authors and year."""
    parts, position = [], 0
    for found in _KEY.finditer(text):
        if found[0] in sources:
            label = citation(found[0], sources).label
            parts.append(Markup.escape(text[position : found.start()]))
            parts.append(Markup('<a href="{}sources.html#{}">{}</a>').format(root, quote(found[0]), label))
            position = found.end()
    return Markup("").join([*parts, Markup.escape(text[position:])])


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
    """What a source supplies to one material: each input with its value, and whether it is recalled."""

    slug: str
    material: str
    values: list[tuple[str, str, bool]]


def supplied_by(sheets: Iterable[Any]) -> dict[str, list[Supplied]]:
    """Source key → the values that it supplies, by material in the order of the sheets."""
    found: dict[str, list[Supplied]] = {}
    for sheet in sheets:
        here: dict[str, Supplied] = {}
        names = tuple(specimen.name for specimen in sheet.record.specimens)
        for identifier, given in sheet.data["inputs"].items():
            for key in given.get("sources", ()):
                material = here.setdefault(key, Supplied(sheet.record.slug, sheet.record.name, []))
                label = words.input_words(identifier, names)
                material.values.append((label, _as_text(given), bool(given.get("recalled"))))
        for key, material in here.items():
            found.setdefault(key, []).append(material)
    return found


def _as_text(given: dict[str, Any]) -> str:
    number = numbers.stated(given["value"], given.get("standard_uncertainty")).text
    unit = numbers.unit_text(given["unit"])
    return f"{number}{numbers.NARROW}{unit}" if unit else number
