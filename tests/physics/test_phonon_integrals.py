"""The integrals over a Debye spectrum against mpmath at 30 digits, and their limits."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest

from sheetgen.physics.phonon_integrals import scaled_bose_integral, scaled_transport_integral

LIMITS = [1e-8, 1e-3, 0.1, 0.7, 2.0, 5.0, 12.0, 30.0, 59.9, 60.1, 200.0, 1e4, 1e9]


def reference(integrand, x, power):
    """∫₀¹ v^power integrand(xv) dv at 30 digits, for an integrand that is 1 at zero and negligible beyond 1000."""
    unit = max(x, mpmath.mpf(1))  # mpmath's rule wants a result of order one
    pieces = [0, *(edge for edge in (1, 5, 15, 40, 100, 300) if edge < x), min(x, mpmath.mpf(1000))]
    scaled = mpmath.quad(lambda s: (s * unit / x) ** power * integrand(s) if s else mpmath.mpf(0), pieces)
    return scaled / x / unit**power


@pytest.mark.parametrize("order", [2, 3, 4, 5])
@pytest.mark.parametrize("x", LIMITS)
def test_transport_integral_against_mpmath(order, x):
    with mpmath.workdps(30):
        x = mpmath.mpf(x)
        value = reference(lambda s: (s / 2 / mpmath.sinh(s / 2)) ** 2, x, order - 2)
        assert abs(scaled_transport_integral(order, float(x)) / value - 1) < 1e-13


@pytest.mark.parametrize("order", [1, 2, 3, 4, 5])
@pytest.mark.parametrize("x", LIMITS)
def test_bose_integral_against_mpmath(order, x):
    with mpmath.workdps(30):
        x = mpmath.mpf(x)
        value = reference(lambda s: s / mpmath.expm1(s), x, order - 1)
        assert abs(scaled_bose_integral(order, float(x)) / value - 1) < 1e-13


@pytest.mark.parametrize("order", [2, 3, 4, 5])
def test_by_parts_one_family_gives_the_other(order):
    """∫ sⁿ eˢ/(eˢ−1)² = −xⁿ/(eˣ−1) + n ∫ s^{n−1}/(eˢ−1)."""
    x = np.geomspace(0.5, 40, 30)
    by_parts = order * scaled_bose_integral(order - 1, x) - x / np.expm1(x)
    assert scaled_transport_integral(order, x) == pytest.approx(by_parts, rel=1e-13)


def test_ends_and_nan():
    assert scaled_transport_integral(4, 0.0) == pytest.approx(1 / 3, rel=1e-15)
    assert scaled_bose_integral(3, 0.0) == pytest.approx(1 / 3, rel=1e-15)
    assert scaled_transport_integral(4, np.inf) == 0 and scaled_bose_integral(3, np.inf) == 0
    assert np.isnan(scaled_transport_integral(5, np.array([np.nan, 1.0]))).tolist() == [True, False]
