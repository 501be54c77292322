"""The nodes of a YAML tree: scalars as typed, lists, and mappings, each with its place."""

from __future__ import annotations

import re
from dataclasses import dataclass

from sheetgen.faults import Place
from sheetgen.records.unreadable import shown


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
class Entry:
    """A key as typed and the node under it."""

    key: Scalar
    node: Node


@dataclass(slots=True)
class Table:
    """A mapping; its keys are in canonical spelling, each with the key as typed and the node under it."""

    entries: dict[str, Entry]
    place: Place

    def node(self, key: str) -> Node | None:
        """The node under a canonical key, or None."""
        entry = self.entries.get(key)
        return entry.node if entry else None


Node = Scalar | Listing | Table

_WORDS = {"": None, "~": None} | {
    spelling: meaning
    for word, meaning in (("null", None), ("true", True), ("false", False))
    for spelling in (word, word.capitalize(), word.upper())
}
_NUMBER = re.compile(r"[-+]?(?:\d{1,40}\.?\d{0,40}|\.\d{1,40})(?:[eE][-+]?\d{1,3})?")


def plain_data(node: Node) -> object:
    """The node as the plain data that a JSON Schema sees: dict, list, str, float, bool or None."""
    if isinstance(node, Table):
        return {key: plain_data(entry.node) for key, entry in node.entries.items()}
    if isinstance(node, Listing):
        return [plain_data(item) for item in node.items]
    if not node.plain:
        return node.text
    if node.text in _WORDS:
        return _WORDS[node.text]
    return float(node.text) if _NUMBER.fullmatch(node.text) else node.text


def found(node: Node | None) -> str:
    """How a message names what stands at a node."""
    if isinstance(node, Table):
        return "a mapping"
    if isinstance(node, Listing):
        return f"a list of {len(node.items)}"
    return shown(node.text) if node and node.text.strip() else "nothing"
