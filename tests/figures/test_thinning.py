"""Decimated curves stay within the stated distance of the curve; clipped ones within the panel."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from hypothesis.extra.numpy import arrays

from sheetgen.figures.thinning import TOLERANCE, clip, runs, thin

heights = arrays(float, st.integers(2, 60), elements=st.floats(-100, 100))


def distance_to_polyline(x, y, kept):
    """Largest distance of any point to the chord between the kept points around it."""
    anchors = np.flatnonzero(kept)
    worst = 0.0
    for first, last in zip(anchors, anchors[1:], strict=False):
        start, end = np.array([x[first], y[first]]), np.array([x[last], y[last]])
        along = end - start
        for index in range(first, last + 1):
            offset = np.array([x[index], y[index]]) - start
            share = np.clip(offset @ along / (along @ along), 0, 1) if along.any() else 0.0
            worst = max(worst, float(np.hypot(*(offset - share * along))))
    return worst


@given(heights)
def test_no_dropped_point_is_further_than_the_tolerance(y):
    x = np.linspace(0, 190, len(y))
    kept = thin(x, y, np.array([0]))
    assert kept[0] and kept[-1]
    assert distance_to_polyline(x, y, kept) <= TOLERANCE * 1.0001


@pytest.mark.parametrize("shape", [np.sqrt, np.exp, np.sin, lambda t: 1 / (1 + np.exp(80 * (t - 2)))])
def test_a_smooth_curve_keeps_few_points_and_errs_below_a_thousandth_of_the_axis(shape):
    t = np.linspace(0, 5, 600)
    y = shape(t)
    x, y = t * 38, (y - y.min()) / np.ptp(y) * 120
    kept = thin(x, y, np.array([0]))
    assert kept.sum() < 90
    assert distance_to_polyline(x, y, kept) <= TOLERANCE * 1.0001 < 120 / 1000


def test_several_polylines_are_thinned_apart():
    x = np.tile(np.linspace(0, 10, 50), 2)
    y = np.concatenate((np.zeros(50), np.full(50, 7.0)))
    assert np.flatnonzero(thin(x, y, np.array([0, 50]))).tolist() == [0, 49, 50, 99]


def test_a_closed_outline_keeps_its_corners():
    x = np.array([0.0, 5, 10, 10, 10, 5, 0, 0, 0])
    y = np.array([0.0, 0, 0, 5, 10, 10, 10, 5, 0])
    assert np.flatnonzero(thin(x, y, np.array([0]))).tolist() == [0, 2, 4, 6, 8]


@given(heights, st.floats(-50, 0), st.floats(1, 50))
def test_a_clipped_curve_stays_inside_and_follows_the_curve(y, low, high):
    x = np.arange(len(y), dtype=float)
    clipped_x, clipped_y = clip(x, y, low, high)
    seen = np.isfinite(clipped_y)
    assert ((clipped_y[seen] >= low) & (clipped_y[seen] <= high)).all()
    assert clipped_y[seen] == pytest.approx(np.interp(clipped_x[seen], x, y), abs=1e-6)


def test_a_curve_that_jumps_over_the_panel_crosses_it():
    x, y = clip(np.array([0.0, 1.0]), np.array([-100.0, 100.0]), 0.0, 10.0)
    ((run_x, run_y),) = runs(x, y)
    assert run_y.tolist() == [0.0, 10.0]
    assert run_x == pytest.approx([0.5, 0.55])


def test_runs_part_at_missing_points():
    y = np.array([1.0, 2, np.nan, 3, np.nan, 4, 5, 6])
    assert [piece[1].tolist() for piece in runs(np.arange(8.0), y)] == [[1, 2], [4, 5, 6]]
