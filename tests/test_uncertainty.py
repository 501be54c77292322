"""First-order propagation: correlated paths, what cancels, inputs of zero, and kinks."""

import math

import numpy as np
import pytest
from quantities.small import COPPER, handbook_of
from scipy import constants as c

from sheetgen.physics import films

FILM = """\
specimens:
  - {name: F-1, form: film, thickness: 20(2) nm, specularity: 0.0(1), invented: true}
"""


@pytest.fixture(scope="module")
def copper(tmp_path_factory):
    return handbook_of(tmp_path_factory.mktemp("copper"), copper=COPPER + FILM)["copper"]


def relative(sheet, id: str, entry: int = 0) -> float:
    stated = sheet.entries(id)[entry]
    return stated["standard_uncertainty"] / abs(stated["value"])


# Powers of the lattice constant, by hand: n ∝ a⁻³, k_F ∝ a⁻¹, E_F ∝ a⁻², B ∝ a⁻⁵, ω_p ∝ a^(−3/2).
@pytest.mark.parametrize(
    "id, power",
    [
        ("electron_density", 3),
        ("fermi_wavevector", 1),
        ("fermi_energy", 2),
        ("bulk_modulus", 5),
        ("plasma_energy", 1.5),
    ],
)
def test_a_power_of_one_input(copper, id, power):
    assert relative(copper, id) == pytest.approx(power * 0.0003 / 3.6149, rel=1e-6)


def test_two_inputs_add_in_squares_with_their_shares(copper):
    # l = v_F m/(n e² ρ) ∝ a² / ρ
    cell, resistivity = 2 * 0.0003 / 3.6149, 0.009 / 1.678
    (path, *_) = copper.entries("mean_free_path")
    assert relative(copper, "mean_free_path") == pytest.approx(math.hypot(cell, resistivity), rel=1e-6)
    assert path["budget"]["measured.resistivity"] == pytest.approx(
        resistivity**2 / (cell**2 + resistivity**2), rel=1e-5
    )
    assert sum(path["budget"].values()) == pytest.approx(1, rel=1e-12)


def test_an_input_along_several_paths_counts_once(copper):
    # D = v_F² τ/3: v_F² ∝ a⁻², τ ∝ a³/ρ; adding the two in squares would give √13 where the truth is 1.
    cell, resistivity = 0.0003 / 3.6149, 0.009 / 1.678
    assert relative(copper, "diffusion_coefficient") == pytest.approx(math.hypot(cell, resistivity), rel=1e-6)


@pytest.mark.parametrize("id", ["packing_fraction", "fermi_to_zone_ratio", "contact_electron_count", "lorenz_number"])
def test_what_cancels_or_has_no_input_shows_no_uncertainty(copper, id):
    (entry,) = copper.entries(id)
    assert "standard_uncertainty" not in entry and "budget" not in entry


@pytest.mark.parametrize("id", ["atoms_per_cell", "states_hard_wall", "hard_wall_deficit", "zone_occupation"])
def test_counts_show_no_uncertainty(copper, id):
    assert all("standard_uncertainty" not in entry for entry in copper.entries(id))


def test_inputs_without_an_uncertainty_leave_none(tmp_path):
    text = COPPER.replace("3.6149(3)", "3.6149").replace("1.678(9)", "1.678")
    sheet = handbook_of(tmp_path, copper=text)["copper"]
    for id in ("fermi_energy", "electron_density", "hall_coefficient"):
        assert all("standard_uncertainty" not in entry for entry in sheet.entries(id))
    reference, cold = sheet.entries("mean_free_path")
    assert "standard_uncertainty" not in reference
    assert cold["budget"] == {"measured.resistivity@77": 1.0}


def test_a_shared_mass_is_booked_once(tmp_path):
    text = COPPER.replace("  valence: 1\n", "  valence: 1\n  effective mass: 1.01(2)\n")
    sheet = handbook_of(tmp_path, copper=text)["copper"]
    # σ is measured; τ ∝ m, v_F ∝ 1/m: the path does not depend on the mass.
    assert "electrons.effective_mass" not in sheet.entries("mean_free_path")[0]["budget"]
    assert sheet.entries("relaxation_time")[0]["budget"]["electrons.effective_mass"] > 0.5
    apart = handbook_of(tmp_path / "apart", copper=text.replace("1.01(2)", "1.01(2)\n  conductivity mass: 1.01(2)"))[
        "copper"
    ]
    shares = apart.entries("mean_free_path")[0]["budget"]
    # v_F ∝ 1/√(m m_c), τ ∝ m_c: each mass moves the path by half its own relative uncertainty.
    assert shares["electrons.effective_mass"] == pytest.approx(shares["electrons.conductivity_mass"], rel=1e-4)


def test_an_input_of_zero_still_counts(copper):
    surface = copper.data["specimens"][0]["quantities"]["film_resistivity_surface"]
    path = copper.si("mean_free_path")
    thickness = 20e-9
    # Slope in p by a route of its own: a wide difference of the published integral.
    up, down = (films.surface_factor(thickness / path, p) for p in (0.02, 0.0))
    slope = (up - down) / 0.02 * 1.678
    by_specularity = surface["budget"]["specimens.1.specularity"] ** 0.5 * surface["standard_uncertainty"]
    assert by_specularity == pytest.approx(abs(slope) * 0.1, rel=0.02)


def test_a_kinked_quantity_takes_the_difference_over_the_uncertainty(copper):
    density, width = copper.si("electron_density"), 2e-9

    def energy(thickness):
        wavevector = films.film_fermi_wavevector(np.array(density), np.array(thickness), np.array(2.0))
        return (c.hbar * wavevector) ** 2 / (2 * c.m_e) / c.e

    expected = abs(energy(20e-9 + width) - energy(20e-9 - width)) / 2
    entry = copper.data["specimens"][0]["quantities"]["film_fermi_energy"]
    by_thickness = entry["budget"]["specimens.1.thickness"] ** 0.5 * entry["standard_uncertainty"]
    assert by_thickness == pytest.approx(expected, rel=1e-6)
