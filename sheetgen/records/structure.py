"""The structure of a record: a named lattice, a space group or a CIF; its cell constants and every site."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from sheetgen.faults import Place
from sheetgen.records.cells import LARGEST_RATIO, angles_close, elongation, lengths_and_angles, overlapping
from sheetgen.records.lattices import IDEAL_RATIO, LATTICES, SHAPES, CellShape, Lattice
from sheetgen.records.measures import STRUCTURE
from sheetgen.records.model import Crystal, Site, Value
from sheetgen.records.nodes import Entry, Scalar, Table
from sheetgen.records.sites import centred, implied_basis, listed_basis
from sheetgen.records.spelling import british, written_key
from sheetgen.records.symmetry import cell_shape, cell_system, expanded, find_space_group, group_lattice_name
from sheetgen.records.unreadable import UnreadableError, sentence, shown
from sheetgen.records.values import Reader

if TYPE_CHECKING:
    import gemmi

ANGLES = ("alpha", "beta", "gamma")

_BLANK = re.compile(r"[ _]+")


@dataclass(frozen=True, slots=True)
class Cell:
    """A cell's name and shape, and how a basis is spread over it: by a space group, else by a lattice's centring."""

    name: str
    shape: CellShape
    lattice: Lattice
    group: gemmi.SpaceGroup | None = None


def read_structure(
    table: Table, composition: Mapping[str, float], reader: Reader, folder: Path
) -> tuple[Crystal | None, dict[str, Value]]:
    """The crystal of a record and its constants by key; (None, {}) where a fault was logged."""
    if cif := table.entries.get("cif"):
        crystal = _from_cif(cif.node, table, reader, folder)
        return crystal, constants_of(crystal) if crystal else {}
    cell = _cell(table, reader)
    if cell is None:
        return None, {}
    constants = _constants(table, cell, reader)
    sites = _sites(table, cell, composition, reader)
    if constants is None or not sites:
        return None, {}
    crystal = build_crystal(cell.name, cell.shape, constants, sites)
    try:
        check_room(crystal)
    except UnreadableError as error:
        reader.fault(table, sentence(str(error)))
        return None, {}
    return crystal, constants


def canonical_lattice(text: str) -> str:
    """A lattice's name in British spelling with hyphens."""
    return _BLANK.sub("-", british(text.strip()))


def constants_of(crystal: Crystal) -> dict[str, Value]:
    """The free constants of a crystal by key, each once."""
    keys = [key for key in STRUCTURE if not (crystal.angles_tied and key in ("beta", "gamma"))]
    return {key: value for key in keys if isinstance(value := getattr(crystal, key), Value)}


def build_crystal(name: str, shape: CellShape, constants: Mapping[str, Value], sites: tuple[Site, ...]) -> Crystal:
    """A crystal from its free constants; those that the shape ties are filled in."""
    angles = {key: constants.get(key, fixed) for key, fixed in zip(ANGLES, shape.angles, strict=True)}
    if shape.angles_tied:
        angles |= {"beta": angles["alpha"], "gamma": angles["alpha"]}
    return Crystal(
        lattice=name,
        a=constants["a"],
        b=constants.get("b"),
        c=constants.get("c"),
        c_over_a=constants.get("c_over_a"),
        **angles,
        sites=sites,
        angles_tied=shape.angles_tied,
    )


def check_room(crystal: Crystal) -> None:
    """Raises UnreadableError where the angles cannot meet or two atoms overlap."""
    if not angles_close(*lengths_and_angles(crystal)[1]):
        raise UnreadableError(
            "the angles alpha, beta and gamma cannot meet in a corner; expected each to be less than the sum of the"
            " others, and all three less than 360° in sum"
        )
    if (ratio := elongation(crystal)) > LARGEST_RATIO:
        raise UnreadableError(
            f"the longest edge of the cell is {ratio:.4g} times the shortest edge or diagonal; expected at most"
            f" {LARGEST_RATIO} times. Check the cell constants and their units"
        )
    if clash := overlapping(crystal):
        one, other = (f"{site.element} at ({', '.join(f'{x:.4g}' for x in site.position)})" for site in clash)
        raise UnreadableError(f"{one} and {other} overlap; correct the positions, or occupancies that exceed 1 in sum")


