"""Chemical potential and heat capacity against mpmath, limits and thermodynamic identities."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from sheetgen.physics.fermi_integrals import fermi_integral, inverse_fermi_integral
from sheetgen.physics.occupation import (
    chemical_potential_ratio,
    chemical_potential_ratio_2d,
    chemical_potential_series,
    heat_capacity_ratio,
    heat_capacity_ratio_2d,
)

TEMPERATURES = [1e-9, 1e-6, 1e-4, 3e-3, 0.02, 0.0243, 0.0245, 0.1, 0.3, 0.98, 2.0, 30.0, 1e3, 1e6]


def integral(order, eta):
    """F_j(η) at the working precision: polylogarithm below, Sommerfeld's series far above the edge."""
    j = mpmath.mpf(order)
    if eta < 60:
        return -mpmath.polylog(j + 1, -mpmath.exp(eta)).real
    total, falling = mpmath.mpf(1), mpmath.mpf(1)
    for k in range(1, 12):
        falling *= (j + 3 - 2 * k) * (j + 2 - 2 * k)
        total += (
            2 * (1 - mpmath.mpf(2) ** (1 - 2 * k)) * mpmath.zeta(2 * k) * falling / mpmath.mpf(eta) ** (2 * k)
        )
    return mpmath.mpf(eta) ** (j + 1) / mpmath.gamma(j + 2) * total


def exact(t: float) -> tuple:
    """µ/E_F and the textbook form of C_V/nk_B at 40 digits, which leave room for its cancellation."""
    with mpmath.workdps(40):
        t = mpmath.mpf(t)
        target = 4 / (3 * mpmath.sqrt(mpmath.pi)) * t ** mpmath.mpf("-1.5")
        start = mpmath.mpf(float(chemical_potential_ratio(float(t)) / float(t)))
        eta = mpmath.findroot(
            lambda x: integral(0.5, x) / target - 1, (start, start * (1 + mpmath.mpf(10) ** -9))
        )
        upper, middle, lower = (integral(order, eta) for order in (1.5, 0.5, -0.5))
        return t * eta, mpmath.mpf(15) / 4 * upper / middle - mpmath.mpf(9) / 4 * middle / lower


@pytest.mark.parametrize("t", TEMPERATURES)
def test_three_dimensions_against_mpmath(t):
    potential, heat = exact(t)
    assert abs(chemical_potential_ratio(t) - potential) < 1e-12 * max(abs(potential), 1e-1)
    assert abs(heat_capacity_ratio(t) / heat - 1) < 1e-11


def test_the_textbook_form_cancels_where_ours_does_not():
    t = 1e-6
    _, heat = exact(t)
    eta = inverse_fermi_integral(0.5, 4 / (3 * np.sqrt(np.pi)) * t**-1.5)
    upper, middle, lower = (fermi_integral(order, eta) for order in (1.5, 0.5, -0.5))
    textbook = 15 / 4 * upper / middle - 9 / 4 * middle / lower
    errors = {
        "textbook": abs(float(textbook / heat - 1)),
        "ours": abs(float(heat_capacity_ratio(t) / heat - 1)),
    }
    print("relative error of C_V at T/T_F = 1e-6:", errors)
    assert errors["textbook"] > 1e-6 and errors["ours"] < 1e-12


@pytest.mark.parametrize("t", [1e-4, 0.01, 0.05, 0.3, 1.0, 4.0, 100.0, 1e4])
def test_two_dimensions_against_mpmath(t):
    with mpmath.workdps(60):
        inverse = 1 / mpmath.mpf(t)
        eta = mpmath.log(mpmath.expm1(inverse))
        first = eta**2 / 2 + mpmath.pi**2 / 6 + mpmath.polylog(2, -mpmath.exp(-eta)).real
        heat = 2 * first / inverse - inverse * (1 + mpmath.exp(-eta))
        potential = eta / inverse
    assert abs(heat_capacity_ratio_2d(t) / heat - 1) < 1e-12
    assert abs(chemical_potential_ratio_2d(t) / potential - 1) < 1e-12


@pytest.mark.parametrize("t", [1e-3, 0.02, 0.1, 0.5, 2.0])
def test_two_dimensional_heat_is_the_slope_of_the_energy(t):
    """U = ∫ E f dE with a constant density of states, differentiated numerically at constant number."""

    def energy(reduced):
        eta = mpmath.log(mpmath.expm1(1 / reduced))
        second = eta**2 / 2 + mpmath.pi**2 / 6 + mpmath.polylog(2, -mpmath.exp(-eta)).real
        return reduced**2 * second

    with mpmath.workdps(40):
        assert heat_capacity_ratio_2d(t) == pytest.approx(float(mpmath.diff(energy, t)), rel=1e-10)


