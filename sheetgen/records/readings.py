"""A text as a quantity: number and unit held against what the key measures, and the value in SI."""

from __future__ import annotations

import math
from functools import lru_cache
from typing import NamedTuple

from sheetgen.records.measures import ANGLE, Measure
from sheetgen.records.notation import Number, read_number
from sheetgen.records.units import Dimension, Unit, read_unit
from sheetgen.records.unreadable import UnreadableError, shown


class Reading(NamedTuple):
    """A number with its uncertainty (None where none is stated), in its unit as written and in coherent SI."""

    value: float
    standard_uncertainty: float | None
    unit: str
    si: float
    si_uncertainty: float | None


@lru_cache(maxsize=4096)
def read_quantity(text: str, measure: Measure) -> Reading:
    """What a text says of something measured. Raises UnreadableError for a wrong form, unit or range."""
    number = read_number(text)
    name, unit = _unit_of(number, measure, text)
    si = number.value * unit.factor + unit.offset
    if not math.isfinite(si):
        raise UnreadableError(f"{shown(text)} is beyond what a number can hold; check the exponent")
    _check_range(si, name, unit, measure, text)
    spread = number.standard_uncertainty
    return Reading(number.value, spread, name, si, None if spread is None else spread * unit.factor)


def _unit_of(number: Number, measure: Measure, text: str) -> tuple[str, Unit]:
    """The unit as written and what it means; a bare number is a pure number, and for an angle counts degrees."""
    expected = f"expected {measure.kind} such as '{measure.example}'"
    if not number.unit:
        if measure is ANGLE:
            return "deg", read_unit("deg")
        if not measure.dimensionless:
            raise UnreadableError(f"{shown(text)} has no unit; {expected}. Add the unit")
        return "1", read_unit("1")
    unit = read_unit(number.unit)
    wanted = read_unit(measure.unit)
    if unit.dimension != wanted.dimension or unit.angle != wanted.angle:
        raise UnreadableError(f"given in {shown(number.unit)}; {expected}.{_mend(number.unit, unit, wanted)}")
    return number.unit, unit


_LACKING = {
    "m": "length",
    "m^3": "volume",
    "K": "temperature",
    "K^2": "squared temperature",
    "mol": "amount of substance",
    "mol K": "amount of substance and the temperature",
    "s": "time",
}
_SLIPS = {"A": "Å", "C": "°C", "k": "K", "G": "GPa"}


def _mend(written: str, unit: Unit, wanted: Unit) -> str:
    """A closing sentence for a wrong dimension: the unit that was meant, or the factor that is lacking."""
    if not wanted.dimension and not wanted.angle:
        return " Write the number alone"
    for meant in (_SLIPS.get(written), _bracketed(written)):
        if meant and _dimension(meant) == wanted.dimension:
            return f" Write {shown(meant)}"
    for factor, word in _LACKING.items():
        for sign, advice in ((1, f" Add the {word}"), (-1, f" Divide by the {word}")):
            if _product(unit, read_unit(factor), sign) == dict(wanted.dimension):
                return advice
    return " Give a unit of that kind"


def _bracketed(written: str) -> str:
    """`W/m K` as `W/(m K)`: a slash divides by one factor, many a person means all that follow."""
    before, slash, after = written.partition("/")
    return f"{before}/({after})" if slash and not {"(", "/"} & set(after) else ""


def _dimension(text: str) -> Dimension | None:
    try:
        return read_unit(text).dimension
    except UnreadableError:
        return None


def _product(unit: Unit, factor: Unit, sign: int) -> dict[str, float]:
    powers = dict(unit.dimension)
    for base, power in factor.dimension:
        powers[base] = powers.get(base, 0) + sign * power
    return {base: power for base, power in powers.items() if power}


def _check_range(si: float, unit_text: str, unit: Unit, measure: Measure, text: str) -> None:
    # A number at the bound may come out a rounding error beside it.
    slack = 1e-12 * abs(si)
    if measure.low - slack <= si <= measure.high + slack and not (measure.high_excluded and si >= measure.high):
        return
    low, high = (_bound(bound, unit_text, unit) for bound in (measure.low, measure.high))
    limits = f"at least {low} and below {high}" if measure.high_excluded else f"{low} to {high}"
    out = f"{shown(text)} is out of the physical range of {measure.kind}"
    raise UnreadableError(f"{out}; expected {limits}. Check the number and its unit")


def _bound(si: float, unit_text: str, unit: Unit) -> str:
    number = f"{(si - unit.offset) / unit.factor:.6g}"
    return number if unit_text == "1" else f"{number}{unit_text}" if unit_text == "°" else f"{number} {unit_text}"
