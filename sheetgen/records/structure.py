"""The structure of a record: a named lattice, a space group or a CIF, with every site of the conventional cell."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from pathlib import Path

from sheetgen.faults import Place
from sheetgen.records.cells import angles_close, lengths_and_angles, merged_sites, overlapping, snapped
from sheetgen.records.elements import elements
from sheetgen.records.lattices import (
    CENTRINGS,
    IDEAL_RATIO,
    LATTICES,
    SHAPES,
    CellShape,
    Lattice,
)
from sheetgen.records.measures import STRUCTURE
from sheetgen.records.model import Crystal, Site, Value
from sheetgen.records.nodes import Listing, Node, Scalar, Table
from sheetgen.records.notation import read_number
from sheetgen.records.spelling import british, written_key
from sheetgen.records.symmetry import cell_shape, cell_system, expanded, find_space_group, group_lattice_name
from sheetgen.records.unreadable import UnreadableError, shown
from sheetgen.records.values import Reader

ANGLES = ("alpha", "beta", "gamma")
OCCUPANCY_TOLERANCE = 0.01


@dataclass(frozen=True, slots=True)
class Cell:
    """A cell's name, shape and what fills it: `operations` of a space group, else centring and implied basis."""

    name: str
    shape: CellShape
    lattice: Lattice
    operations: tuple | None = None


def read_structure(
    table: Table, composition: Mapping[str, float], reader: Reader, folder: Path
) -> tuple[Crystal | None, dict[str, Value]]:
    """The crystal of a record, and its values by key; None where a fault was logged or nothing follows."""
    if "cif" in table.entries:
        from sheetgen.records.cif import read_cif

        for key, entry in table.entries.items():
            if key != "cif":
                reader.fault(
                    entry.key.place,
                    f"{shown(entry.key.text)} stands beside 'cif', which says everything; keep one of them.",
                )
        crystal = read_cif(table.entries["cif"].node, reader, folder)
        return crystal, constants_of(crystal) if crystal else {}
    cell = _cell(table, reader)
    if cell is None:
        return None, {}
    constants = _constants(table, cell, reader)
    sites = _sites(table, cell, composition, reader)
    if constants is None or not sites:
        return None, {}
    crystal = build_crystal(cell.name, cell.shape, constants, sites)
    if not sound(crystal, table.place, reader):
        return None, {}
    return crystal, {key: constants[key] for key in STRUCTURE if key in constants}


def constants_of(crystal: Crystal) -> dict[str, Value]:
    """The free constants of a crystal by key."""
    found = {key: getattr(crystal, key) for key in STRUCTURE}
    if crystal.angles_tied:
        del found["beta"], found["gamma"]
    return {key: value for key, value in found.items() if isinstance(value, Value)}


def build_crystal(name: str, shape: CellShape, constants: Mapping[str, Value], sites: tuple[Site, ...]) -> Crystal:
    """A crystal from its free constants, those that the shape ties filled in."""
    tied = shape is SHAPES["rhombohedral"]
    angles = [constants[key] if key in constants else fixed for key, fixed in zip(ANGLES, shape.angles, strict=True)]
    if tied:
        angles = [constants["alpha"]] * 3
    edges = (constants.get(key) for key in ("a", "b", "c", "c_over_a"))
    return Crystal(name, *edges, *angles, sites=sites, angles_tied=tied)


def sound(crystal: Crystal, place: Place, reader: Reader) -> bool:
    """Whether angles can meet and atoms have room, else with a fault logged."""
    _, angles = lengths_and_angles(crystal)
    if not angles_close(*angles):
        reader.fault(
            place,
            "the angles alpha, beta and gamma cannot meet in a corner; each must be less than the sum of the others, and their sum less than 360°.",
        )
        return False
    if clash := overlapping(crystal):
        one, other = clash
        reader.fault(
            place,
            f"{one.element} at {_point(one)} and {other.element} at {_point(other)} overlap and are more than one atom"
            " in sum; correct the positions or the occupancies.",
        )
        return False
    return True


