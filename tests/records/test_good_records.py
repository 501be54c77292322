"""What a sound record says once it has been read."""

from __future__ import annotations

import pytest

from sheetgen.records import Caution, Review, si_factor

FULL = """\
# Everything that a record can hold.
name: Copper
formula: Cu
structure:
  lattice: fcc
  a: {value: 3.6149(2) Å, at: 20 °C, from: [good2000, other], note: mean of two}
electrons:
  valence: {value: 1, from: good2000, note: the 4s electron}
  effective mass: 1.3
  conductivity_mass: 1.35(5)
  optical mass: 1.4
  valleys: 1
  background permittivity: 5.0
  charge: electron
  note: d electrons are not counted
measured:
  resistivity:
    - {value: 0.2 µΩ cm, at: 77 K}
    - {value: 1.9 µΩ cm, at: 298 K}
    - {value: 1.676(5) µΩ cm, at: 293 K, from: good2000}
    - {value: 1.70 µΩ cm, at: 20 °C, recalled: true}
    - {value: 0.21 µΩ cm, at: 77 K}
    - {value: 0.22 µΩ cm, at: 77.0 K}
  residual resistivity: 2 nΩ cm
  heat coefficient: 0.695(10) mJ/(mol K²)
  debye_temperature:
    - 343 K
    - {value: 320 K, at: 298 K}
    - {value: 310 K}
  hall coefficient: {value: -5.1×10^-11 m³/C, at: 293 K}
  susceptibility: -9.6e-6
  melting point: 1084.62(2) °C
  refractive index:
    - {photon energy: 1.5 eV, n: 0.26(1), k: 5.26, at: 293 K, from: good2000}
    - {photon energy: 2 eV, n: {value: 0.27, from: other}, k: 3.41, recalled: true}
specimens:
  - {name: F-1, form: film, thickness: 40(2) nm, grain size: 30 nm, specularity: 0.2, grain reflection: 0.3,
     resistivity: {value: 3.1(1) µΩ cm, at: 293 K}, note: as grown, invented: true}
  - {name: 7, form: cube, edge: 5 nm}
cautions:
  - Sharp edges.
  - {text: Dust burns., hazard: H228}
  - {text: Toxic., hazard: [H300 + H310, EUH066, H360Fd]}
review: {state: reviewed, by: AB, date: 2026-11-02}
notes: |
  Some *Markdown*.
"""
SOURCES = "@misc{good2000, title={Fine numbers}}\n@misc{other, title={Other numbers}}\n"


@pytest.fixture
def copper(read_record):
    return read_record(FULL, sources=SOURCES)


def test_value_keeps_everything_that_was_written(copper):
    a = copper.crystal.a
    assert (a.value, a.standard_uncertainty, a.unit) == (3.6149, pytest.approx(2e-4), "Å")
    assert (a.si, a.si_uncertainty) == (pytest.approx(3.6149e-10), pytest.approx(2e-14))
    assert a.temperature == pytest.approx(293.15)
    assert (a.sources, a.recalled, a.note) == (("good2000", "other"), False, "mean of two")
    assert (a.text, str(a.place)) == ("3.6149(2) Å", "m/copper.yaml:6:14")


def test_inputs_have_the_ids_of_the_record_in_its_order(copper):
    assert list(copper.inputs) == [
        "structure.a",
        "electrons.valence",
        "electrons.effective_mass",
        "electrons.conductivity_mass",
        "electrons.optical_mass",
        "electrons.background_permittivity",
        "measured.resistivity@77",
        "measured.resistivity@298",
        "measured.resistivity@293",
        "measured.resistivity",
        "measured.resistivity@77#2",
        "measured.resistivity@77#3",
        "measured.residual_resistivity",
        "measured.heat_coefficient",
        "measured.debye_temperature",
        "measured.debye_temperature@298",
        "measured.debye_temperature@293.15",
        "measured.hall_coefficient",
        "measured.susceptibility",
        "measured.melting_point",
        *(f"measured.refractive_index.{number}.{key}" for number in (1, 2) for key in ("photon_energy", "n", "k")),
        *(
            f"specimens.1.{key}"
            for key in ("thickness", "grain_size", "specularity", "grain_reflection", "resistivity")
        ),
        "specimens.2.edge",
    ]


def test_reference_resistivity_is_the_nearest_to_the_reference_temperature(copper):
    # 20 °C is the reference temperature itself; 293 K is 0.15 K away.
    assert copper.inputs["measured.resistivity"].text == "1.70 µΩ cm"
    assert copper.inputs["measured.resistivity"].recalled


@pytest.mark.parametrize(
    "values, reference",
    [
        (["{value: 1 µΩ cm, at: 290 K}", "{value: 2 µΩ cm, at: 290 K}"], "1 µΩ cm"),
        (["{value: 1 µΩ cm, at: 296.15 K}", "{value: 2 µΩ cm, at: 290.15 K}"], "1 µΩ cm"),
        (["{value: 1 µΩ cm, at: 298 K}"], "1 µΩ cm"),
        (["{value: 1 µΩ cm, at: 299 K}", "2 µΩ cm"], "2 µΩ cm"),
        (["{value: 1 µΩ cm, at: 299 K}", "{value: 2 µΩ cm, at: 77 K}"], None),
    ],
)
def test_reference_is_within_five_kelvins_and_the_first_of_equals(read_record, values, reference):
    listed = "".join(f"    - {value}\n" for value in values)
    record = read_record(f"name: X\nformula: Cu\nmeasured:\n  resistivity:\n{listed}")
    found = record.inputs.get("measured.resistivity")
    assert (found and found.text) == reference


