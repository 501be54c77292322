"""The lattice's heat and its crossing with the electrons'."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.optimize import brentq

from sheetgen.physics.debye import debye_function, debye_heat_ratio, heat_crossover
from sheetgen.physics.occupation import heat_capacity_ratio


def test_low_temperatures_follow_the_cube_law():
    temperature = np.array([1e-3, 0.1, 1.0, 5.0])
    law = 4 * np.pi**4 / 5 * (temperature / 400) ** 3
    assert debye_heat_ratio(temperature, 400) == pytest.approx(law, rel=1e-12)
    assert debye_heat_ratio(0.0, 400) == 0


def test_high_temperatures_approach_dulong_and_petit():
    ratio = debye_heat_ratio(np.array([40.0, 4e3, 4e7]), 4.0)
    reduced = 4.0 / np.array([40.0, 4e3, 4e7])
    assert ratio == pytest.approx(1 - reduced**2 / 20 + reduced**4 / 560, rel=1e-8)
    assert ratio[-1] == pytest.approx(1, rel=1e-14)


def test_heat_capacity_is_the_slope_of_the_energy():
    """U/3RT = D_3(θ/T)."""
    temperature, step = np.geomspace(5, 2000, 20), 1e-3

    def energy(t):
        return t * debye_function(3, 300 / t)

    a, b, c, d = (energy(temperature * (1 + n * step)) for n in (-2, -1, 1, 2))
    assert debye_heat_ratio(temperature, 300) == pytest.approx(
        (a - 8 * b + 8 * c - d) / (12 * step * temperature), rel=1e-9
    )


@given(temperature=st.floats(0.1, 1e4), scale=st.floats(0.01, 100))
def test_only_the_reduced_temperature_matters(temperature, scale):
    assert debye_heat_ratio(temperature * scale, 300 * scale) == pytest.approx(
        debye_heat_ratio(temperature, 300), rel=1e-12
    )


def equality(temperature, fermi, debye, electrons, atoms):
    return (
        electrons
        * heat_capacity_ratio(temperature / fermi)
        / (3 * atoms * debye_heat_ratio(temperature, debye))
        - 1
    )


METALS = [
    (81600.0, 343.0, 1, 1),
    (37500.0, 158.0, 1, 1),
    (135000.0, 428.0, 3, 1),
    (18500.0, 40.5, 1, 1),
    (166000.0, 1440.0, 2, 1),
]


@pytest.mark.parametrize("metal", METALS)
def test_crossing_against_a_scalar_root_finder(metal):
    found = heat_crossover(*map(np.array, metal))
    assert found == pytest.approx(
        brentq(equality, found / 3, found * 3, args=metal, xtol=1e-13, rtol=1e-14), rel=1e-11
    )


def test_crossing_of_metals_is_nearly_that_of_the_limiting_laws():
    """γT = 12π⁴/5 r R (T/θ)³ gives T = (5 θ³ z / 24 π² r T_F)^{1/2}."""
    fermi, debye, electrons, atoms = map(np.array, zip(*METALS, strict=True))
    laws = np.sqrt(5 * debye**3 * electrons / (24 * np.pi**2 * atoms * fermi))
    assert heat_crossover(fermi, debye, electrons, atoms) == pytest.approx(laws, rel=2e-2)


def test_the_lowest_crossing_is_found_in_a_dilute_gas():
    """Electrons of a low Fermi temperature saturate before the lattice wakes."""
    arguments = (50.0, 300.0, 0.9, 1)
    found = float(heat_crossover(*arguments))
    temperatures = np.geomspace(1e-3, found * (1 - 1e-9), 4000)
    assert np.all(equality(temperatures, *arguments) > 0)
    assert abs(equality(found, *arguments)) < 1e-11


def test_a_crossing_above_the_steepest_point_is_found_too():
    """With nearly two electrons to an atom and T_F below θ the lattice overtakes late, where a grid is searched."""
    arguments = (50.0, 300.0, 1.8, 1)
    found = float(heat_crossover(*arguments))
    assert found > 0.3 * 300 and abs(equality(found, *arguments)) < 1e-11
    assert np.all(equality(np.geomspace(1e-3, found * (1 - 1e-9), 4000), *arguments) > 0)


def test_no_crossing_where_the_electrons_always_hold_more():
    assert np.isnan(heat_crossover(1.0, 300.0, 4.0, 1))
    assert np.isnan(heat_crossover(np.nan, 300.0, 1.0, 1)) and np.isnan(heat_crossover(8e4, np.nan, 1.0, 1))


def test_the_two_monotonies_that_make_the_search_complete():
    t = np.geomspace(1e-7, 1e3, 3000)
    assert np.all(np.diff(heat_capacity_ratio(t) / t) < 1e-13)
    reduced = np.linspace(0.001, 0.2799, 3000)
    assert np.all(np.diff(debye_heat_ratio(reduced, 1.0) / reduced) > 0)


def test_crossing_is_smooth_in_its_arguments():
    fermi = 81600 * (1 + 1e-5 * np.arange(-20, 21))
    values = heat_crossover(fermi, 343.0, 1, 1)
    fit = np.polynomial.polynomial.polyfit(np.arange(-20, 21), values, 3)
    assert (
        np.abs(values - np.polynomial.polynomial.polyval(np.arange(-20, 21), fit)).max()
        < 2e-14 * values.max()
    )


@given(scale=st.floats(0.1, 10))
def test_crossing_scales_with_both_temperatures(scale):
    assert heat_crossover(8e4 * scale, 300 * scale, 1, 1) == pytest.approx(
        scale * heat_crossover(8e4, 300, 1, 1), rel=1e-12
    )
