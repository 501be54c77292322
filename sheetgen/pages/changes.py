"""The page and the feed of what changed since the edition before."""

from __future__ import annotations

import datetime
import os
import uuid
from collections.abc import Callable, Iterator
from typing import TYPE_CHECKING, Any
from xml.sax.saxutils import escape, quoteattr

from . import numbers, words

if TYPE_CHECKING:
    from sheetgen.errata import Errata, MaterialErrata, Moved
    from sheetgen.errata.model import InputChange

PAGE, FEED = "changes.html", "changes.atom"
# A name of our own under which the entries of a feed without an address get theirs.
NAMESPACE = uuid.UUID("6f0b3a52-6a55-5e0c-9d8b-0c7d1f7d9a11")
SPREAD = "its uncertainty"
SLIGHT = 1e-3  # of a change: a share below it is in the data of the errata, and not in its words


class Changes:
    """What the changes page and the feed of a handbook say, compared once."""

    def __init__(self, handbook: Any):
        self.imprint, self.registry = handbook.imprint, handbook.registry
        self.errata: Errata | None = since_previous(handbook)
        self.updated = date_of(handbook.imprint)

    def context(self) -> dict[str, Any]:
        """The names that the page's template uses."""
        materials = [_Material(one) for one in self.errata.materials] if self.errata else []
        return {
            "errata": self.errata,
            "changed": materials,
            "has_feed": self.updated is not None,
            "known_quantities": {*self.registry.published(), *self.registry.published("specimen")},
        }

    def feed(self) -> Iterator[tuple[str, bytes]]:
        """The Atom feed (RFC 4287), unless neither the imprint nor SOURCE_DATE_EPOCH gives the edition a date."""
        if self.updated is not None:
            yield FEED, _Feed(self.imprint, self.errata, self.updated).to_bytes()


def since_previous(handbook: Any) -> Errata | None:
    """What changed since the edition that the imprint names; None where it names none.

    Raises FaultsError where that edition's data file is no such thing.
    """
    path = handbook.imprint.previous_edition
    if path is None:
        return None
    from sheetgen.errata import edition_of, errata
    from sheetgen.errata.editions import read_edition

    return errata(read_edition(path, path.name), edition_of(handbook))


def date_of(imprint: Any) -> str | None:
    """When the edition was made, as RFC 3339: the imprint's date, else SOURCE_DATE_EPOCH, never the clock."""
    if imprint.date:
        return f"{imprint.date}T00:00:00Z"
    epoch = os.environ.get("SOURCE_DATE_EPOCH", "")
    if not (epoch.isascii() and epoch.isdigit() and len(epoch) <= 11):
        return None
    return f"{datetime.datetime.fromtimestamp(int(epoch), datetime.UTC):%Y-%m-%dT%H:%M:%SZ}"


# --- in words --------------------------------------------------------------------------------------------------------


def cause_words(cause: str) -> str:
    """A cause as a reader would name it."""
    if cause.startswith("specimens["):
        name, _, key = cause.removeprefix("specimens[").rpartition("].")
        return f"{key.replace('_', ' ')} of {name}" if name else f"specimen {cause[10:-1]}"
    if "." in cause and not cause.startswith("definition of"):
        return words.input_words(cause)
    return cause


def number_words(stated: dict[str, Any] | None, unit: str) -> str:
    """A value with the digits of its uncertainty and its unit; a dash where there is none."""
    if stated is None:
        return "–"
    value, spread = stated["value"], stated.get("standard_uncertainty")
    if not isinstance(value, list):
        whole = isinstance(value, int)
        return f"{numbers.printed(value, spread, whole).text} {numbers.unit_text(unit)}".rstrip()
    parts = [f"{p['distance']:.6g} ({p['count']:g})" if isinstance(p, dict) else f"{p:.6g}" for p in value]
    return f"{', '.join(parts)} {numbers.unit_text(unit)}".rstrip()


def size_words(moved: Moved) -> str:
    """By how much a number moved: in itself, as a part of it, and counted in its standard uncertainty."""
    if moved.change is None:
        return {"presence": "new" if moved.old is None else "withdrawn"}.get(moved.beyond, "")
    if moved.beyond == SPREAD:
        return "uncertainty only"
    parts = [f"{signed(100 * moved.relative)}{numbers.NARROW}%"] if moved.relative is not None else []
    if moved.in_uncertainties is not None:
        parts.append(f"{abs(moved.in_uncertainties):.2g}{numbers.NARROW}u")
    return f"{signed(moved.change)}" + (f" ({', '.join(parts)})" if parts else "")


def why_words(moved: Moved, named: Callable[[str], str] = cause_words) -> str:
    """The causes of a change with what each does alone, and what they do together beyond that."""
    if not moved.because:
        return "several changes together" if moved.how == "derived" else "not told by the data"
    parts = [(named(share.cause), share.change) for share in moved.because]
    parts += [("their interaction", moved.interaction)] if moved.interaction is not None else []
    shown = [part for part in parts if part[1] is None or not moved.change or abs(part[1] / moved.change) >= SLIGHT]
    told = shown[0][0] if len(shown) == 1 else ", ".join(name + _part(size, moved.change) for name, size in shown)
    return told if moved.how == "derived" else f"{told} (inferred)"


def _part(change: float | None, whole: float | None) -> str:
    if change is None or not whole:
        return ""
    return f" {signed(change)} ({signed(100 * change / whole)}{numbers.NARROW}%)"


def signed(number: float) -> str:
    """Two significant digits with a sign, as −0.012."""
    text = numbers.printed(float(f"{abs(number):.2g}")).text
    return f"{'+' if number > 0 else numbers.MINUS if number < 0 else ''}{text}"


