"""Crystals as points and lattices: cells, neighbours, the primitive lattice, the nearest zone faces."""

from __future__ import annotations

from collections import Counter
from collections.abc import Hashable, Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from sheetgen.physics.lattices import box, reduction, vectors_within

# A coordinate this near to a fraction with one of these denominators is meant to be that fraction.
SNAP = 1e-3
DENOMINATORS = (1, 2, 3, 4, 5, 6, 8, 12)
_FRACTIONS = np.unique([n / d for d in DENOMINATORS for n in range(d)])
_ENTRIES = 200_000  # vectors between sites held at once
# A reflection is missing where |S|² is at most this part of (ΣZ)².
MISSING_REFLECTION = 1e-9


@dataclass(frozen=True)
class NeighbourShells:
    """The first shells of neighbours, named by their shortest distance.

    `nearest` is one shortest vector between sites, in fractions of the cell: nearest @ cell has length
    distances[0] for a strained cell too, as long as the strain does not change which pair is nearest.
    """

    distances: np.ndarray
    counts: np.ndarray
    nearest: np.ndarray

    @property
    def coordination(self) -> float:
        """Mean number of nearest neighbours."""
        return float(self.counts[0])


def cell_matrix(lengths: np.ndarray, angles: np.ndarray) -> np.ndarray:
    """Rows a, b, c (..., 3, 3) from their lengths and the angles alpha, beta, gamma in radians.

    a lies along x and b in the xy plane. Angles that close no cell give NaN.
    """
    lengths, angles = np.broadcast_arrays(np.asarray(lengths, float), np.asarray(angles, float))
    cosines = np.cos(angles)
    cosines = np.where(np.abs(cosines) < 1e-15, 0.0, cosines)  # the cosine of a right angle is zero
    alpha, beta, gamma = np.moveaxis(cosines, -1, 0)
    with np.errstate(invalid="ignore", divide="ignore"):
        sine = np.sqrt(1 - gamma**2)
        height = np.sqrt(1 - alpha**2 - beta**2 - gamma**2 + 2 * alpha * beta * gamma) / sine
        zero, one = np.zeros_like(gamma), np.ones_like(gamma)
        rows = [(one, zero, zero), (gamma, sine, zero), (beta, (alpha - beta * gamma) / sine, height)]
    directions = np.stack([np.stack(row, axis=-1) for row in rows], axis=-2)
    return lengths[..., None] * directions


def reciprocal_basis(cell: np.ndarray) -> np.ndarray:
    """Rows of the reciprocal basis, 2π included."""
    return 2 * np.pi * np.swapaxes(np.linalg.inv(cell), -1, -2)


def ideal_fractions(positions: np.ndarray) -> np.ndarray:
    """The positions modulo 1, with every coordinate that is nearly a simple fraction made that fraction."""
    positions = np.asarray(positions, float) % 1.0
    fractions = np.append(_FRACTIONS, 1.0)
    nearest = fractions[np.abs(positions[..., None] - fractions).argmin(axis=-1)]
    return np.where(np.abs(positions - nearest) <= SNAP, nearest, positions) % 1.0


