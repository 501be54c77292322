"""Everything about Brillouin zones in one place, and the bands of free electrons in an empty lattice."""

from __future__ import annotations

import numpy as np

from sheetgen.physics.bragg_planes import zone_occupation
from sheetgen.physics.lattices import vectors_within
from sheetgen.physics.polyhedra import Polyhedron, zone_polyhedron
from sheetgen.physics.zone_paths import Path, special_points, standard_path

__all__ = [
    "Path",
    "Polyhedron",
    "empty_lattice_bands",
    "special_points",
    "standard_path",
    "zone_occupation",
    "zone_polyhedron",
]

HBAR = 6.62607015e-34 / (2 * np.pi)  # J s, exact in the SI


def empty_lattice_bands(points: np.ndarray, basis: np.ndarray, mass: float, count: int) -> np.ndarray:
    """The lowest `count` energies ħ²|k+G|²/2m (P, count) in J, ascending, at wavevectors (P, 3).

    Rows of basis generate the G. Complete: every G that could give one of these energies is looked at.
    """
    points, basis = np.asarray(points, float), np.asarray(basis, float)
    farthest = np.linalg.norm(points, axis=1).max()
    radius = farthest + np.cbrt(count * abs(np.linalg.det(basis)))
    while True:
        vectors = vectors_within(basis, radius) @ basis
        if len(vectors) >= count:
            squares = np.sort(((points[:, None] + vectors) ** 2).sum(axis=-1), axis=1)[:, :count]
            if np.sqrt(squares[:, -1].max()) + farthest <= radius:
                return HBAR**2 * squares / (2 * mass)
        radius *= 1.3
