"""Lattice points in spheres and circles against the On-Line Encyclopedia of Integer Sequences."""

from __future__ import annotations

import numpy as np
import pytest

from sheetgen.physics.counting import _octant_counts, periodic_points

# OEIS A000605: points of norm ≤ n in the cubic lattice.
A000605 = {0: 1, 1: 7, 2: 33, 4: 257, 9: 3071, 10: 4169, 20: 33401, 30: 113081, 37: 212095}
# OEIS A117609: points with x² + y² + z² ≤ n.
A117609 = {
    3: 27, 4: 33, 6: 81, 7: 81, 8: 93, 10: 147, 11: 171, 13: 203, 14: 251, 17: 305, 18: 341, 19: 365, 20: 389
}  # fmt: skip
# OEIS A000328: points of norm ≤ n in the square lattice.
A000328 = {1: 5, 2: 13, 3: 29, 4: 49, 5: 81, 7: 149, 8: 197}


@pytest.mark.parametrize("radius, points", A000605.items())
def test_points_in_a_sphere(radius, points):
    assert periodic_points(float(radius)) == points


@pytest.mark.parametrize("square, points", A117609.items())
def test_points_up_to_a_squared_radius(square, points):
    assert periodic_points(np.sqrt(square)) == points


@pytest.mark.parametrize("radius, points", A000328.items())
def test_points_in_a_circle(radius, points):
    """The plane's share of the counts: four quarters, two axes, the centre."""
    _, quarter = _octant_counts(np.array([radius**2]))
    assert 4 * quarter[0] + 4 * radius + 1 == points
