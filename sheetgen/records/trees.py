"""YAML as a tree in which every key and value knows its line and column.

The tree is built from the parser's events and never from objects: no tag can build anything, an alias is refused
where it stands, and a scalar keeps the text that was typed, so that `1e-8` is a number and `No` is no truth value.
"""

from __future__ import annotations

import re
from collections.abc import Iterator

import yaml

from sheetgen.faults import FaultLog, Place
from sheetgen.records.files import HIDDEN, Lines
from sheetgen.records.nodes import Entry, Listing, Node, Scalar, Table
from sheetgen.records.spelling import canonical_key
from sheetgen.records.unreadable import shown
from sheetgen.records.yaml11 import surprise

MAXIMUM_DEPTH = 20
MAXIMUM_NODES = 20_000
MAXIMUM_FAULTS = 50

_LOADER = getattr(yaml, "CLoader", yaml.Loader)
_TAB = re.compile(r"^ *\t", re.MULTILINE)
_STREAM_EVENTS = (yaml.StreamStartEvent, yaml.StreamEndEvent, yaml.DocumentEndEvent)


class _GivenUpError(Exception):
    """So much is wrong, or so much is written, that reading on would say nothing new."""


def read_tree(text: str, file: str, log: FaultLog, example: str = "name: Copper") -> Table | None:
    """The one mapping that a YAML text holds, or None with a fault logged; `example` is a line of such a file.

    Bounded: a tree that is deeper or larger than a record needs is a fault, and so is every alias and tag.
    """
    if tab := _TAB.search(text):
        log.fault(Lines(text, file).place(tab.end() - 1), "a tab indents this line; YAML wants spaces. Replace it.")
        return None
    builder = _Builder(file, log, example)
    try:
        root = builder.document(iter(_LOADER(text).get_event, None))
    except yaml.MarkedYAMLError as error:
        builder.fault(_syntax_mark(error), _syntax_message(error))
    except yaml.YAMLError as error:
        builder.fault(None, f"not readable as YAML: {' '.join(str(error).split())}.")
    except _GivenUpError:
        pass
    return root if not builder.faults else None


