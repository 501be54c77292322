"""Numbers and units as a printed handbook sets them.

A number with an uncertainty is written in the concise notation of the GUM (JCGM 100:2008, 7.2.2): two digits of the
standard uncertainty in brackets, in the last places of the value. One without shows six significant digits at most.
"""

from __future__ import annotations

import math
import re
import statistics
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from decimal import ROUND_HALF_EVEN, Context, Decimal
from functools import cache, lru_cache

from markupsafe import Markup

NARROW = "\u202f"  # narrow no-break space
FIGURE = "\u2007"  # figure space
MINUS = "\u2212"
TIMES = "\u00d7"
SIGNIFICANT = 6
# A double holds 15 reliable decimal digits: an uncertainty smaller than that adds nothing that could be shown.
RELIABLE = 15
PLAIN_MAGNITUDES = range(-3, 5)
# Room for every digit between the largest and the smallest double.
_ROUNDING = Context(prec=700, rounding=ROUND_HALF_EVEN)
_SUPERSCRIPTS = str.maketrans("0123456789-", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻")
_FROM_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺−", "0123456789-+-")


@dataclass(frozen=True, slots=True)
class Printed:
    """A number ready for print: sign and digits, digits of its uncertainty (or ""), power of ten (0: none)."""

    digits: str
    uncertainty: str = ""
    exponent: int = 0

    @property
    def text(self) -> str:
        """The number as plain Unicode, as in 8.491(12) × 10²⁸."""
        return self.mantissa + (f"{NARROW}{TIMES}{NARROW}10{superscript(self.exponent)}" if self.exponent else "")

    @property
    def mantissa(self) -> str:
        """Digits and uncertainty, without the power of ten."""
        return self.digits + (f"({self.uncertainty})" if self.uncertainty else "")

    @property
    def html(self) -> Markup:
        """The number with a real superscript."""
        return _html(self)


@lru_cache(maxsize=2**16)
def _html(number: Printed) -> Markup:
    power = f"<wbr>{NARROW}{TIMES}{NARROW}10<sup>{signed(number.exponent)}</sup>" if number.exponent else ""
    return Markup(number.mantissa + power)


def superscript(power: int) -> str:
    """An integer in superscript figures."""
    return str(power).translate(_SUPERSCRIPTS)


def signed(power: int) -> str:
    """An integer with a real minus."""
    return str(power).replace("-", MINUS)


@lru_cache(maxsize=2**16)
def printed(value: float, uncertainty: float | None = None, whole: bool = False) -> Printed:
    """Round a number by its standard uncertainty, or to six significant digits where it has none.

    A whole number is shown in full when asked for. Raises ValueError for a number that is not finite or an
    uncertainty that is negative: neither is ever on a sheet.
    """
    if not math.isfinite(value) or (uncertainty is not None and not uncertainty >= 0):
        raise ValueError(f"{value} with standard uncertainty {uncertainty} cannot be printed")
    exact = Decimal(repr(float(value)))
    if whole and value == int(value) and abs(value) < 10**RELIABLE:
        return Printed(_grouped(exact.quantize(Decimal(1))))
    spread = _two_digits(uncertainty, exact) if uncertainty and math.isfinite(uncertainty) else None
    if spread is None:
        return _without_uncertainty(exact)
    return _concise(exact, spread)


def stated(value: float, uncertainty: float | None = None) -> Printed:
    """A number as its author gave it: all its digits, and a one-digit uncertainty left at one digit."""
    exact = Decimal(repr(float(value)))
    if not uncertainty:
        return _without_uncertainty(exact, significant=RELIABLE)
    spread = _two_digits(uncertainty, exact)
    if spread is None or not math.isfinite(value):
        return printed(value, uncertainty)
    last = min(int(number.normalize().as_tuple().exponent) for number in (exact, spread))
    return _concise(exact, _to_place(spread, max(last, int(spread.as_tuple().exponent))))


def _two_digits(uncertainty: float, value: Decimal) -> Decimal | None:
    """The uncertainty at two digits, or None where it lies below what a double can hold beside the value."""
    exact = Decimal(repr(float(uncertainty)))
    finest = value.adjusted() - RELIABLE + 1 if value else exact.adjusted() - 1
    place = max(exact.adjusted() - 1, finest)
    rounded = _to_place(exact, place)
    if rounded and rounded.adjusted() > place + 1:  # 0.0996 became 0.100
        rounded = _to_place(exact, place + 1)
    return rounded or None


def _to_place(number: Decimal, place: int) -> Decimal:
    return number.quantize(Decimal((0, (1,), place)), context=_ROUNDING)


def _concise(value: Decimal, spread: Decimal) -> Printed:
    place = int(spread.as_tuple().exponent)
    rounded = _to_place(value, place)
    magnitude = max(rounded.adjusted(), spread.adjusted()) if rounded else spread.adjusted()
    exponent = 0 if place <= 0 and magnitude in PLAIN_MAGNITUDES else magnitude
    digits = _grouped(rounded.scaleb(-exponent, context=_ROUNDING))
    return Printed(digits, str(int(spread.scaleb(-place))), exponent)


def _without_uncertainty(value: Decimal, significant: int = SIGNIFICANT) -> Printed:
    if not value:
        return Printed("0")
    rounded = _to_place(value, value.adjusted() - significant + 1)
    exponent = 0 if rounded.adjusted() in PLAIN_MAGNITUDES else rounded.adjusted()
    return Printed(_grouped(rounded.scaleb(-exponent, context=_ROUNDING).normalize(_ROUNDING)), "", exponent)


def _grouped(number: Decimal) -> str:
    """Digits with a real minus; five or more before the decimal point stand in groups of three."""
    _, _, text = f"{number:f}".rpartition("-")
    before, point, after = text.partition(".")
    if len(before) > 4:
        first = len(before) % 3
        groups = [before[:first], *(before[start : start + 3] for start in range(first, len(before), 3))]
        before = NARROW.join(filter(None, groups))
    return (MINUS if number < 0 else "") + before + point + after


# --- columns -------------------------------------------------------------------------------------------------------


def column_power(values: Iterable[float]) -> int:
    """The power of ten to take out of a column into its head: a multiple of three, 0 where none is needed."""
    magnitudes = [math.floor(math.log10(abs(value))) for value in values if value]
    if not magnitudes:
        return 0
    median = statistics.median_low(magnitudes)
    return 0 if median in PLAIN_MAGNITUDES else 3 * (median // 3)


def column(numbers: Sequence[tuple[float, float | None] | None], whole: bool = False) -> tuple[int, list[Markup]]:
    """Print numbers under each other so that their decimal points stand in line.

    Returns the power of ten for the column's head and one piece of HTML for each number (empty for None).
    """
    power = column_power(number[0] for number in numbers if number) if not whole else 0
    cells = [_scaled(number, power, whole) if number else None for number in numbers]
    widest = max((len(_before(cell)) for cell in cells if cell), default=0)
    return power, [_padded(cell, widest) if cell else Markup("") for cell in cells]


def _scaled(number: tuple[float, float | None], power: int, whole: bool) -> Printed:
    value, uncertainty = number
    scale = 10.0**-power
    return printed(value * scale, None if uncertainty is None else uncertainty * scale, whole)


def _before(cell: Printed) -> str:
    """What stands before the decimal point."""
    return cell.digits.split(".")[0]


def _padded(cell: Printed, widest: int) -> Markup:
    return Markup(FIGURE * (widest - len(_before(cell)))) + cell.html


# --- units -----------------------------------------------------------------------------------------------------------

_UNIT_NAMES = {
    "angstrom": "Å", "\u212b": "Å", "ohm": "Ω", "\u2126": "Ω", "fohm": "fΩ", "nohm": "nΩ", "uohm": "µΩ", "mohm": "mΩ",
    "kohm": "kΩ", "\u03bcΩ": "µΩ", "µ\u2126": "µΩ", "\u03bc\u2126": "µΩ", "um": "µm", "\u03bcm": "µm", "uV": "µV",
    "\u03bcV": "µV", "us": "µs", "uW": "µW", "degC": "°C", "percent": "%",
}  # fmt: skip
_UNIT_TOKEN = re.compile(r"\s*(?:(?P<name>[^\W\d_]+|[°%]C?)|(?P<one>1)|(?P<sign>[/()·*]))(?:\^?(?P<power>[-+]?\d+))?")


def unit_factors(text: str) -> list[tuple[str, int]] | None:
    """The factors of a unit with their powers, as [("eV", -1), ("nm", -3)]; None where it is not understood."""
    plain = re.sub(r"\*\*", "^", text.strip())
    plain = re.sub(r"[⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺]+", lambda found: "^" + found[0].translate(_FROM_SUPERSCRIPTS), plain)
    factors: list[tuple[str, int]] = []
    position, sign, depth = 0, 1, 0
    while position < len(plain):
        token = _UNIT_TOKEN.match(plain, position)
        if token is None or (token["sign"] and token["power"]):
            return None
        position = token.end()
        if token["name"]:
            factors.append((_UNIT_NAMES.get(token["name"], token["name"]), sign * int(token["power"] or 1)))
        depth += {"(": 1, ")": -1}.get(token["sign"], 0)
        # A slash inverts the one factor, or the one bracket, that follows it.
        sign = -1 if token["sign"] == "/" or (sign == -1 and depth and token["sign"] != ")") else 1
    return factors if depth == 0 else None


@cache
def unit(text: str) -> Markup:
    """A unit with superscripts and no-break spaces; "" for the unit one; a unit not understood as it was written."""
    if text.strip() in ("", "1"):
        return Markup("")
    factors = unit_factors(text)
    if factors is None:
        return Markup.escape(text)
    return Markup(NARROW).join(Markup.escape(name) + _power_html(power) for name, power in factors)


def _power_html(power: int) -> Markup:
    return Markup("") if power == 1 else Markup(f"<sup>{signed(power)}</sup>")


@cache
def unit_text(text: str) -> str:
    """The unit as plain Unicode, for titles and alternative texts."""
    if text.strip() in ("", "1"):
        return ""
    factors = unit_factors(text)
    if factors is None:
        return text
    return NARROW.join(name + ("" if power == 1 else superscript(power)) for name, power in factors)


def with_unit(number: Printed, text: str) -> Markup:
    """Number and unit, held together by a no-break space; a percent sign and a degree follow the same rule."""
    shown = unit(text)
    return Markup(f"{number.html}{NARROW}{shown}") if shown else number.html


def converted(value: float, uncertainty: float | None, unit_from: str, unit_to: str) -> tuple[float, float | None]:
    """The same quantity in another unit of its kind."""
    if unit_from == unit_to:
        return value, uncertainty
    factor = si_factor(unit_from) / si_factor(unit_to)
    return value * factor, None if uncertainty is None else uncertainty * factor


@cache
def si_factor(unit: str) -> float:
    """How many of the SI's own units one of these is."""
    from sheetgen.records.units import si_factor as of_records  # reached by pages that convert, not by every import

    return of_records(unit)
