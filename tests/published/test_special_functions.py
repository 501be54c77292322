"""Special functions against printed tables, each value with its source and within its printed digits."""

from __future__ import annotations

import numpy as np
import pytest
from support.printed import printed

from sheetgen.physics.bloch_grueneisen import bloch_grueneisen_shape
from sheetgen.physics.debye import debye_function, debye_heat_ratio
from sheetgen.physics.occupation import fermi_integral, inverse_fermi_integral

# Test values of the GNU Scientific Library (specfunc/test_sf.c), which gives them to about 20 digits; they are
# normalised by Γ(j+1). A double holds 16 digits: a relative 1e-13 is asked for.
GSL_FERMI_DIRAC = [
    (0.5, -2.0, "0.1292985133200755911"),
    (0.5, -1.0, "0.3277951592607115477"),
    (0.5, -0.4, "0.5522452153690688947"),
    (0.5, 0.4, "1.0386797503389389277"),
    (0.5, 1.0, "1.5756407761513002308"),
    (0.5, 1.5, "2.1448608775831140360"),
    (0.5, 2.5, "3.606975377950373251"),
    (0.5, 10.0, "24.084656964637653615"),
    (-0.5, -0.4, "0.4631755336886027800"),
    (-0.5, 0.4, "0.7654084737661656915"),
    (-0.5, 1.0, "1.0270571254743506890"),
    (-0.5, 2.5, "1.6663128834358313625"),
    (-0.5, 10.0, "3.552779239536617160"),
    (-0.5, 12.0, "3.897268231925439359"),
    (-0.5, 50.0, "7.977530858581869960"),
]


@pytest.mark.parametrize("order, eta, value", GSL_FERMI_DIRAC)
def test_fermi_dirac_integrals_of_the_gsl(order, eta, value):
    assert fermi_integral(order, eta) == pytest.approx(float(value), rel=1e-13)
    assert inverse_fermi_integral(order, float(value)) == pytest.approx(eta, rel=2e-12)


# J. McDougall and E. C. Stoner, Philosophical Transactions of the Royal Society A 237, 67 (1938): the integrals
# ∫ xʲ/(e^{x−η}+1) dx without normalisation, quoted from memory to fewer digits than the table prints.
@pytest.mark.parametrize(
    "order, eta, value",
    [
        (0.5, -4.0, "0.016128"),
        (0.5, 0.0, "0.678094"),
        (0.5, 1.0, "1.39638"),
        (0.5, 4.0, "5.77073"),
        (0.5, 10.0, "21.3445"),
        (1.5, 0.0, "1.152804"),
    ],
)
def test_fermi_dirac_integrals_of_mcdougall_and_stoner(order, eta, value):
    bare = fermi_integral(order, eta) * {0.5: np.sqrt(np.pi) / 2, 1.5: 0.75 * np.sqrt(np.pi)}[order]
    assert bare == printed(value)


# The same source: D_n(x) = (n/xⁿ) ∫₀ˣ tⁿ/(eᵗ−1) dt.
@pytest.mark.parametrize(
    "order, x, value",
    [
        (3, 0.1, "0.962999940487211048"),
        (3, 1.0, "0.674415564077814667"),
        (3, 10.0, "0.0192957656903454886"),
        (4, 1.0, "0.654874068886737049"),
        (4, 10.0, "0.00967367556027115896"),
        (5, 0.1, "0.95892849428310568745"),
        (5, 1.0, "0.6421002580217790246"),
        (5, 10.0, "0.005701535852992908538"),
    ],
)
def test_debye_functions_of_the_gsl(order, x, value):
    assert debye_function(order, x) == pytest.approx(float(value), rel=1e-13)


# M. Abramowitz and I. A. Stegun, Handbook of Mathematical Functions, table 27.1, quoted from memory.
@pytest.mark.parametrize(
    "order, x, value",
    [
        (1, 1.0, "0.777505"),
        (2, 1.0, "0.707878"),
        (3, 1.0, "0.674416"),
        (4, 1.0, "0.654874"),
        (1, 0.1, "0.975278"),
        (2, 0.1, "0.967083"),
        (3, 0.1, "0.963000"),
        (4, 0.1, "0.960555"),
        (1, 10.0, "0.164443"),
        (3, 10.0, "0.019296"),
    ],
)
def test_debye_functions_of_the_handbook(order, x, value):
    assert debye_function(order, x) == printed(value)


# GNU Scientific Library, transport integrals J(5, x) = ∫₀ˣ t⁵ eᵗ/(eᵗ−1)² dt (specfunc/test_sf.c), x = θ/T.
@pytest.mark.parametrize(
    "x, value",
    [
        (0.1, "0.000024986116317791487410"),
        (1.0, "0.236615879239094789259153"),
        (3.0, "12.77055769104415951115760"),
        (5.0, "50.26309221817518778543615"),
    ],
)
def test_transport_integrals_of_the_gsl(x, value):
    assert bloch_grueneisen_shape(1 / x, 1.0) * x**5 == pytest.approx(float(value), rel=1e-13)


def test_low_temperature_constants_of_the_textbooks():
    """C. Kittel, Introduction to Solid State Physics: 12π⁴/5 = 234 in Debye's law; 5! ζ(5) = 124.43 in Bloch's."""
    assert 3 * debye_heat_ratio(1e-3, 1.0) / 1e-9 == printed("234")
    assert bloch_grueneisen_shape(1e-3, 1.0) / 1e-15 == printed("124.43")
