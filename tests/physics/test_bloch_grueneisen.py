"""Resistivity against temperature: both limits, the reference point, the residual part."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from sheetgen.physics.bloch_grueneisen import bloch_grueneisen_shape, resistivity_from_debye


def test_fifth_power_law_at_low_temperatures():
    temperature = np.array([1e-6, 0.1, 1.0, 4.2])
    law = float(120 * mpmath.zeta(5)) * (temperature / 343) ** 5
    assert bloch_grueneisen_shape(temperature, 343) == pytest.approx(law, rel=1e-12)
    assert bloch_grueneisen_shape(0.0, 343) == 0


def test_linear_law_at_high_temperatures():
    reduced = np.array([10.0, 1e3, 1e6])
    assert bloch_grueneisen_shape(reduced, 1.0) == pytest.approx(
        reduced / 4 * (1 - 1 / (18 * reduced**2)), rel=1e-6
    )
    assert bloch_grueneisen_shape(1e6, 1.0) == pytest.approx(2.5e5, rel=1e-13)


@given(
    residual=st.floats(0, 1e-8),
    reference=st.floats(1.1e-8, 1e-6),
    debye=st.floats(50, 2000),
    at=st.floats(20, 1000),
)
def test_curve_passes_through_the_reference_point_and_the_residual(residual, reference, debye, at):
    through = resistivity_from_debye(np.array([0.0, at]), debye, residual, reference, at)
    assert through == pytest.approx([residual, reference], rel=1e-14)


@given(low=st.floats(0, 1000), step=st.floats(0.1, 100))
def test_curve_rises(low, step):
    values = resistivity_from_debye(np.array([low, low + step]), 343.0, 2e-11, 1.68e-8, 293.15)
    assert values[1] > values[0]


def test_missing_inputs_stay_missing():
    values = resistivity_from_debye(np.array([4.2, 77.0]), 343.0, 0.0, np.nan, 293.15)
    assert np.isnan(values).all()
    assert np.isnan(resistivity_from_debye(77.0, 343.0, 0.0, 1e-8, 0.0))