def _from_cif(node: Scalar, table: Table, reader: Reader, folder: Path) -> Crystal | None:
    from sheetgen.records.cif import read_cif

    for key, entry in table.entries.items():
        if key != "cif":
            beside = f"{shown(entry.key.text)} stands beside 'cif', which says everything"
            reader.fault(entry.key.place, f"{beside}; keep one of them.")
    return read_cif(node, reader, folder)


def _cell(table: Table, reader: Reader) -> Cell | None:
    named, group = table.entries.get("lattice"), table.node("space_group")
    name = canonical_lattice(named.node.text) if named else None
    if group is not None:
        return _group_cell(group, name, table, reader)
    if name is None:
        message = (
            "structure has no lattice; expected 'lattice', 'space group' or 'cif'. Add 'lattice: fcc' or the like."
        )
        reader.fault(table, message)
        return None
    lattice = LATTICES[name]
    if name == "rhombohedral" and {"c", "c_over_a"} & table.entries.keys():
        lattice = Lattice("hexagonal", "R")
    return Cell(name, SHAPES[lattice.system], lattice)


def _group_cell(node: Scalar, name: str | None, table: Table, reader: Reader) -> Cell | None:
    try:
        group = find_space_group(node.text, rhombohedral_axes="alpha" in table.entries)
    except UnreadableError as error:
        reader.unreadable(node, "space group", error)
        return None
    if "atoms" not in table.entries:
        reader.fault(node, "a space group needs 'atoms', the asymmetric unit; add them.")
        return None
    if name and not _agree(name, group):
        reader.fault(
            table.node("lattice"),
            f"lattice '{name}' disagrees with the space group {group.hm}, whose lattice is"
            f" '{group_lattice_name(group)}'; correct one of them.",
        )
        return None
    lattice = Lattice(cell_system(group), group.centring_type())
    return Cell(name or group_lattice_name(group), cell_shape(group), lattice, group)


def _agree(name: str, group: gemmi.SpaceGroup) -> bool:
    """Whether a named lattice has the Bravais lattice of a space group, such as diamond and F d -3 m."""
    found = group_lattice_name(group)
    lattice, bravais = LATTICES[name], LATTICES[found]
    return name == found or (lattice.system, lattice.centring) == (bravais.system, bravais.centring)


def _constants(table: Table, cell: Cell, reader: Reader) -> dict[str, Value] | None:
    """The cell constants by key, held against what the lattice leaves free."""
    given = {key: table.entries[key] for key in STRUCTURE if key in table.entries}
    complete = True
    for key, entry in given.items():
        if key not in cell.shape.read:
            reader.fault(entry.key.place, f"the lattice '{cell.name}' fixes '{written_key(key)}'; remove it.")
            complete = False
    for group in cell.shape.groups:
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
        reader.remark(table, "hcp has neither c nor c/a; the ideal ratio c/a = √(8/3) is taken. Add 'c' or 'c/a'.")
    return values


def _one_of(group: tuple[str, ...], given: Mapping[str, Entry], table: Table, cell: Cell, reader: Reader) -> bool:
    """Whether one constant of a group is given, and one only."""
    found = [key for key in group if key in given]
    if len(found) == 1 or (not found and cell.name == "hcp" and "c" in group):
        return True
    names = list(map(written_key, group))
    if found:
        reader.fault(given[found[-1]].key.place, f"both {' and '.join(names)} are given; keep one of them.")
        return False
    example = f"'{names[0]}: {STRUCTURE[group[0]].example}'"
    reader.fault(table, f"the lattice '{cell.name}' needs {' or '.join(names)}; add {example} or the like.")
    return False


def _ideal_ratio(place: Place) -> Value:
    return Value(
        value=IDEAL_RATIO,
        standard_uncertainty=None,
        unit="1",
        si=IDEAL_RATIO,
        si_uncertainty=None,
        temperature=None,
        sources=(),
        recalled=False,
        note="ideal ratio of close-packed spheres, assumed",
        text="√(8/3)",
        place=place,
    )


def _sites(table: Table, cell: Cell, composition: Mapping[str, float], reader: Reader) -> tuple[Site, ...]:
    """Every site of the cell; none where a fault was logged."""
    atoms = table.node("atoms")
    try:
        basis = implied_basis(cell.lattice, composition) if atoms is None else listed_basis(atoms, reader)
        if not basis:
            return ()
        return expanded(basis, cell.group.operations()) if cell.group else centred(basis, cell.lattice)
    except UnreadableError as error:
        reader.unreadable(atoms or table, "atoms" if atoms else f"lattice '{cell.name}'", error)
        return ()
