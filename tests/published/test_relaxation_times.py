"""Relaxation times and mean free paths from printed resistivities and the densities printed beside them."""

from __future__ import annotations

import math

import pytest
from published.gases import half_unit, of_gas
from scipy import constants as c
from support.printed import printed

MICROOHM_CENTIMETRE = 1e-8  # Ω m

# Ashcroft & Mermin (1976): n (1e28/m³) of table 1.1.
DENSITY = {
    "Li": "4.70", "Na": "2.65", "K": "1.40", "Rb": "1.15", "Cs": "0.91", "Cu": "8.47", "Ag": "5.86", "Au": "5.90",
    "Be": "24.7", "Mg": "8.61", "Ca": "4.61", "Nb": "5.56", "Fe": "17.0", "Zn": "13.2", "Al": "18.1", "In": "11.5",
    "Sn": "14.8", "Pb": "13.2", "Bi": "14.1", "Sb": "16.5",
}  # fmt: skip

# Ashcroft & Mermin (1976): resistivity (µΩ cm) of table 1.2 and relaxation time (1e-14 s) of table 1.3 at 77, 273 and
# 373 K (from memory). The book pairs the cold density of the alkali metals with all three.
TIMES = [
    ("Li", 77, "1.04", "7.3"), ("Li", 273, "8.55", "0.88"), ("Li", 373, "12.4", "0.61"),
    ("Na", 77, "0.8", "17"),
    ("K", 273, "6.1", "4.1"),
    ("Rb", 77, "2.2", "14"), ("Rb", 273, "11.0", "2.8"),
    ("Cs", 77, "4.5", "8.6"), ("Cs", 273, "18.8", "2.1"),
    ("Cu", 77, "0.2", "21"),
    ("Ag", 77, "0.3", "20"), ("Ag", 273, "1.51", "4.0"),
    ("Au", 77, "0.5", "12"), ("Au", 273, "2.04", "3.0"), ("Au", 373, "2.84", "2.1"),
    ("Be", 273, "2.8", "0.51"), ("Be", 373, "5.3", "0.27"),
    ("Mg", 77, "0.62", "6.7"), ("Mg", 273, "3.9", "1.1"), ("Mg", 373, "5.6", "0.74"),
    ("Ca", 273, "3.43", "2.2"), ("Ca", 373, "5.0", "1.5"),
    ("Nb", 77, "3.0", "2.1"), ("Nb", 373, "19.2", "0.33"),
    ("Fe", 77, "0.66", "3.2"), ("Fe", 273, "8.9", "0.24"), ("Fe", 373, "14.7", "0.14"),
    ("Zn", 77, "1.1", "2.4"), ("Zn", 273, "5.5", "0.49"), ("Zn", 373, "7.8", "0.34"),
    ("Al", 77, "0.3", "6.5"), ("Al", 273, "2.45", "0.80"), ("Al", 373, "3.55", "0.55"),
    ("In", 273, "8.0", "0.38"),
    ("Sn", 77, "2.1", "1.1"), ("Sn", 273, "10.6", "0.23"), ("Sn", 373, "15.8", "0.15"),
    ("Pb", 77, "4.7", "0.57"), ("Pb", 373, "27.0", "0.099"),
    ("Bi", 273, "107", "0.023"), ("Bi", 373, "156", "0.016"),
    ("Sb", 77, "8", "0.27"), ("Sb", 273, "39", "0.055"), ("Sb", 373, "59", "0.036"),
]  # fmt: skip


@pytest.mark.parametrize("metal, temperature, resistivity, time", TIMES)
def test_relaxation_times_of_table_1_3(metal, temperature, resistivity, time):
    n = DENSITY[metal]
    measured = float(resistivity) * MICROOHM_CENTIMETRE
    found = of_gas("relaxation_time", carrier_density=float(n) * 1e28, measured_resistivity=measured) / 1e-14
    assert found == printed(time, inputs=half_unit(n) + half_unit(resistivity))


# Gall, J. Appl. Phys. 119, 085101 (2016), first page: free electrons give Cu and Ag mean free paths of 39 and 53 nm at
# room temperature (read). Densities as above; resistivities of the CRC Handbook at 293 K (µΩ cm).
@pytest.mark.parametrize("metal, resistivity, path", [("Cu", "1.678", "39"), ("Ag", "1.587", "53")])
def test_mean_free_paths_at_room_temperature(metal, resistivity, path):
    n = DENSITY[metal]
    measured = float(resistivity) * MICROOHM_CENTIMETRE
    found = of_gas("mean_free_path", carrier_density=float(n) * 1e28, measured_resistivity=measured) / 1e-9
    assert found == printed(path, inputs=2 * half_unit(n) / 3 + half_unit(resistivity))


@pytest.mark.parametrize("slug, path", [("copper", "39"), ("silver", "53")])
def test_mean_free_paths_of_the_handbook(handbook, slug, path):
    assert handbook[slug].si("mean_free_path") / 1e-9 == printed(path)


# Ashcroft & Mermin (1976), eqs. (1.8) and (2.91), from memory: τ = (0.22/ρ_µ)(r_s/a_0)³ × 1e-14 s and
# l = ((r_s/a_0)²/ρ_µ) × 92 Å, with ρ_µ in µΩ cm. The second is the product of the first and v_F = 4.20e6 m/s a_0/r_s,
# so that the rounding of 0.22 goes into it.
@pytest.mark.parametrize(
    "id, value, unit, power, inputs",
    [("relaxation_time", "0.22", 1e-14, 3, 0.0), ("mean_free_path", "92", 1e-10, 2, half_unit("0.22"))],
)
@pytest.mark.parametrize("radius", [1.87, 2.67, 5.62])
def test_rules_for_times_and_paths(id, value, unit, power, inputs, radius):
    n = 3 / (4 * math.pi * (radius * c.value("Bohr radius")) ** 3)
    found = of_gas(id, carrier_density=n, measured_resistivity=MICROOHM_CENTIMETRE) / unit
    assert found / radius**power == printed(value, inputs=inputs)


def test_path_times_resistivity_counts_the_fermi_surface():
    # Ashcroft & Mermin (1976), eq. (13.25) for an isotropic path: σ = e² l S_F/(12π³ħ), S_F the area of the Fermi
    # surface: here of the sphere.
    n = 8.47e28
    surface = 4 * math.pi * of_gas("fermi_wavevector", carrier_density=n) ** 2
    expected = 12 * math.pi**3 * c.hbar / (c.e**2 * surface)
    assert of_gas("resistivity_path_product", carrier_density=n) == pytest.approx(expected, rel=1e-12)
