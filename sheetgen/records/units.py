"""Units at the border: any unit of the right dimension comes in, coherent SI stays inside.

Unit texts come from strangers: a small grammar with bounds reads the expression, and the units library is asked
about single names only. Every distinct text is read once.
"""

from __future__ import annotations

import math
import re
from functools import cache, lru_cache
from typing import TYPE_CHECKING, NamedTuple

from sheetgen.faults import did_you_mean
from sheetgen.records.notation import CHARACTERS, SUPERSCRIPTS
from sheetgen.records.unreadable import UnreadableError, shown

if TYPE_CHECKING:
    import pint

MAXIMUM_LENGTH = 60
MAXIMUM_EXPONENT = 12

Dimension = tuple[tuple[str, int | float], ...]


class Unit(NamedTuple):
    """One unit in coherent SI: `si = value * factor + offset`.

    `dimension` is sorted, and empty for a pure number; the radian is none, so `angle` holds its power apart.
    """

    factor: float
    offset: float
    dimension: Dimension
    angle: float = 0


def to_si(number: float, unit: str) -> float:
    """A number in the given unit as coherent SI; °C alone is a temperature, °C in a product a difference.

    Raises UnreadableError for what is no unit.
    """
    factor, offset, _ = read_unit(unit)
    return number * factor + offset


def si_factor(unit: str) -> float:
    """How many coherent SI units one of these is; the offset of °C is left out. Raises UnreadableError."""
    return read_unit(unit).factor


def dimension_matches(unit: str, other: str) -> bool:
    """Whether two units measure the same kind of thing. Raises UnreadableError for what is no unit."""
    return read_unit(unit).dimension == read_unit(other).dimension


@lru_cache(maxsize=4096)
def read_unit(text: str) -> Unit:
    """What a unit text means: `µΩ cm`, `mJ/(mol K²)`, `1/(eV nm^3)`, `Ω/sq`, `m_e`; the empty text is 1.

    A slash divides by the one factor behind it, as the SI Brochure has it. Raises UnreadableError.
    """
    if len(text) > MAXIMUM_LENGTH:
        raise UnreadableError(f"a unit of {len(text)} characters; expected at most {MAXIMUM_LENGTH}")
    plain = _ascii(text)
    per_square = _PER_SQUARE.search(plain)
    unit = _Expression(plain[: per_square.start()] if per_square else plain, text).read()
    if per_square and unit.dimension != read_unit("ohm").dimension:
        raise UnreadableError(f"{shown(text)} is per square, which only a sheet resistance is; expected such as 'Ω/sq'")
    if not (math.isfinite(unit.factor) and unit.factor > 0):
        raise UnreadableError(f"the unit {shown(text)} is beyond what a number can hold; check its exponents")
    return unit


_SYMBOLS = [
    ("\u00b5", "u"), ("\u03bc", "u"), ("°C", "degC"), ("℃", "degC"), ("°F", "degF"), ("°", "deg"),
    ("Å", "angstrom"), ("Å", "angstrom"), ("%", "percent"), ("‰", "permille"),
]  # fmt: skip
_RAISED = re.compile("[⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺]+")
_OHM = re.compile(r"[\u03a9\u2126](?P<next>[A-Za-z])?")
_PER_SQUARE = re.compile(r"\s*(?:/|\bper\b)\s*(?:sq|square|□|◻|\(sq\))$")
_PER = re.compile(r"\s*\bper\b\s*")
_BARE_POWER = re.compile(r"(?<=[A-Za-z])(?=[+-]?\d)")


def _ascii(text: str) -> str:
    """The unit in the ASCII that the grammar reads."""
    plain = _RAISED.sub(lambda power: "^" + power[0].translate(SUPERSCRIPTS), text.translate(CHARACTERS).strip())
    for symbol, name in _SYMBOLS:
        plain = plain.replace(symbol, name)
    plain = _OHM.sub(lambda ohm: f"ohm {ohm['next']}" if ohm["next"] else "ohm", plain)
    return _BARE_POWER.sub("^", _PER.sub("/", plain))


_TOKEN = re.compile(r"\s*(?P<token>[A-Za-z_]+|(?:\^|\*\*)\s*(?:\(\s*[+-]?\d{1,9}\s*\)|[+-]?\d{1,9})|[*/()]|1(?![\d.]))")


