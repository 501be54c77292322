"""Numbers of states against counting one by one, and the smooth terms beside them."""

from __future__ import annotations

from itertools import product

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from sheetgen.physics import counting
from sheetgen.physics.counting import (
    LARGEST_RADIUS,
    TABLE_RADIUS,
    bulk_edge_product,
    hard_wall_points,
    last_deficit_crossing,
    periodic_points,
    weyl_terms,
)


def one_by_one(radius: float) -> tuple[int, int]:
    """Points of the positive octant and of the whole ball, each looked at."""
    reach = range(-int(radius) - 1, int(radius) + 2)
    inside = [n for n in product(reach, repeat=3) if sum(i * i for i in n) <= radius * radius * (1 + 1e-12)]
    return sum(min(n) > 0 for n in inside), len(inside)


@pytest.mark.parametrize("radius", [0.0, 0.9, 1.0, np.sqrt(3), 1.75, 3.3, np.sqrt(14), 7.0, 11.23])
def test_small_radii_against_counting_one_by_one(radius):
    assert (hard_wall_points(radius), periodic_points(radius)) == one_by_one(radius)


@given(radius=st.floats(0, 14))
def test_any_small_radius(radius):
    assert (hard_wall_points(radius), periodic_points(radius)) == one_by_one(radius)


def squares_below(limit: int) -> np.ndarray:
    return np.floor(np.sqrt(np.maximum(limit, 0)) + 1e-9).astype(np.int64)


@pytest.mark.parametrize("radius", [50, 137.6, 216.4, 318, 637, 699.99])
def test_large_radii_against_columns(radius):
    """Points counted as columns over every point of the plane, with other arithmetic than the table's."""
    limit = int(radius**2)
    axis = np.arange(1, int(radius) + 1)
    rest = limit - axis[:, None] ** 2 - axis**2
    octant = squares_below(rest)[rest > 0].sum()
    assert hard_wall_points(radius) == octant
    axis = np.arange(-int(radius), int(radius) + 1)
    rest = limit - axis[:, None] ** 2 - axis**2
    assert periodic_points(radius) == (2 * squares_below(rest)[rest >= 0] + 1).sum()


@pytest.mark.parametrize("square", [1, 2, 3, 6, 14, 50, 12345, 51218, 489_999])
def test_a_level_at_the_fermi_energy_is_filled(square):
    """The radius rounds either way; the level counts, and one part in 10¹¹ below it does not."""
    radius = np.sqrt(square)
    filled = hard_wall_points(np.array([np.nextafter(radius, 0), radius, np.nextafter(radius, 1e9)]))
    assert np.ptp(filled) == 0
    below = hard_wall_points(radius * (1 - 1e-11))
    assert filled[0] - below == hard_wall_points(np.sqrt(square + 0.5)) - hard_wall_points(
        np.sqrt(square - 0.5)
    )


def test_the_two_ways_of_counting_agree_where_they_meet():
    limits = np.array([1, 2, 3, 100, 9999, 600**2])
    space, plane = counting._octant_counts(limits)
    assert [counting._count_by_slices(int(limit)) for limit in limits] == list(zip(space, plane, strict=True))
    radius = TABLE_RADIUS + 0.5
    assert hard_wall_points(radius) == pytest.approx(sum(weyl_terms(radius)), rel=1e-5)


def test_the_smooth_terms_are_the_mean_of_the_count():
    """The corner term is −1/8; over many radii the scatter averages out."""
    radius = np.linspace(60, 120, 20_001)
    excess = hard_wall_points(radius) - sum(weyl_terms(radius))
    assert excess.mean() == pytest.approx(-1 / 8, abs=1.5)
    assert np.abs(excess).max() < 120**1.4


def test_bulk_edge_is_the_last_crossing_of_one_percent():
    assert last_deficit_crossing(0.01) == 51218
    assert bulk_edge_product() == pytest.approx(np.pi * np.sqrt(51218), rel=1e-15)
    crossing = np.sqrt(51218)
    just_below = np.sqrt(51218 - 1e-6)
    assert 1 - hard_wall_points(just_below) / weyl_terms(just_below)[0] > 0.01
    beyond = np.concatenate(
        [crossing + np.linspace(0, 40, 4001), np.sqrt(np.arange(51218, 60000) + 0.999999)]
    )
    assert np.abs(1 - hard_wall_points(beyond) / weyl_terms(beyond)[0]).max() <= 0.01


def test_what_is_not_counted_is_nan_and_shapes_are_kept():
    radius = np.array([[1.0, np.nan], [2 * LARGEST_RADIUS, -1.0]])
    assert np.isnan(hard_wall_points(radius)).tolist() == [[False, True], [True, True]]
    assert periodic_points(radius)[0, 0] == 7
    assert np.ndim(periodic_points(2.0)) == 0 and periodic_points(np.array([])).shape == (0,)
