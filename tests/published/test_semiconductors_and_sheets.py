"""Gases with a mass, valleys or two dimensions of their own, against values in print."""

from __future__ import annotations

import math

import pytest
from published.gases import half_unit, of_gas
from scipy import constants as c
from support.printed import printed

# Beenakker & van Houten, Solid State Physics 44, 1 (1991), table I: two-dimensional gases in GaAs and at the (100) face
# of silicon. From memory. Mass (m_e), valleys, density (1/m²), mobility (m²/Vs).
GAAS = {"effective_mass_ratio": 0.067, "valleys": 1.0, "carrier_sheet_density": 4e15}
SILICON = {"effective_mass_ratio": 0.19, "valleys": 2.0, "carrier_sheet_density": 1e15}
DENSE_SILICON = {**SILICON, "carrier_sheet_density": 1e16}
MILLI_EV, CM2 = 1e-3 * c.e, 1e-4


def contradicts(*case, reason: str):
    return pytest.param(*case, marks=pytest.mark.xfail(strict=True, reason=reason))


def with_mobility(gas: dict[str, float], mobility: float) -> dict[str, float]:
    """A gas with the sheet resistance that gives it a mobility in cm²/Vs."""
    resistance = 1 / (gas["carrier_sheet_density"] * c.e * mobility * CM2)
    return {**gas, "measured_sheet_resistance": resistance}


@pytest.mark.parametrize(
    "gas, id, value, unit",
    [
        (GAAS, "density_of_states", "0.28", 1e15 / MILLI_EV),
        contradicts(GAAS, "fermi_wavevector", "1.58", 1e8, reason="table I prints 1.58; its own density gives 1.585"),
        (GAAS, "fermi_velocity", "2.7", 1e5),
        (GAAS, "fermi_energy", "14", MILLI_EV),
        (GAAS, "fermi_wavelength", "40", 1e-9),
        (SILICON, "density_of_states", "1.59", 1e15 / MILLI_EV),
        (SILICON, "fermi_wavevector", "0.56", 1e8),
        (SILICON, "fermi_velocity", "0.34", 1e5),
        (SILICON, "fermi_energy", "0.63", MILLI_EV),
        (SILICON, "fermi_wavelength", "112", 1e-9),
        (DENSE_SILICON, "fermi_wavevector", "1.77", 1e8),
        (DENSE_SILICON, "fermi_velocity", "1.1", 1e5),
        (DENSE_SILICON, "fermi_energy", "6.3", MILLI_EV),
        (DENSE_SILICON, "fermi_wavelength", "35", 1e-9),
    ],
)
def test_two_dimensional_gases(gas, id, value, unit):
    assert of_gas(id, dimension=2, **gas) / unit == printed(value)


# The same table. What it multiplies out from its own rounded velocity (2.7, 0.34, 1.1) and time (0.38, 1.1) carries
# their rounding.
FAST, SLOW, QUICK = half_unit("2.7"), half_unit("0.34"), half_unit("1.1")
PICOSECOND, SHORT = half_unit("1.1"), half_unit("0.38")


@pytest.mark.parametrize(
    "gas, mobility, id, value, unit, inputs",
    [
        (GAAS, 1e4, "relaxation_time", "0.38", 1e-12, 0),
        (GAAS, 1e6, "relaxation_time", "38", 1e-12, 0),
        (GAAS, 1e4, "diffusion_coefficient", "1.4", 1e2 * CM2, 2 * FAST + SHORT),
        (GAAS, 1e6, "diffusion_coefficient", "1.4", 1e4 * CM2, 2 * FAST + SHORT),
        (GAAS, 1e4, "mean_free_path", "1", 1e-7, 0),
        (GAAS, 1e6, "mean_free_path", "1", 1e-5, 0),
        (GAAS, 1e4, "cyclotron_angle_per_tesla", "1", 1, 0),
        (GAAS, 1e6, "cyclotron_angle_per_tesla", "1.0", 1e2, 0),
        (SILICON, 1e4, "relaxation_time", "1.1", 1e-12, 0),
        (SILICON, 1e4, "diffusion_coefficient", "6.4", CM2, 2 * SLOW + PICOSECOND),
        (SILICON, 1e4, "mean_free_path", "37", 1e-9, SLOW + PICOSECOND),
        (SILICON, 1e4, "path_wavevector_product", "2.1", 1, 0),
        (DENSE_SILICON, 1e4, "diffusion_coefficient", "64", CM2, 2 * QUICK + PICOSECOND),
        (DENSE_SILICON, 1e4, "mean_free_path", "118", 1e-9, QUICK + PICOSECOND),
        (DENSE_SILICON, 1e4, "path_wavevector_product", "21", 1, 0),
        contradicts(
            GAAS, 1e4, "path_wavevector_product", "15.8", 1, 0,
            reason="table I prints 15.8, its k_F times 100 nm; its k_F and mobility give 16.5",
        ),
    ],
)  # fmt: skip
def test_transport_in_two_dimensions(gas, mobility, id, value, unit, inputs):
    found = of_gas(id, dimension=2, **with_mobility(gas, mobility))
    assert found / unit == printed(value, inputs=inputs)


