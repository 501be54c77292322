"""Thin films against mpmath, brute force, limits, and the inverse questions."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.optimize import brentq

from sheetgen.physics.films import (
    alpha,
    explained_ratios,
    explaining_grain_reflection,
    explaining_specularity,
    film_factor,
    film_fermi_wavevector,
    film_subbands,
    grain_factor,
    neutral_film_fermi_wavevector,
    surface_factor,
)

DENSITY = 8.47e28
BULK = np.cbrt(3 * np.pi**2 * DENSITY)


def electrons_per_area(wavevector, width, degeneracy):
    """(g/4π) Σ (k² − (πj/d)²) over every j with a positive term."""
    j = np.arange(1, int(wavevector * width / np.pi) + 2)
    return degeneracy / (4 * np.pi) * np.maximum(wavevector**2 - (np.pi * j / width) ** 2, 0).sum()


@given(thickness=st.floats(1e-10, 2e-7), degeneracy=st.sampled_from([2, 4, 12]))
def test_discs_hold_the_electrons_of_the_film(thickness, degeneracy):
    wavevector = film_fermi_wavevector(DENSITY, thickness, degeneracy)
    assert electrons_per_area(wavevector, thickness, degeneracy) == pytest.approx(
        DENSITY * thickness, rel=1e-12
    )
    subbands = film_subbands(DENSITY, thickness, degeneracy)
    assert np.pi * subbands / thickness < wavevector * (1 + 1e-12)
    assert np.pi * (subbands + 1) / thickness > wavevector * (1 - 1e-12)


@pytest.mark.parametrize("thickness", [2e-10, 1e-9, 1.234e-8, 4e-8])
def test_wavevector_against_a_scalar_root_finder(thickness):
    found = film_fermi_wavevector(DENSITY, thickness, 2)
    root = brentq(
        lambda k: electrons_per_area(k, thickness, 2) / (DENSITY * thickness) - 1,
        BULK / 2,
        BULK * 9,
        xtol=1e-3,
    )
    assert found == pytest.approx(root, rel=1e-12)
    bulk = np.cbrt(3 * np.pi**2 * DENSITY)
    width = thickness + 3 * np.pi / (4 * bulk)
    areal = DENSITY * thickness
    root = brentq(lambda k: electrons_per_area(k, width, 2) / areal - 1, BULK / 9, BULK * 9, xtol=1e-3)
    assert neutral_film_fermi_wavevector(DENSITY, thickness, 2) == pytest.approx(root, rel=1e-12)


def test_a_subband_at_the_fermi_energy_is_empty():
    """q = s exactly: the filling is s(s−1)(4s+1)/6 and the s-th subband holds nobody."""
    thickness = 1e-8
    for s in (2, 3, 10):
        density = 2 / (4 * np.pi) * (np.pi / thickness) ** 2 * (s * (s - 1) * (4 * s + 1) / 6) / thickness
        assert film_subbands(density * (1 - 1e-12), thickness, 2) == s - 1
        assert film_subbands(density * (1 + 1e-12), thickness, 2) == s


def test_thick_films_tend_to_the_bulk_from_above_and_neutral_ones_faster():
    thickness = np.array([1e-8, 1e-7, 1e-6])
    hard = film_fermi_wavevector(DENSITY, thickness, 2) / BULK - 1
    neutral = neutral_film_fermi_wavevector(DENSITY, thickness, 2) / BULK - 1
    # Weyl's surface term: k/k_F − 1 = π/(4 k_F d) for hard walls; the neutral walls remove it.
    assert hard * BULK * thickness == pytest.approx(np.pi / 4, rel=0.05)
    assert np.all(np.abs(neutral) < 0.1 * hard)


def test_subbands_of_nothing():
    assert film_subbands(np.array([0.0, np.nan]), 1e-8, 2) == pytest.approx([0.0, np.nan], nan_ok=True)


def fuchs_sondheimer(kappa, specularity):
    """The integral as printed, at 30 digits."""
    with mpmath.workdps(30):
        k, p = mpmath.mpf(kappa), mpmath.mpf(specularity)

        def loss(t):
            return (1 / t**3 - 1 / t**5) * (1 - mpmath.exp(-k * t)) / (1 - p * mpmath.exp(-k * t))

        pieces = [1, 2, 10, 100, 1000, 10**4, 10**6, mpmath.inf]
        return 1 / (1 - 3 / (2 * k) * (1 - p) * mpmath.quad(loss, pieces))


@pytest.mark.parametrize("kappa", [1e-3, 0.02, 0.4, 1.0, 7.0, 100.0, 1e4])
@pytest.mark.parametrize("specularity", [0.0, 0.3, 0.9, 0.999])
def test_surface_factor_against_mpmath(kappa, specularity):
    assert abs(surface_factor(kappa, specularity) / fuchs_sondheimer(kappa, specularity) - 1) < 1e-11


@pytest.mark.parametrize("strength", [0.0, 1e-6, 0.01, 0.3, 0.499, 0.501, 2.0, 10.0, 100.0, 1e4])
def test_grain_factor_against_mpmath(strength):
    with mpmath.workdps(40):
        a = mpmath.mpf(strength)
        f = 1 - 3 * a / 2 + 3 * a**2 - (3 * a**3 * mpmath.log(1 + 1 / a) if a else 0)
    assert abs(grain_factor(strength) * f - 1) < 1e-14


def mayadas_shatzkes(kappa, strength, specularity):
    """The double integral as printed, over φ and u = 1/t, with mpmath's rules at 30 digits."""
    with mpmath.workdps(30):
        k, a, p = (mpmath.mpf(x) for x in (kappa, strength, specularity))
        f = 1 - 3 * a / 2 + 3 * a**2 - 3 * a**3 * mpmath.log(1 + 1 / a)

        def over_t(phi):
            cosine = mpmath.cos(phi)

            def integrand(u):
                slowing = 1 + a / (cosine * mpmath.sqrt(1 - u * u))
                decay = mpmath.exp(-k * slowing / u)
                return u * (1 - u * u) * cosine**2 / slowing**2 * (1 - decay) / (1 - p * decay)

            return mpmath.quad(integrand, [0, k / 4, 1] if k < 2 else [0, 0.5, 1], maxdegree=5)

        integral = mpmath.quad(over_t, [0, mpmath.pi / 4, mpmath.pi / 2], maxdegree=4)
        return 1 / (f - 6 / (mpmath.pi * k) * (1 - p) * integral)