class _Expression:
    """Reads `product = power {[* | /] power}`, `power = (name | 1 | ( product )) [^ integer]`."""

    def __init__(self, plain: str, written: str):
        self.written = written
        self.tokens = self._tokens(plain.strip())
        self.position = 0

    def _tokens(self, plain: str) -> list[str]:
        tokens, position = [], 0
        while position < len(plain):
            token = _TOKEN.match(plain, position)
            if not token:
                raise UnreadableError(self._complaint(plain[position:].strip()))
            tokens.append(token["token"].replace("**", "^"))
            position = token.end()
        return tokens

    def _complaint(self, rest: str) -> str:
        if rest[0].isdigit():
            return f"the unit {shown(self.written)} holds the number {shown(rest)}; expected one number, then its unit"
        return f"the unit {shown(self.written)} cannot be read at {shown(rest)}; expected a form such as 'µΩ cm' or 'mJ/(mol K^2)'"

    def read(self) -> Unit:
        if not self.tokens:
            return Unit(1.0, 0.0, ())
        if len(self.tokens) == 1 and self.tokens[0] != "1":
            return _named(self.tokens[0], self.written)
        factor, powers = self._product()
        if self.position < len(self.tokens):
            raise UnreadableError(self._complaint(self.tokens[self.position]))
        return _unit(factor, 0.0, powers)

    def _product(self) -> tuple[float, dict[str, float]]:
        factor, powers, sign = 1.0, {}, 1
        if self._next() == "/":  # "/cm^3" behind a number means per cubic centimetre
            self.position, sign = self.position + 1, -1
        while True:
            self._multiply(powers, *(part := self._power())[1:], sign)
            factor = _scaled(factor, part[0], sign)
            following = self._next()
            if following is None or following == ")":
                return factor, powers
            sign = -1 if following == "/" else 1
            self.position += following in "*/"

    @staticmethod
    def _multiply(powers: dict[str, float], more: dict[str, float], sign: int) -> None:
        for base, power in more.items():
            powers[base] = powers.get(base, 0) + sign * power

    def _power(self) -> tuple[float, dict[str, float]]:
        factor, powers = self._atom()
        following = self._next()
        if following is None or following[0] != "^":
            return factor, powers
        self.position += 1
        exponent = int(following.strip("^() "))
        if abs(exponent) > MAXIMUM_EXPONENT:
            raise UnreadableError(
                f"the unit {shown(self.written)} has the exponent {exponent}; expected at most {MAXIMUM_EXPONENT}"
            )
        return _scaled(1.0, factor, exponent), {base: power * exponent for base, power in powers.items()}

    def _atom(self) -> tuple[float, dict[str, float]]:
        token = self._next()
        self.position += 1
        if token == "(":
            inside = self._product()
            if self._next() != ")":
                raise UnreadableError(f"the unit {shown(self.written)} leaves a bracket open; close it")
            self.position += 1
            return inside
        if token == "1":
            return 1.0, {}
        if token is None or not (token[0].isalpha() or token[0] == "_"):
            found = f"at {shown(token)}" if token else "at its end"
            raise UnreadableError(
                f"the unit {shown(self.written)} cannot be read {found}; expected a form such as 'µΩ cm' or 'mJ/(mol K^2)'"
            )
        unit = _named(token, self.written)
        return unit.factor, dict(unit.dimension) | {"radian": unit.angle}

    def _next(self) -> str | None:
        return self.tokens[self.position] if self.position < len(self.tokens) else None


def _scaled(factor: float, by: float, exponent: int) -> float:
    try:
        return factor * by**exponent
    except OverflowError:
        return math.inf


_COMMON = (
    "angstrom nm um mm cm m g kg s fs K degC eV meV J mJ mol ohm uohm S V uV A W T mT GPa Pa bar rad deg Hz GHz C percent"
).split()


@lru_cache(maxsize=4096)
def _named(name: str, written: str) -> Unit:
    """One unit name with its prefix, by the units library."""
    import pint

    unknown = UnreadableError(f"{shown(name)} in {shown(written)} is no unit known here.{did_you_mean(name, _COMMON)}")
    try:
        one = _registry().Quantity(1.0, name).to_base_units()
        zero = _registry().Quantity(0.0, name).to_base_units()
    except (pint.PintError, ValueError, AttributeError):
        raise unknown from None
    unit = _unit(one.magnitude - zero.magnitude, zero.magnitude, dict(one.unit_items()))
    if unit.offset and unit.dimension != (("kelvin", 1),):
        raise unknown  # logarithmic units such as dB
    return unit


def _unit(factor: float, offset: float, powers: dict[str, float]) -> Unit:
    angle = powers.pop("radian", 0)
    return Unit(factor, offset, tuple(sorted((base, power) for base, power in powers.items() if power)), angle)


@cache
def _registry() -> pint.UnitRegistry:
    import pint

    return pint.UnitRegistry(autoconvert_offset_to_baseunit=True, on_redefinition="ignore")
