"""How a record is put together from its inputs: written into the data of an edition, and put together again.

The data of an edition holds every input of a record under its id. What it takes besides to derive the record once
more (lattice and sites, valleys, the sign of the carriers, which input belongs where) is its assembly.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import fields, is_dataclass, replace
from pathlib import Path
from typing import Any

from sheetgen.faults import Place
from sheetgen.records.formulas import composition
from sheetgen.records.model import Crystal, Electrons, OpticalPoint, Record, Site, Specimen, Value
from sheetgen.records.units import si_factor, to_si

PARTS = ("crystal", "electrons", "measured", "optical", "specimens")
IN_WORDS = ("place", "note")  # fields that say something to a reader and nothing to a formula
NOWHERE = Place("")


def assembly(record: Record) -> dict[str, Any]:
    """The record without its numbers, as JSON: where a value stands there is {"input": its id}."""
    names = {id(value): name for name, value in record.inputs.items()}
    return {part: _skeleton(getattr(record, part), names) for part in PARTS}


def _skeleton(node: Any, names: Mapping[int, str]) -> Any:
    if isinstance(node, Value):
        return {"input": names.get(id(node), "")}
    if is_dataclass(node):
        kept = (field.name for field in fields(node) if field.name not in IN_WORDS)
        return {name: _skeleton(getattr(node, name), names) for name in kept}
    if isinstance(node, Mapping):
        return {key: _skeleton(value, names) for key, value in node.items()}
    if isinstance(node, (tuple, list)):
        return [_skeleton(item, names) for item in node]
    return node


def rebuilt(material: Mapping[str, Any], skeleton: Mapping[str, Any]) -> Record:
    """The record that a material's data were derived from.

    Raises LookupError, TypeError or ValueError where the data do not fit together.
    """
    values = {name: _value(stated) for name, stated in material["inputs"].items()}
    crystal = _decoded(skeleton["crystal"], values)
    if crystal is not None:
        crystal = Crystal(**{**crystal, "sites": tuple(Site(**site) for site in crystal["sites"])})
    points = _decoded(skeleton["optical"], values)
    specimens = _decoded(skeleton["specimens"], values)
    return Record(
        slug=material["slug"],
        name=material["name"],
        formula=material["formula"],
        composition=composition(material["formula"]),
        crystal=crystal,
        electrons=Electrons(**_decoded(skeleton["electrons"], values)),
        measured=_decoded(skeleton["measured"], values),
        optical=tuple(OpticalPoint(**point, place=NOWHERE) for point in points),
        specimens=tuple(Specimen(**specimen, note="", place=NOWHERE) for specimen in specimens),
        cautions=(),
        review=None,
        notes="",
        path=Path(),
        place=NOWHERE,
        remarks=(),
        inputs=values,
    )


def _decoded(node: Any, values: Mapping[str, Value]) -> Any:
    if isinstance(node, dict):
        return values[node["input"]] if node.keys() == {"input"} else {k: _decoded(v, values) for k, v in node.items()}
    return tuple(_decoded(item, values) for item in node) if isinstance(node, list) else node


def _value(stated: Mapping[str, Any]) -> Value:
    value, unit, spread = float(stated["value"]), str(stated["unit"]), stated.get("standard_uncertainty")
    return Value(
        value=value,
        standard_uncertainty=spread,
        unit=unit,
        si=to_si(value, unit),
        si_uncertainty=None if spread is None else float(spread) * si_factor(unit),
        temperature=stated.get("temperature"),
        sources=tuple(stated.get("sources", ())),
        recalled=bool(stated.get("recalled")),
        note="",
        text=f"{value!r} {unit}",
        place=NOWHERE,
    )


# --- walking through a record ----------------------------------------------------------------------------------------


def values_in(node: Any) -> Iterator[Value]:
    """Every value of a part of a record, in an order that depends on its shape alone."""
    if isinstance(node, Value):
        yield node
    else:
        for _, child in _children(node):
            yield from values_in(child)


def shape(node: Any) -> Any:
    """A part of a record with its numbers and words taken out; equal shapes differ in numbers at most."""
    if isinstance(node, Value):
        return "a value"
    if is_dataclass(node) or isinstance(node, (Mapping, tuple, list)):
        return (type(node).__name__, tuple((name, shape(child)) for name, child in _children(node)))
    return node


def replaced(node: Any, old: Value, new: Value) -> Any:
    """A part of a record in which another value stands wherever `old` (the very object) stood."""
    if node is old:
        return new
    if isinstance(node, Value) or not any(value is old for value in values_in(node)):
        return node
    swap: Callable[[Any], Any] = lambda child: replaced(child, old, new)  # noqa: E731
    if isinstance(node, Mapping):
        return {key: swap(child) for key, child in node.items()}
    if isinstance(node, (tuple, list)):
        return tuple(map(swap, node))
    return replace(node, **{name: swap(child) for name, child in _children(node)})


def _children(node: Any) -> list[tuple[Any, Any]]:
    if is_dataclass(node):
        return [(field.name, getattr(node, field.name)) for field in fields(node) if field.name not in IN_WORDS]
    if isinstance(node, Mapping):
        return list(node.items())
    return list(enumerate(node)) if isinstance(node, (tuple, list)) else []
