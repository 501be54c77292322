"""Geometry that reading a structure needs: ideal fractions, coincident sites, overlaps, the nearest neighbour."""

from __future__ import annotations

import math
from bisect import bisect
from collections.abc import Iterable, Sequence
from itertools import product

from sheetgen.records.model import Crystal, Site, Value

# A position this near to a simple fraction is that fraction: printed tables round 1/3 to 0.333.
FRACTION_TOLERANCE = 1e-3
DENOMINATORS = (1, 2, 3, 4, 5, 6, 8, 12)
OVERLAP_DISTANCE = 0.5e-10
MAXIMUM_SITES = 1000

_FRACTIONS = sorted({numerator / below for below in DENOMINATORS for numerator in range(below + 1)})


def snapped(fraction: float) -> float:
    """The fraction in [0, 1), replaced by the simple fraction that it stands for where one is near."""
    inside = fraction % 1.0
    index = bisect(_FRACTIONS, inside)
    for near in _FRACTIONS[max(0, index - 1) : index + 1]:
        if abs(near - inside) <= FRACTION_TOLERANCE:
            return near % 1.0
    return inside


def merged_sites(sites: Iterable[Site]) -> tuple[Site, ...]:
    """The sites with those of one element at one position counted once, in the given order."""
    kept: list[Site] = []
    by_element: dict[str, list[tuple[float, float, float]]] = {}
    for site in sites:
        positions = by_element.setdefault(site.element, [])
        if not _near_any(site.position, positions):
            positions.append(site.position)
            kept.append(site)
    return tuple(kept)


def _near_any(position: Sequence[float], others: list[tuple[float, float, float]]) -> bool:
    return any(
        all(abs(_wrapped(mine - its)) <= FRACTION_TOLERANCE for mine, its in zip(position, other, strict=True))
        for other in others
    )


def _wrapped(difference: float) -> float:
    return difference - round(difference)


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
    """Whether three angles (radians) can meet in the corner of a cell of positive volume."""
    cosines = [math.cos(angle) for angle in (alpha, beta, gamma)]
    return 1 - sum(cosine**2 for cosine in cosines) + 2 * math.prod(cosines) > 1e-6


def metric(crystal: Crystal) -> list[list[float]]:
    """The metric tensor of the cell in m²: a distance squared is d·G·d for a difference d of fractions."""
    edges, (alpha, beta, gamma) = lengths_and_angles(crystal)
    cosines = [[1.0, math.cos(gamma), math.cos(beta)], [math.cos(gamma), 1.0, math.cos(alpha)],
               [math.cos(beta), math.cos(alpha), 1.0]]  # fmt: skip
    return [[edges[i] * edges[j] * cosines[i][j] for j in range(3)] for i in range(3)]


def overlapping(crystal: Crystal) -> tuple[Site, Site] | None:
    """Two sites that cannot both be filled as stated: nearer than OVERLAP_DISTANCE, more than one atom in sum."""
    import numpy as np

    positions = np.array([site.position for site in crystal.sites])
    occupancies = np.array([site.occupancy for site in crystal.sites])
    tensor = np.array(metric(crystal))
    difference = positions[:, None] - positions
    difference -= np.round(difference)
    near = np.sum(difference @ tensor * difference, axis=-1) < OVERLAP_DISTANCE**2
    full = occupancies[:, None] + occupancies > 1.001
    clashes = np.argwhere(np.triu(near & full, k=1))
    return tuple(crystal.sites[index] for index in clashes[0]) if clashes.size else None


def nearest_neighbour_distance(crystal: Crystal) -> float:
    """The shortest distance between two sites in metres, periodic images included."""
    import numpy as np

    positions = np.array([site.position for site in crystal.sites])
    tensor = np.array(metric(crystal))
    images = np.array(list(product((-1, 0, 1), repeat=3)), dtype=float)
    shortest = np.inf
    for position in positions:
        difference = positions - position
        difference = (difference - np.round(difference))[:, None, :] + images
        squares = np.sum(difference @ tensor * difference, axis=-1)
        apart = squares[squares > OVERLAP_DISTANCE**2]
        shortest = min(shortest, apart.min(initial=np.inf))
    return math.sqrt(shortest)