def merge_coincident_sites(positions: np.ndarray, occupancies: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Places (P, 3) and their total occupancies: elements that share a place make one site of it."""
    positions = ideal_fractions(positions)
    places: list[int] = []
    totals: list[float] = []
    for index, (position, occupancy) in enumerate(zip(positions, occupancies, strict=True)):
        offsets = _wrapped(positions[places] - position)
        same = np.flatnonzero(np.all(np.abs(offsets) <= SNAP, axis=1))
        if same.size:
            totals[same[0]] += float(occupancy)
        else:
            places.append(index)
            totals.append(float(occupancy))
    return positions[places], np.array(totals)


def neighbour_shells(
    cell: np.ndarray, positions: np.ndarray, occupancies: np.ndarray, shells: int = 3, tolerance: float = 0.01
) -> NeighbourShells:
    """The first shells of neighbours of the sites, periodic images included.

    A shell holds every distance up to (1 + tolerance) times the shortest in it. Each neighbouring site counts
    as one; the mean over the central sites is weighted by their occupancy. Sites of mixed occupancy are one.
    """
    places, weights = merge_coincident_sites(positions, occupancies)
    transform = reduction(cell)
    reduced = transform @ cell
    places = places @ np.linalg.inv(transform)
    # The multiples of the shortest lattice vector are distances too, so the search ends by shells·|b₁|.
    radius = 2.05 * np.cbrt(abs(np.linalg.det(reduced)) / len(places))
    while True:
        vectors, distances, counts = _pairs_within(reduced, places, weights, radius)
        starts = _shell_starts(distances, shells, tolerance)
        if len(starts) == shells and distances[starts[-1]] * (1 + tolerance) < radius:
            break
        radius *= 1.4
    ends = [np.searchsorted(distances, distances[start] * (1 + tolerance) * (1 + 1e-12)) for start in starts]
    totals = [counts[start:end].sum() / weights.sum() for start, end in zip(starts, ends, strict=True)]
    return NeighbourShells(distances[starts], np.array(totals), vectors[0] @ transform)


def primitive_lattice(positions: np.ndarray, species: Sequence[Hashable]) -> np.ndarray:
    """Rows of a basis of the largest translation group of the atoms, in fractions of the conventional cell.

    A species is whatever tells two sites apart: element and occupancy. The rows are in Hermite normal form.
    """
    positions = ideal_fractions(positions)
    groups = {kind: positions[[other == kind for other in species]] for kind in dict.fromkeys(species)}
    rarest = min(Counter(species).items(), key=lambda item: item[1])[0]
    candidates = groups[rarest] - groups[rarest][0]
    tolerance = SNAP
    while True:
        refined = [_translation(groups.values(), step, tolerance) for step in candidates]
        kept = np.array([step for step in refined if step is not None])
        # In a group of order N every element is a multiple of 1/N: that makes the translations exact.
        order = len(kept)
        steps = np.round(kept * order).astype(int)
        basis = _hermite_rows(np.vstack([steps, order * np.eye(3, dtype=int)]))
        exact = np.abs(kept - steps / order).max() <= tolerance
        if exact and round(abs(np.linalg.det(basis))) == order**2:
            return basis / order
        tolerance /= 10  # sites that nearly repeat form no group: ask for a closer match


def nearest_zone_face(cell: np.ndarray, primitive: np.ndarray) -> np.ndarray:
    """Miller indices (3,), on the conventional axes, of a shortest vector of the reciprocal lattice."""
    return _shells_of_indices(cell, primitive, lambda indices: np.ones(len(indices), bool))


def nearest_diffracting_face(
    cell: np.ndarray, primitive: np.ndarray, positions: np.ndarray, weights: np.ndarray
) -> np.ndarray:
    """Miller indices (3,) of a shortest reciprocal vector whose structure factor does not vanish.

    The weights are atomic number times occupancy. Raises ValueError where the weights scatter nothing.
    """
    positions, weights = ideal_fractions(positions), np.asarray(weights, float)
    if not weights.sum() > 0:
        raise ValueError(f"the weights of the scatterers add up to {weights.sum()}; expected a positive sum")

    def diffracts(indices: np.ndarray) -> np.ndarray:
        factor = np.abs(structure_factor(indices, positions, weights))
        return factor**2 > MISSING_REFLECTION * weights.sum() ** 2

    return _shells_of_indices(cell, primitive, diffracts)


def structure_factor(indices: np.ndarray, positions: np.ndarray, weights: np.ndarray) -> np.ndarray:
    """Σ w exp(2πi h·x) over the sites, for Miller indices (..., 3)."""
    return np.exp(2j * np.pi * (np.asarray(indices) @ np.asarray(positions).T)) @ weights


def half_reciprocal_length(cell: np.ndarray, indices: np.ndarray) -> np.ndarray:
    """Distance of the zone face with these Miller indices from the zone centre, in 1/m."""
    vector = (np.asarray(indices, float)[..., None, :] @ reciprocal_basis(np.asarray(cell, float)))[..., 0, :]
    return np.linalg.norm(vector, axis=-1) / 2


def _wrapped(fractions: np.ndarray) -> np.ndarray:
    return fractions - np.round(fractions)


def _pairs_within(cell, places, weights, radius):
    """Vectors (fractions), distances and weights of the pairs of sites up to radius apart, by distance."""
    images = box(radius * np.linalg.norm(np.linalg.inv(cell), axis=0) + 0.5 + 1e-9)
    found = []
    at_once = max(_ENTRIES // (len(places) * len(images)), 1)
    for start in range(0, len(places), at_once):
        centres = places[start : start + at_once, None]
        steps = _wrapped(places - centres)[:, :, None] + images
        lengths = np.linalg.norm(steps @ cell, axis=-1)
        centre, _, _ = near = np.nonzero((lengths <= radius) & (lengths > 0))
        found.append((steps[near], lengths[near], weights[start + centre]))
    vectors, distances, counts = (np.concatenate(part) for part in zip(*found, strict=True))
    order = np.argsort(distances, kind="stable")
    return vectors[order], distances[order], counts[order]


def _shell_starts(distances: np.ndarray, shells: int, tolerance: float) -> list[int]:
    """Indices at which the shells begin in sorted distances."""
    starts, start = [], 0
    while start < len(distances) and len(starts) < shells:
        starts.append(start)
        start = int(np.searchsorted(distances, distances[start] * (1 + tolerance) * (1 + 1e-12)))
    return starts


def _translation(groups: Iterable[np.ndarray], step: np.ndarray, tolerance: float) -> np.ndarray | None:
    """The step, corrected by the mean misfit, if it takes every place of each group to one of the same group.

    Over the cycles of a translation the misfits of single places add up to zero, so the mean makes it exact.
    """
    misfits = []
    for places in groups:
        for place in places:
            offsets = _wrapped(places - place - step)
            nearest = offsets[np.abs(offsets).max(axis=1).argmin()]
            if np.abs(nearest).max() > 4 * tolerance:
                return None
            misfits.append(nearest)
    mean = np.mean(misfits, axis=0)
    return step + mean if np.abs(misfits - mean).max() <= tolerance else None


def _hermite_rows(rows: np.ndarray) -> np.ndarray:
    """Upper triangular integer basis (3, 3) of the lattice that integer rows span."""
    rows = [[int(entry) for entry in row] for row in rows]
    basis = []
    for column in range(3):
        pivot = [0, 0, 0]
        for number, row in enumerate(rows):
            while row[column]:
                quotient = pivot[column] // row[column]
                pivot, row = row, [p - quotient * r for p, r in zip(pivot, row, strict=True)]
            rows[number] = row
        basis.append([-entry for entry in pivot] if pivot[column] < 0 else pivot)
    return np.array(basis)


def _shells_of_indices(cell, primitive, wanted) -> np.ndarray:
    """Indices of a shortest wanted reciprocal vector; of equally short ones the first in descending order."""
    to_conventional = np.linalg.inv(primitive).T
    basis = reciprocal_basis(np.asarray(primitive) @ cell)
    radius = 1.01 * np.linalg.norm((reduction(basis) @ basis)[0])
    while True:
        indices = np.round(vectors_within(basis, radius)[1:] @ to_conventional)
        indices = indices[wanted(indices)]
        if len(indices):
            break
        radius *= 1.3
    lengths = half_reciprocal_length(cell, indices)
    equal = indices[lengths <= lengths.min() * (1 + 1e-9)]
    return np.array(max(map(tuple, equal + 0.0)))
