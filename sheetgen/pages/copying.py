"""What a reader takes away from a sheet: each number in plain text, in LaTeX (siunitx) and in JSON, and how to cite it.

The page carries the parts of every number once, under the id of its place; a script puts them together.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from typing import Any

from . import entries, numbers, words

# Names of units in the macros of siunitx; longest symbols first, so that "mol" is not read as a milli-something.
_BASES = {
    "eV": r"\electronvolt", "mol": r"\mole", "rad": r"\radian", "Pa": r"\pascal", "Hz": r"\hertz", "Å": r"\angstrom",
    "°C": r"\degreeCelsius", "%": r"\percent", "m": r"\metre", "g": r"\gram", "s": r"\second", "K": r"\kelvin",
    "J": r"\joule", "V": r"\volt", "A": r"\ampere", "T": r"\tesla", "W": r"\watt", "Ω": r"\ohm", "C": r"\coulomb",
    "S": r"\siemens", "N": r"\newton", "u": r"\dalton",
}  # fmt: skip
_PREFIXES = {
    "f": r"\femto", "p": r"\pico", "n": r"\nano", "µ": r"\micro", "m": r"\milli", "c": r"\centi", "k": r"\kilo",
    "M": r"\mega", "G": r"\giga", "T": r"\tera",
}  # fmt: skip
_POWERS = {1: "", 2: r"\squared", 3: r"\cubed"}
_SIUNITX = str.maketrans({numbers.MINUS: "-", numbers.NARROW: "", numbers.FIGURE: ""})


def latex_unit(unit: str) -> str:
    """The unit in macros of siunitx, as \\per\\electronvolt\\per\\nano\\metre\\cubed; "" for the unit one."""
    if unit.strip() in ("", "1"):
        return ""
    factors = numbers.unit_factors(unit)
    if factors is None:
        return unit
    return "".join(_latex_factor(name, power) for name, power in factors)


def _latex_factor(name: str, power: int) -> str:
    macro = _BASES.get(name) or (_PREFIXES.get(name[:1], "") + _BASES.get(name[1:], ""))
    if not macro or (name not in _BASES and name[1:] not in _BASES):
        macro = rf"\text{{{name}}}"
    size = abs(power)
    return (r"\per" if power < 0 else "") + macro + _POWERS.get(size, rf"\tothe{{{size}}}")


def anchor(id: str, entry: dict[str, Any], repeat: int = 1) -> str:
    """The id of one number's place on the sheet: that of its quantity and, in a list, its condition: 'mobility@77K'."""
    for axis, unit in (("temperature", "K"), ("photon_energy", "eV"), ("edge", "nm")):
        if (value := entry.get(axis)) is not None:
            return f"{id}@{value:g}{unit}" + (f".{repeat}" if repeat > 1 else "")
    return id


class Copies:
    """The numbers of one sheet as its script needs them."""

    def __init__(self, sheet: Any, handbook: Any, definitions: dict[str, Any]):
        self.sheet, self.handbook, self.definitions = sheet, handbook, definitions
        self.preference = entries.Preference(handbook.imprint.units)
        self.units: dict[str, int] = {}

    def data(self) -> dict[str, Any]:
        """What the page embeds: `numbers` maps an id to [digits with uncertainty in brackets, power of ten, unit]."""
        found = dict(self._numbers())
        return {
            "material": self.sheet.record.name,
            "slug": self.sheet.record.slug,
            "edition": self.sheet.data["edition"],
            "symbols": self._symbols(),
            "units": [[unit, numbers.unit_text(unit), latex_unit(unit)] for unit in self.units],
            "numbers": found,
        }

    def _numbers(self) -> Iterator[tuple[str, list[Any]]]:
        for id, stated in self.sheet.data["inputs"].items():
            number = numbers.stated(stated["value"], stated.get("standard_uncertainty"))
            yield f"input.{id}", self._parts(number, stated["unit"])
        for id in self.definitions:
            seen: dict[str, int] = {}
            for entry in self.sheet.entries(id):
                place = anchor(id, entry)
                seen[place] = seen.get(place, 0) + 1
                if not isinstance(entry["value"], list):
                    yield anchor(id, entry, seen[place]), self._entry(id, entry)
        for position, specimen in enumerate(self.sheet.data.get("specimens", ()), 1):
            for id, entry in specimen["quantities"].items():
                if isinstance(entry, dict) and not isinstance(entry["value"], list):
                    yield f"specimen-{position}.{id}", self._entry(id, entry)

    def _symbols(self) -> dict[str, str]:
        """Symbols as sentences write them ('k_F') with the quantity that each stands for."""
        plain = {_plain(definition.symbol): id for id, definition in self.definitions.items()}
        return {symbol: id for symbol, id in plain.items() if words.is_symbol(symbol)}

    def _entry(self, id: str, entry: dict[str, Any]) -> list[Any]:
        value, uncertainty = self.preference.number(id, entry)
        number = numbers.printed(value, uncertainty, whole=entries.is_count(entry))
        return self._parts(number, self.preference.of(id, entry["unit"]))

    def _parts(self, number: numbers.Printed, unit: str) -> list[Any]:
        index = self.units.setdefault(unit, len(self.units))
        return [number.mantissa.translate(_SIUNITX), number.exponent, index]


_BRACED = re.compile(r"\\(?:mathrm|text)\s*\{([^{}]*)\}")


def _plain(latex: str) -> str:
    """A symbol without the marks of LaTeX: 'k_\\mathrm{F}' is k_F."""
    return _BRACED.sub(r"\1", latex).replace(r"\lambda", "λ").replace(r"\omega", "ω")


# --- citation --------------------------------------------------------------------------------------------------------

_SPECIAL = re.compile(r"([#$%&_{}])")


def citation(record: Any, handbook: Any) -> tuple[str, str]:
    """How to cite one sheet: as text, and as an entry of BibTeX."""
    imprint = handbook.imprint
    page = f"materials/{record.slug}.html"
    address = f"{imprint.base_address.rstrip('/')}/{page}" if imprint.base_address else ""
    title = f"{record.name} ({record.formula})"
    parts = [imprint.group, f"{title}. In: {imprint.title}", f"Edition {imprint.edition}", words.date(imprint.date)]
    text = ". ".join(part for part in parts if part) + "." + (f" {address}" if address else "")
    fields = {
        "author": f"{{{_latex(imprint.group)}}}",
        "title": _latex(title),
        "booktitle": _latex(imprint.title),
        "edition": _latex(imprint.edition),
        "date": imprint.date,
        "year": imprint.date[:4],
        "url": address,
    }
    lines = [f"  {name} = {{{value}}}" for name, value in fields.items() if value.strip("{}")]
    key = re.sub(r"[^A-Za-z0-9]+", "-", f"{record.slug}-{imprint.edition}").strip("-").lower()
    return text, f"@incollection{{{key},\n" + ",\n".join(lines) + "\n}"


def _latex(text: str) -> str:
    plain = text.replace("\\", r"\textbackslash ")
    return _SPECIAL.sub(r"\\\1", plain)