def input_change_words(change: InputChange) -> str:
    """What an input was and is, and what else about it changed."""
    old, new = change.old, change.new
    if old is None or new is None:
        return f"{_stated(old)} → {_stated(new)}"
    parts = []
    if {"value", "standard_uncertainty", "unit"} & set(change.aspects):
        parts.append(f"{_stated(old)} → {_stated(new)}")
    if "temperature" in change.aspects:
        parts.append(f"temperature {_kelvins(old)} → {_kelvins(new)}")
    if "sources" in change.aspects:
        parts.append(f"source {_keys(old)} → {_keys(new)}")
    if "recalled" in change.aspects:
        parts.append("now quoted from memory" if new.get("recalled") else "no longer quoted from memory")
    return "; ".join(parts)


def _stated(stated: dict[str, Any] | None) -> str:
    if stated is None:
        return "–"
    number = numbers.stated(stated["value"], stated.get("standard_uncertainty")).text
    return f"{number} {numbers.unit_text(stated['unit'])}".rstrip()


def _kelvins(stated: dict[str, Any]) -> str:
    return f"{stated['temperature']:g} K" if "temperature" in stated else "none stated"


def _keys(stated: dict[str, Any]) -> str:
    return ", ".join(stated.get("sources", ())) or "none"


class _Material:
    """One material of the page."""

    def __init__(self, one: MaterialErrata):
        self.slug, self.name, self.formula = one.slug, one.name, one.formula
        self.inputs = [(cause_words(change.cause), input_change_words(change)) for change in one.inputs]
        self.specimens = one.specimens
        self.numbers = [_Line(moved) for moved in one.moved if moved.beyond != SPREAD]
        self.spreads = [_Line(moved) for moved in one.moved if moved.beyond == SPREAD]
        self.standings = [
            (change.title, change.point.place, change.kind, change.old, change.new, _causes(change.because))
            for change in one.standings
        ]


class _Line:
    """One number of the page."""

    def __init__(self, moved: Moved):
        self.quantity, self.title, self.place = moved.point.quantity, moved.title, moved.point.place
        self.old, self.new = (number_words(stated, moved.unit) for stated in (moved.old, moved.new))
        self.size, self.why = size_words(moved), why_words(moved)
        self.beyond, self.is_list = moved.beyond == "uncertainty", moved.beyond == "list"


def _causes(because: tuple[str, ...]) -> str:
    return ", ".join(map(cause_words, because)) or "several changes together"


# --- the feed --------------------------------------------------------------------------------------------------------


class _Feed:
    """An Atom feed of one edition: an entry for the edition, and one for each material that changed."""

    def __init__(self, imprint: Any, errata: Errata | None, updated: str):
        self.imprint, self.errata, self.updated = imprint, errata, updated
        address = imprint.base_address
        self.address = address if not address or address.endswith("/") else f"{address}/"

    def to_bytes(self) -> bytes:
        """The document in UTF-8."""
        links = [f'<link rel="self" href={quoteattr(self.address + FEED)}/>'] if self.address else []
        parts = [
            '<?xml version="1.0" encoding="utf-8"?>',
            f'<feed xmlns="http://www.w3.org/2005/Atom" xml:lang={quoteattr(words.language(self.imprint.language))}>',
            f"<id>{_xml(self._id('feed'))}</id>",
            f"<title>{_xml(f'{self.imprint.title}: changes')}</title>",
            f"<updated>{self.updated}</updated>",
            f"<author><name>{_xml(self.imprint.group or self.imprint.title)}</name></author>",
            *links,
            *self._entries(),
            "</feed>",
        ]
        return ("\n".join(parts) + "\n").encode()

    def _entries(self) -> Iterator[str]:
        errata = self.errata
        if errata is None:
            return
        new = [f"New: {', '.join(errata.new_materials.values())}."] if errata.new_materials else []
        gone = [f"Withdrawn: {', '.join(errata.withdrawn.values())}."] if errata.withdrawn else []
        moved = f"{_count(errata.count, 'number')} moved in {_count(len(errata.materials), 'material')}"
        moved += f" since edition {errata.old}."
        yield self._entry("", f"Edition {errata.new}", " ".join([moved, *new, *gone]))
        for material in errata.materials:
            causes = ", ".join(dict.fromkeys(cause_words(change.cause) for change in material.inputs))
            said = f"{_count(len(material.moved), 'number')} moved" + (f"; changed: {causes}." if causes else ".")
            yield self._entry(material.slug, f"{material.name}, edition {errata.new}", said)

    def _entry(self, slug: str, title: str, summary: str) -> str:
        anchor = f"{PAGE}#{slug}" if slug else PAGE
        link = f"<link href={quoteattr(self.address + anchor)}/>" if self.address else ""
        return (
            f"<entry><id>{_xml(self._id(f'{self.imprint.edition}/{slug}'))}</id><title>{_xml(title)}</title>"
            f"<updated>{self.updated}</updated>{link}<summary>{_xml(summary)}</summary></entry>"
        )

    def _id(self, what: str) -> str:
        name = f"{self.address or self.imprint.title}\n{self.imprint.group}\n{what}"
        return f"urn:uuid:{uuid.uuid5(NAMESPACE, name)}"


def _xml(text: str) -> str:
    """Text as XML 1.0 can hold it: escaped, without the control characters that it has no form for."""
    return escape("".join(character for character in text if character >= " " or character in "\t\n"))


def _count(number: int, word: str) -> str:
    return f"{number} {word}{'' if number == 1 else 's'}"
