"""Sheets of electrons, holes and what a record without a structure or a resistivity leaves out."""

import pytest
from quantities.small import COPPER, WELL, handbook_of
from scipy import constants as c


@pytest.fixture(scope="module")
def well(tmp_path_factory):
    return handbook_of(tmp_path_factory.mktemp("well"), well=WELL)["well"]


# Beenakker and van Houten, Solid State Physics 44, 1 (1991), table 1: a GaAs heterostructure of 4e11 cm⁻².
def test_a_published_sheet(tmp_path):
    text = WELL.replace("3.0(1)e11", "4e11").replace("20(1) Ω", "15.6 Ω")
    sheet = handbook_of(tmp_path, well=text)["well"]
    value = {id: sheet.entries(id)[0]["value"] for id in ("fermi_energy", "fermi_wavevector", "fermi_wavelength")}
    assert value["fermi_energy"] == pytest.approx(14e-3, abs=0.5e-3)
    assert value["fermi_wavelength"] == pytest.approx(40, abs=0.5)
    assert sheet.entries("density_of_states")[0]["value"] * 1e14 == pytest.approx(2.8e13, abs=0.05e13)
    assert sheet.entries("fermi_velocity")[0]["value"] == pytest.approx(2.7e5, abs=0.05e5)


def test_the_sheet_keeps_its_density(well):
    (entry,) = well.entries("sheet_density")
    assert entry["value"] == pytest.approx(3e11, rel=1e-12)
    assert entry["standard_uncertainty"] == pytest.approx(1e10, rel=1e-9)
    assert entry["budget"] == {"electrons.density": 1.0}


def test_three_dimensional_lines_are_absent(well):
    absent = {"electron_density", "plasma_energy", "hall_coefficient", "bulk_modulus", "skin_depth", "states_periodic"}
    assert absent.isdisjoint(well.data["quantities"])
    assert {"sheet_hall_coefficient", "thermopower", "lorenz_number", "mobility"} <= well.data["quantities"].keys()


def test_a_sheet_far_from_the_reference_temperature_is_outside(well):
    # 3e11 cm⁻² in GaAs is degenerate at 4.2 K, T_F = 124 K, and not at 293 K.
    by_temperature = {entry["temperature"]: entry["standing"] for entry in well.entries("thermopower")}
    assert by_temperature == {293.15: "outside", 4.2: "unchecked", 77: "outside"}
    (path,) = well.entries("mean_free_path")
    assert (path["temperature"], path["standing"]) == (4.2, "unchecked")


def test_holes_turn_the_signs(tmp_path):
    hole = COPPER.replace("  valence: 1\n", "  valence: 1\n  charge: hole\n")
    book = handbook_of(tmp_path, copper=COPPER, hole=hole.replace("name: Copper", "name: Hole"))
    for id in ("hall_coefficient", "thermopower"):
        assert book["hole"].si(id) == pytest.approx(-book["copper"].si(id), rel=1e-12)
    assert book["copper"].si("hall_coefficient") < 0


def test_without_a_resistivity_what_needs_it_is_absent_and_says_so(tmp_path):
    start = COPPER.index("  resistivity:")
    text = COPPER[:start] + COPPER[COPPER.index("  debye") :]
    sheet = handbook_of(tmp_path, copper=text)["copper"]
    assert sheet.missing["conductivity"] == "needs a resistivity"
    assert sheet.missing["plasma_edge_energy"].startswith("needs a resistivity")
    assert "relaxation_time" not in sheet.data["quantities"]
    assert "fermi_energy" in sheet.data["quantities"]


def test_without_a_reference_the_list_keeps_the_order_of_the_record(tmp_path):
    text = COPPER.replace("1.678(9) µΩ cm, at: 293.15 K", "1.543 µΩ cm, at: 273.15 K")
    sheet = handbook_of(tmp_path, copper=text)["copper"]
    assert [entry["temperature"] for entry in sheet.entries("conductivity")] == [77, 273.15]
    wanted = "a resistivity within 5 K of the reference temperature"
    for id in ("plasma_edge_energy", "normal_reflectance", "optical_depth", "resistivity_from_debye"):
        assert wanted in sheet.missing[id]


def test_the_reference_comes_first(tmp_path):
    sheet = handbook_of(tmp_path, copper=COPPER)["copper"]
    assert [entry["temperature"] for entry in sheet.entries("conductivity")] == [293.15, 77]
    assert sheet.entries("conductivity")[1]["budget"] == {"measured.resistivity@77": 1.0}


def test_a_gas_without_a_structure_has_no_crystal(tmp_path):
    text = "name: Doped\nformula: GaAs\nelectrons: {density: {value: 1e18 1/cm³, from: here}, effective mass: 0.067}\n"
    sheet = handbook_of(tmp_path, doped=text)["doped"]
    assert "atoms_per_cell" not in sheet.data["quantities"]
    assert sheet.missing["heat_coefficient"] == "needs a crystal structure"
    assert "valence" in sheet.missing["inner_potential"]
    assert sheet.entries("plasma_energy")[0]["value"] == pytest.approx(
        c.hbar * (1e24 * c.e**2 / (c.epsilon_0 * 0.067 * c.m_e)) ** 0.5 / c.e, rel=1e-9
    )
