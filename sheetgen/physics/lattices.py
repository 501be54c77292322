"""Bases of a lattice: a reduced one, and every lattice vector within a radius."""

from __future__ import annotations

from functools import lru_cache
from itertools import product

import numpy as np

# A vector counts as shortened only where the gain exceeds rounding, so that ties end the reduction.
_GAIN = 1 - 1e-12


def reduction(basis: np.ndarray) -> np.ndarray:
    """Integer matrix T of determinant ±1 that makes the rows of T @ basis Minkowski-reduced, shortest first.

    In three dimensions the first row is then a shortest vector of the lattice. Greedy reduction after
    P. Q. Nguyen and D. Stehlé, ACM Transactions on Algorithms 5, 46 (2009).
    """
    members = [
        _Member(row, unit) for row, unit in zip(np.asarray(basis, float).tolist(), _UNITS, strict=True)
    ]
    while True:
        members.sort(key=lambda member: member.square)
        members[:2] = _reduce_pair(*members[:2])
        third = _nearest_removed(*members)
        if third.square >= members[1].square * _GAIN:
            return np.array([members[0].coefficients, members[1].coefficients, third.coefficients], float)
        members[2] = third


def reduced_basis(basis: np.ndarray) -> np.ndarray:
    """The rows of a Minkowski-reduced basis of the same lattice, shortest first."""
    return reduction(basis) @ basis


def vectors_within(basis: np.ndarray, radius: float) -> np.ndarray:
    """Integer coefficients (M, 3) of every lattice vector no longer than radius, by length, zero first.

    Complete for any basis: the i-th coefficient of v is v·b*_i, so it cannot exceed |v||b*_i|. Reducing the
    basis first keeps the box that this bound spans small for skewed and flat cells too.
    """
    transform = reduction(basis)
    reduced = transform @ basis
    coefficients = box(radius * np.linalg.norm(np.linalg.inv(reduced), axis=0) + 1e-9)
    lengths = np.linalg.norm(coefficients @ reduced, axis=1)
    inside = np.flatnonzero(lengths <= radius * (1 + 1e-12))
    inside = inside[np.argsort(lengths[inside], kind="stable")]
    return coefficients[inside] @ transform


def box(bounds: np.ndarray) -> np.ndarray:
    """Every integer triple (M, 3) with |n_i| ≤ bounds_i. Do not write into it: boxes are shared."""
    return _box(*(int(bound) for bound in bounds))


@lru_cache(maxsize=64)
def _box(*bounds: int) -> np.ndarray:
    axes = [np.arange(-bound, bound + 1.0) for bound in bounds]
    return np.stack(np.meshgrid(*axes, indexing="ij"), axis=-1).reshape(-1, 3)


_UNITS = ((1, 0, 0), (0, 1, 0), (0, 0, 1))


class _Member:
    """A lattice vector with its coefficients; plain numbers, since arrays of three cost more than they save."""

    __slots__ = ("coefficients", "square", "vector")

    def __init__(self, vector, coefficients) -> None:
        self.vector, self.coefficients = vector, coefficients
        self.square = self.dot(self)

    def dot(self, other: _Member) -> float:
        (a, b, c), (x, y, z) = self.vector, other.vector
        return a * x + b * y + c * z

    def less(self, count: int, other: _Member) -> _Member:
        """This vector less so many times the other."""
        if not count:
            return self
        return _Member(
            [a - count * b for a, b in zip(self.vector, other.vector, strict=True)],
            [a - count * b for a, b in zip(self.coefficients, other.coefficients, strict=True)],
        )


def _reduce_pair(short: _Member, long: _Member) -> tuple[_Member, _Member]:
    """Lagrange's reduction of two vectors."""
    while True:
        long = long.less(round(short.dot(long) / short.square), short)
        if long.square >= short.square * _GAIN:
            return short, long
        short, long = long, short


def _nearest_removed(first: _Member, second: _Member, third: _Member) -> _Member:
    """The third vector less the vector nearest to it in the reduced lattice of the first two."""
    cross = first.dot(second)
    area = first.square * second.square - cross * cross
    one, two = first.dot(third), second.dot(third)
    centre = (
        round((second.square * one - cross * two) / area),
        round((first.square * two - cross * one) / area),
    )
    best = third.less(centre[0], first).less(centre[1], second)
    for shift in product((-1, 0, 1), repeat=2):
        candidate = third.less(centre[0] + shift[0], first).less(centre[1] + shift[1], second)
        if candidate.square < best.square * _GAIN:
            best = candidate
    return best
