"""Numbers held against measurements: which pairs, at which temperature, and what standing they give to which entry."""

import math

import pytest
from quantities.small import COPPER, IMPRINT, WELL, handbook_of

from sheetgen.faults import FaultsError


def sheet_of(folder, text: str, imprint: str = IMPRINT):
    return handbook_of(folder, imprint=imprint, copper=text)["copper"]


def held(sheet, quantity: str) -> list[dict]:
    return [entry for entry in sheet.data["held_against"] if entry["quantity"] == quantity]


def with_measured(lines: str, text: str = COPPER) -> str:
    return text.replace("  work function:", f"{lines}\n  work function:")


def test_a_ratio_carries_the_uncertainty_of_both_sides(tmp_path):
    sheet = sheet_of(tmp_path, COPPER)
    (confrontation,) = (c for c in sheet.confrontations if c.quantity == "heat_coefficient")
    model = sheet.entries("heat_coefficient")[0]
    expected = math.hypot(0.010 / 0.695, model["standard_uncertainty"] / model["value"])
    assert confrontation.ratio_uncertainty / confrontation.ratio == pytest.approx(expected, rel=1e-9)
    assert "heavier than free ones" in confrontation.meaning


def test_heat_conduction_is_held_as_a_lorenz_number(tmp_path):
    sheet = sheet_of(tmp_path, with_measured("  thermal conductivity: {value: 401 W/(m K), at: 295 K, from: here}"))
    (entry,) = held(sheet, "electron_thermal_conductivity")
    assert entry["unit"] == "W ohm/K^2"
    assert entry["temperature"] == 295
    assert entry["measured"] == pytest.approx(401 * 1.678e-8 / 295, rel=1e-12)
    assert entry["model"] == pytest.approx(2.44300e-8, rel=1e-5)
    assert [e["standing"] for e in sheet.entries("electron_thermal_conductivity")] == ["agrees", "unchecked"]


def test_heat_conduction_without_a_resistivity_near_is_unchecked_and_says_why(tmp_path):
    sheet = sheet_of(tmp_path, with_measured("  thermal conductivity: {value: 483 W/(m K), at: 150 K, from: here}"))
    (entry,) = held(sheet, "electron_thermal_conductivity")
    assert "model" not in entry and "ratio" not in entry
    assert entry["standing"] == "unchecked"
    (confrontation,) = (c for c in sheet.confrontations if c.quantity == "electron_thermal_conductivity")
    assert confrontation.reason == "no resistivity within 5 K of 150 K"


def test_the_resistivity_is_held_at_every_temperature_but_the_reference(tmp_path):
    sheet = sheet_of(tmp_path, COPPER)
    assert [entry["temperature"] for entry in held(sheet, "resistivity_from_debye")] == [77]
    by_temperature = {e["temperature"]: e["standing"] for e in sheet.entries("resistivity_from_debye")}
    assert by_temperature == {293.15: "unchecked", 4.2: "unchecked", 77: "adjust"}


def test_of_a_list_the_nearest_entry_within_five_kelvins_takes_the_standing(tmp_path):
    text = COPPER.replace("at: 77 K", "at: 80 K")
    by_temperature = {
        e["temperature"]: e["standing"] for e in sheet_of(tmp_path, text).entries("resistivity_from_debye")
    }
    assert by_temperature[77] != "unchecked"
    far = COPPER.replace("at: 77 K", "at: 90 K")
    by_temperature = {
        e["temperature"]: e["standing"] for e in sheet_of(tmp_path / "far", far).entries("resistivity_from_debye")
    }
    assert by_temperature[77] == "unchecked"


def test_the_thermopower_is_taken_at_the_temperature_of_the_measurement(tmp_path):
    sheet = sheet_of(tmp_path, with_measured("  thermopower: {value: -1.0 µV/K, at: 200 K, from: here}"))
    (entry,) = held(sheet, "thermopower")
    assert entry["temperature"] == 200
    reference = sheet.entries("thermopower")[0]
    assert entry["model"] == pytest.approx(reference["value"] * 200 / 293.15, rel=1e-12)
    assert {e["standing"] for e in sheet.entries("thermopower")} == {"unchecked"}


