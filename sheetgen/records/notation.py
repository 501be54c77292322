"""Numbers as the trade writes them: `3.6149(2)`, `1.03(2)×10^19`, `3.6149 ± 0.0002`, each with what follows."""

from __future__ import annotations

import math
import re
from decimal import Decimal
from functools import lru_cache
from typing import NamedTuple

from sheetgen.records.unreadable import UnreadableError

MAXIMUM_LENGTH = 200

_PLAIN = r"[+-]?(?:\d{1,40}(?:\.\d{0,40})?|\.\d{1,40})"
_EXPONENT = r"(?:[eE](?P<e{0}>[+-]?\d{{1,9}})|\s?[*x]\s?10(?:\^|\*\*)?(?P<ten{0}>[+-]?\d{{1,9}}))"
_BRACKET = r"\((?P<bracket>\d{1,40}(?:\.\d{1,40})?)\)"
_NUMBER = re.compile(rf"(?P<number>{_PLAIN})(?:{_BRACKET})?{_EXPONENT.format(1)}?")
_PLUS_MINUS = re.compile(
    rf"(?P<opening>\()?\s?(?P<number>{_PLAIN}){_EXPONENT.format(1)}?\s?(?:±|\+/-|\+-)\s?"
    rf"(?P<spread>{_PLAIN}){_EXPONENT.format(2)}?\s?(?(opening)\){_EXPONENT.format(3)}?)"
)
_COMMA = re.compile(r"[+-]?\d+,\d")
_GROUPED = re.compile(r"[+-]?\d{1,3}(?: \d{3})+(?!\d)")
_NOT_FINITE = re.compile(r"[+-]?\.?(?:nan|inf|infinity)\b", re.IGNORECASE)

_CHARACTERS = str.maketrans({
    "−": "-", "‐": "-", "‑": "-", "–": "-", "×": "*", "·": "*", "⋅": "*", "∙": "*",
    "\u00a0": " ", "\u2009": " ", "\u202f": " ", "\t": " ", "\n": " ", "\r": " ",
})  # fmt: skip
_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", "0123456789-+")
_SUPERSCRIPT = re.compile("[⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺]+")


class Number(NamedTuple):
    """A number, its standard uncertainty (None where none is stated), and the text after it: the unit."""

    value: float
    standard_uncertainty: float | None
    rest: str


@lru_cache(maxsize=4096)
def ascii_form(text: str) -> str:
    """The text with typographic minus, multiplication and space as ASCII, and superscripts as `^n`."""
    plain = text.translate(_CHARACTERS)
    return _SUPERSCRIPT.sub(lambda power: "^" + power[0].translate(_SUPERSCRIPTS), plain).strip()


def read_number(text: str) -> Number:
    """The number at the beginning of a text.

    Digits in brackets are the standard uncertainty in the last places of the number; with a decimal point of its
    own the bracket is the uncertainty itself. An exponent after either belongs to both.
    Raises UnreadableError for everything else, for numbers that are not finite and for decimal commas.
    """
    if len(text) > MAXIMUM_LENGTH:
        raise UnreadableError(f"a text of {len(text)} characters; expected a number of at most {MAXIMUM_LENGTH}")
    form = ascii_form(text)
    _refuse_comma(form, text)
    match = _PLUS_MINUS.match(form)
    if match:
        scale = _power(match, 3)
        value = _finite(match["number"], _power(match, 1) + scale, text)
        spread = _finite(match["spread"], _power(match, 2) + scale, text)
    elif match := _NUMBER.match(form):
        value = _finite(match["number"], _power(match, 1), text)
        spread = _bracket(match, text)
    else:
        raise UnreadableError(_no_number(form, text))
    if spread is not None and spread < 0:
        raise UnreadableError(f"'{text}' has a negative uncertainty; expected one above 0")
    rest = form[match.end() :].strip()
    _refuse_digits(rest, form, text)
    return Number(value, spread or None, rest)


def _power(match: re.Match[str], index: int) -> int:
    return int(match[f"e{index}"] or match[f"ten{index}"] or 0)


def _finite(digits: str, power: int, text: str) -> float:
    value = float(f"{digits}e{power}")
    if not math.isfinite(value) or (value == 0 and any(digit in "123456789" for digit in digits)):
        raise UnreadableError(f"'{text}' is beyond what a number can hold; check the exponent")
    return value


def _bracket(match: re.Match[str], text: str) -> float | None:
    bracket = match["bracket"]
    if bracket is None:
        return None
    places = 0 if "." in bracket else max(0, -int(Decimal(match["number"]).as_tuple().exponent))
    return _finite(bracket, _power(match, 1) - places, text)


def _refuse_comma(form: str, text: str) -> None:
    if comma := _COMMA.match(form):
        mended = form.replace(",", ".", 1)
        raise UnreadableError(
            f"'{text}' has a comma in '{comma[0]}'; expected a decimal point: write '{mended}',"
            " and leave thousands ungrouped"
        )


def _refuse_digits(rest: str, form: str, text: str) -> None:
    if not rest[:1].isdigit():
        return
    # "1/K" behind a number is a unit; "960 kg/m^3" behind "8" is the end of "8 960".
    if rest.startswith("1/") or rest == "1":
        return
    if _GROUPED.match(form):
        raise UnreadableError(f"'{text}' has a space between its digits; write the digits without spaces")
    raise UnreadableError(f"'{text}' has a second number '{rest}'; expected one number and its unit")


def _no_number(form: str, text: str) -> str:
    if _NOT_FINITE.match(form):
        return f"'{text}' is not a finite number; leave the key out where nothing is known"
    if not form:
        return "nothing stands here; expected a number with its unit, or leave the key out"
    return f"'{text}' does not begin with a number; expected a form such as 1.03(2), 1.03(2)e19 or 1.03 ± 0.02"
