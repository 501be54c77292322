"""What differs between two records of a material, each difference with the record that has it alone."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, fields, replace
from typing import Any

from sheetgen.errata.model import InputChange
from sheetgen.records import Electrons, Record, Value
from sheetgen.records.assembly import replaced, shape, values_in

CARRIERS = ("valence", "density", "dimension")  # one means nothing without the others
NUMBERS = ("value", "standard_uncertainty", "unit", "temperature")
ASPECTS = (*NUMBERS, "sources", "recalled")


@dataclass(frozen=True)
class Part:
    """A part of a record that can be taken from one record and put into another."""

    name: str
    get: Callable[[Record], Any]
    put: Callable[[Record, Any], Record]


@dataclass(frozen=True)
class Alone:
    """One cause, and the old record with nothing changed but that."""

    cause: str
    record: Record


def input_changes(old: Mapping[str, Any], new: Mapping[str, Any]) -> Iterator[InputChange]:
    """Every input of a material's data that differs, in the order of the new edition, then those that are gone."""
    before, after = _by_name(old), _by_name(new)
    for name, stated in after.items():
        earlier = before.get(name)
        aspects = ("value",) if earlier is None else tuple(a for a in ASPECTS if earlier.get(a) != stated.get(a))
        if aspects:
            yield InputChange(name, aspects, earlier, stated)
    yield from (InputChange(name, ("value",), stated) for name, stated in before.items() if name not in after)


def _by_name(material: Mapping[str, Any]) -> dict[str, dict[str, Any]]:
    """Inputs by id, those of a specimen by its name, since its number changes when another is added before it."""
    names = [specimen["name"] for specimen in material.get("specimens", ())]
    return {_renamed(id, names): dict(stated) for id, stated in material["inputs"].items()}


def _renamed(id: str, specimens: list[str]) -> str:
    head, _, rest = id.partition(".")
    number, _, key = rest.partition(".")
    if head == "specimens" and number.isdigit() and 0 < int(number) <= len(specimens):
        return f"specimens[{specimens[int(number) - 1]}].{key}"
    return id


def changes(old: Record, new: Record) -> list[Alone]:
    """Every difference that can move a number, one by one: an input, or a whole part where its form differs."""
    found = []
    for part in _parts(old, new):
        before, after = part.get(old), part.get(new)
        if shape(before) != shape(after):
            found.append(Alone(part.name, _named(part.put(old, after), old, new)))
            continue
        pairs = dict.fromkeys(zip(map(_Same, values_in(before)), map(_Same, values_in(after)), strict=True))
        for earlier, later in ((one.value, other.value) for one, other in pairs):
            if any(getattr(earlier, a) != getattr(later, a) for a in (*NUMBERS, "si")):
                record = _named(part.put(old, replaced(before, earlier, later)), old, new)
                found.append(Alone(_cause(later, new), record))
    return found


@dataclass(frozen=True, eq=False)
class _Same:
    """A value that equals only itself: two inputs may well hold the same number."""

    value: Value

    def __eq__(self, other: object) -> bool:
        return isinstance(other, _Same) and other.value is self.value

    def __hash__(self) -> int:
        return id(self.value)


def _cause(value: Value, record: Record) -> str:
    id_ = next((name for name, known in record.inputs.items() if known is value), "")
    return _renamed(id_, [specimen.name for specimen in record.specimens])


def _named(record: Record, old: Record, new: Record) -> Record:
    """The record with its inputs by name again, so that its budget can tell them apart."""
    names = {id(value): name for whole in (new, old) for name, value in whole.inputs.items()}
    parts = (record.crystal, record.electrons, record.measured, record.optical, record.specimens)
    return replace(record, inputs={names[id(value)]: value for value in values_in(parts)})


def _parts(old: Record, new: Record) -> Iterator[Part]:
    formula = ("formula", "composition")
    yield Part("formula", lambda r: {k: getattr(r, k) for k in formula}, lambda r, it: replace(r, **it))
    yield Part("structure", lambda r: r.crystal, lambda r, it: replace(r, crystal=it))
    yield _electrons("electrons", CARRIERS)
    for field in fields(Electrons):
        if field.name not in (*CARRIERS, "note"):
            yield _electrons(f"electrons.{field.name}", (field.name,))
    for key in dict.fromkeys((*old.measured, *new.measured)):
        yield _measured(key)
    yield Part("measured.refractive_index", lambda r: r.optical, lambda r, it: replace(r, optical=it))
    for name in (specimen.name for specimen in old.specimens):
        if any(specimen.name == name for specimen in new.specimens):
            yield _specimen(name)


def _electrons(name: str, keys: tuple[str, ...]) -> Part:
    def put(record: Record, values: dict[str, Any]) -> Record:
        return replace(record, electrons=replace(record.electrons, **values))

    return Part(name, lambda record: {key: getattr(record.electrons, key) for key in keys}, put)


def _measured(key: str) -> Part:
    def put(record: Record, values: tuple[Value, ...]) -> Record:
        others = {name: held for name, held in record.measured.items() if name != key}
        return replace(record, measured=others | ({key: values} if values else {}))

    return Part(f"measured.{key}", lambda record: record.measured.get(key, ()), put)


def _specimen(name: str) -> Part:
    def put(record: Record, specimen: Any) -> Record:
        return replace(record, specimens=tuple(specimen if s.name == name else s for s in record.specimens))

    return Part(f"specimens[{name}]", lambda record: next(s for s in record.specimens if s.name == name), put)