@pytest.mark.parametrize("t", [1e-3, 0.02, 0.1, 0.5, 2.0])
def test_three_dimensional_heat_is_the_slope_of_the_energy(t):
    """U/nE_F = (3/2) t F_{3/2}/F_{1/2}."""

    def energy(reduced):
        eta = chemical_potential_ratio(reduced) / reduced
        return 1.5 * reduced * fermi_integral(1.5, eta) / fermi_integral(0.5, eta)

    step = 1e-3 * t
    slope = (energy(t - 2 * step) - 8 * energy(t - step) + 8 * energy(t + step) - energy(t + 2 * step)) / (
        12 * step
    )
    assert heat_capacity_ratio(t) == pytest.approx(slope, rel=2e-8 + 1e-12 / t**2)


def test_the_same_gas_at_absolute_zero_and_far_above():
    assert chemical_potential_ratio(0.0) == 1 and heat_capacity_ratio(0.0) == 0
    assert heat_capacity_ratio(1e-9) / 1e-9 == pytest.approx(np.pi**2 / 2, rel=1e-15)
    assert heat_capacity_ratio(1e6) == pytest.approx(1.5, rel=1e-9)
    assert chemical_potential_ratio_2d(0.0) == 1 and heat_capacity_ratio_2d(0.0) == 0
    assert heat_capacity_ratio_2d(1e-9) / 1e-9 == pytest.approx(np.pi**2 / 3, rel=1e-15)
    assert heat_capacity_ratio_2d(1e6) == pytest.approx(1, rel=1e-12)


def test_the_series_is_the_exact_potential_to_its_order():
    t = np.array([1e-4, 1e-3, 1e-2, 0.05])
    assert np.all(np.abs(chemical_potential_series(t) - chemical_potential_ratio(t)) < 10 * t**6 + 1e-15)
    assert np.isnan(chemical_potential_series(np.array([0.3000001, 2.0, np.nan]))).all()
    assert chemical_potential_series(0.3) == pytest.approx(1 - np.pi**2 / 12 * 0.09 - np.pi**4 / 80 * 0.0081)


@given(t=st.floats(1e-8, 1e5))
def test_number_of_electrons_is_conserved(t):
    eta = chemical_potential_ratio(t) / t
    assert fermi_integral(0.5, eta) * t**1.5 * 0.75 * np.sqrt(np.pi) == pytest.approx(
        1, rel=3e-14 * max(abs(eta), 10)
    )


@given(t=st.floats(1e-6, 1e4))
def test_potential_falls_and_heat_rises(t):
    grid = t * np.array([1.0, 1.01])
    for potential in (chemical_potential_ratio, chemical_potential_ratio_2d):
        assert potential(grid)[1] <= potential(grid)[0] <= 1
    assert 0 < heat_capacity_ratio(grid)[0] < heat_capacity_ratio(grid)[1] <= 1.5 * (1 + 1e-14)
    assert 0 < heat_capacity_ratio_2d(grid)[0] < heat_capacity_ratio_2d(grid)[1] <= 1 + 1e-14


@pytest.mark.parametrize(
    "function",
    [chemical_potential_ratio, heat_capacity_ratio, chemical_potential_ratio_2d, heat_capacity_ratio_2d],
)
def test_smooth_enough_for_differences(function):
    """Across the meeting point of the routes and elsewhere, second differences show no noise above 1e-11."""
    for centre in (1e-4, 1 / 41, 0.2, 1.0, 3.0):
        values = function(centre * (1 + 1e-5 * np.arange(-20, 21)))
        fit = np.polynomial.polynomial.polyfit(np.arange(-20, 21), values, 3)
        residual = values - np.polynomial.polynomial.polyval(np.arange(-20, 21), fit)
        assert np.abs(residual).max() < 1e-13 * max(np.abs(values).max(), 0.1)


def test_nan_in_gives_nan_out_and_shapes_are_kept():
    t = np.array([[0.01, np.nan], [1.0, 1e-5]])
    for function in (
        chemical_potential_ratio,
        heat_capacity_ratio,
        chemical_potential_ratio_2d,
        heat_capacity_ratio_2d,
    ):
        assert np.array_equal(np.isnan(function(t)), np.isnan(t))
