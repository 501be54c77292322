"""Resistivity of films against the limiting laws and values of the literature."""

from __future__ import annotations

import numpy as np
import pytest
from support.printed import printed

from sheetgen.physics.films import film_factor, grain_factor, surface_factor

# The exact integral of Fuchs (1938) and Sondheimer (1952), evaluated elsewhere with mpmath and rounded to the digits
# given: κ, p, ρ/ρ₀. (Sondheimer's own table has three digits.)
FUCHS_SONDHEIMER = [
    (0.01, 0.0, "26.4835799"),
    (0.01, 0.5, "11.8203887"),
    (0.1, 0.0, "4.78165562"),
    (0.1, 0.5, "2.66816671"),
    (0.2, 0.0, "3.09585648"),
    (0.2, 0.5, "1.92507643"),
    (1.0, 0.0, "1.46229488"),
    (1.0, 0.5, "1.20611455"),
    (2.0, 0.0, "1.22083988"),
    (5.0, 0.5, "1.03894709"),
    (20.0, 0.5, "1.00946372"),
    (100.0, 0.0, "1.00376412"),
    (100.0, 0.5, "1.00187852"),
]


@pytest.mark.parametrize("kappa, specularity, value", FUCHS_SONDHEIMER)
def test_fuchs_sondheimer(kappa, specularity, value):
    assert surface_factor(kappa, specularity) == printed(value)
    assert film_factor(kappa, 0.0, specularity) == printed(value)


# A. F. Mayadas and M. Shatzkes, Physical Review B 1, 1382 (1970): ρ₀/ρ = 3[1/3 − α/2 + α² − α³ ln(1 + 1/α)],
# evaluated elsewhere with mpmath: α, ρ/ρ₀.
@pytest.mark.parametrize("alpha, value", [(0.01, "1.014933576"), (5.0, "7.727007766"), (10.0, "14.39665345")])
def test_mayadas_shatzkes(alpha, value):
    assert grain_factor(alpha) == printed(value)


@pytest.mark.parametrize("specularity", [0.0, 0.3, 0.8])
def test_thick_film_law_of_sondheimer(specularity):
    """Sondheimer (1952): ρ/ρ₀ = 1 + 3(1 − p)/8κ for κ ≫ 1."""
    kappa = np.array([50.0, 500.0, 5000.0])
    excess = surface_factor(kappa, specularity) - 1
    assert excess == pytest.approx(3 * (1 - specularity) / (8 * kappa), rel=0.02)
    assert excess[-1] == pytest.approx(3 * (1 - specularity) / (8 * kappa[-1]), rel=3e-4)


@pytest.mark.parametrize("specularity", [0.0, 0.3, 0.8])
def test_thin_film_law_of_sondheimer(specularity):
    """Sondheimer (1952): ρ₀/ρ = (3/4) (1 + p)/(1 − p) κ ln(1/κ) for κ ≪ 1; what is left out has no logarithm."""
    kappa = 10.0 ** -np.arange(6.0, 11.0)
    weight = 0.75 * (1 + specularity) / (1 - specularity)
    rest = 1 / surface_factor(kappa, specularity) / (weight * kappa) - np.log(1 / kappa)
    assert np.ptp(rest) < 1e-5
    if specularity == 0:
        assert rest[-1] == pytest.approx(1 - np.euler_gamma, abs=1e-6)


def test_fine_and_coarse_grains():
    """Mayadas and Shatzkes (1970): 1 + 3α/2 for α ≪ 1 and 4α/3 for α ≫ 1."""
    assert grain_factor(1e-6) == pytest.approx(1 + 1.5e-6, abs=1e-11)
    assert grain_factor(1e6) == pytest.approx(4e6 / 3, rel=1e-6)
