"""YAML as a tree in which every key and value knows its line and column.

The tree is built from the parser's events and never from objects: no tag can build anything, an alias is refused
where it stands, and a scalar keeps the text that was typed, so that `1e-8` is a number and `No` is not a truth value.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

import yaml

from sheetgen.faults import FaultLog, Place
from sheetgen.records.spelling import canonical_key

MAXIMUM_DEPTH = 20
MAXIMUM_FAULTS = 50

_LOADER = getattr(yaml, "CLoader", yaml.Loader)


@dataclass(slots=True)
class Scalar:
    """A text as typed; `plain` says that it stood without quotes."""

    text: str
    plain: bool
    place: Place


@dataclass(slots=True)
class Listing:
    """A list of nodes."""

    items: list[Node]
    place: Place


@dataclass(slots=True)
class Table:
    """A mapping; keys are in canonical spelling, each with the key as typed and the node."""

    entries: dict[str, Entry]
    place: Place

    def node(self, key: str) -> Node | None:
        """The node under a canonical key, or None."""
        entry = self.entries.get(key)
        return entry.node if entry else None


@dataclass(slots=True)
class Entry:
    """A key as typed and the node under it."""

    key: Scalar
    node: Node


Node = Scalar | Listing | Table


class _TooManyFaultsError(Exception):
    """So much is wrong that the rest of the file says nothing new."""


def read_tree(text: str, file: str, log: FaultLog) -> Table | None:
    """The one mapping that a YAML text holds, or None with at least one fault logged.

    Bounded: nesting deeper than MAXIMUM_DEPTH is a fault, and reading stops after MAXIMUM_FAULTS faults.
    """
    builder = _Builder(file, log)
    try:
        root = builder.document(iter(yaml.parse(text, Loader=_LOADER)))
    except yaml.MarkedYAMLError as error:
        log.fault(builder.place(error.problem_mark or error.context_mark), syntax_message(error))
        return None
    except _TooManyFaultsError:
        return None
    return root if not builder.faults else None


class _Builder:
    """Turns events into nodes; counts the faults it found."""

    def __init__(self, file: str, log: FaultLog):
        self.file, self.log, self.faults = file, log, 0

    def place(self, mark: yaml.Mark | None) -> Place:
        return Place(self.file, mark.line + 1, mark.column + 1) if mark else Place(self.file)

    def fault(self, place: Place, message: str) -> None:
        self.log.fault(place, message)
        self.faults += 1
        if self.faults >= MAXIMUM_FAULTS:
            raise _TooManyFaultsError

    def document(self, events: Iterator[yaml.Event]) -> Table | None:
        root: Node | None = None
        for event in events:
            if isinstance(event, yaml.DocumentStartEvent):
                if root is not None:
                    self.fault(self.place(event.start_mark), "a second YAML document begins here; expected one. Split the file.")
                    return None
            elif not isinstance(event, _STREAM_EVENTS):
                root = self.node(event, events, 1)
        if isinstance(root, Table):
            return root
        if root is None:
            self.fault(Place(self.file), "the file is empty; expected keys such as 'name: Copper'.")
        else:
            self.fault(root.place, "the file holds no keys; expected lines such as 'name: Copper'.")
        return None

    def node(self, event: yaml.Event, events: Iterator[yaml.Event], depth: int) -> Node:
        place = self.place(event.start_mark)
        if isinstance(event, yaml.AliasEvent):
            self.fault(place, f"the alias '*{event.anchor}' is not read; write the value out here.")
            return Scalar("", True, place)
        if event.anchor is not None:
            self.fault(place, f"the anchor '&{event.anchor}' is not read; remove it and write the value out where it is used.")
        if event.tag is not None:
            self.fault(place, f"the tag '{event.tag}' is not read; remove it, plain text and numbers need none.")
        if isinstance(event, yaml.ScalarEvent):
            scalar = Scalar(event.value, event.implicit[0], place)
            self.refuse_surprise(scalar)
            return scalar
        if depth > MAXIMUM_DEPTH:
            self.fault(place, f"nested deeper than {MAXIMUM_DEPTH} levels; a record needs fewer.")
            raise _TooManyFaultsError
        if isinstance(event, yaml.SequenceStartEvent):
            return self.listing(place, events, depth)
        return self.table(place, events, depth)

    def listing(self, place: Place, events: Iterator[yaml.Event], depth: int) -> Listing:
        items = []
        for event in events:
            if isinstance(event, yaml.SequenceEndEvent):
                break
            items.append(self.node(event, events, depth + 1))
        return Listing(items, place)

    def table(self, place: Place, events: Iterator[yaml.Event], depth: int) -> Table:
        entries: dict[str, Entry] = {}
        for event in events:
            if isinstance(event, yaml.MappingEndEvent):
                break
            key = self.node(event, events, depth + 1)
            node = self.node(next(events), events, depth + 1)
            if not isinstance(key, Scalar):
                self.fault(key.place, "a key is a list or a mapping; expected a word. Put quotes around a text that begins with a bracket.")
                continue
            name = canonical_key(key.text)
            if name in entries:
                first = entries[name].key.place.line
                self.fault(key.place, f"the key '{key.text}' stands a second time (first in line {first}); keep one of them.")
                continue
            entries[name] = Entry(key, node)
        return Table(entries, place)

    def refuse_surprise(self, scalar: Scalar) -> None:
        if not scalar.plain:
            return
        for pattern, message in _SURPRISES:
            if pattern.fullmatch(scalar.text):
                self.fault(scalar.place, message.format(text=scalar.text))
                return


_STREAM_EVENTS = (yaml.StreamStartEvent, yaml.StreamEndEvent, yaml.DocumentEndEvent)

# What YAML 1.1 reads as something else than what stands there (https://yaml.org/type/): another reader of the same
# file would see a truth value, minutes, or an octal number.
_SURPRISES = [
    (
        re.compile(r"yes|Yes|YES|no|No|NO|on|On|ON|off|Off|OFF"),
        "the word '{text}' is a truth value in YAML 1.1; write \"{text}\" in quotes, or true or false where that is meant.",
    ),
    (
        re.compile(r"[-+]?\d[\d_]*(?::[0-5]?\d)+(?:\.[\d_]*)?"),
        "'{text}' is a number to the base 60 in YAML 1.1; write \"{text}\" in quotes.",
    ),
    (
        re.compile(r"[-+]?0[\d_]+"),
        "'{text}' is an octal number in YAML 1.1; write it without the leading zero, or \"{text}\" in quotes for a text.",
    ),
    (
        re.compile(r"[-+]?0(?:x[\da-fA-F_]+|b[01_]+)"),
        "'{text}' is a hexadecimal or binary number in YAML 1.1; write it in decimal digits, or \"{text}\" in quotes for a text.",
    ),
    (
        re.compile(r"[-+]?\d[\d_]*_[\d_]*(?:\.[\d_]*)?"),
        "'{text}' has underscores between its digits; write the digits without them.",
    ),
    (re.compile(r"<<"), "'{text}' merges another mapping, which is not read; write its keys out here."),
]

_SYNTAX_MENDS = {
    "mapping values are not allowed": "A text with ': ' in it needs quotes",
    "did not find expected key": "Check the indentation, and that brackets and quotes are closed",
    "did not find expected ',' or": "Close the bracket, and put quotes around a text that holds a comma or a bracket",
    "could not find expected ':'": "A key needs ': ' after it, and lines of one mapping start in the same column",
    "cannot start any token": "Put quotes around a text that begins with a special character",
    "unexpected end of stream": "Close the quotes or the bracket",
}


def syntax_message(error: yaml.MarkedYAMLError) -> str:
    """What a YAML parser found wrong, with the mend that usually helps."""
    problem = (error.problem or "syntax error").strip()
    context = f" {error.context.strip()}" if error.context else ""
    mend = next((mend for part, mend in _SYNTAX_MENDS.items() if part in problem), "Check the line above, too")
    return f"not readable as YAML: {problem}{context}. {mend}."


_NULL = re.compile(r"~|null|Null|NULL|")
_TRUE = ("true", "True", "TRUE")
_FALSE = ("false", "False", "FALSE")
_NUMBER = re.compile(r"[-+]?(?:\d{1,40}\.?\d{0,40}|\.\d{1,40})(?:[eE][-+]?\d{1,3})?")


def plain_data(node: Node) -> object:
    """The node as the plain data that a JSON Schema sees: dict, list, str, float, bool or None."""
    if isinstance(node, Table):
        return {key: plain_data(entry.node) for key, entry in node.entries.items()}
    if isinstance(node, Listing):
        return [plain_data(item) for item in node.items]
    if not node.plain:
        return node.text
    if node.text in _TRUE or node.text in _FALSE:
        return node.text in _TRUE
    if _NULL.fullmatch(node.text):
        return None
    return float(node.text) if _NUMBER.fullmatch(node.text) else node.text
