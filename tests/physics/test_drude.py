"""The optical response: sum rule, Kramers–Kronig, energy, limits."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.constants import c, epsilon_0
from scipy.integrate import quad

from sheetgen.physics.drude import (
    SPEED_OF_LIGHT,
    intensity_depth,
    normal_reflectance,
    permittivity,
    plasma_edge,
    refractive_index,
)

PLASMA, TAU = 1.6e16, 2.5e-14


def conductivity(frequency):
    """Re σ = ωε₀ Im ε."""
    return frequency * epsilon_0 * permittivity(frequency, PLASMA, TAU, 1.0).imag


def test_speed_of_light_is_that_of_the_si():
    assert c == SPEED_OF_LIGHT


def test_f_sum_rule():
    """∫ Re σ dω = (π/2) ε₀ω₀² = (π/2) ne²/m."""
    scaled = quad(lambda x: conductivity(x / TAU) / TAU, 0, np.inf, epsrel=1e-12)[0]
    assert scaled == pytest.approx(np.pi / 2 * epsilon_0 * PLASMA**2, rel=1e-10)


@pytest.mark.parametrize("x", [0.3, 1.0, 4.0])
def test_kramers_kronig(x):
    """Re ε(ω) − 1 = (2/π) P∫ ω′ Im ε(ω′)/(ω′² − ω²) dω′."""

    def absorbed(y):
        y = max(y, 1e-12)  # the product is finite at zero, its factors are not
        return y * permittivity(y / TAU, PLASMA, TAU, 1.0).imag / (y + x)

    near = quad(absorbed, 0, 2 * x, weight="cauchy", wvar=x, epsrel=1e-12)[0]
    far = quad(lambda y: absorbed(y) / (y - x), 2 * x, np.inf, epsrel=1e-12)[0]
    assert permittivity(x / TAU, PLASMA, TAU, 1.0).real - 1 == pytest.approx(
        2 / np.pi * (near + far), rel=1e-8
    )


def test_direct_current_limit_is_the_conductivity():
    assert conductivity(1e3) == pytest.approx(epsilon_0 * PLASMA**2 * TAU, rel=1e-12)


def test_hagen_rubens_in_the_far_infrared():
    """1 − R = (8ε₀ω/σ)^{1/2} for ωτ ≪ 1: E. Hagen and H. Rubens (1903)."""
    frequency, sigma = 1e-3 / TAU, epsilon_0 * PLASMA**2 * TAU
    reflectance = normal_reflectance(refractive_index(permittivity(frequency, PLASMA, TAU, 1.0)))
    assert 1 - reflectance == pytest.approx(np.sqrt(8 * epsilon_0 * frequency / sigma), rel=1e-3)


@given(x=st.floats(1e-3, 1e3), tau=st.floats(1e-16, 1e-9), background=st.floats(1, 30))
def test_passive_and_consistent(x, tau, background):
    epsilon = permittivity(x * PLASMA, PLASMA, tau, background)
    index = refractive_index(epsilon)
    assert epsilon.imag > 0 and index.real >= 0 and index.imag >= 0
    assert abs(index**2 / epsilon - 1) < 1e-14
    assert 0 <= normal_reflectance(index) <= 1


def test_index_of_a_lossless_metal_has_its_loss_on_the_right_side():
    for epsilon in (-4 + 0j, -4 - 0j, complex(-4, -0.0)):
        assert refractive_index(epsilon) == pytest.approx(2j)


def test_intensity_falls_to_one_over_e_at_the_depth():
    frequency = 3e15
    index = refractive_index(permittivity(frequency, PLASMA, TAU, 1.0))
    wave = np.exp(1j * index * frequency / c * intensity_depth(frequency, index))
    assert abs(wave) ** 2 == pytest.approx(np.exp(-1), rel=1e-14)


@given(product=st.floats(1.0001, 1e4), background=st.floats(1, 20))
def test_real_part_vanishes_at_the_edge(product, background):
    screened = PLASMA / np.sqrt(background)
    tau = product / screened
    edge = plasma_edge(screened, tau)
    assert abs(permittivity(edge, PLASMA, tau, background).real) < 1e-11 * background


def test_no_edge_where_damping_wins():
    assert np.isnan(plasma_edge(np.array([1e15, 1e15, np.nan]), np.array([1e-15, 5e-16, 1e-15]))).all()
