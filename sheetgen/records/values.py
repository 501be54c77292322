"""Values of a record: a text, a number, or a mapping with `value`, `at`, `from`, `note` and `recalled`."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from sheetgen.faults import FaultLog, Place, did_you_mean
from sheetgen.records.measures import TEMPERATURE, Measure
from sheetgen.records.model import Source, Value
from sheetgen.records.nodes import Listing, Node, Scalar, Table
from sheetgen.records.readings import read_quantity
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
            reading = read_quantity(node.text, measure)
        except UnreadableError as error:
            self.unreadable(node, name, error)
            return None
        return Value(
            value=reading.value,
            standard_uncertainty=reading.standard_uncertainty,
            unit=reading.unit,
            si=reading.si,
            si_uncertainty=reading.si_uncertainty,
            temperature=origin.temperature,
            sources=origin.sources,
            recalled=origin.recalled,
            note=origin.note,
            text=node.text,
            place=node.place,
        )

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
        try:
            return read_quantity(node.text, TEMPERATURE).si
        except UnreadableError as error:
            self.unreadable(node, name, error)
            return None

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


def _unknown_source(key: str, sources: Mapping[str, Source]) -> str:
    mend = f"Add an entry {shown(key)} there, or correct the key.{did_you_mean(key[:80], sources)}"
    return f"the source {shown(key)} is not in sources.bib; expected one of its keys. {mend}"
