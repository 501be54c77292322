"""The group's own films, wires, particles and cubes in a record."""

from __future__ import annotations

from sheetgen.records.cells import nearest_neighbour_distance
from sheetgen.records.measures import FORMS, SPECIMEN
from sheetgen.records.model import Crystal, Specimen, Value
from sheetgen.records.nodes import Listing, Table
from sheetgen.records.spelling import written_key
from sheetgen.records.unreadable import shown
from sheetgen.records.values import Reader, text_of, truth

SIZES = ("thickness", "diameter", "edge")


def read_specimens(listing: Listing, crystal: Crystal | None, reader: Reader) -> tuple[Specimen, ...]:
    """The specimens in the order of the record; none is thinner than an atom."""
    smallest = nearest_neighbour_distance(crystal) if crystal and listing.items else 0.0
    specimens = tuple(_specimen(table, smallest, reader) for table in listing.items)
    _check_names(listing, reader)
    return specimens


def specimen_inputs(specimens: tuple[Specimen, ...]) -> dict[str, Value]:
    """Every value of the specimens by its id, counted from 1."""
    return {
        f"specimens.{number}.{key}": value
        for number, specimen in enumerate(specimens, start=1)
        for key in SPECIMEN
        if (value := getattr(specimen, key)) is not None
    }


def _specimen(table: Table, smallest: float, reader: Reader) -> Specimen:
    form = text_of(table.node("form"))
    _check_size(table, form, reader)
    values = {
        key: reader.value(node, measure, written_key(key)) if (node := table.node(key)) is not None else None
        for key, measure in SPECIMEN.items()
    }
    for key in SIZES:
        size = values[key]
        if size and size.si < smallest * (1 - 1e-9):
            least = f"expected at least the nearest-neighbour distance, {smallest * 1e9:.4g} nm"
            message = f"{key}: {shown(size.text)} is thinner than one atom; {least}. Check the number and its unit."
            reader.fault(size.place, message)
    return Specimen(
        name=text_of(table.node("name")),
        form=form,
        note=text_of(table.node("note")),
        invented=truth(table.node("invented")),
        place=table.place,
        **values,
    )


def _check_size(table: Table, form: str, reader: Reader) -> None:
    """A form has its own size, and no other."""
    wanted = FORMS[form]
    for key in SIZES:
        if key != wanted and key in table.entries:
            message = f"a {form} has no '{key}'; expected '{wanted}'. Correct the form or the key."
            reader.fault(table.entries[key].key.place, message)
    if wanted not in table.entries:
        reader.fault(table, f"a {form} needs '{wanted}'; add '{wanted}: {SPECIMEN[wanted].example}' or the like.")


def _check_names(listing: Listing, reader: Reader) -> None:
    seen: dict[str, int] = {}
    for table in listing.items:
        node = table.entries["name"].node
        if (name := text_of(node)) in seen:
            reader.fault(node, f"a specimen {shown(name)} stands already in line {seen[name]}; give each its own name.")
        seen.setdefault(name, node.place.line)