def test_a_resistivity_without_temperature_is_remarked_on(read_record):
    record = read_record("name: X\nformula: Cu\nelectrons: {density: 8e22 cm-3}\nmeasured: {resistivity: 2 µΩ cm}\n")
    assert [str(remark) for remark in record.remarks] == [
        "m/copper.yaml:4:25: remark: resistivity has no temperature; it counts as taken at the reference temperature."
        " Add 'at: 293 K' or the like."
    ]


def test_units_are_kept_as_written_and_converted_beside(copper):
    melting = copper.measured["melting_point"][0]
    assert (melting.value, melting.unit, melting.si) == (1084.62, "°C", pytest.approx(1357.77))
    assert melting.si_uncertainty == pytest.approx(0.02)
    heat = copper.measured["heat_coefficient"][0]
    assert heat.unit == "mJ/(mol K²)" and heat.si == pytest.approx(0.695e-3)
    assert heat.si / si_factor(heat.unit) == pytest.approx(heat.value)


def test_optical_values_inherit_where_their_point_comes_from(copper):
    first, second = copper.optical
    assert (first.n.sources, first.n.temperature, first.k.sources) == (("good2000",), 293.0, ("good2000",))
    assert first.photon_energy.si == pytest.approx(1.5 * 1.602176634e-19, rel=1e-15)
    assert (second.n.sources, second.n.recalled, second.k.recalled) == (("other",), True, True)
    assert "refractive_index" not in copper.measured


def test_electrons_specimens_cautions_review_and_notes(copper):
    assert copper.electrons.valence["Cu"].note == "the 4s electron"
    assert copper.electrons.note == "d electrons are not counted"
    film, cube = copper.specimens
    assert (film.name, film.form, film.invented, film.note) == ("F-1", "film", True, "as grown")
    assert (film.diameter, film.resistivity.temperature) == (None, 293.0)
    assert (cube.name, cube.edge.si, cube.invented) == ("7", pytest.approx(5e-9), False)
    assert copper.cautions == (
        Caution("Sharp edges."),
        Caution("Dust burns.", ("H228",)),
        Caution("Toxic.", ("H300+H310", "EUH066", "H360Fd")),
    )
    assert copper.review == Review("reviewed", "AB", "2026-11-02")
    assert copper.notes == "Some *Markdown*."


def test_defaults_of_the_electrons(read_record):
    electrons = read_record().electrons
    assert (electrons.dimension, electrons.valleys, electrons.charge) == (3, 1, "electron")
    assert electrons.effective_mass is electrons.conductivity_mass is electrons.optical_mass is None
    assert electrons.background_permittivity is None


def test_valence_of_a_compound_has_an_input_for_each_element(read_record):
    record = read_record(
        "name: X\nformula: TiN\nstructure: {lattice: rocksalt, a: 4.24 Å}\nelectrons: {valence: {N: -3, Ti: 4(1)}}\n"
    )
    assert {element: value.value for element, value in record.electrons.valence.items()} == {"Ti": 4, "N": -3}
    assert [key for key in record.inputs if "valence" in key] == ["electrons.valence.Ti", "electrons.valence.N"]


def test_two_dimensional_gas_of_holes(read_record):
    record = read_record(
        "name: Well\nformula: GaAs\nelectrons: {density: 3.0(1)×10^11 cm^-2, dimension: 2, effective mass: 0.45,"
        " charge: hole}\nmeasured:\n  sheet resistance:\n    - {value: 1.2 kΩ/□, at: 4.2 K}\n"
        "    - {value: 3 kΩ/sq, at: 295 K}\n"
    )
    assert (record.electrons.dimension, record.electrons.charge) == (2, "hole")
    assert record.electrons.density.si == pytest.approx(3e15)
    assert record.inputs["measured.sheet_resistance"].si == pytest.approx(3000)
    assert record.inputs["measured.sheet_resistance@4.2"].unit == "kΩ/□"


@pytest.mark.parametrize("bulk", ["heat coefficient", "heat_coefficient"])
@pytest.mark.parametrize(
    "debye", ["transport debye temperature", "transport_debye_temperature", "transport debye_temperature"]
)
def test_keys_with_spaces_or_underscores(read_record, bulk, debye):
    record = read_record(f"name: X\nformula: Cu\nmeasured: {{{bulk}: 1 mJ/mol/K^2, {debye}: 300 K}}\n")
    assert list(record.measured) == ["heat_coefficient", "transport_debye_temperature"]


def test_quotes_make_nobelium_of_no(read_record):
    assert read_record('name: Nobelium\nformula: "No"\nelectrons: {density: 1e22 cm^-3}\n').composition == {"No": 1}


def test_a_valence_without_structure_is_remarked_on(read_record):
    record = read_record("name: X\nformula: Cu\nelectrons: {valence: 1}\n")
    assert [str(remark) for remark in record.remarks] == [
        "m/copper.yaml:3:13: remark: a valence gives no electron density without a structure; add one, or give"
        " 'density'."
    ]