def _point(site: Site) -> str:
    return "(" + ", ".join(f"{fraction:.4g}" for fraction in site.position) + ")"


def _cell(table: Table, reader: Reader) -> Cell | None:
    named, group = table.node("lattice"), table.node("space_group")
    lattice_word = canonical_lattice(named.text) if named else None
    if group is not None:
        return _group_cell(group, lattice_word, named, table, reader)
    if lattice_word is None:
        reader.fault(
            table,
            "structure has no lattice; expected lattice, space group or cif. Add 'lattice: fcc' or the like.",
        )
        return None
    lattice = LATTICES[lattice_word]
    if lattice_word == "rhombohedral" and ("c" in table.entries or "c_over_a" in table.entries):
        lattice = Lattice("hexagonal", "R")
    return Cell(lattice_word, SHAPES[lattice.system], lattice)


def canonical_lattice(text: str) -> str:
    """A lattice's name in British spelling with hyphens."""
    return re.sub(r"[ _]+", "-", british(text.strip()))


def _group_cell(node: Scalar, word: str | None, named: Node | None, table: Table, reader: Reader) -> Cell | None:
    try:
        group = find_space_group(node.text, rhombohedral_axes="alpha" in table.entries)
    except UnreadableError as error:
        reader.fault(node, f"space group: {error}.")
        return None
    if "atoms" not in table.entries:
        reader.fault(node, "a space group needs 'atoms', the asymmetric unit; add them.")
        return None
    system = cell_system(group)
    wanted = {"rhombohedral": ("rhombohedral", "hexagonal")}.get(word, (LATTICES[word].system,)) if word else (system,)
    if system not in wanted:
        reader.fault(
            named,
            f"lattice '{word}' disagrees with the space group {group.hm}, which is {system}; correct one of them.",
        )
        return None
    shape = cell_shape(group)
    return Cell(
        word or group_lattice_name(group),
        shape,
        Lattice(system, group.centring_type()),
        tuple(group.operations()),
    )


def _constants(table: Table, cell: Cell, reader: Reader) -> dict[str, Value] | None:
    """The cell constants by key, checked against what the lattice leaves free."""
    given = {key: entry for key, entry in table.entries.items() if key in STRUCTURE}
    complete = True
    for key, entry in given.items():
        if key not in cell.shape.read:
            complete = False
            reader.fault(entry.key.place, f"a {cell.name} lattice fixes '{written_key(key)}'; remove it.")
    for group in [(key,) for key in cell.shape.needed] + list(cell.shape.either):
        complete &= _one_of(group, given, table, cell, reader)
    values = {
        key: reader.value(entry.node, STRUCTURE[key], written_key(key))
        for key, entry in given.items()
        if key in cell.shape.read
    }
    if not complete or None in values.values():
        return None
    if cell.name == "hcp" and not {"c", "c_over_a"} & values.keys():
        values["c_over_a"] = _ideal_ratio(table.place)
        reader.remark(table, "hcp has neither c nor c/a; the ideal ratio c/a = √(8/3) is taken.")
    return values


def _one_of(group: tuple[str, ...], given: Mapping[str, object], table: Table, cell: Cell, reader: Reader) -> bool:
    found = [key for key in group if key in given]
    if len(found) == 1 or (not found and cell.name == "hcp" and "c" in group):
        return True
    names = " or ".join(written_key(key) for key in group)
    if found:
        reader.fault(given[found[-1]].key.place, f"both {names.replace(' or ', ' and ')} are given; keep one of them.")
    else:
        example = STRUCTURE[group[0]].example
        reader.fault(
            table,
            f"a {cell.name} lattice needs {names}; add '{written_key(group[0])}: {example}' or the like.",
        )
    return False


