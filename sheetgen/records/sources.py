"""The bibliography, sources.bib: BibTeX read by a library, with the line of every entry and plain Unicode texts."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path
from typing import NamedTuple

from sheetgen.faults import FaultLog, Place
from sheetgen.records.files import Lines
from sheetgen.records.model import Source
from sheetgen.records.references import link_of, person_name, plain_text, reference
from sheetgen.records.unreadable import UnreadableError, sentence, shown

MAXIMUM_BYTES = 4_000_000
MAXIMUM_ENTRIES = 5000
MAXIMUM_FIELD = 20_000
MAXIMUM_FAULTS = 50

_PEOPLE = ("author", "editor")
_NO_SOURCES = ("string", "preamble")


class _Entry(NamedTuple):
    """An entry as the library read it, with where it begins and the text that was typed."""

    kind: str
    key: str
    fields: list[tuple[str, str]]
    broken: bool
    place: Place
    bibtex: str


def read_sources(text: str, path: Path, log: FaultLog) -> dict[str, Source]:
    """Every source by its key, in the order of the file; what is wrong is logged, the first MAXIMUM_FAULTS of it.

    An entry at fault keeps its key, so that the records that cite it are not at fault, too.
    """
    sources: dict[str, Source] = {}
    own = FaultLog()
    for entry in _entries(text, str(path), own):
        if first := sources.get(entry.key):
            again = f"the source {shown(entry.key)} stands a second time (first in line {first.place.line})"
            own.fault(entry.place, f"{again}; keep one of them.")
            continue
        try:
            sources[entry.key] = _source(entry)
        except UnreadableError as error:
            own.fault(entry.place, sentence(f"the source {shown(entry.key)}: {error}"))
            sources[entry.key] = _bare_source(entry)
    log.entries += own.entries[:MAXIMUM_FAULTS]
    return sources


def _entries(text: str, file: str, log: FaultLog) -> Iterator[_Entry]:
    """The entries of a bibliography; one with a syntax error has no fields, but a fault."""
    from pybtex.database.input.bibtex import LowLevelParser
    from pybtex.scanner import PybtexSyntaxError

    class BoundedParser(LowLevelParser):
        """Refuses a value that abbreviations of abbreviations have blown up."""

        def parse_value(self) -> None:
            super().parse_value()
            if sum(map(len, self.current_value)) > MAXIMUM_FIELD:
                raise PybtexSyntaxError(f"a field of more than {MAXIMUM_FIELD} characters", self)

    broken: set[int] = set()

    def note(error: PybtexSyntaxError) -> None:
        broken.add(error.parser.command_start)
        what = error.args[0] if error.error_type == "syntax error" else f"{error.error_type} {shown(error.args[0])}"
        message = (
            f"not readable as BibTeX: {what}. Check the braces, quotes and commas of this entry and the one before."
        )
        log.fault(Place(file, error.lineno), message)

    parser, lines = BoundedParser(text, handle_error=note), Lines(text, file)
    for count, (kind, content) in enumerate(parser):
        start = parser.command_start
        if count == MAXIMUM_ENTRIES:
            log.fault(
                lines.place(start), f"more than {MAXIMUM_ENTRIES} sources; expected fewer. Keep those that are cited."
            )
            return
        if kind.lower() in _NO_SOURCES or content[0] is None:
            continue
        key, fields = content
        joined = [] if start in broken else _joined(fields)
        yield _Entry(kind.lower(), key, joined, start in broken, lines.place(start), text[start : parser.pos])


def _joined(fields: list[tuple[str, list[str]]]) -> list[tuple[str, str]]:
    """Field names in lower case, values in one line."""
    return [(name.lower(), " ".join("".join(parts).split())) for name, parts in fields]


def _source(entry: _Entry) -> Source:
    if entry.broken:
        return _bare_source(entry)
    names = [name for name, _ in entry.fields]
    if repeated := next((name for name in names if names.count(name) > 1), None):
        raise UnreadableError(f"the field {shown(repeated)} stands twice; keep one of them")
    written = dict(entry.fields)
    people = {role: _people(written[role]) for role in _PEOPLE if role in written}
    fields = {name: plain_text(value) for name, value in written.items() if name not in _PEOPLE}
    fields |= {role: " and ".join(names) for role, names in people.items()}
    if not {"title", "author", "editor", "note"} & fields.keys():
        raise UnreadableError("says neither title, author nor note; add what a reader needs to find it")
    authors = people.get("author") or people.get("editor") or ()
    return replace(
        _bare_source(entry),
        title=fields.get("title", ""),
        authors=authors,
        year=fields.get("year", ""),
        fields=fields,
        text=reference(authors, fields),
        link=link_of(written),
        note=fields.get("note", ""),
    )


def _bare_source(entry: _Entry) -> Source:
    """What is known of an entry whose fields are not read."""
    return Source(
        key=entry.key,
        kind=entry.kind,
        title="",
        authors=(),
        year="",
        fields={},
        text="",
        link=None,
        bibtex=entry.bibtex,
        note="",
        place=entry.place,
    )


def _people(text: str) -> tuple[str, ...]:
    from pybtex.bibtex.utils import split_name_list

    return tuple(person_name(name) for name in split_name_list(text))
