"""Fermi–Dirac integrals against mpmath at 30 digits, exact identities, and their inverses."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from sheetgen.physics.fermi_integrals import (
    DEGENERATE,
    ORDERS,
    fermi_integral,
    fermi_integral_slope,
    inverse_fermi_integral,
)

HALF_ODD = (-0.5, 0.5, 1.5)


def reference(order: float, eta: float):
    """The defining integral at 30 digits, in pieces about the Fermi edge; u = √x removes the end point's root."""
    with mpmath.workdps(30):
        j, eta = mpmath.mpf(order), mpmath.mpf(eta)
        edges = [0, 1, 5, 20, 60, 120]
        if eta > 0:
            edges += [eta / 4, eta / 2] + [eta + shift for shift in (-60, -20, -5, 0, 5, 20, 60, 120)]
        corners = sorted({mpmath.sqrt(edge) for edge in edges if edge >= 0})
        integral = mpmath.quad(lambda u: 2 * u ** (2 * j + 1) / (1 + mpmath.exp(u * u - eta)), corners)
        return integral / mpmath.gamma(j + 1)


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize(
    "eta", [-50.0, -12.5, -3.0, -0.7, 0.0, 0.3, 1.0, 2.2, 7.0, 20.0, 39.9, 40.1, 75.0, 400.0]
)
def test_integral_against_mpmath(order, eta):
    assert abs(fermi_integral(order, eta) / reference(order, eta) - 1) < 1e-12


@pytest.mark.parametrize("order", ORDERS)
def test_deep_in_the_degenerate_range_against_the_leading_terms_at_30_digits(order):
    eta = 1e6
    with mpmath.workdps(30):
        j = mpmath.mpf(order)
        leading = mpmath.mpf(eta) ** (j + 1) / mpmath.gamma(j + 2)
        ratio = mpmath.pi / mpmath.mpf(eta)
        # The next term is of order η⁻⁶ = 1e-36.
        series = 1 + (j + 1) * j * ratio**2 / 6 + (j + 1) * j * (j - 1) * (j - 2) * 7 * ratio**4 / 360
        expected = leading * series
    assert abs(fermi_integral(order, eta) / expected - 1) < 1e-14


@pytest.mark.parametrize("order", ORDERS)
def test_zero_is_an_eta_function(order):
    """F_j(0) = (1 − 2^{−j}) ζ(j+1), with ln 2 for j = 0."""
    expected = mpmath.altzeta(mpmath.mpf(order) + 1)
    assert fermi_integral(order, 0.0) == pytest.approx(float(expected), rel=1e-14)


@pytest.mark.parametrize("order", ORDERS)
def test_dilute_limit_is_an_exponential(order):
    eta = np.array([-45.0, -50.0, -300.0])
    assert fermi_integral(order, eta) == pytest.approx(np.exp(eta), rel=1e-13)


@pytest.mark.parametrize("order", ORDERS)
@given(eta=st.floats(-40, 80))
def test_slope_is_the_derivative(order, eta):
    step = 1e-4 * max(abs(eta), 1.0)
    values = fermi_integral(order, np.array([eta - 2 * step, eta - step, eta + step, eta + 2 * step]))
    derivative = (values[0] - 8 * values[1] + 8 * values[2] - values[3]) / (12 * step)
    assert fermi_integral_slope(order, eta) == pytest.approx(derivative, rel=1e-6)


@pytest.mark.parametrize("order", HALF_ODD)
def test_no_jump_where_the_routes_meet(order):
    below, above = fermi_integral(order, np.array([DEGENERATE, np.nextafter(DEGENERATE, 100)]))
    assert abs(above / below - 1) < 3e-15


@pytest.mark.parametrize("order", ORDERS)
@given(eta=st.one_of(st.floats(-50, 60), st.floats(60, 1e6)))
def test_inverse_leads_back(order, eta):
    value = fermi_integral(order, eta)
    # What rounding of the value alone can move the argument.
    slack = 1e-14 * max(abs(eta), 1.0) + 4e-16 * value / fermi_integral_slope(order, eta)
    assert abs(inverse_fermi_integral(order, value) - eta) <= slack


def test_shape_is_kept_and_nan_stays():
    eta = np.array([[-1.0, np.nan, 100.0], [0.0, 50.0, -np.inf]])
    for order in ORDERS:
        values = fermi_integral(order, eta)
        assert values.shape == eta.shape
        assert np.isnan(values[0, 1]) and not np.isnan(np.delete(values.ravel(), 1)).any()
        assert isinstance(float(fermi_integral(order, 1.0)), float)


@pytest.mark.parametrize("order", ORDERS)
def test_no_argument_has_a_value_that_is_not_positive(order):
    assert np.isnan(inverse_fermi_integral(order, np.array([0.0, -1.0, np.nan]))).all()


def test_another_order_is_refused():
    with pytest.raises(ValueError, match="order 2.5 of a Fermi–Dirac integral; expected one of"):
        fermi_integral(2.5, 0.0)
