"""What the atomic positions alone decide (counts, nearest vectors, Miller indices), as arrays over materials.

Lengths are left to the quantities, which follow the cell constants and their uncertainties.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from math import nan, radians

import numpy as np

from sheetgen.physics import crystals
from sheetgen.records import Crystal, Record, Value, atomic_number, atomic_weight

SHELLS = 3
SAME_PLACE = 1e-3  # fraction of a cell constant

STRUCTURE_INPUTS = {
    "atoms_in_cell": "a crystal structure",
    "neighbour_vector": "a crystal structure",
    "neighbour_count": "a crystal structure",
    "shells": "a crystal structure",
    "primitive_basis": "a crystal structure",
    "zone_face_indices": "a crystal structure",
    "diffracting_face_indices": "a crystal structure",
    "cell_mass": "a standard atomic weight for each element",
}

# Lengths among the facts, which move with the constants of the cell; the others are counts and indices.
OF_THE_CELL = ("shells",)
CELL_CONSTANTS = tuple(f"structure.{name}" for name in ("a", "b", "c", "c_over_a", "alpha", "beta", "gamma"))


@dataclass(frozen=True)
class StructureFacts:
    """What one crystal structure fixes; vectors are fractions of the conventional cell or Miller indices."""

    atoms_in_cell: float
    neighbour_vector: np.ndarray
    neighbour_count: float
    shells: np.ndarray
    primitive_basis: np.ndarray
    zone_face_indices: np.ndarray
    diffracting_face_indices: np.ndarray
    cell_mass: float


NO_STRUCTURE = StructureFacts(
    nan,
    np.full(3, nan),
    nan,
    np.full((SHELLS, 2), nan),
    np.full((3, 3), nan),
    np.full(3, nan),
    np.full(3, nan),
    nan,
)


def structure_arrays(records: Sequence[Record]) -> dict[str, np.ndarray]:
    """Arrays of shape (1, N, 1) for counts, with the vectors' own axes behind; NaN rows without a structure."""
    facts = [NO_STRUCTURE if record.crystal is None else structure_facts(record.crystal) for record in records]
    return {
        name: np.array([getattr(fact, name) for fact in facts], dtype=float).reshape(
            1, len(facts), 1, *np.shape(getattr(NO_STRUCTURE, name))
        )
        for name in STRUCTURE_INPUTS
    }


def nominal_cell(crystal: Crystal) -> np.ndarray:
    """Rows a, b, c of the conventional cell at the stated cell constants, shape (3, 3), in m."""
    a = crystal.a.si
    b = a if crystal.b is None else crystal.b.si
    c = crystal.c.si if crystal.c is not None else a * (1.0 if crystal.c_over_a is None else crystal.c_over_a.si)
    stated = (crystal.alpha,) * 3 if crystal.angles_tied else (crystal.alpha, crystal.beta, crystal.gamma)
    angles = [angle.si if isinstance(angle, Value) else radians(angle) for angle in stated]
    return crystals.cell_matrix(np.array([a, b, c]), np.array(angles))


def structure_facts(crystal: Crystal) -> StructureFacts:
    """The facts of one structure, at the nominal cell constants."""
    sites = tuple((site.element, *site.position, site.occupancy) for site in crystal.sites)
    return _facts(sites, tuple(map(float, nominal_cell(crystal).ravel())))


@lru_cache(maxsize=4096)
def _facts(sites: tuple[tuple, ...], cell_numbers: tuple[float, ...]) -> StructureFacts:
    cell = np.array(cell_numbers).reshape(3, 3)
    shared = _by_position(sites)
    positions = np.array([group[0][1:4] for group in shared])
    occupancies = np.array([sum(site[4] for site in group) for group in shared])
    weights = np.array([sum(site[4] * atomic_number(site[0]) for site in group) for group in shared])
    species = [tuple(sorted((site[0], round(site[4], 6)) for site in group)) for group in shared]
    primitive = crystals.primitive_lattice(positions, species)
    shells = crystals.neighbour_shells(cell, positions, occupancies, shells=SHELLS)
    masses = [atomic_weight(site[0]) for site in sites]
    fractions = np.array([site[4] for site in sites])
    return StructureFacts(
        atoms_in_cell=float(occupancies.sum()),
        neighbour_vector=shells.nearest,
        neighbour_count=float(shells.coordination),
        shells=np.column_stack([shells.distances, shells.counts]),
        primitive_basis=primitive,
        zone_face_indices=crystals.nearest_zone_face(cell, primitive),
        diffracting_face_indices=crystals.nearest_diffracting_face(cell, primitive, positions, weights),
        cell_mass=nan if None in masses else float(fractions @ np.array(masses, dtype=float)),
    )


def _by_position(sites: tuple[tuple, ...]) -> list[list[tuple]]:
    """Sites grouped by where they are: an alloy puts several elements on one."""
    groups: list[list[tuple]] = []
    for site in sites:
        for group in groups:
            apart = np.subtract(site[1:4], group[0][1:4])
            if np.all(np.abs(apart - np.round(apart)) < SAME_PLACE):
                group.append(site)
                break
        else:
            groups.append([site])
    return groups