def test_reflectance_is_held_at_the_measured_photon_energies(tmp_path):
    lines = "  refractive index:\n    - {photon energy: 1.2 eV, n: 0.10(2), k: 6.6(1), from: here}"
    sheet = sheet_of(tmp_path, with_measured(lines))
    (entry,) = held(sheet, "normal_reflectance")
    front, back = 0.9**2 + 6.6**2, 1.1**2 + 6.6**2
    assert entry["photon_energy"] == pytest.approx(1.2, rel=1e-12)
    assert entry["measured"] == pytest.approx(front / back, rel=1e-12)
    assert entry["standing"] == "agrees"
    assert "standard_uncertainty" in sheet.data["inputs"]["measured.refractive_index.1.n"]


def test_light_above_the_threshold_is_outside_whatever_the_ratio(tmp_path):
    lines = (
        "  interband threshold: {value: 2.1 eV, from: here}\n"
        "  refractive index:\n    - {photon energy: 3 eV, n: 1.2, k: 2.2, from: here}"
    )
    sheet = sheet_of(tmp_path, with_measured(lines))
    (entry,) = held(sheet, "normal_reflectance")
    assert entry["standing"] == "outside"
    by_energy = {e["photon_energy"]: e["standing"] for e in sheet.entries("normal_reflectance")}
    assert by_energy == {
        0.1: "unchecked",
        0.5: "unchecked",
        1: "unchecked",
        1.96: "unchecked",
        3: "outside",
        6: "outside",
    }
    # Each plasmon is judged at its own energy.
    assert {sheet.entries(id)[0]["standing"] for id in ("plasma_energy", "sphere_plasmon_energy")} == {"outside"}
    own = {entry.get("photon_energy") for entry in sheet.data["assumptions"] if entry["id"] == "one_band"}
    assert any(energy == pytest.approx(10.8, abs=0.1) for energy in own if energy)


def test_a_superconductor_below_its_critical_temperature_is_outside(tmp_path):
    sheet = sheet_of(tmp_path, with_measured("  critical temperature: {value: 7.2 K, from: here}"))
    by_temperature = {e["temperature"]: e["standing"] for e in sheet.entries("electron_heat_capacity")}
    assert by_temperature == {293.15: "unchecked", 4.2: "outside", 77: "unchecked"}
    assert sheet.entries("heat_coefficient")[0]["standing"] == "adjust"


def test_a_magnet_has_no_susceptibility_of_free_electrons(tmp_path):
    sheet = sheet_of(tmp_path, with_measured("  magnetic ordering temperature: {value: 1043 K, from: here}"))
    assert sheet.entries("pauli_susceptibility")[0]["standing"] == "outside"


FILM = """\
specimens:
  - {name: F-1, form: film, thickness: 40(2) nm, grain size: 30 nm, specularity: 0.2, grain reflection: 0.3,
     resistivity: {value: 3.1(1) µΩ cm, at: 295 K}, invented: true}
  - {name: F-2, form: film, thickness: 40 nm, specularity: 0.2,
     resistivity: {value: 0.7(1) µΩ cm, at: 77 K}, invented: true}
  - {name: F-3, form: film, thickness: 40 nm, specularity: 0.2,
     resistivity: {value: 0.9(1) µΩ cm, at: 150 K}, invented: true}
  - {name: P-1, form: particle, diameter: 3 nm, invented: true}
  - {name: C-1, form: cube, edge: 0.3 nm, invented: true}
"""


def test_films_take_the_bulk_resistivity_at_their_own_temperature(tmp_path):
    sheet = sheet_of(tmp_path, COPPER + FILM)
    by_name = {entry["specimen"]: entry for entry in held(sheet, "film_resistivity")}
    warm, cold, lost = (by_name[name] for name in ("F-1", "F-2", "F-3"))
    specimens = {one["name"]: one["quantities"] for one in sheet.data["specimens"]}
    assert warm["model"] == pytest.approx(specimens["F-1"]["film_resistivity"]["value"], rel=1e-12)
    assert cold["model"] < specimens["F-2"]["film_resistivity"]["value"] / 2
    assert "model" not in lost and lost["standing"] == "unchecked"
    assert specimens["F-2"]["film_resistivity"]["standing"] == "unchecked"
    assert specimens["F-1"]["film_resistivity"]["standing"] == warm["standing"]


