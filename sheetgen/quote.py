"""One number of a sheet, for the terminal."""

from __future__ import annotations

import math
import re
import unicodedata
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from sheetgen.faults import did_you_mean
from sheetgen.lookup import NotDerivedError, NotFoundError
from sheetgen.pages.numbers import NARROW, printed, unit_text

if TYPE_CHECKING:
    from sheetgen.handbook import Handbook, Sheet
    from sheetgen.quantities import Definition

_AXES = {"temperature": "K", "edge": "nm", "photon_energy": "eV"}
_COMMAND = re.compile(r"\\([a-zA-Z]+)")
_UPRIGHT = re.compile(r"\\(?:mathrm|text|operatorname)\s*")
_NAMED = {"hbar": "ħ", "langle": "⟨", "rangle": "⟩", "square": "□", "Box": "□", "infty": "∞", "cdot": "·", "ldots": "…"}


@dataclass(frozen=True)
class Quote:
    """One quantity of one material: the entry at one temperature, or every entry of another kind of list."""

    sheet: Sheet
    definition: Definition
    entries: tuple[Mapping[str, Any], ...]

    def as_json(self) -> dict[str, Any]:
        """What the material's data file says of the quantity, with the names that it goes by."""
        return {
            "material": self.sheet.record.slug,
            "quantity": self.definition.id,
            "title": self.definition.title,
            "edition": self.sheet.data["edition"],
            "constants": self.sheet.data["constants"],
            "entries": list(self.entries),
        }

    def lines(self) -> Iterator[str]:
        """The quote as a person reads it: what it is, its values, and what holds for all of them."""
        # Narrow spaces belong on paper; many terminals set them badly.
        yield from (line.replace(NARROW, " ") for line in self._lines())

    def _lines(self) -> Iterator[str]:
        name = f"{self.sheet.record.name}: {self.definition.title}  {plain(self.definition.symbol)}".rstrip()
        for entry in self.entries:
            yield f"{name} = {_amount(entry)}{_position(entry)}"
        yield from _block("from", [self._input(id) for id in self._inputs()])
        yield from _block("assumes", [", ".join(self._assumed()) or "nothing beyond its inputs"])
        yield from _block("standing", list(dict.fromkeys(self._standing(entry) for entry in self.entries)))

    def _inputs(self) -> list[str]:
        """Ids of the values of the record that the entries rest on, near or far."""
        found, seen = [], set()
        waiting = _every(self.entries, "depends_on")
        while waiting:
            name = waiting.pop(0)
            if name in seen:
                continue
            seen.add(name)
            if name in self.sheet.data["inputs"]:
                found.append(name)
            waiting += _every(self.sheet.entries(name), "depends_on")
        return found

    def _input(self, id: str) -> str:
        given = self.sheet.data["inputs"][id]
        sources = f" [{', '.join(given['sources'])}]" if given.get("sources") else ""
        recalled = " (recalled, not checked)" if given.get("recalled") else ""
        return f"{id} = {_amount(given)}{_position(given)}{sources}{recalled}"

    def _assumed(self) -> Iterator[str]:
        """Titles of the assumptions; what is not simply known to hold is said of each."""
        temperatures = {entry.get("temperature") for entry in self.entries} | {None}
        for id in _every(self.entries, "assumes"):
            standings = {
                check["standing"]
                for check in self.sheet.data["assumptions"]
                if check["id"] == id and check.get("temperature") in temperatures and "specimen" not in check
            }
            worst = next((word for word in ("broken", "strained") if word in standings), "")
            yield id.replace("_", " ") + (f" ({worst})" if worst else "")

    def _standing(self, entry: Mapping[str, Any]) -> str:
        for held in self.sheet.data["held_against"]:
            same = all(axis not in entry or held.get(axis) in (None, entry[axis]) for axis in _AXES)
            decides = held["quantity"] == self.definition.id and held["standing"] == entry["standing"]
            if decides and same and "ratio" in held and "specimen" not in held:
                return f"{entry['standing']}: measured / model = {held['ratio']:.3g}{_position(held)}"
        return entry["standing"]


def quote(handbook: Handbook, material: str, quantity: str, at: float | None = None) -> Quote:
    """Look one quantity up; without a temperature `at` (kelvins), the entry at the reference temperature.

    Raises NotFoundError for words that the handbook does not know, NotDerivedError where an input is missing.
    """
    sheet = find_sheet(handbook.sheets, material)
    definition = find_definition(handbook, sheet, quantity)
    entries = sheet.entries(definition.id)
    if not entries:
        reason = sheet.missing.get(definition.id, "the record does not suffice for it")
        raise NotDerivedError(f"{sheet.record.name} has no {definition.id}: {reason}")
    return Quote(sheet, definition, tuple(_chosen(entries, definition, at)))


