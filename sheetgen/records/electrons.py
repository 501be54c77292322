"""The conduction electrons of a record: a valence per element, or a measured density; masses, valleys, charge."""

from __future__ import annotations

from collections.abc import Mapping

from sheetgen.faults import did_you_mean
from sheetgen.records.elements import elements
from sheetgen.records.measures import DENSITIES, ELECTRONS, VALENCE
from sheetgen.records.model import Electrons, Value
from sheetgen.records.nodes import Node, Table
from sheetgen.records.spelling import written_key
from sheetgen.records.unreadable import shown
from sheetgen.records.values import Reader, text_of


def read_electrons(
    table: Table, composition: Mapping[str, float], reader: Reader
) -> tuple[Electrons, dict[str, Value]]:
    """The electrons of a record, and their values by the last part of the input id ("valence.Ti", "density")."""
    dimension = int(float(text_of(table.node("dimension")) or 3))
    inputs: dict[str, Value] = {}
    valence, density = table.node("valence"), table.node("density")
    _check_choice(table, dimension, reader)
    electrons_per_atom = _valence(valence, composition, reader, inputs) if valence is not None else None
    if density is not None:
        inputs |= _single("density", reader.value(density, DENSITIES[dimension], "density"))
    for key, measure in ELECTRONS.items():
        if (node := table.node(key)) is not None:
            inputs |= _single(key, reader.value(node, measure, written_key(key)))
    electrons = Electrons(
        valence=electrons_per_atom,
        density=inputs.get("density"),
        dimension=dimension,
        valleys=int(float(text_of(table.node("valleys")) or 1)),
        charge=text_of(table.node("charge")) or "electron",
        note=text_of(table.node("note")),
        **{key: inputs.get(key) for key in ELECTRONS},
    )
    return electrons, inputs


def _single(key: str, value: Value | None) -> dict[str, Value]:
    return {} if value is None else {key: value}


def _check_choice(table: Table, dimension: int, reader: Reader) -> None:
    """Exactly one of valence and density; a two-dimensional gas has no valence."""
    valence, density = table.entries.get("valence"), table.entries.get("density")
    if valence and density:
        reader.fault(
            density.key.place,
            "both valence and density are given; keep the one that the electrons are counted by.",
        )
    elif not valence and not density:
        reader.fault(table, "electrons has neither valence nor density; add 'valence: 1' or the like.")
    elif valence and dimension == 2:
        reader.fault(
            valence.key.place,
            "a valence does not count the electrons of a two-dimensional gas; give 'density' per area instead.",
        )


def _valence(
    node: Node, composition: Mapping[str, float], reader: Reader, inputs: dict[str, Value]
) -> dict[str, Value] | None:
    """Electrons per atom by element, every element of the formula named; the total must be above 0."""
    if isinstance(node, Table) and "value" not in node.entries:
        valence = _by_element(node, composition, reader)
        inputs |= {f"valence.{element}": value for element, value in valence.items()}
    elif len(composition) > 1:
        expected = f"expected a mapping from each of {_listed(composition)} to its electrons"
        reader.fault(node, f"valence is one number for a compound; {expected}, such as {{Ti: 4, N: -3}}.")
        return None
    else:
        _refuse_elements(node, reader)
        value = reader.value(node, VALENCE, "valence")
        valence = {element: value for element in composition if value}
        inputs |= _single("valence", value)
    if len(valence) < len(composition):
        return None
    total = sum(valence[element].si * count for element, count in composition.items())
    if total <= 0:
        reader.fault(node, f"valence adds up to {total:g} electrons per formula unit; expected more than 0.")
        return None
    return valence


def _refuse_elements(node: Node, reader: Reader) -> None:
    """A value is one number or one for each element, not both."""
    for key, entry in node.entries.items() if isinstance(node, Table) else ():
        if key in elements():
            beside = f"{shown(key)} stands beside 'value'"
            reader.fault(entry.key.place, f"{beside}; give either one number or one for each element.")


def _by_element(table: Table, composition: Mapping[str, float], reader: Reader) -> dict[str, Value]:
    for key, entry in table.entries.items():
        if key not in composition:
            known = f"expected {_listed(composition)}.{did_you_mean(key, composition)}"
            reader.fault(entry.key.place, f"valence names {shown(key)}, which is not in the formula; {known}")
    missing = [element for element in composition if element not in table.entries]
    if missing:
        reader.fault(
            table,
            f"valence does not name {_listed(missing)}; add the electrons of each, 0 where it gives none.",
        )
    found = {
        element: reader.value(table.entries[element].node, VALENCE, f"valence of {element}")
        for element in composition
        if element in table.entries
    }
    return {element: value for element, value in found.items() if value}


def _listed(words: Mapping[str, float] | list[str]) -> str:
    *most, last = words
    return f"{', '.join(most)} and {last}" if most else last
