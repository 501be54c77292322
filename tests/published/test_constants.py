"""The constants are the CODATA set that the sheets name.

Values of CODATA 2022 as printed by NIST (https://physics.nist.gov/cuu/Constants/, May 2024). The exact ones are those
of the SI Brochure, 9th ed.; the measured ones differ from the 2018 set in the digits that are compared.
"""

from __future__ import annotations

import pytest
from scipy import constants as c
from support.printed import printed

from sheetgen.physics import drude
from sheetgen.quantities import gas, heat
from sheetgen.sheet import CONSTANTS

EXACT = {
    "speed of light in vacuum": (c.c, 299792458),
    "Planck constant over 2 pi": (c.hbar, 6.62607015e-34 / (2 * 3.141592653589793)),
    "elementary charge": (c.e, 1.602176634e-19),
    "Boltzmann constant": (c.k, 1.380649e-23),
    "Avogadro constant": (c.N_A, 6.02214076e23),
    "molar gas constant": (c.R, 1.380649e-23 * 6.02214076e23),
}
# (value in use, printed digits, power of ten, digits of the 2018 set)
MEASURED = {
    "electron mass": (c.m_e, "9.1093837139", -31, "9.1093837015"),
    "vacuum electric permittivity": (c.epsilon_0, "8.8541878188", -12, "8.8541878128"),
    "vacuum magnetic permeability": (c.mu_0, "1.25663706127", -6, "1.25663706212"),
    "Bohr radius": (gas.BOHR_RADIUS, "5.29177210544", -11, "5.29177210903"),
    "Bohr magneton": (heat.BOHR_MAGNETON, "9.2740100657", -24, "9.2740100783"),
}


@pytest.mark.parametrize("name", EXACT)
def test_exact_constants(name):
    used, defined = EXACT[name]
    assert used == pytest.approx(defined, rel=1e-15, abs=0)


@pytest.mark.parametrize("name", MEASURED)
def test_measured_constants_are_those_of_2022(name):
    used, digits, power, older = MEASURED[name]
    assert used / 10.0**power == printed(digits)
    assert used / 10.0**power != printed(older)


def test_sheets_name_the_set():
    assert CONSTANTS == "CODATA 2022"


def test_light_is_as_fast_in_the_physics():
    assert c.c == drude.SPEED_OF_LIGHT


def test_coulomb_energy_of_two_electrons():
    # e²/4πε₀ = α ħc with 1/α = 137.035999177 (CODATA 2022).
    assert c.hbar * c.c / gas.COULOMB == printed("137.035999177")