def find_sheet(sheets: Iterable[Sheet], word: str) -> Sheet:
    """The sheet that goes by a slug, a name or a formula, in capitals or not."""
    sheets = list(sheets)
    for names in ("slug", "name", "formula"):
        found = [sheet for sheet in sheets if getattr(sheet.record, names).casefold() == word.casefold()]
        if len(found) == 1:
            return found[0]
        if found:
            slugs = ", ".join(sheet.record.slug for sheet in found)
            raise NotFoundError(f"'{word}' is the {names} of {len(found)} materials; choose one of {slugs}.")
    known = [getattr(sheet.record, names) for sheet in sheets for names in ("formula", "name", "slug")]
    guess = did_you_mean(word, known) or f" It has {', '.join(sheet.record.slug for sheet in sheets)}."
    raise NotFoundError(f"The handbook has no material '{word}'.{guess}")


def find_definition(handbook: Handbook, sheet: Sheet, word: str) -> Definition:
    """The quantity that goes by an id or a title, as it is defined in the dimensions of the material."""
    published = handbook.registry.published()
    wanted = re.sub(r"[\s_-]+", "_", word.strip().casefold())
    for id, definition in published.items():
        if wanted in (id, re.sub(r"[\s_-]+", "_", definition.title.casefold())):
            dimension = sheet.record.electrons.dimension
            choices = handbook.registry.definitions_of(id)
            return next((choice for choice in choices if dimension in choice.dimensions), definition)
    known = [*published, *(definition.title for definition in published.values())]
    guess = did_you_mean(word, known) or f" It has {', '.join(published)}."
    raise NotFoundError(f"The handbook has no quantity '{word}'.{guess}")


def plain(latex: str) -> str:
    """A symbol in plain Unicode, as E_F for E_\\mathrm{F}."""
    return re.sub(r"[{}\\\s]", "", _COMMAND.sub(_character, _UPRIGHT.sub("", latex)))


def _character(command: re.Match) -> str:
    name = command[1].removeprefix("var")
    if name in _NAMED:
        return _NAMED[name]
    size = "CAPITAL" if name[0].isupper() else "SMALL"
    try:
        return unicodedata.lookup(f"GREEK {size} LETTER {name.upper().replace('LAMBDA', 'LAMDA')}")
    except KeyError:
        return name


def _chosen(entries: list[Mapping[str, Any]], definition: Definition, at: float | None) -> list:
    temperatures = [entry["temperature"] for entry in entries if "temperature" in entry]
    if not temperatures:
        if at is not None:
            raise NotFoundError(f"{definition.id} is not stated by temperature; leave --at out.")
        return entries
    if at is None:
        return entries[:1]
    found = [entry for entry in entries if math.isclose(entry["temperature"], at, abs_tol=1e-6)]
    if not found:
        stated = ", ".join(f"{temperature:g}" for temperature in temperatures)
        raise NotFoundError(f"{definition.id} is stated at {stated} K, and not at {at:g} K.")
    return found


def _every(entries: Iterable[Mapping[str, Any]], key: str) -> list[str]:
    return list(dict.fromkeys(word for entry in entries for word in entry[key]))


def _amount(entry: Mapping[str, Any]) -> str:
    """Value and unit; the digits in brackets are the standard uncertainty in the last places."""
    unit = unit_text(entry["unit"])
    values = entry["value"] if isinstance(entry["value"], list) else [entry["value"]]
    if values and isinstance(values[0], Mapping):
        shells = (f"{printed(shell['count']).text} at {shell['distance']:.6g} {unit}" for shell in values)
        return "; ".join(shells)
    numbers = ", ".join(printed(value, entry.get("standard_uncertainty")).text for value in values)
    return f"{numbers} {unit}".rstrip()


def _position(entry: Mapping[str, Any]) -> str:
    stated = [f"{entry[axis]:g} {unit}" for axis, unit in _AXES.items() if entry.get(axis) is not None]
    return f" at {', '.join(stated)}" if stated else ""


def _block(head: str, lines: list[str]) -> Iterator[str]:
    for number, line in enumerate(lines):
        yield f"  {'' if number else head:<9} {line}".rstrip()
