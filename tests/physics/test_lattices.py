"""Reduced bases and complete searches, also for cells as skewed and flat as they come."""

from __future__ import annotations

from itertools import product

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from sheetgen.physics.lattices import reduced_basis, reduction, vectors_within

entries = st.floats(-5, 5).map(lambda x: round(x, 3))
bases = st.lists(entries, min_size=9, max_size=9).map(lambda x: np.array(x).reshape(3, 3))
skews = st.lists(st.integers(-40, 40), min_size=3, max_size=3)


def skewed(basis, steps):
    """Another basis of the same lattice."""
    upper = np.array([[1, steps[0], steps[1]], [0, 1, steps[2]], [0, 0, 1]])
    lower = np.array([[1, 0, 0], [steps[2], 1, 0], [steps[1], steps[0], 1]])
    return upper @ lower @ basis


@given(basis=bases, steps=skews)
def test_reduction_keeps_the_lattice_and_is_minkowski_reduced(basis, steps):
    assume(abs(np.linalg.det(basis)) > 0.05)
    transform = reduction(skewed(basis, steps))
    assert round(abs(np.linalg.det(transform))) == 1 and np.array_equal(transform, np.round(transform))
    reduced = transform @ skewed(basis, steps)
    lengths = np.linalg.norm(reduced, axis=1)
    assert np.all(np.diff(lengths) >= -1e-9)
    for signs in product((-1, 0, 1), repeat=2):
        assert np.linalg.norm(reduced[2] + np.array(signs) @ reduced[:2]) >= lengths[2] * (1 - 1e-9)
    assert np.linalg.norm(reduced[1] + reduced[0]) >= lengths[1] * (1 - 1e-9)
    assert np.linalg.norm(reduced[1] - reduced[0]) >= lengths[1] * (1 - 1e-9)


@given(basis=bases, steps=skews)
def test_every_vector_within_a_radius_is_found_once_whatever_the_basis(basis, steps):
    assume(abs(np.linalg.det(basis)) > 0.5)
    radius = 3.98716253  # as good as no vector of a lattice with three decimals has this length
    bound = int(np.ceil(radius * np.linalg.norm(np.linalg.inv(basis), axis=0).max()))
    assume(bound <= 8)
    grid = np.array(list(product(range(-bound, bound + 1), repeat=3)))
    expected = np.sort(np.linalg.norm(grid @ basis, axis=1))
    found = vectors_within(skewed(basis, steps), radius)
    lengths = np.linalg.norm(found @ skewed(basis, steps), axis=1)
    assert len({tuple(row) for row in found.astype(int)}) == len(found)
    assert np.array_equal(found, np.round(found)) and not found[0].any()
    assert lengths == pytest.approx(expected[expected <= radius * (1 + 1e-12)], abs=1e-6)


@pytest.mark.parametrize("flatness", [1.0, 1e-2, 1e-4])
def test_shortest_vector_of_a_flat_and_skewed_cell(flatness):
    basis = skewed(np.diag([1.0, 1.3, flatness]), [37, -25, 18])
    assert np.linalg.norm(reduced_basis(basis), axis=1) == pytest.approx(
        sorted([1.0, 1.3, flatness]), rel=1e-9
    )