def _ideal_ratio(place: Place) -> Value:
    return Value(
        IDEAL_RATIO,
        None,
        "1",
        IDEAL_RATIO,
        None,
        None,
        (),
        False,
        "ideal ratio of close-packed spheres",
        "√(8/3)",
        place,
    )


def _sites(table: Table, cell: Cell, composition: Mapping[str, float], reader: Reader) -> tuple[Site, ...]:
    atoms = table.node("atoms")
    basis = _implied_basis(table, cell, composition, reader) if atoms is None else _listed_basis(atoms, reader)
    if not basis:
        return ()
    if cell.operations is not None:
        try:
            return expanded(basis, cell.operations)
        except UnreadableError as error:
            reader.fault(atoms, f"atoms: {error}.")
            return ()
    return merged_sites(
        replace(atom, position=tuple(snapped(x + float(dx)) for x, dx in zip(atom.position, shift, strict=True)))
        for atom in basis
        for shift in CENTRINGS[cell.lattice.centring]
    )


def _implied_basis(table: Table, cell: Cell, composition: Mapping[str, float], reader: Reader) -> list[Site]:
    basis = cell.lattice.basis
    if len(basis) != len(composition):
        elements_in = "an element" if len(basis) == 1 else "a compound of two elements"
        reader.fault(
            table,
            f"the lattice '{cell.name}' says where the atoms are only for {elements_in}; add 'atoms' with element,"
            " position and occupancy.",
        )
        return []
    return [
        Site(element, tuple(float(x) for x in point), 1.0)
        for element, points in zip(composition, basis, strict=True)
        for point in points
    ]


def _listed_basis(atoms: Listing, reader: Reader) -> list[Site]:
    sites = [_atom(atom, reader) for atom in atoms.items]
    return [] if None in sites else sites


def _atom(table: Table, reader: Reader) -> Site | None:
    element = table.entries["element"].node
    if element.text not in elements():
        reader.fault(element, f"{shown(element.text)} is no element; expected a symbol such as Ti.")
        return None
    fractions = [_fraction(node, "position", reader) for node in table.entries["position"].node.items]
    occupied = table.node("occupancy")
    occupancy = 1.0 if occupied is None else _fraction(occupied, "occupancy", reader)
    if None in fractions or occupancy is None:
        return None
    if not 0 < occupancy <= 1:
        reader.fault(occupied, f"occupancy: {shown(occupied.text)} is out of range; expected above 0 and at most 1.")
        return None
    return Site(element.text, tuple(map(snapped, fractions)), occupancy)


_RATIO = re.compile(r"([+-]?\d{1,3})/([1-9]\d{0,2})")


def _fraction(node: Scalar, name: str, reader: Reader) -> float | None:
    """A number such as 0.25, 0.2345(2) or 1/4; its uncertainty is not carried further."""
    if ratio := _RATIO.fullmatch(node.text.strip()):
        return int(ratio[1]) / int(ratio[2])
    try:
        number = read_number(node.text)
        if number.unit or abs(number.value) > 10:
            raise UnreadableError(f"{shown(node.text)} is no fraction of a cell edge; expected such as 0.25 or 1/4")
    except UnreadableError as error:
        reader.fault(node, f"{name}: {error}.")
        return None
    return number.value


def check_content(
    sites: Iterable[Site], formula: str, composition: Mapping[str, float], place: Place, reader: Reader
) -> None:
    """A fault where the elements of the cell are not those of the formula, in its ratio."""
    counts: dict[str, float] = {}
    for site in sites:
        counts[site.element] = counts.get(site.element, 0) + site.occupancy
    units = [counts.get(element, 0) / count for element, count in composition.items()]
    if counts.keys() == composition.keys() and max(units) - min(units) <= OCCUPANCY_TOLERANCE * max(units):
        return
    content = " ".join(f"{element}{count:.4g}" for element, count in counts.items())
    reader.fault(
        place,
        f"formula {shown(formula)} disagrees with the content of the cell, {content}; correct the formula, the lattice or the atoms.",
    )
