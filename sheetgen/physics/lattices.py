"""Bases of a lattice: a reduced one, and every lattice vector within a radius."""

from __future__ import annotations

from itertools import product

import numpy as np

# A vector counts as shortened only where the gain exceeds rounding, so that ties end the reduction.
_GAIN = 1 - 1e-12


def reduction(basis: np.ndarray) -> np.ndarray:
    """Integer matrix T of determinant ±1 that makes the rows of T @ basis Minkowski-reduced, shortest first.

    In three dimensions the first row is then a shortest vector of the lattice. Greedy reduction after
    P. Q. Nguyen and D. Stehlé, ACM Transactions on Algorithms 5, 46 (2009).
    """
    basis = np.asarray(basis, float)
    transform = np.eye(3)
    while True:
        transform = transform[np.argsort(_lengths(transform @ basis), kind="stable")]
        transform[:2] = _reduce_pair(transform[:2], basis)
        before = _lengths(transform @ basis)
        transform[2] = _subtract_nearest(transform, basis)
        after = _lengths(transform @ basis)
        if after[2] >= before[1] * _GAIN:
            return transform.round()


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
    bounds = np.floor(radius * _lengths(np.linalg.inv(reduced).T) + 1e-9).astype(int)
    coefficients = box(bounds)
    lengths = _lengths(coefficients @ reduced)
    inside = np.flatnonzero(lengths <= radius * (1 + 1e-12))
    inside = inside[np.argsort(lengths[inside], kind="stable")]
    return coefficients[inside] @ transform


def box(bounds: np.ndarray) -> np.ndarray:
    """Every integer triple (M, 3) with |n_i| ≤ bounds_i."""
    axes = [np.arange(-bound, bound + 1.0) for bound in bounds]
    return np.stack(np.meshgrid(*axes, indexing="ij"), axis=-1).reshape(-1, 3)


def _lengths(vectors: np.ndarray) -> np.ndarray:
    return np.linalg.norm(vectors, axis=-1)


def _reduce_pair(pair: np.ndarray, basis: np.ndarray) -> np.ndarray:
    """Lagrange's reduction of two vectors given by their coefficients."""
    short, long = pair
    while True:
        step = np.round((short @ basis) @ (long @ basis) / ((short @ basis) @ (short @ basis)))
        long = long - step * short
        if _lengths(long @ basis) >= _lengths(short @ basis) * _GAIN:
            return np.array([short, long])
        short, long = long, short


def _subtract_nearest(transform: np.ndarray, basis: np.ndarray) -> np.ndarray:
    """The third vector less the vector nearest to it in the reduced lattice of the first two."""
    plane, third = transform[:2] @ basis, transform[2] @ basis
    centre = np.round(np.linalg.solve(plane @ plane.T, plane @ third))
    candidates = [transform[2] - (centre + shift) @ transform[:2] for shift in product((0, -1, 1), repeat=2)]
    lengths = [_lengths(candidate @ basis) for candidate in candidates]
    best = int(np.argmin(lengths))
    return candidates[0] if lengths[best] >= lengths[0] * _GAIN else candidates[best]