class _Builder:
    """Turns events into nodes; counts the nodes that it made and the faults that it found."""

    def __init__(self, file: str, log: FaultLog, example: str):
        self.file, self.log, self.example = file, log, example
        self.faults = self.nodes = 0

    def place(self, mark: yaml.Mark | None) -> Place:
        return Place(self.file, mark.line + 1, mark.column + 1) if mark else Place(self.file)

    def fault(self, where: yaml.Mark | Place | None, message: str) -> None:
        self.log.fault(where if isinstance(where, Place) else self.place(where), message)
        self.faults += 1
        if self.faults == MAXIMUM_FAULTS:
            raise _GivenUpError

    def document(self, events: Iterator[yaml.Event]) -> Table | None:
        root: Node | None = None
        for event in events:
            if isinstance(event, _STREAM_EVENTS):
                continue
            if not isinstance(event, yaml.DocumentStartEvent):
                root = self.node(event, events, 1)
            elif root is not None:
                self.fault(event.start_mark, "a second YAML document begins here; expected one. Split the file.")
                return None
        if root is None:
            self.fault(None, f"the file is empty; expected lines such as '{self.example}'.")
        elif not isinstance(root, Table):
            self.fault(root.place, f"the file holds no keys; expected lines such as '{self.example}'.")
        return root

    def node(self, event: yaml.Event, events: Iterator[yaml.Event], depth: int) -> Node:
        place = self.place(event.start_mark)
        self.nodes += 1
        if self.nodes > MAXIMUM_NODES or depth > MAXIMUM_DEPTH:
            self._give_up(place, depth)
        if isinstance(event, yaml.AliasEvent):
            self.fault(place, f"the alias {shown('*' + event.anchor)} is not read; write the value out here.")
            return Scalar("", True, place)
        if event.anchor is not None:
            self.fault(place, f"the anchor {shown('&' + event.anchor)} is not read; remove it.")
        if event.tag is not None:
            self.fault(place, f"the tag {shown(event.tag)} is not read; remove it, plain text and numbers need none.")
        if isinstance(event, yaml.ScalarEvent):
            return self._scalar(event, place)
        if isinstance(event, yaml.SequenceStartEvent):
            return self._listing(place, events, depth)
        return self._table(place, events, depth)

    def _scalar(self, event: yaml.ScalarEvent, place: Place) -> Scalar:
        plain = event.implicit[0]
        if plain and (message := surprise(event.value)):
            self.fault(place, message)
        # Quotes can spell what the file itself must not hold: "\x00".
        if not plain and (hidden := HIDDEN.search(event.value)):
            self.fault(
                place, f"the text spells the hidden character U+{ord(hidden[0]):04X}; expected visible text. Delete it."
            )
        return Scalar(event.value, plain, place)

    def _give_up(self, place: Place, depth: int) -> None:
        deep = f"nested deeper than {MAXIMUM_DEPTH} levels; a record needs fewer."
        large = f"more than {MAXIMUM_NODES} keys and values; a record needs fewer. Split the file."
        self.fault(place, deep if depth > MAXIMUM_DEPTH else large)
        raise _GivenUpError

    def _listing(self, place: Place, events: Iterator[yaml.Event], depth: int) -> Listing:
        items = []
        for event in events:
            if isinstance(event, yaml.SequenceEndEvent):
                break
            items.append(self.node(event, events, depth + 1))
        return Listing(items, place)

    def _table(self, place: Place, events: Iterator[yaml.Event], depth: int) -> Table:
        entries: dict[str, Entry] = {}
        for event in events:
            if isinstance(event, yaml.MappingEndEvent):
                break
            key = self.node(event, events, depth + 1)
            node = self.node(next(events), events, depth + 1)
            if self._fit(key, entries):
                entries[canonical_key(key.text)] = Entry(key, node)
        return Table(entries, place)

    def _fit(self, key: Node, entries: dict[str, Entry]) -> bool:
        """Whether a key is a word that does not stand there yet."""
        if not isinstance(key, Scalar):
            message = (
                "a key is a list or a mapping; expected a word. Put quotes around a text that begins with a bracket."
            )
            self.fault(key.place, message)
            return False
        if first := entries.get(canonical_key(key.text)):
            again = f"the key {shown(key.text)} stands a second time (first in line {first.key.place.line})"
            self.fault(key.place, f"{again}; keep one of them.")
            return False
        return True


_SYNTAX_MENDS = {
    "mapping values are not allowed": "A text with ': ' in it needs quotes, and a key in the line above its colon",
    "did not find expected key": "Check the indentation, and that brackets and quotes are closed",
    "did not find expected ',' or": "Close the bracket, and put quotes around a text that holds a comma or a bracket",
    "could not find expected ':'": "A key needs ': ' after it, and the keys of one mapping start in the same column",
    "cannot start any token": "Put quotes around a text that begins with a special character",
    "unexpected end of stream": "Close the quotes or the bracket",
}


def _syntax_mark(error: yaml.MarkedYAMLError) -> yaml.Mark | None:
    """Where to look: at the beginning of what was left open, else where the parser stumbled."""
    problem = error.problem or ""
    left_open = "end of stream" in problem or "expected ',' or" in problem
    return (left_open and error.context_mark) or error.problem_mark or error.context_mark


def _syntax_message(error: yaml.MarkedYAMLError) -> str:
    """What the YAML parser found wrong, with the mend that usually helps."""
    problem = (error.problem or "syntax error").strip()
    context = f" {error.context.strip()}" if error.context else ""
    mend = next((mend for part, mend in _SYNTAX_MENDS.items() if part in problem), "Check the line above, too")
    return f"not readable as YAML: {problem}{context}. {mend}."