@pytest.mark.parametrize("film", [(0.1, 0.2, 0.0), (0.3, 30.0, 0.9)])
def test_film_factor_against_mpmath(film):
    assert abs(film_factor(*film) / mayadas_shatzkes(*film) - 1) < 1e-9


def graded(ends: int) -> tuple[np.ndarray, np.ndarray]:
    """Gauss–Legendre nodes on panels that shrink fourfold towards both ends of 0 … 1."""
    edges = np.concatenate([[0], 0.5 * 4.0 ** -np.arange(ends, -1, -1)])
    edges = np.concatenate([edges, 1 - edges[-2::-1]])
    x, w = np.polynomial.legendre.leggauss(16)
    widths = np.diff(edges)
    return (edges[:-1, None] + widths[:, None] * (x + 1) / 2).ravel(), (widths[:, None] * w / 2).ravel()


@pytest.mark.parametrize("kappa", [1e-3, 0.1, 1.0, 30.0, 1e4])
@pytest.mark.parametrize("strength", [1e-3, 0.1, 3.0, 100.0])
@pytest.mark.parametrize("specularity", [0.0, 0.5, 0.95])
def test_film_factor_against_graded_panels(kappa, strength, specularity):
    """The printed integral over φ and u = 1/t by brute force; its own cancellation limits the comparison."""
    x, weight = graded(18)
    cosine = np.sin(np.pi / 2 * x)[:, None]  # φ counted from π/2
    u, sine = x[None, :], np.sqrt((1 - x) * (1 + x))[None, :]
    slowing = 1 + strength / (cosine * sine)
    decay = np.exp(-np.minimum(kappa * slowing / u, 700))
    values = u * sine**2 * cosine**2 / slowing**2 * (1 - decay) / (1 - specularity * decay)
    integral = np.pi / 2 * weight @ values @ weight
    f = 1 / grain_factor(strength)
    loss = 6 / (np.pi * kappa) * (1 - specularity) * integral
    assert film_factor(kappa, strength, specularity) == pytest.approx(
        1 / (f - loss), rel=1e-9 + 3e-13 * f / (f - loss)
    )


