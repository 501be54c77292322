"""A publication as a BibTeX entry, and sources.bib with one entry more and nothing else changed."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path

from sheetgen.faults import Fault, FaultLog, FaultsError, Place
from sheetgen.records import Source
from sheetgen.records.files import read_text
from sheetgen.records.references import link_of
from sheetgen.records.sources import MAXIMUM_BYTES, read_sources
from sheetgen.records.unreadable import UnreadableError

FILE_NAME = "sources.bib"
_SPECIAL = re.compile(r"([&%#_])")
# What would end a field, begin a command, or mean something else to a reader of LaTeX.
_FORBIDDEN = str.maketrans({"{": "(", "}": ")", "\\": "/", "~": " ", "^": " ", "@": " at ", "$": " "})
_LONGEST_KEY = 40


@dataclass(frozen=True)
class Publication:
    """What a CIF says of where it was published, in plain Unicode; whatever it does not say is empty."""

    authors: tuple[str, ...] = ()
    title: str = ""
    journal: str = ""
    volume: str = ""
    number: str = ""
    pages: str = ""
    year: str = ""
    doi: str = ""
    note: str = ""

    def __bool__(self) -> bool:
        """Whether a reader could find it."""
        return bool(self.authors or self.title or self.journal or self.doi or self.note)


@dataclass(frozen=True)
class Cited:
    """The key of a source; `addition` is the entry to append to sources.bib, empty where it stands there already."""

    key: str
    addition: str = ""


def cite(publication: Publication, sources: Mapping[str, Source], fallback: str) -> Cited:
    """The key under which a publication is cited: that of the entry which says the same, or a new one.

    `fallback` names it where neither an author nor a year does.
    """
    doi = _checked_doi(publication.doi)
    for key, source in sources.items():
        if doi and source.fields.get("doi", "").lower() == doi.lower():
            return Cited(key)
    base = _key(publication, fallback)
    for key in _numbered(base):
        if key not in sources:
            return Cited(key, entry(key, publication))
        if _same(publication, sources[key]):
            return Cited(key)
    raise AssertionError("there is always a further key")


def entry(key: str, publication: Publication) -> str:
    """The BibTeX entry of a publication."""
    kind = "article" if publication.journal else "misc"
    title = publication.title or publication.journal or publication.note or f"Publication {key}"
    fields = {
        "author": " and ".join(_name(author) for author in publication.authors if _name(author)),
        "title": _latex(title),
        "journal": _latex(publication.journal),
        "volume": _latex(publication.volume),
        "number": _latex(publication.number),
        "pages": _latex(publication.pages),
        "year": _latex(publication.year),
        "doi": _checked_doi(publication.doi),
        "note": _latex(publication.note),
    }
    lines = [f"  {name} = {{{value}}}," for name, value in fields.items() if value]
    return "\n".join([f"@{kind}{{{key},", *lines, "}"]) + "\n"


def read_bibliography(folder: Path) -> tuple[str, dict[str, Source]]:
    """Text and sources of a folder's sources.bib; empty without one.

    Raises FaultsError where it cannot be read: an entry behind a broken one would be swallowed by it.
    """
    path = folder / FILE_NAME
    if not path.exists() and not path.is_symlink():
        return "", {}
    log = FaultLog()
    text = read_text(path, folder, log, MAXIMUM_BYTES)
    sources = read_sources(text, path, log) if text is not None else {}
    log.raise_if_any()
    return text or "", sources


def appended(text: str, addition: str) -> str:
    """The text with an entry behind everything that stands there, an empty line between."""
    if not text:
        return addition
    gap = "" if text.endswith("\n\n") else "\n" if text.endswith("\n") else "\n\n"
    return f"{text}{gap}{addition}"


def check_addition(folder: Path, text: str, cited: Cited) -> None:
    """Raise FaultsError where the end of the file would swallow a new entry, as an open brace does."""
    path = folder / FILE_NAME
    log = FaultLog()
    before, after = (read_sources(whole, path, log) for whole in (text, appended(text, cited.addition)))
    if log.faults or after.keys() != before.keys() | {cited.key}:
        last = Place(str(path), text.count("\n") + 1)
        message = "an entry behind the last one would not be read. Close the brace, or end the comment, that is open."
        raise FaultsError([Fault(last, message)])


def _key(publication: Publication, fallback: str) -> str:
    surname = _plain(_surname(publication.authors[0])) if publication.authors else ""
    year = "".join(re.findall(r"\d", publication.year))[:4]
    return (surname + year)[:_LONGEST_KEY] if surname else _plain(fallback)[:_LONGEST_KEY] or "source"


def _numbered(base: str) -> Iterator[str]:
    """The key itself, then with a letter behind, then with a number."""
    yield base
    yield from (f"{base}{letter}" for letter in "abcdefghijklmnopqrstuvwxyz")
    number = 2
    while True:
        yield f"{base}_{number}"
        number += 1


def _surname(author: str) -> str:
    if "," in author:
        return author.partition(",")[0]
    # "A. Smith", or as some databases have it "Smith A": initials are no surname.
    words = [word for word in author.split() if len(_plain(word)) > 2] or author.split()
    return words[0 if author.startswith(words[0]) and _initials(author.split()[-1]) else -1] if words else ""


def _initials(word: str) -> bool:
    return len(_plain(word)) <= 2 or word.endswith(".")


def _plain(text: str) -> str:
    """Lower-case ASCII letters and digits of a text."""
    return re.sub(r"[^a-z0-9]", "", unicodedata.normalize("NFKD", text).casefold())


def _same(publication: Publication, source: Source) -> bool:
    """Whether a source says nothing that speaks against its being the publication."""
    titles = (_plain(publication.title), _plain(source.title))
    if all(titles):
        return titles[0] == titles[1]
    journals = (_plain(publication.journal), _plain(source.fields.get("journal", "")))
    return not all(journals) or journals[0] == journals[1]


def _name(author: str) -> str:
    """A name as BibTeX reads it: one comma at most, and no word "and" within it."""
    family, comma, given = author.partition(",")
    text = f"{family}{comma} {given.replace(',', ' ')}" if comma else author
    return _latex(re.sub(r"\band\b", "&", text))


def _latex(text: str) -> str:
    """A text in one line that LaTeX gives back as it is."""
    return _SPECIAL.sub(r"\\\1", " ".join(text.translate(_FORBIDDEN).split()))


def _checked_doi(doi: str) -> str:
    """The DOI without the address of its resolver; "" for what is none."""
    bare = re.sub(r"(?i)^(?:https?://(?:dx\.)?doi\.org/|doi:\s*)", "", doi.strip())
    try:
        link_of({"doi": bare})
    except UnreadableError:
        return ""
    return bare
