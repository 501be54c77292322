"""Exact numbers of states of a cube, as lattice points in a sphere, and the smooth terms beside them.

In a cube of edge L with hard walls the states up to k_F are the points n_i ≥ 1 with |n| ≤ k_F L/π; with
periodic boundaries they are all integer points with |n| ≤ k_F L/2π. Each stands for g states.
"""

from __future__ import annotations

from functools import lru_cache
from math import isqrt, pi, sqrt

import numpy as np

# A radius² this near below an integer counts as reaching it: E ≤ E_F includes the level at E_F.
INCLUSION = 1e-12
# Up to here counts come from one table that grows by need; beyond, each radius is counted by itself.
TABLE_RADIUS = 750
# Counting by itself takes a time that grows as the square of the radius; larger ones are not counted.
LARGEST_RADIUS = 20_000


def hard_wall_points(radius: np.ndarray) -> np.ndarray:
    """Number of points with integer coordinates n_i ≥ 1 and |n| ≤ radius; exact, as floats.

    NaN for NaN and beyond LARGEST_RADIUS.
    """
    return _count(radius, lambda limits: _octant_counts(limits)[0])


def periodic_points(radius: np.ndarray) -> np.ndarray:
    """Number of points with integer coordinates and |n| ≤ radius, the origin included; exact, as floats.

    NaN for NaN and beyond LARGEST_RADIUS.
    """

    def whole(limits: np.ndarray) -> np.ndarray:
        space, plane = _octant_counts(limits)
        # Each positive octant, quarter plane and half axis stands for 8, 4 and 2 equal ones.
        return 8 * space + 12 * plane + 6 * _square_roots(limits) + 1

    return _count(radius, whole)


def weyl_terms(radius: np.ndarray) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Volume, surface and edge terms of the number of hard-wall points, π r³/6, −3πr²/8 and 3r/4.

    Their sum over the first is 1 − (9π/4k_FL)(1 − 2/k_FL), r = k_FL/π.
    H. Weyl, Mathematische Annalen 71, 441 (1912).
    """
    radius = np.asarray(radius, float)
    return pi * radius**3 / 6, -3 * pi * radius**2 / 8, 3 * radius / 4


@lru_cache
def last_deficit_crossing(part: float = 0.01) -> int:
    """The radius² beyond which |1 − points/(π r³/6)| stays below the part; at most TABLE_RADIUS².

    The count is constant between integers r², so the deficit is greatest just below each integer m,
    1 − N(m − 1)/(π m^{3/2}/6), and drops at it. The crossing is the last m at which that exceeds the part;
    for 1 % it is 51218, so an edge of π√51218/k_F. The surface term, 9/4r, is 0.3 % at the end of the search
    and the count scatters about it by less than 0.01 %.
    """
    limits = np.arange(1, TABLE_RADIUS**2 + 1)
    counts = _octant_counts(limits - 1)[0]
    deficits = 1 - counts / (pi * limits**1.5 / 6)
    return int(limits[np.flatnonzero(deficits > part)[-1]])


def bulk_edge_product() -> float:
    """k_F L beyond which the exact hard-wall count stays within 1 % of the continuum, π√51218."""
    return pi * sqrt(last_deficit_crossing())


def _count(radius: np.ndarray, counts) -> np.ndarray:
    """Counts at the whole part of each radius², NaN where it is not counted."""
    radius = np.asarray(radius, float)
    result = np.full(radius.shape, np.nan)
    counted = (radius >= 0) & (radius <= LARGEST_RADIUS)
    limits, places = np.unique(np.floor(radius[counted] ** 2 * (1 + INCLUSION)), return_inverse=True)
    result[counted] = counts(limits.astype(np.int64))[places]
    return result[()]


def _octant_counts(limits: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Points with positive coordinates and a square sum up to each limit, in space and in the plane."""
    space, plane = np.empty(limits.shape, np.int64), np.empty(limits.shape, np.int64)
    tabulated = limits <= TABLE_RADIUS**2
    if tabulated.any():
        table = _TABLE.reaching(int(limits[tabulated].max()))
        space[tabulated], plane[tabulated] = table[0][limits[tabulated]], table[1][limits[tabulated]]
    for index in np.flatnonzero(~tabulated):
        space[index], plane[index] = _count_by_slices(int(limits[index]))
    return space, plane


class _Table:
    """Cumulative counts by square sum, grown geometrically to the largest limit asked for."""

    def __init__(self) -> None:
        self._counts = (np.zeros(1, np.int64), np.zeros(1, np.int64))

    def reaching(self, limit: int) -> tuple[np.ndarray, np.ndarray]:
        if limit >= len(self._counts[0]):
            self._counts = self._grown(min(max(2 * limit, 10_000), TABLE_RADIUS**2))
        return self._counts

    @staticmethod
    def _grown(limit: int) -> tuple[np.ndarray, np.ndarray]:
        squares = np.arange(1, isqrt(limit) + 1) ** 2
        sums = (squares[:, None] + squares).ravel()
        plane = np.bincount(sums[sums <= limit], minlength=limit + 1)
        space = np.zeros(limit + 1, np.int32)
        narrow = plane.astype(np.int32)
        for square in squares:
            space[square:] += narrow[: limit + 1 - square]
        return np.cumsum(space, dtype=np.int64), np.cumsum(plane)


_TABLE = _Table()


def _square_roots(values: np.ndarray) -> np.ndarray:
    """Whole parts of square roots; exact, since the values stay far below 2⁵²."""
    return np.floor(np.sqrt(values)).astype(np.int64)


@lru_cache(maxsize=256)
def _count_by_slices(limit: int) -> tuple[int, int]:
    """The same two counts for one limit, from the columns over every point of a quarter plane."""
    squares = np.arange(1, isqrt(limit) + 1, dtype=np.int64) ** 2
    space = 0
    for square in squares:
        rest = limit - square - squares
        space += int(_square_roots(rest[rest > 0]).sum())
    return space, int(_square_roots(limit - squares).sum())
