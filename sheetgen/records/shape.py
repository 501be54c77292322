"""The shape of a record held against the schema: each error of the schema library as a fault with its place."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from contextlib import suppress
from itertools import islice
from typing import TYPE_CHECKING

from sheetgen.faults import FaultLog, Place, did_you_mean
from sheetgen.records.nodes import Listing, Node, Scalar, Table, found, plain_data
from sheetgen.records.quickly import fits
from sheetgen.records.schema import NAME_PATTERN, canonical_schema, validator
from sheetgen.records.spelling import written_key
from sheetgen.records.structure import canonical_lattice
from sheetgen.records.unreadable import shown

if TYPE_CHECKING:
    from jsonschema.exceptions import ValidationError

MAXIMUM_FAULTS = 50
MAXIMUM_PRUNINGS = 4


def has_record_shape(root: Table, log: FaultLog) -> bool:
    """Whether a tree has the shape of a record; where it has not, every fault of it is logged."""
    if fits(data := _data(root), canonical_schema()):
        return True
    errors = islice(validator().iter_errors(data), MAXIMUM_FAULTS)
    faults = dict.fromkeys(fault for error in errors for fault in _faults(error, root))
    for place, message in faults:
        log.fault(place, message)
    return not faults


def prune(root: Table) -> set[str] | None:
    """Take out of a tree what keeps it from the shape of a record, so that the faults of the rest are found as well.

    The keys of the sections that lost something, or None where no record is left.
    """
    upset: set[str] = set()
    for _ in range(MAXIMUM_PRUNINGS):
        if fits(_data(root), canonical_schema()):
            return upset
        errors = {tuple(error.absolute_path): error for error in validator().iter_errors(_data(root))}
        # The deepest first, and of a list the last first, so that no removal moves what another error names.
        for path in sorted(errors, key=lambda path: (-len(path), [-s if isinstance(s, int) else 0 for s in path])):
            unknown = errors[path].validator == "additionalProperties"
            if not path and not unknown:
                return None
            upset.update([str(path[0])] if path else [])
            with suppress(KeyError, IndexError):
                _take_out(root, path, errors[path].schema.get("properties") if unknown else None)
    return None


def _take_out(root: Table, path: tuple[str | int, ...], known: dict | None) -> None:
    """Remove the node at a path, or of the mapping there each key that is not among the known ones."""
    if known is not None:
        table = _node_at(root, path)
        for key in set(table.entries) - set(known):
            del table.entries[key]
        return
    parent = _node_at(root, path[:-1])
    if isinstance(parent, Table):
        del parent.entries[path[-1]]
    else:
        del parent.items[path[-1]]


def _data(root: Table) -> dict:
    data = plain_data(root)
    structure = data.get("structure")
    if isinstance(structure, dict) and isinstance(structure.get("lattice"), str):
        structure["lattice"] = canonical_lattice(structure["lattice"])
    return data


def _faults(error: ValidationError, root: Table) -> Iterator[tuple[Place, str]]:
    node = _node_at(root, error.absolute_path)
    name = _name(error.absolute_path)
    expected = error.schema["description"]
    if error.validator == "additionalProperties":
        yield from _unknown_keys(node, error.schema, name)
    elif error.validator == "required":
        for key in error.validator_value:
            if key not in node.entries:
                yield node.place, f"{name} has no '{written_key(key)}'; expected {expected}. Add it."
    elif error.validator == "enum":
        options = [str(option) for option in error.validator_value]
        guess = did_you_mean(node.text, options) if isinstance(node, Scalar) else ""
        yield node.place, f"{name}: found {found(node)}; expected {_one_of(options)}.{guess}"
    else:
        yield node.place, f"{name}: found {found(node)}; expected {expected}{_limit(error)}."


def _node_at(root: Node, path: Iterable[str | int]) -> Node:
    node = root
    for step in path:
        node = node.items[step] if isinstance(node, Listing) else node.entries[step].node
    return node


def _name(path: Iterable[str | int]) -> str:
    """What a message calls the thing at a path: its last key, `value` aside."""
    keys = [step for step in path if isinstance(step, str) and step != "value"]
    return written_key(keys[-1]) if keys else "the record"


def _limit(error: ValidationError) -> str:
    if error.validator_value == NAME_PATTERN:
        return " that begins with a letter or a digit"
    limits = {
        "maxLength": "of at most {} characters",
        "maxItems": "of at most {}",
        "minItems": "of at least {}",
    }
    return f", {limits[error.validator].format(error.validator_value)}" if error.validator in limits else ""


def _one_of(options: list[str]) -> str:
    return f"one of {', '.join(options)}" if len(options) > 2 else " or ".join(options)


def _unknown_keys(table: Table, schema: dict, name: str) -> Iterator[tuple[Place, str]]:
    known = schema["properties"]
    patterns = [re.compile(pattern) for pattern in schema.get("patternProperties", ())]
    where = "" if name == "the record" else f" of {name}"
    for key, entry in table.entries.items():
        if key in known or any(pattern.search(key) for pattern in patterns):
            continue
        expected = ", ".join(map(written_key, known))
        message = f"unknown key {shown(entry.key.text)}{where}; expected one of {expected}."
        yield entry.key.place, message + _mend(key[:80], known)


def _mend(key: str, known: dict) -> str:
    """A closing sentence for an unknown key: a comma in a number, the section where it belongs, or a near word."""
    if "value" in known and key[:1].isdigit():
        return " A comma ends a value in braces: write a decimal point, or put the text in quotes."
    sections = {} if "value" in known else canonical_schema()["properties"]
    if key in sections and "name" not in known:
        return f" '{written_key(key)}' belongs at the left margin, outside every section."
    for section, schema in sections.items():
        if key in schema.get("items", schema).get("properties", {}) and section != "cautions":
            return f" Put '{written_key(key)}' under '{written_key(section)}'."
    return did_you_mean(key.replace("_", " "), map(written_key, known))
