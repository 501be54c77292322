"""Relations between quantities that share no code with the way they are computed, and scaling laws."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from quantities.small import COPPER, WELL, handbook_of
from scipy import constants as c

from sheetgen.quantities import registry
from sheetgen.quantities.evaluate import evaluate


@pytest.fixture(scope="module")
def copper(tmp_path_factory):
    return handbook_of(tmp_path_factory.mktemp("copper"), copper=COPPER)["copper"]


@pytest.fixture(scope="module")
def well(tmp_path_factory):
    return handbook_of(tmp_path_factory.mktemp("well"), well=WELL)["well"]


def test_fermi_velocity_carries_the_fermi_energy(copper):
    assert c.m_e * copper.si("fermi_velocity") ** 2 / 2 == pytest.approx(copper.si("fermi_energy"), rel=1e-12)


def test_three_halves_of_the_density_fill_the_states(copper):
    n, energy, states = (copper.si(id) for id in ("electron_density", "fermi_energy", "density_of_states"))
    assert 3 * n == pytest.approx(2 * energy * states, rel=1e-12)


def test_states_below_the_fermi_level_hold_all_electrons(copper):
    energies = np.linspace(0, 1, 200_001)[1:]
    # The density of states of a parabola, whose value at E_F is the declared one.
    states = copper.si("density_of_states") * np.sqrt(energies)
    count = np.trapezoid(np.append(0, states), np.append(0, energies)) * copper.si("fermi_energy")
    assert count == pytest.approx(copper.si("electron_density"), rel=1e-6)


def test_the_sphere_of_wavevectors_holds_all_electrons(copper):
    sphere = 4 / 3 * np.pi * copper.si("fermi_wavevector") ** 3
    assert 2 * sphere / (2 * np.pi) ** 3 == pytest.approx(copper.si("electron_density"), rel=1e-12)


def test_cyclotron_angle_is_mobility_times_field(copper):
    assert copper.si("cyclotron_angle_per_tesla") == pytest.approx(copper.si("mobility"), rel=1e-12)


def test_einstein_relation(copper):
    states, diffusion = copper.si("density_of_states"), copper.si("diffusion_coefficient")
    assert c.e**2 * states * diffusion == pytest.approx(copper.si("conductivity"), rel=1e-12)


def test_conductivity_is_charge_times_density_times_mobility(copper):
    assert c.e * copper.si("electron_density") * copper.si("mobility") == pytest.approx(
        copper.si("conductivity"), rel=1e-12
    )


def test_wiedemann_and_franz(copper):
    for index, temperature in enumerate((293.15, 77.0)):
        quotient = copper.list_si("electron_thermal_conductivity")[index] / copper.list_si("conductivity")[index]
        assert quotient == pytest.approx(copper.si("lorenz_number") * temperature, rel=1e-12)


def test_kinetic_theory_gives_the_heat_conducted(copper):
    # κ = C v l / 3 with the heat capacity per volume γT of the degenerate gas.
    molar_volume = c.N_A / copper.si("atomic_density")
    heat = copper.si("heat_coefficient") * 293.15 / molar_volume
    conducted = heat * copper.si("fermi_velocity") * copper.si("mean_free_path") / 3
    assert conducted == pytest.approx(copper.si("electron_thermal_conductivity"), rel=1e-12)


def test_bulk_modulus_is_the_slope_of_the_pressure(copper):
    assert copper.si("bulk_modulus") == pytest.approx(5 / 3 * copper.si("degeneracy_pressure"), rel=1e-12)


def test_pressure_is_two_thirds_of_the_energy_density(copper):
    energy_density = copper.si("electron_density") * copper.si("mean_energy")
    assert copper.si("degeneracy_pressure") == pytest.approx(2 / 3 * energy_density, rel=1e-12)


def test_landau_takes_back_a_third_of_pauli(copper):
    assert copper.si("landau_susceptibility") == pytest.approx(-copper.si("pauli_susceptibility") / 3, rel=1e-12)
    assert copper.si("conduction_susceptibility") == pytest.approx(copper.si("pauli_susceptibility") * 2 / 3, rel=1e-12)


def test_london_depth_is_light_over_plasma_frequency(copper):
    assert copper.si("london_depth") == pytest.approx(c.c / copper.si("plasma_frequency"), rel=1e-9)


def test_quantum_oscillations_count_the_extremal_area(copper):
    # Onsager: F = ħA/2πe with the area A of the belly.
    area = np.pi * copper.si("fermi_wavevector") ** 2
    assert copper.si("oscillation_frequency") == pytest.approx(c.hbar * area / (2 * np.pi * c.e), rel=1e-12)


def test_contact_is_where_the_ratio_is_one(copper):
    ratio = copper.si("fermi_to_zone_ratio")
    assert copper.si("contact_electron_count") == pytest.approx(ratio**-3, rel=1e-12)


def test_zones_are_filled_by_half_the_electrons(copper):
    assert sum(copper.entries("zone_occupation")[0]["value"]) == pytest.approx(0.5, abs=1e-4)


def test_at_the_thermal_edge_the_spacing_is_the_thermal_energy(copper):
    for edge, temperature in zip(copper.list_si("thermal_edge"), (293.15, 4.2, 77.0), strict=True):
        assert 2 / (edge**3 * copper.si("density_of_states")) == pytest.approx(c.k * temperature, rel=1e-12)


def test_skin_depth_reaches_the_path_at_the_anomalous_frequency(copper):
    # δ falls as the root of the frequency.
    frequency = copper.si("anomalous_skin_frequency")
    depth = copper.si("skin_depth") * (1e9 / frequency) ** 0.5
    assert depth == pytest.approx(copper.si("mean_free_path"), rel=1e-12)


def test_heat_capacity_starts_with_the_coefficient(copper):
    cold = copper.entries("electron_heat_capacity")[1]
    assert cold["temperature"] == 4.2
    assert cold["value"] == pytest.approx(copper.entries("heat_coefficient")[0]["value"] * 4.2, rel=1e-8)


def test_resistivity_curve_passes_through_its_reference(copper):
    at_reference = copper.entries("resistivity_from_debye")[0]
    assert at_reference["temperature"] == 293.15
    assert at_reference["value"] == pytest.approx(1.678, rel=1e-12)


def test_the_disc_of_wavevectors_holds_the_sheet(well):
    disc = np.pi * well.si("fermi_wavevector") ** 2
    assert 2 * disc / (2 * np.pi) ** 2 == pytest.approx(well.si("sheet_density"), rel=1e-12)


def test_einstein_relation_of_a_sheet(well):
    diffusion, states = well.si("diffusion_coefficient"), well.si("density_of_states")
    assert c.e**2 * states * diffusion == pytest.approx(1 / 20, rel=1e-12)


def test_the_density_of_states_of_a_sheet_knows_no_density(well):
    assert well.si("density_of_states") == pytest.approx(0.067 * c.m_e / (np.pi * c.hbar**2), rel=1e-12)


def _with_density(density: float, **further: float) -> dict[str, np.ndarray]:
    """Values of the gas of a given density (m⁻³), other inputs at their defaults."""
    given = {name: np.full((1, 1, 1), np.nan) for name in registry().inputs}
    for name, value in {"effective_mass_ratio": 1, "valleys": 1, "background_permittivity": 1, **further}.items():
        given[name] = np.full((1, 1, 1), float(value))
    given["carrier_density"] = np.full((1, 1, 1), density)
    plan = registry().plans["material", 3]
    # The density is given, so nothing of a structure is read.
    unread = {"cell", "cell_volume", "electrons_per_cell"}
    given |= {name: np.full((1, 1, 1), np.nan) for name in unread}
    return evaluate(plan, given, only=plan.needed_for(POWERS) - unread)


POWERS = {
    "fermi_wavevector": 1 / 3, "fermi_wavelength": -1 / 3, "fermi_energy": 2 / 3, "fermi_temperature": 2 / 3,
    "fermi_velocity": 1 / 3, "density_of_states": 1 / 3, "mean_energy": 2 / 3, "degeneracy_pressure": 5 / 3,
    "bulk_modulus": 5 / 3, "exchange_energy": 1 / 3, "plasma_frequency": 1 / 2, "plasma_energy": 1 / 2,
    "plasma_wavelength": -1 / 2, "surface_plasmon_energy": 1 / 2, "sphere_plasmon_energy": 1 / 2,
    "thomas_fermi_length": -1 / 6, "london_depth": -1 / 2, "oscillation_frequency": 2 / 3,
    "electron_sphere_radius": -1 / 3, "effective_electron_sphere_radius": -1 / 3,
}  # fmt: skip


@settings(deadline=None, max_examples=30)
@given(exponent=st.floats(20, 31), factor=st.floats(0.01, 100))
def test_everything_scales_with_its_power_of_the_density(exponent, factor):
    once, again = _with_density(10**exponent), _with_density(10**exponent * factor)
    for id, power in POWERS.items():
        assert again[id].item() == pytest.approx(once[id].item() * factor**power, rel=1e-10), id


@settings(deadline=None, max_examples=30)
@given(mass=st.floats(0.01, 100))
def test_masses_enter_where_the_definition_says(mass):
    free, heavy = _with_density(8.5e28), _with_density(8.5e28, effective_mass_ratio=mass)
    for id, power in {"fermi_wavevector": 0, "fermi_energy": -1, "fermi_velocity": -1, "density_of_states": 1,
                      "plasma_frequency": -0.5, "effective_electron_sphere_radius": 1}.items():  # fmt: skip
        assert heavy[id].item() == pytest.approx(free[id].item() * mass**power, rel=1e-10), id
    apart = _with_density(
        8.5e28, effective_mass_ratio=mass, stated_conductivity_mass_ratio=1, stated_optical_mass_ratio=1
    )
    assert apart["plasma_frequency"].item() == pytest.approx(free["plasma_frequency"].item(), rel=1e-12)
    assert apart["fermi_velocity"].item() == pytest.approx(free["fermi_velocity"].item() * mass**-0.5, rel=1e-10)


@settings(deadline=None, max_examples=20)
@given(valleys=st.integers(1, 12))
def test_valleys_share_the_electrons(valleys):
    single, several = _with_density(1e25), _with_density(1e25, valleys=valleys)
    assert several["fermi_energy"].item() == pytest.approx(
        single["fermi_energy"].item() * valleys ** (-2 / 3), rel=1e-10
    )
    assert several["plasma_frequency"].item() == pytest.approx(single["plasma_frequency"].item(), rel=1e-12)
