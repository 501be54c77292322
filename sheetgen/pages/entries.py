"""Entries of the machine-readable sheet turned into what is printed: value, unit, standing, largest contributor."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from typing import Any

from markupsafe import Markup

from . import numbers, words

NOT_VALID = "not valid"  # the word of sheetgen.draws for an uncertainty that the draws refute
AXES = ("temperature", "photon_energy", "edge", "specimen")


@dataclass(frozen=True)
class Cell:
    """One number as it is printed, with its standing; `anchor` is the id of its place in a list."""

    value: Markup
    standing: str
    unit: Markup = Markup("")
    anchor: str = ""
    interval: Markup = Markup("")


@dataclass(frozen=True)
class Line:
    """One quantity of a sheet: what it is called and its number."""

    id: str
    symbol: str
    title: str
    cell: Cell
    origin: str
    recalled: bool = False


@dataclass(frozen=True)
class Preference:
    """Units that the imprint prefers on the page, by quantity."""

    units: dict[str, str]

    def of(self, quantity: str, unit: str) -> str:
        """The unit to print a quantity in, given the unit it is stated in."""
        return self.units.get(quantity, unit)

    def number(self, quantity: str, entry: dict[str, Any]) -> tuple[float, float | None]:
        """Value and standard uncertainty of an entry in the preferred unit."""
        unit = entry["unit"]
        return numbers.converted(entry["value"], entry.get("standard_uncertainty"), unit, self.of(quantity, unit))


def is_count(entry: dict[str, Any]) -> bool:
    """Whether an entry is a whole number without a unit, to be shown in full."""
    value = entry["value"]
    return (
        entry["unit"] == "1"
        and "standard_uncertainty" not in entry
        and not isinstance(value, list)
        and value == int(value)
    )


def cell(quantity: str, entry: dict[str, Any], preference: Preference) -> Cell:
    """The printed form of one entry; a list of numbers or of shells is written out."""
    value, unit = entry["value"], entry["unit"]
    if isinstance(value, list):
        return Cell(_written_out(value, unit), entry["standing"])
    number = numbers.printed(*preference.number(quantity, entry), whole=is_count(entry))
    shown = numbers.unit(preference.of(quantity, unit))
    return Cell(number.html, entry["standing"], shown, interval=interval(quantity, entry, preference))


def interval(quantity: str, entry: dict[str, Any], preference: Preference, power: int = 0) -> Markup:
    """The 95 % interval of the draws, where they refute the first-order uncertainty; in units of a power of ten."""
    if entry.get("first_order") != NOT_VALID:
        return Markup("")
    unit, scale = entry["unit"], 10.0**-power
    wanted = preference.of(quantity, unit)
    low, high = (numbers.converted(end, None, unit, wanted)[0] * scale for end in entry["coverage_interval"])
    width = abs(high - low) / 4  # about one standard uncertainty, which says how many digits an end is worth
    ends = [numbers.printed(end, width or None) for end in (low, high)]
    parts = [Markup(_without_bracket(end).html) for end in ends]
    return Markup('<span class="interval">95{0}%: {1} to {2}</span>').format(numbers.NARROW, *parts)


def _without_bracket(number: numbers.Printed) -> numbers.Printed:
    return numbers.Printed(number.digits, "", number.exponent)


def _written_out(values: list, unit: str) -> Markup:
    shown = numbers.unit(unit)
    if values and isinstance(values[0], dict):
        parts = [
            numbers.printed(shell["count"]).html + " at " + numbers.printed(shell["distance"]).html for shell in values
        ]
    else:
        parts = [numbers.printed(round(value, 6)).html for value in values]
    return Markup("; ").join(parts) + (Markup(numbers.NARROW) + shown if shown else Markup(""))


def origin(entry: dict[str, Any], specimens: tuple[str, ...] = ()) -> str:
    """Where most of the uncertainty comes from, as 'lattice constant a, 97 %'; "" without an uncertainty."""
    budget = entry.get("budget")
    if not budget:
        return ""
    largest, share = max(budget.items(), key=lambda item: item[1])
    return f"{words.input_words(largest, specimens)}, {percent(share)}"


def percent(share: float) -> str:
    """A share of variance in whole percent, never rounded up to all of it."""
    whole = round(100 * share)
    if whole == 100 and share < 0.9999:
        return f"over 99{numbers.NARROW}%"
    return f"{whole}{numbers.NARROW}%"


@lru_cache(maxsize=2**12)
def _at(value: float, unit: str) -> Markup:
    return numbers.with_unit(numbers.printed(value), unit)


def where(item: Any) -> Markup:
    """What an entry, a confrontation or a check was taken at: '293.15 K', '1.96 eV', '5 nm' or 'F-12, 293 K'."""
    get = item.get if isinstance(item, dict) else lambda name: getattr(item, name, None)
    parts = [Markup.escape(specimen)] if (specimen := get("specimen")) else []
    for axis, unit in (("temperature", "K"), ("photon_energy", "eV"), ("edge", "nm")):
        if (value := get(axis)) is not None:
            parts.append(_at(value, unit))
    return Markup(", ").join(parts)