def test_cyclotron_radius():
    # The same table: ħk_F/eB = 100 nm at 1 T in GaAs; v_F over the cyclotron frequency.
    velocity = of_gas("fermi_velocity", dimension=2, **GAAS)
    radius = velocity / of_gas("cyclotron_frequency_per_tesla", dimension=2, **GAAS)
    assert radius / 1e-7 == printed("1.0")


def test_oscillations_count_landau_levels():
    # At a field B the gas fills ν = 2F/B levels, one for each spin, and its Hall resistance is R_K/ν, with the von
    # Klitzing constant of CODATA 2022, 25 812.807 45… Ω (exact, printed to ten digits).
    frequency = of_gas("oscillation_frequency", dimension=2, **GAAS)
    hall = abs(of_gas("sheet_hall_coefficient", dimension=2, **GAAS))
    assert hall * 2 * frequency == printed("25812.8075")


def test_handbook_well_is_that_of_the_table(handbook):
    well = handbook["gallium-arsenide-quantum-well"]
    assert well.si("fermi_energy") / MILLI_EV == printed("14")
    assert well.si("fermi_wavelength") / 1e-9 == printed("40")
    coldest = min(well.entries("mean_free_path"), key=lambda entry: entry["temperature"])
    assert coldest["value"] / 1e4 == printed("1.0", inputs=0.1)  # nm, for the resistance that the record rounds


# Chen et al., IEEE J. Quantum Electron. (2010), abstract (read): sputtered In₂O₃:Sn with 2.79e20 and 4.10e20 electrons
# per cm³ has plasma frequencies (unscreened) of 1590 and 1930 rad THz, mobilities of 32.7 to 34.2 cm²/Vs and scattering
# times of 6 to 7 fs. The mass of 0.35 m_e is Hamberg & Granqvist's (1986), from memory.
ITO_MASS = "0.35"


@pytest.mark.parametrize("density, frequency", [("2.79", "1.59"), ("4.10", "1.93")])
def test_plasma_frequency_of_indium_tin_oxide(density, frequency):
    found = of_gas("plasma_frequency", carrier_density=float(density) * 1e26, effective_mass_ratio=float(ITO_MASS))
    assert found / 1e15 == printed(frequency, inputs=(half_unit(density) + half_unit(ITO_MASS)) / 2)


@pytest.mark.parametrize("density", [2.79e26, 4.10e26])
@pytest.mark.parametrize("mobility", [32.7, 34.2])
def test_scattering_time_of_indium_tin_oxide(density, mobility):
    resistivity = 1 / (density * c.e * mobility * CM2)
    gas = {"carrier_density": density, "effective_mass_ratio": float(ITO_MASS), "measured_resistivity": resistivity}
    assert 6 <= of_gas("relaxation_time", **gas) / 1e-15 <= 7
    assert of_gas("mobility", **gas) / CM2 == pytest.approx(mobility, rel=1e-12)


def test_free_electrons_fail_titanium_nitride(handbook):
    # Chawla, Zhang & Gall, J. Appl. Phys. 113, 063704 (2013), abstract (read): the path measured in TiN(001) at 298 K
    # is 45 ± 4 nm, an order of magnitude above the free-electron prediction.
    (warm,) = [entry for entry in handbook["titanium-nitride"].entries("mean_free_path") if entry["temperature"] == 298]
    assert round(math.log10(45 / warm["value"])) == 1


def test_holes_turn_the_signs():
    # Ashcroft & Mermin (1976), ch. 12: holes have the Hall coefficient and the thermopower of positive charges.
    gas = {"carrier_density": 1e25, "temperature": 300.0}
    for id in ("hall_coefficient", "thermopower"):
        assert of_gas(id, **gas, charge_sign=1.0) == -of_gas(id, **gas) > 0


def test_six_valleys_of_silicon():
    # Sze & Ng (2007), from memory: m_l = 0.98, m_t = 0.19; density-of-states mass of a valley 0.33, of all six 1.08,
    # conductivity mass 0.26. Six valleys with the one mass hold as many states as one valley with the other.
    light, heavy = 0.19, 0.98
    valley = (light**2 * heavy) ** (1 / 3)
    assert valley == printed("0.33")
    assert 6 ** (2 / 3) * valley == printed("1.08")
    assert 3 / (2 / light + 1 / heavy) == printed("0.26")
    six = of_gas("fermi_energy", carrier_density=1e26, valleys=6.0, effective_mass_ratio=valley)
    one = of_gas("fermi_energy", carrier_density=1e26, effective_mass_ratio=6 ** (2 / 3) * valley)
    assert six == pytest.approx(one, rel=1e-12)
