"""Units at the border: any unit of the right dimension comes in, coherent SI stays inside.

Unit texts come from strangers: a small grammar with bounds reads the expression, and the units library is asked
about single names only. Every distinct text is read once.
"""

from __future__ import annotations

import csv
import math
import re
from dataclasses import dataclass, field
from functools import cache, lru_cache
from importlib.resources import files
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
    meaning = read_unit(unit)
    return number * meaning.factor + meaning.offset


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
    ("\u00b5", "u"),  # the micro sign and the Greek letter
    ("\u03bc", "u"),
    ("\u00c5", "angstrom"),  # the letter and the unit sign
    ("\u212b", "angstrom"),
    ("°C", "degC"),
    ("℃", "degC"),
    ("°F", "degF"),
    ("°", "deg"),
    ("%", "percent"),
    ("‰", "permille"),
]
_RAISED = re.compile("[⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺]+")
_OHM = re.compile(r"[\u03a9\u2126](?P<next>[A-Za-z])?")
_HYPHEN = re.compile(r"(?<=[A-Za-z\u03a9\u2126])-(?=[A-Za-z])")  # µΩ-cm
_PER_SQUARE = re.compile(r"\s*(?:/|\bper\b)\s*(?:sq|square|□|◻|\(sq\))$")
_PER = re.compile(r"\s*\bper\b\s*")
_BARE_POWER = re.compile(r"(?<=[A-Za-z])(?=[+-]?\d)")


def _ascii(text: str) -> str:
    """The unit in the ASCII that the grammar reads."""
    plain = _RAISED.sub(lambda power: "^" + power[0].translate(SUPERSCRIPTS), text.translate(CHARACTERS).strip())
    for symbol, name in _SYMBOLS:
        plain = plain.replace(symbol, name)
    plain = _HYPHEN.sub(" ", plain)
    plain = _OHM.sub(lambda ohm: f"ohm {ohm['next']}" if ohm["next"] else "ohm", plain)
    return _BARE_POWER.sub("^", _PER.sub("/", plain))


_TOKEN = re.compile(r"\s*(?P<token>[A-Za-z_]+|(?:\^|\*\*)\s*(?:\(\s*[+-]?\d{1,9}\s*\)|[+-]?\d{1,9})|[*/()]|1(?![\d.]))")

_NO_EXPONENT = re.compile(r"[^\d+-]")  # blanks of any alphabet may stand about an exponent


@dataclass(slots=True)
class _Part:
    """A factor to SI and the powers of the base units, of any part of a unit expression."""

    factor: float = 1.0
    powers: dict[str, float] = field(default_factory=dict)

    def times(self, other: _Part, exponent: int) -> _Part:
        """This part multiplied by another one raised to an exponent."""
        powers = dict(self.powers)
        for base, power in other.powers.items():
            powers[base] = powers.get(base, 0) + exponent * power
        try:
            return _Part(self.factor * other.factor**exponent, powers)
        except (OverflowError, ZeroDivisionError):  # a factor that has vanished is as far out as one without bounds
            return _Part(math.inf, powers)