KAPPAS = 10.0 ** np.arange(-3, 5)
STRENGTHS = np.array([0.0, 1e-4, 0.01, 0.3, 1.0, 10.0, 100.0])


def test_film_factor_in_its_three_limits():
    kappa, strength = np.meshgrid(KAPPAS, STRENGTHS)
    assert film_factor(kappa, strength, 1.0) == pytest.approx(grain_factor(strength), rel=1e-10)
    for specularity in (0.0, 0.4, 0.99):
        assert film_factor(KAPPAS, 0.0, specularity) == pytest.approx(
            surface_factor(KAPPAS, specularity), rel=1e-10
        )
        assert film_factor(1e12, STRENGTHS, specularity) == pytest.approx(grain_factor(STRENGTHS), rel=1e-10)


@given(
    kappa=st.floats(1e-3, 1e3),
    strength=st.floats(0, 50),
    specularity=st.floats(0, 0.99),
    step=st.floats(1e-3, 0.01),
)
def test_film_factor_moves_the_right_way(kappa, strength, specularity, step):
    here = film_factor(kappa, strength, specularity)
    assert film_factor(kappa * (1 + step), strength, specularity) < here
    assert film_factor(kappa, strength + step, specularity) > here
    assert film_factor(kappa, strength, specularity + step) < here
    assert here >= max(grain_factor(strength), surface_factor(kappa, specularity)) * (1 - 1e-10)


def test_film_factor_is_smooth_enough_for_differences():
    kappa = 0.5 * (1 + 1e-5 * np.arange(-20, 21))
    for strength, specularity in ((0.3, 0.2), (0.0, 0.0), (20.0, 0.9)):
        values = film_factor(kappa, strength, specularity)
        fit = np.polynomial.polynomial.polyfit(np.arange(-20, 21), values, 4)
        assert np.ptp(values - np.polynomial.polynomial.polyval(np.arange(-20, 21), fit)) < 1e-13 * values[0]


def test_strength_of_the_grains():
    assert alpha(40e-9, 20e-9, 0.2) == pytest.approx(0.5)
    assert alpha(40e-9, 20e-9, 0.0) == 0


@given(kappa=st.floats(0.01, 100), strength=st.floats(0, 10), specularity=st.floats(0, 1))
def test_explaining_specularity_leads_back(kappa, strength, specularity):
    ratio = film_factor(kappa, strength, specularity)
    low, high = explained_ratios(kappa, strength)
    found = explaining_specularity(ratio, kappa, strength)
    if low < ratio < high:
        assert film_factor(kappa, strength, found) == pytest.approx(ratio, rel=1e-12)


@given(kappa=st.floats(0.01, 100), reflection=st.floats(0.001, 0.95), specularity=st.floats(0, 1))
def test_explaining_grain_reflection_leads_back(kappa, reflection, specularity):
    grain_ratio = 1.7
    ratio = film_factor(kappa, grain_ratio * reflection / (1 - reflection), specularity)
    found = explaining_grain_reflection(ratio, kappa, grain_ratio, specularity)
    assert found == pytest.approx(reflection, rel=1e-8)


def test_none_explains_what_lies_outside():
    low, high = explained_ratios(0.5, 0.4)
    assert low == pytest.approx(grain_factor(0.4)) and high == pytest.approx(film_factor(0.5, 0.4, 0.0))
    ratios = np.array([low * 0.99, high * 1.01, np.nan])
    assert np.isnan(explaining_specularity(ratios, 0.5, 0.4)).all()
    least = surface_factor(0.5, 0.3)
    assert np.isnan(explaining_grain_reflection(least * 0.99, 0.5, 2.0, 0.3))
    assert 0 < explaining_grain_reflection(least * 1.01, 0.5, 2.0, 0.3) < 0.05


def test_missing_inputs_stay_missing():
    values = film_factor(
        np.array([np.nan, 1.0, 1.0, 1.0]), np.array([0.1, np.nan, 0.1, 0.1]), np.array([0, 0, np.nan, 0])
    )
    assert np.isnan(values).tolist() == [True, True, True, False]
    assert np.isnan(surface_factor(np.nan, 0.1)) and np.isnan(grain_factor(np.nan))
