"""Hall coefficients and Lorenz numbers: what free electrons give in print, and what was measured."""

from __future__ import annotations

import pytest
from published.gases import half_unit, of_gas
from scipy import constants as c
from support.printed import printed

from sheetgen.standing import thresholds

# 1e-24 of the Gaussian unit in m³/C: Kittel prints −1/nec, the SI has −1/ne.
GAUSSIAN = 1e-24 * c.c**2 / 1e3


def contradicts(*case, reason: str):
    return pytest.param(*case, marks=pytest.mark.xfail(strict=True, reason=reason))


# Kittel, ch. 6: −1/nec of table 4 (1e-24 Gaussian) and n of table 1 (1e28/m³), both read in the chapter.
@pytest.mark.parametrize(
    "n, coefficient",
    [
        ("1.40", "-4.944"),  # K
        ("8.45", "-0.82"),  # Cu
        ("5.85", "-1.19"),  # Ag
        ("5.90", "-1.18"),  # Au
        contradicts("2.65", "-2.603", reason="Na: table 4 prints −2.603; n of table 1 gives −2.621"),
    ],
)
def test_hall_coefficients_of_kittel(n, coefficient):
    found = of_gas("hall_coefficient", carrier_density=float(n) * 1e28) / GAUSSIAN
    assert found == printed(coefficient, inputs=half_unit(n))


# The same tables for metals in strong fields, where the sign is that of one hole per atom: a third of the three
# electrons that table 1 counts.
@pytest.mark.parametrize(
    "n, coefficient",
    [
        contradicts("18.06", "1.135", reason="Al: table 4 prints 1.135; n of table 1 gives 1.154"),
        contradicts("11.49", "1.780", reason="In: table 4 prints 1.780; n of table 1 gives 1.813"),
    ],
)
def test_hole_hall_coefficients_of_kittel(n, coefficient):
    found = of_gas("hall_coefficient", carrier_density=float(n) * 1e28 / 3, charge_sign=1.0) / GAUSSIAN
    assert found == printed(coefficient, inputs=half_unit(n))


# Greenfield, Phys. Rev. 135, A1589 (1964), abstract (read): in these liquids the Hall coefficient (1e-11 m³/C) is that
# of free electrons; gallium known to 2.5 %, the others to 1.5 % of it. Densities of the liquids at the melting point
# (g/cm³) from the CRC Handbook (from memory), atomic weights from CIAAW.
LIQUIDS = [("-7.2", "8.00", 112.414, 2), ("-5.2", "6.57", 65.38, 2), ("-4.4", "6.99", 118.710, 4)]  # Cd, Zn, Sn


@pytest.mark.parametrize("coefficient, density, weight, valence", LIQUIDS)
def test_hall_coefficients_of_liquid_metals(coefficient, density, weight, valence):
    carriers = valence * float(density) * 1e3 / (weight * 1e-3) * c.N_A
    found = of_gas("hall_coefficient", carrier_density=carriers) / 1e-11
    measured = (0.025**2 + 0.015**2) ** 0.5
    assert found == printed(coefficient, inputs=measured + half_unit(density))


def test_liquid_mercury_agrees(handbook):
    # The same abstract: −7.6e-11 m³/C, equal to the free-electron value.
    (held,) = [one for one in handbook["mercury-liquid"].confrontations if one.quantity == "hall_coefficient"]
    assert held.model / 1e-11 == printed("-7.6", inputs=0.025)
    assert held.standing == "agrees"


# ------------------------------------------------------------------------------------------------ Lorenz numbers


@pytest.mark.parametrize(
    "value",
    [
        "2.44",  # Ashcroft & Mermin (1976), eq. (2.93)
        "2.443",  # Sommerfeld's (π²/3)(k_B/e)² with the exact constants of the SI
        contradicts("2.45", reason="Kittel, eq. 59, prints 2.45e-8; its formula gives 2.443e-8"),
    ],
)
def test_lorenz_number(value):
    assert of_gas("lorenz_number", degeneracy=2.0) / 1e-8 == printed(value)


# Kittel, ch. 6, table 5: measured Lorenz numbers (1e-8 W Ω/K²) at 273 K, read.
@pytest.mark.parametrize(
    "slug, lorenz",
    [("gold", "2.35"), ("copper", "2.23"), ("cadmium", "2.42"), ("tin", "2.52"), ("molybdenum", "2.61"),
     ("tungsten", "3.04")],
)  # fmt: skip
def test_standing_is_that_of_kittels_lorenz_numbers(handbook, slug, lorenz):
    ratio = float(lorenz) * 1e-8 / of_gas("lorenz_number", degeneracy=2.0)
    expected = thresholds(handbook.imprint).grade(ratio, 0.0)
    standings = {
        one.standing for one in handbook[slug].confrontations if one.quantity == "electron_thermal_conductivity"
    }
    assert standings == {expected}


def test_lorenz_ratio_of_sodium(handbook):
    # "Thermal and Electrical Conductivities of Sodium from 40 to 360 K", abstract (read): above 300 K the ratio of the
    # Lorenz number to Sommerfeld's levels off at about 0.91.
    (held,) = [one for one in handbook["sodium"].confrontations if one.quantity == "electron_thermal_conductivity"]
    assert held.temperature == 300
    assert held.ratio == pytest.approx(0.91, abs=0.005 + held.ratio_uncertainty)