class _Expression:
    """Reads `product = power {[* | /] power}`, `power = (name | 1 | ( product )) [^ integer]`."""

    def __init__(self, plain: str, written: str):
        self.written, self.position = written, 0
        self.tokens = self._tokens(plain.strip())

    def read(self) -> Unit:
        if not self.tokens:
            return Unit(1.0, 0.0, ())
        if len(self.tokens) == 1 and _is_name(self.tokens[0]):
            return _named(self.tokens[0], self.written)
        part = self._product()
        if self._next() is not None:
            raise self._unexpected(self._next())
        return _unit(part.factor, 0.0, part.powers)

    def _tokens(self, plain: str) -> list[str]:
        tokens, position = [], 0
        while position < len(plain):
            token = _TOKEN.match(plain, position)
            if not token:
                raise self._unexpected(plain[position:].strip())
            tokens.append(token["token"].replace("**", "^"))
            position = token.end()
        return tokens

    def _next(self) -> str | None:
        return self.tokens[self.position] if self.position < len(self.tokens) else None

    def _product(self) -> _Part:
        part, sign = _Part(), 1
        if self._next() == "/":  # "/cm^3" behind a number means per cubic centimetre
            self.position, sign = self.position + 1, -1
        while True:
            part = part.times(self._power(), sign)
            following = self._next()
            if following is None or following == ")":
                return part
            sign = -1 if following == "/" else 1
            self.position += following in "*/"

    def _power(self) -> _Part:
        part, following = self._atom(), self._next()
        if following is None or following[0] != "^":
            return part
        self.position += 1
        exponent = int(_NO_EXPONENT.sub("", following))
        if abs(exponent) > MAXIMUM_EXPONENT:
            found = f"the unit {shown(self.written)} has the exponent {exponent}"
            raise UnreadableError(f"{found}; expected at most {MAXIMUM_EXPONENT}")
        return _Part().times(part, exponent)

    def _atom(self) -> _Part:
        token = self._next()
        self.position += 1
        if token == "1":
            return _Part()
        if token == "(":
            inside = self._product()
            if self._next() != ")":
                raise UnreadableError(f"the unit {shown(self.written)} leaves a bracket open; close it")
            self.position += 1
            return inside
        if token is None or not _is_name(token):
            raise self._unexpected(token)
        unit = _named(token, self.written)
        return _Part(unit.factor, dict(unit.dimension) | {"radian": unit.angle})

    def _unexpected(self, rest: str | None) -> UnreadableError:
        if rest and rest[0].isdigit():
            found = f"the unit {shown(self.written)} holds the number {shown(rest)}"
            return UnreadableError(f"{found}; expected one number, then its unit")
        where = f"at {shown(rest)}" if rest else "at its end"
        expected = "expected a form such as 'µΩ cm' or 'mJ/(mol K^2)'"
        return UnreadableError(f"the unit {shown(self.written)} cannot be read {where}; {expected}")


def _is_name(token: str) -> bool:
    return token[0].isalpha() or token[0] == "_"


def _named(name: str, written: str) -> Unit:
    """One unit name with its prefix: a usual one from the table, any other by the units library."""
    unit = _usual_units().get(name) or _library_unit(name)
    if unit is None:
        within = "" if name == written else f" in {shown(written)}"
        raise UnreadableError(f"{shown(name)}{within} is no unit known here.{did_you_mean(name, _usual_units())}")
    return unit


@cache
def _usual_units() -> dict[str, Unit]:
    """What the units library says of the usual names, kept beside: loading it takes longer than reading a handbook."""
    table = files(__package__).joinpath("data/units.csv").read_text(encoding="utf-8")
    units = {}
    for row in csv.DictReader(table.splitlines()):
        name, factor, offset = (row.pop(column) for column in ("unit", "factor", "offset"))
        units[name] = _unit(float(factor), float(offset), {base: int(power) for base, power in row.items()})
    return units


@lru_cache(maxsize=4096)
def _library_unit(name: str) -> Unit | None:
    """What the units library makes of a name; None for an unknown one, and for levels such as dB."""
    import pint

    registry = _registry()
    try:
        one, zero = (registry.Quantity(number, name).to_base_units() for number in (1.0, 0.0))
        if not zero.magnitude:
            return _unit(one.magnitude, 0.0, dict(one.unit_items()))
        if dict(one.unit_items()) == {"kelvin": 1}:
            degree = registry.Quantity(1.0, f"delta_{registry.Unit(name)}").to_base_units()
            return _unit(degree.magnitude, zero.magnitude, {"kelvin": 1})
    except (pint.PintError, ValueError, AttributeError):
        pass
    return None


def _unit(factor: float, offset: float, powers: dict[str, float]) -> Unit:
    angle = powers.pop("radian", 0)
    return Unit(factor, offset, tuple(sorted((base, power) for base, power in powers.items() if power)), angle)


@cache
def _registry() -> pint.UnitRegistry:
    import pint

    return pint.UnitRegistry(autoconvert_offset_to_baseunit=True, on_redefinition="ignore")
