"""Numbers as the trade writes them: `3.6149(2)`, `1.03(2)×10^19`, `3.6149 ± 0.0002`, and the unit behind them."""

from __future__ import annotations

import math
import re
from typing import NamedTuple

from sheetgen.records.unreadable import UnreadableError, shown

MAXIMUM_LENGTH = 200

# One typographic character for one ASCII character, so that positions in the text stay what they are.
CHARACTERS = str.maketrans({
    **dict.fromkeys("−‐‑–", "-"),
    **dict.fromkeys("×·⋅∙", "*"),
    **dict.fromkeys("\u00a0\u2009\u202f\t\n\r", " "),
})  # fmt: skip
SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", "0123456789-+")

_PLAIN = r"[+-]?(?:\d{1,40}(?:\.\d{0,40})?|\.\d{1,40})"
_BRACKET = r"\((?P<bracket>\d{1,40}(?:\.\d{1,40})?)\)"
_RAISED = r"[⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]{1,9}"


def _exponent(name: str) -> str:
    """The pattern of an exponent: `e19`, `×10^19`, `x 10**19`, `·10¹⁹`."""
    ten = rf" ?[*x] ?10(?:(?:\^|\*\*)(?P<{name}_ten>[+-]?\d{{1,9}})|(?P<{name}_raised>{_RAISED}))"
    return rf"(?:[eE](?P<{name}>[+-]?\d{{1,9}})|{ten})"


_CONCISE = re.compile(rf" *(?P<number>{_PLAIN})(?:{_BRACKET})?{_exponent('own')}?")
_PLUS_MINUS = re.compile(
    rf" *(?P<opening>\( ?)?(?P<number>{_PLAIN}){_exponent('own')}? ?(?:±|\+/-|\+-) ?"
    rf"(?P<spread>{_PLAIN}){_exponent('its')}?(?(opening) ?\){_exponent('both')}?)"
)
_COMMA = re.compile(r" *[+-]?\d+,\d+")
_GROUPED = re.compile(r" *[+-]?\d{1,3}(?: \d{3})+(?![\d.])")
_NOT_FINITE = re.compile(r" *[+-]?\.?(?:nan|inf|infinity)\b", re.IGNORECASE)


class Number(NamedTuple):
    """A number, its standard uncertainty (None where none is stated), and the text after it: the unit as written."""

    value: float
    standard_uncertainty: float | None
    unit: str


def read_number(text: str) -> Number:
    """The number at the beginning of a text, and the unit behind it.

    Digits in brackets are the standard uncertainty in the last places of the number; with a decimal point of its
    own the bracket is the uncertainty itself. An exponent behind either belongs to both.
    Raises UnreadableError for everything else, for numbers that are not finite and for decimal commas.
    """
    if len(text) > MAXIMUM_LENGTH:
        raise UnreadableError(f"found a text of {len(text)} characters; expected a number of at most {MAXIMUM_LENGTH}")
    plain = text.translate(CHARACTERS)
    if match := _PLUS_MINUS.match(plain):
        both = _power(match, "both")
        value = _finite(match["number"], _power(match, "own") + both, text)
        spread = _finite(match["spread"], _power(match, "its") + both, text)
    elif match := _CONCISE.match(plain):
        value = _finite(match["number"], _power(match, "own"), text)
        spread = _bracket(match, text)
    else:
        raise UnreadableError(_not_a_number(plain, text))
    if spread is not None and spread < 0:
        raise UnreadableError(f"{shown(text)} has a negative uncertainty; expected one above 0")
    unit = text[match.end() :].strip()
    _refuse_remainder(unit, plain, text)
    return Number(value, spread or None, unit)


def _power(match: re.Match[str], name: str) -> int:
    written = match[name] or match[f"{name}_ten"] or (match[f"{name}_raised"] or "0").translate(SUPERSCRIPTS)
    return int(written)


def _finite(digits: str, power: int, text: str) -> float:
    value = float(f"{digits}e{power}")
    vanished = value == 0 and any(digit in "123456789" for digit in digits)
    if not math.isfinite(value) or vanished:
        raise UnreadableError(f"{shown(text)} is beyond what a number can hold; check the exponent")
    return value


def _bracket(match: re.Match[str], text: str) -> float | None:
    bracket = match["bracket"]
    if bracket is None:
        return None
    decimals = 0 if "." in bracket else len(match["number"].partition(".")[2])
    return _finite(bracket, _power(match, "own") - decimals, text)


def _refuse_remainder(unit: str, plain: str, text: str) -> None:
    """Complain about what stands behind a number and cannot begin a unit."""
    if _COMMA.match(plain):
        mended = " ".join(plain.replace(",", ".", 1).split())
        raise UnreadableError(
            f"{shown(text)} has a decimal comma; expected a decimal point: write {shown(mended)},"
            " and leave thousands ungrouped"
        )
    if _GROUPED.match(plain):
        raise UnreadableError(f"{shown(text)} has a space between its digits; write the digits without spaces")
    if unit.startswith("^"):
        raise UnreadableError(f"{shown(text)} is a bare power; expected a form such as 1e19 or 1×10^19")
    if unit.startswith("("):
        raise UnreadableError(
            f"{shown(text)} has brackets that are no uncertainty; expected digits in them, as 1.03(2)"
        )
    # "1/K" behind a number is a unit.
    if unit[:1].isdigit() and not re.match(r"1(?: ?/|$)", unit):
        raise UnreadableError(f"{shown(text)} has a second number {shown(unit)}; expected one number and its unit")


def _not_a_number(plain: str, text: str) -> str:
    if _NOT_FINITE.match(plain):
        return f"{shown(text)} is not a finite number; leave the key out where nothing is known"
    if not plain.strip():
        return "found nothing; expected a number with its unit, or leave the key out"
    return f"{shown(text)} does not begin with a number; expected a form such as 1.03(2), 1.03(2)e19 or 1.03 ± 0.02"
