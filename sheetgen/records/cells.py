"""Geometry that reading a structure needs: ideal fractions, coincident sites, overlaps, the nearest neighbour."""

from __future__ import annotations

import math
from collections.abc import Sequence
from itertools import product

import numpy as np

from sheetgen.records.model import Crystal, Site, Value

# A position this near to a simple fraction is that fraction: printed tables round 1/3 to 0.333.
FRACTION_TOLERANCE = 1e-3
DENOMINATORS = (1, 2, 3, 4, 5, 6, 8, 12)
OVERLAP_DISTANCE = 0.5e-10
# A needle or a sheet of a cell holds lattice points without number in a sphere as wide as it is long.
LARGEST_RATIO = 30
FLATTEST = 0.03  # volume of the cell over the product of its edges
MAXIMUM_SITES = 1000

_FRACTIONS = np.array(sorted({numerator / below for below in DENOMINATORS for numerator in range(below + 1)}))


def snapped(fractions: np.ndarray) -> np.ndarray:
    """Fractions of any shape, taken into [0, 1); those near a simple fraction are that fraction."""
    inside = np.mod(fractions, 1.0)
    above = np.clip(np.searchsorted(_FRACTIONS, inside), 1, len(_FRACTIONS) - 1)
    low, high = _FRACTIONS[above - 1], _FRACTIONS[above]
    near = np.where(inside - low < high - inside, low, high)
    return np.where(np.abs(near - inside) <= FRACTION_TOLERANCE, near, inside) % 1.0


def merged(sites: Sequence[Site]) -> tuple[Site, ...]:
    """The sites with those of one element at one position counted once, in the given order."""
    elements = np.array([site.element for site in sites])
    near = _coincident(np.array([site.position for site in sites]))
    first = (near & (elements[:, None] == elements)).argmax(axis=1)
    return tuple(site for index, site in enumerate(sites) if first[index] == index)


def combined(atoms: Sequence[Site]) -> list[Site]:
    """The atoms as listed, with the occupancies of one element at one listed position added, up to a full site.

    A mixed valence or an isotope is written so; a full atom listed twice still counts once.
    """
    found: list[Site] = []
    for atom in atoms:
        apart = [_wrapped(np.subtract(other.position, atom.position)) for other in found]
        near = [np.all(np.abs(step) <= FRACTION_TOLERANCE) for step in apart]
        same = [i for i, other in enumerate(found) if near[i] and other.element == atom.element]
        if same:
            other = found[same[0]]
            found[same[0]] = Site(other.element, other.position, min(other.occupancy + atom.occupancy, 1.0))
        else:
            found.append(atom)
    return found


def distinct(positions: np.ndarray) -> np.ndarray:
    """The rows of positions (N, 3) with coincident ones counted once."""
    return positions[_coincident(positions).argmax(axis=1) == np.arange(len(positions))]


def _coincident(positions: np.ndarray) -> np.ndarray:
    """Which pairs of positions (N, 3) are one point of the crystal, as (N, N) truth values."""
    return np.all(np.abs(_wrapped(positions[:, None] - positions)) <= FRACTION_TOLERANCE, axis=-1)


def _wrapped(difference: np.ndarray) -> np.ndarray:
    return difference - np.round(difference)


def lengths_and_angles(crystal: Crystal) -> tuple[tuple[float, float, float], tuple[float, float, float]]:
    """The six constants of the cell, in metres and radians."""
    a = crystal.a.si
    b = a if crystal.b is None else crystal.b.si
    c = a * crystal.c_over_a.si if crystal.c_over_a else a if crystal.c is None else crystal.c.si
    alpha, beta, gamma = (
        angle.si if isinstance(angle, Value) else math.radians(angle)
        for angle in (crystal.alpha, crystal.beta, crystal.gamma)
    )
    return (a, b, c), (alpha, beta, gamma)


def angles_close(alpha: float, beta: float, gamma: float) -> bool:
    """Whether three angles (radians) can meet in the corner of a cell with room inside it."""
    cosines = [math.cos(angle) for angle in (alpha, beta, gamma)]
    return 1 - sum(cosine**2 for cosine in cosines) + 2 * math.prod(cosines) > FLATTEST**2


def metric(crystal: Crystal) -> np.ndarray:
    """The metric tensor (3, 3) in m²: a difference d of fractions is sqrt(d·G·d) long."""
    lengths, (alpha, beta, gamma) = lengths_and_angles(crystal)
    cosines = np.eye(3)
    for (one, other), angle in {(1, 2): alpha, (0, 2): beta, (0, 1): gamma}.items():
        cosines[one, other] = cosines[other, one] = math.cos(angle)
    return np.outer(lengths, lengths) * cosines


def elongation(crystal: Crystal) -> float:
    """The longest edge of the cell over its shortest translation, the diagonals of cell and faces included."""
    steps = np.array([step for step in product((-1, 0, 1), repeat=3) if any(step)], dtype=float)
    tensor = metric(crystal)
    return math.sqrt(np.diagonal(tensor).max() / np.sum(steps @ tensor * steps, axis=-1).min())


def overlapping(crystal: Crystal) -> tuple[Site, Site] | None:
    """Two sites that cannot both be filled as stated: nearer than OVERLAP_DISTANCE, more than one atom in sum."""
    positions = np.array([site.position for site in crystal.sites])
    occupancies = np.array([site.occupancy for site in crystal.sites])
    difference = _wrapped(positions[:, None] - positions)
    near = np.sum(difference @ metric(crystal) * difference, axis=-1) < OVERLAP_DISTANCE**2
    full = occupancies[:, None] + occupancies > 1.001
    clashes = np.argwhere(np.triu(near & full, k=1))
    return tuple(crystal.sites[index] for index in clashes[0]) if clashes.size else None


def nearest_neighbour_distance(crystal: Crystal) -> float:
    """The shortest distance between two sites in metres, periodic images included.

    In a cell of more than 100 sites the neighbours of a site are in the cell or at once beside it: one image is enough.
    """
    positions = np.array([site.position for site in crystal.sites])
    tensor = metric(crystal)
    steps = (-1, 0, 1) if len(positions) <= 100 else (0,)
    images = np.array(list(product(steps, repeat=3)), dtype=float)
    shortest = np.inf
    for position in positions:
        difference = _wrapped(positions - position)[:, None, :] + images
        squares = np.sum(difference @ tensor * difference, axis=-1)
        shortest = squares[squares > OVERLAP_DISTANCE**2].min(initial=shortest)
    return math.sqrt(shortest)
