"""Values of a record: a text, a number, or a mapping with `value`, `at`, `from`, `note` and `recalled`."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, field

from sheetgen.faults import FaultLog, Place, did_you_mean
from sheetgen.records.measures import ANGLE, TEMPERATURE, Measure
from sheetgen.records.model import Source, Value
from sheetgen.records.nodes import Listing, Node, Scalar, Table
from sheetgen.records.notation import Number, read_number
from sheetgen.records.units import Dimension, Unit, read_unit
from sheetgen.records.unreadable import UnreadableError, sentence, shown


@dataclass(frozen=True, slots=True)
class Origin:
    """Where a value comes from, and at what temperature (K) it was taken."""

    temperature: float | None = None
    sources: tuple[str, ...] = ()
    recalled: bool = False
    note: str = ""


@dataclass(slots=True)
class Reader:
    """Reads nodes into values and notes what is wrong; `sources` are the known keys of sources.bib."""

    log: FaultLog
    sources: Mapping[str, Source] = field(default_factory=dict)

    def fault(self, where: Node | Place, message: str) -> None:
        """Note a fault at a node."""
        self.log.fault(where if isinstance(where, Place) else where.place, message)

    def remark(self, where: Node | Place, message: str) -> None:
        """Note a remark at a node."""
        self.log.remark(where if isinstance(where, Place) else where.place, message)

    def unreadable(self, where: Node | Place, name: str, error: UnreadableError) -> None:
        """Note what a small parser found wrong with `name`."""
        self.fault(where, sentence(f"{name}: {error}"))

    def value(self, node: Node, measure: Measure, name: str, origin: Origin | None = None) -> Value | None:
        """The value at a node, or None with a fault logged; `name` is what messages call it."""
        origin = origin or Origin()
        if isinstance(node, Table):
            origin = self.origin(node, origin)
            node = node.entries["value"].node
        try:
            return _value(node, measure, origin)
        except UnreadableError as error:
            self.unreadable(node, name, error)
            return None

    def values(self, node: Node, measure: Measure, name: str) -> list[Value]:
        """The readable values at a node that holds one value or a list of them."""
        items = node.items if isinstance(node, Listing) else [node]
        return [value for item in items if (value := self.value(item, measure, name))]

    def origin(self, table: Table, inherited: Origin) -> Origin:
        """What a mapping says about where its values come from, over what it inherits."""
        at, cited, recalled = table.node("at"), table.node("from"), table.node("recalled")
        return Origin(
            inherited.temperature if at is None else self.temperature(at, "at"),
            inherited.sources if cited is None else self.source_keys(cited),
            inherited.recalled if recalled is None else truth(recalled),
            text_of(table.node("note")) or inherited.note,
        )

    def temperature(self, node: Scalar, name: str) -> float | None:
        """A temperature in K, or None with a fault logged."""
        value = self.value(node, TEMPERATURE, name)
        return value.si if value else None

    def source_keys(self, node: Scalar | Listing) -> tuple[str, ...]:
        """The cited keys, each checked against sources.bib."""
        keys = node.items if isinstance(node, Listing) else [node]
        for key in keys:
            if key.text.strip() not in self.sources:
                self.fault(key, _unknown_source(key.text.strip(), self.sources))
        return tuple(dict.fromkeys(key.text.strip() for key in keys))


def truth(node: Node | None) -> bool:
    """Whether a node, checked before to hold a truth value, says true."""
    return isinstance(node, Scalar) and node.text.lower() == "true"


def text_of(node: Node | None) -> str:
    """The text of a scalar without surrounding blanks, or the empty text where nothing stands."""
    return node.text.strip() if isinstance(node, Scalar) else ""


def _value(node: Scalar, measure: Measure, origin: Origin) -> Value:
    number = read_number(node.text)
    unit_text, unit = _unit_of(number, measure, node.text)
    si = number.value * unit.factor + unit.offset
    if not math.isfinite(si):
        raise UnreadableError(f"{shown(node.text)} is beyond what a number can hold; check the exponent")
    _check_range(si, unit_text, unit, measure, node.text)
    spread = number.standard_uncertainty
    return Value(
        value=number.value,
        standard_uncertainty=spread,
        unit=unit_text,
        si=si,
        si_uncertainty=None if spread is None else spread * unit.factor,
        temperature=origin.temperature,
        sources=origin.sources,
        recalled=origin.recalled,
        note=origin.note,
        text=node.text,
        place=node.place,
    )


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
    "m^2": "area",
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


def _unknown_source(key: str, sources: Mapping[str, Source]) -> str:
    mend = f"Add an entry {shown(key)} there, or correct the key.{did_you_mean(key[:80], sources)}"
    return f"the source {shown(key)} is not in sources.bib; expected one of its keys. {mend}"