def test_only_what_fits_the_form_of_a_specimen_is_stated(tmp_path):
    sheet = sheet_of(tmp_path, COPPER + FILM)
    particle = sheet.data["specimens"][3]["quantities"]
    assert set(particle) == {"level_spacing"}
    volume = math.pi / 6 * 27
    assert particle["level_spacing"]["value"] == pytest.approx(
        2e3 / (volume * sheet.entries("density_of_states")[0]["value"]), rel=1e-12
    )
    cube = sheet.data["specimens"][4]["quantities"]
    assert set(cube) == {"level_spacing", "states_hard_wall", "states_periodic", "hard_wall_deficit"}
    # The lowest level of hard walls needs k_F·L ≥ π√3 = 5.4, and there k_F·L = 4.1: none fits, and 0 is a value.
    assert (cube["states_hard_wall"]["value"], cube["hard_wall_deficit"]["value"]) == (0, 1)
    ids = {(entry["id"], entry.get("specimen")) for entry in sheet.data["assumptions"]}
    assert ("continuum", "P-1") in ids and ("bulk", "F-1") in ids


def test_a_film_says_what_would_explain_it(tmp_path):
    sheet = sheet_of(tmp_path, COPPER + FILM)
    specimens = {one["name"]: one["quantities"] for one in sheet.data["specimens"]}
    p = specimens["F-2"]["explaining_specularity"]["value"]
    assert 0 <= p <= 1
    assert "explaining_grain_reflection" in sheet.specimen_missing["F-2"]


def test_sheets_of_two_dimensions_are_held_too(tmp_path):
    text = WELL.replace("measured:", "measured:\n  oscillation frequency: {value: 6.2 T, at: 4.2 K, from: here}")
    sheet = handbook_of(tmp_path, well=text)["well"]
    (entry,) = held(sheet, "oscillation_frequency")
    # One filled Landau level for each flux quantum: F = n₂h/2e.
    assert entry["model"] == pytest.approx(3e15 * 6.62607015e-34 / (2 * 1.602176634e-19), rel=1e-9)


def test_a_threshold_that_names_nothing_is_a_fault(tmp_path):
    imprint = IMPRINT + "thresholds: {degenerate_gass: [0.05, 0.2]}\nremarks as faults: [densty]\n"
    with pytest.raises(FaultsError) as caught:
        sheet_of(tmp_path, COPPER, imprint)
    messages = [fault.message for fault in caught.value.faults]
    assert any("Did you mean 'degenerate_gas'?" in message for message in messages)
    assert any("Did you mean 'density'?" in message for message in messages)


WARM = """\
name: Warm gas
formula: GaAs
structure: {lattice: zincblende, a: {value: 5.653 Å, at: 300 K, from: here}}
electrons: {density: {value: 1e17 1/cm³, from: here}, effective mass: 0.067, background permittivity: 12.9}
measured:
  resistivity: {value: 0.0125 Ω cm, at: 293 K, from: here}
  thermal conductivity: {value: 100 W/(m K), at: 100 K, from: here}
specimens:
  - {name: F-9, form: film, thickness: 900 nm, specularity: 0, resistivity: {value: 0.02 Ω cm, at: 293 K}}
"""


def test_what_binds_a_material_binds_its_specimens(tmp_path):
    sheet = handbook_of(tmp_path, warm=WARM)["warm"]
    film = sheet.data["specimens"][0]["quantities"]
    # T/T_F = 2.15: the lines that rest on a degenerate gas are outside, those that do not are not.
    assert {film[id]["standing"] for id in ("film_resistivity", "film_resistivity_surface")} == {"outside"}
    assert film["film_fermi_energy"]["standing"] == "unchecked"
    assert held(sheet, "film_resistivity")[0]["standing"] == "outside"


def test_where_the_model_cannot_be_taken_nothing_is_said_of_it(tmp_path):
    sheet = handbook_of(tmp_path, warm=WARM)["warm"]
    (entry,) = held(sheet, "electron_thermal_conductivity")
    assert entry["standing"] == "unchecked" and "model" not in entry


def test_the_thermopower_of_a_sheet_is_held_too(tmp_path):
    text = WELL.replace("measured:", "measured:\n  thermopower: {value: -10 µV/K, at: 4.2 K, from: here}")
    sheet = handbook_of(tmp_path, well=text)["well"]
    (entry,) = held(sheet, "thermopower")
    expected = -(math.pi**2) / 3 * 86.17333262 * 4.2 / sheet.si("fermi_temperature")
    assert entry["model"] == pytest.approx(expected, rel=1e-9)
