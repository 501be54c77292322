"""Space groups, by the crystallographic library: finding one, its operations, and what its system ties."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from typing import TYPE_CHECKING

import numpy as np

from sheetgen.records.cells import MAXIMUM_SITES, combined, distinct, merged, snapped
from sheetgen.records.lattices import SHAPES, CellShape, lattice_name
from sheetgen.records.model import Site
from sheetgen.records.unreadable import UnreadableError, shown

if TYPE_CHECKING:
    import gemmi


def find_space_group(text: str, rhombohedral_axes: bool = False) -> gemmi.SpaceGroup:
    """The space group of a Hermann–Mauguin or Hall symbol, or a number from 1 to 230.

    A rhombohedral group is taken on hexagonal axes unless `rhombohedral_axes`. Raises UnreadableError.
    """
    import gemmi

    symbol = text.strip()
    axes = "R" if rhombohedral_axes else "H"
    if _NUMBER.fullmatch(symbol) and 1 <= float(symbol) <= 230:
        symbol = gemmi.find_spacegroup_by_number(int(float(symbol))).hm
    if found := gemmi.find_spacegroup_by_name(symbol, prefer=axes) or _by_hall_symbol(symbol):
        return found
    expected = "expected a symbol such as 'Fm-3m' or a number from 1 to 230"
    raise UnreadableError(f"{shown(text)} is no space group; {expected}")


_NUMBER = re.compile(r"[0-9]{1,3}(?:\.0)?")


def _by_hall_symbol(symbol: str) -> gemmi.SpaceGroup | None:
    import gemmi

    try:
        return gemmi.find_spacegroup_by_ops(gemmi.symops_from_hall(symbol))
    except (RuntimeError, ValueError):
        return None


def cell_system(group: gemmi.SpaceGroup) -> str:
    """The system whose cell shape the group's axes have; a trigonal group counts by its axes."""
    system = group.crystal_system_str()
    if system == "trigonal":
        return "rhombohedral" if group.ext == "R" else "hexagonal"
    return system


def cell_shape(group: gemmi.SpaceGroup) -> CellShape:
    """Which cell constants the group leaves free."""
    system = cell_system(group)
    axis = group.monoclinic_unique_axis() if system == "monoclinic" else "b"
    if axis in "b\0":
        return SHAPES[system]
    angle = {"a": "alpha", "c": "gamma"}[axis]
    free = tuple(None if name == angle else 90.0 for name in ("alpha", "beta", "gamma"))
    return CellShape(("a", "b", angle), (("c", "c_over_a"),), free)


def group_lattice_name(group: gemmi.SpaceGroup) -> str:
    """The name of the group's Bravais lattice; on rhombohedral axes the cell itself is primitive."""
    system = cell_system(group)
    return "rhombohedral" if system == "rhombohedral" else lattice_name(system, group.centring_type())


def expanded(atoms: Sequence[Site], operations: Iterable[gemmi.Op]) -> tuple[Site, ...]:
    """Every site of the cell that the atoms of the asymmetric unit stand for. Raises UnreadableError if too many."""
    import gemmi

    operations = list(operations)
    turns = np.array([operation.rot for operation in operations]) / gemmi.Op.DEN
    shifts = np.array([operation.tran for operation in operations]) / gemmi.Op.DEN
    sites: list[Site] = []
    for atom in combined(atoms):
        images = distinct(snapped(turns @ np.array(atom.position) + shifts))
        sites += [Site(atom.element, tuple(image), atom.occupancy) for image in images.tolist()]
        if len(sites) > MAXIMUM_SITES:
            raise UnreadableError(f"the cell holds more than {MAXIMUM_SITES} sites; expected a smaller cell")
    return merged(sites)
