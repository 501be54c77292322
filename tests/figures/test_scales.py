"""Places on paper, axis ranges and tick labels."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from sheetgen.figures.plot import Axis
from sheetgen.figures.scales import FINE_STEPS, decades, number_label, place, power_label, snap_up, value

AXES = (Axis("", -3, 7), Axis("", 1e-3, 1e4, "log"))


@pytest.mark.parametrize("axis", AXES)
def test_the_ends_of_an_axis_are_the_ends_of_the_panel(axis):
    assert place(axis, [axis.low, axis.high], 40, 190) == pytest.approx([40, 230])


@pytest.mark.parametrize("axis", AXES)
def test_value_undoes_place(axis):
    given_values = np.linspace(max(axis.low, 1e-3), axis.high, 23)
    assert value(axis, place(axis, given_values, 40, 190), 40, 190) == pytest.approx(given_values, rel=1e-12)


def test_what_is_not_positive_has_no_place_on_a_log_axis():
    assert np.isnan(place(AXES[1], [0.0, -1.0, 1.0], 0, 1)).tolist() == [True, True, False]


@given(st.floats(1e-12, 1e12))
def test_snapping_goes_up_to_the_next_step(number):
    for steps in (None, FINE_STEPS):
        end = snap_up(number, steps) if steps else snap_up(number)
        assert number * (1 - 1e-8) <= end <= 2.5 * number * (1 + 1e-8)


@pytest.mark.parametrize(("number", "end"), [(7.03, 10), (1.0, 1), (0.2, 0.2), (210, 500), (0.0049, 0.005)])
def test_snapped_ends(number, end):
    assert snap_up(number) == end


@pytest.mark.parametrize("number", [0.0, -1.0, float("nan"), float("inf")])
def test_an_axis_cannot_end_just_anywhere(number):
    with pytest.raises(ValueError, match="expected a positive finite number"):
        snap_up(number)


@given(st.lists(st.floats(1e-9, 1e9), min_size=1, max_size=5), st.integers(1, 4))
def test_decades_hold_all_values(values, least):
    low, high = decades(values, least)
    assert low * (1 - 1e-6) <= min(values) and max(values) <= high * (1 + 1e-6)
    assert np.log10(high / low) >= least - 1e-9


@pytest.mark.parametrize(
    ("number", "label"), [(1, "1"), (0.01, "0.01"), (1e-3, "10⁻³"), (1e5, "10⁵"), (2e-5, "2·10⁻⁵"), (200, "200")]
)
def test_ticks_of_a_log_axis(number, label):
    assert power_label(number) == label


@pytest.mark.parametrize(
    ("number", "label"),
    [
        (-0.5, "−0.5"),
        (0.30000000000000004, "0.3"),
        (1e-17, "0"),
        (20, "20"),
        (2e-10, "2·10⁻¹⁰"),
        (-3e5, "−3·10⁵"),
        (30000, "30000"),
    ],
)
def test_ticks_of_a_linear_axis(number, label):
    assert number_label(number) == label
