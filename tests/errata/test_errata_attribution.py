"""Shares of a change against what the formulas say by hand, and every kind of cause."""

from __future__ import annotations

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from quantities.small import COPPER, IMPRINT, WELL, handbook_of

from sheetgen.errata import edition_of, errata


def the(found, quantity, slug="copper", at=None, specimen=None):
    """The one change of a number."""
    material = next(material for material in found.materials if material.slug == slug)
    return next(
        moved
        for moved in material.moved
        if moved.point.quantity == quantity and moved.point.at == at and moved.point.specimen == specimen
    )


def shares(moved):
    return {share.cause: share.change for share in moved.because}


def test_equal_editions_have_no_errata(edition):
    found = errata(edition("1"), edition("2"))
    assert (found.count, found.materials, found.new_materials, found.withdrawn) == (0, (), {}, {})
    assert (found.old, found.new) == ("1", "2")


def test_one_input_alone_carries_the_whole_change(edition):
    found = errata(edition("1"), edition("2", copper=COPPER.replace("3.6149(3)", "3.6200(3)")))
    moved = the(found, "fermi_energy")
    # E_F goes as n^(2/3), n as a^-3
    assert moved.relative == pytest.approx((3.6149 / 3.62) ** 2 - 1, rel=1e-9)
    assert shares(moved) == {"structure.a": pytest.approx(moved.change)}
    assert (moved.interaction, moved.beyond, moved.how) == (None, "uncertainty", "derived")
    # u(E_F)/E_F = 2 u(a)/a
    assert moved.in_uncertainties == pytest.approx(((3.6149 / 3.62) ** 2 - 1) / (2 * 0.0003 / 3.6149), rel=1e-6)
    [change] = found.materials[0].inputs
    assert (change.cause, change.aspects, change.old["value"], change.new["value"]) == (
        "structure.a", ("value",), 3.6149, 3.62,
    )  # fmt: skip


def test_two_inputs_share_a_change_and_interact(edition):
    new = COPPER.replace("3.6149(3)", "3.7000(3)").replace("1.678(9)", "1.800(9)")
    moved = the(errata(edition("1"), edition("2", copper=new)), "relaxation_time", at=293.15)
    # tau = m/(n e^2 rho), n as a^-3: factors by hand
    by_cell, by_resistivity, before = (3.7 / 3.6149) ** 3, 1.678 / 1.8, moved.old["value"]
    assert shares(moved) == {
        "structure.a": pytest.approx(before * (by_cell - 1), rel=1e-9),
        "measured.resistivity": pytest.approx(before * (by_resistivity - 1), rel=1e-9),
    }
    assert moved.interaction == pytest.approx(before * (by_cell - 1) * (by_resistivity - 1), rel=1e-7)
    assert moved.change == pytest.approx(before * (by_cell * by_resistivity - 1), rel=1e-9)


@settings(max_examples=8, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(cell=st.floats(3.3, 4.0), resistivity=st.floats(1.0, 3.0), debye=st.integers(200, 500))
def test_shares_and_interaction_add_up_to_the_change(edition, cell, resistivity, debye):
    new = COPPER.replace("3.6149(3)", f"{cell:.4f}(3)").replace("1.678(9)", f"{resistivity:.3f}(9)")
    found = errata(edition("1"), edition("2", copper=new.replace("343(5)", f"{debye}(5)")))
    for material in found.materials:
        for moved in material.moved:
            if moved.change is not None and moved.beyond != "its uncertainty":
                parts = [share.change for share in moved.because] + [moved.interaction or 0.0]
                assert sum(parts) == pytest.approx(moved.change, rel=1e-6, abs=1e-9 * abs(moved.new["value"]))


def test_an_uncertainty_alone(edition):
    found = errata(edition("1"), edition("2", copper=COPPER.replace("3.6149(3)", "3.6149(6)")))
    moved = the(found, "fermi_energy")
    assert (moved.beyond, moved.change, shares(moved)) == ("its uncertainty", 0.0, {"structure.a": None})
    assert moved.new["standard_uncertainty"] == pytest.approx(2 * moved.old["standard_uncertainty"], rel=1e-6)


def test_a_source_alone_moves_no_number(edition):
    found = errata(edition("1"), edition("2", copper=COPPER.replace("4.65(10) eV, from: here", "4.65(10) eV")))
    [material] = found.materials
    assert (material.moved, [(c.cause, c.aspects) for c in material.inputs]) == (
        (), [("measured.work_function", ("sources",))],
    )  # fmt: skip


def test_a_temperature_of_a_measurement(edition):
    found = errata(edition("1"), edition("2", copper=COPPER.replace("at: 293.15 K", "at: 295 K")))
    [change] = found.materials[0].inputs
    assert (change.cause, change.aspects) == ("measured.resistivity", ("temperature",))
    # kappa = L T/rho: proportional to the temperature of its resistivity
    moved = the(found, "electron_thermal_conductivity", at=295)
    assert moved.relative == pytest.approx(295 / 293.15 - 1, rel=1e-9)
    assert shares(moved) == {"measured.resistivity": pytest.approx(moved.change)}


def test_a_new_and_a_withdrawn_measurement(edition):
    line = "    - {value: 0.21(1) µΩ cm, at: 77 K, from: here}\n"
    found = errata(edition("1"), edition("2", copper=COPPER.replace(line, "")))
    gone = the(found, "relaxation_time", at=77)
    assert (gone.new, gone.beyond, [share.cause for share in gone.because]) == (
        None,
        "presence",
        ["measured.resistivity"],
    )
    back = the(errata(edition("3", copper=COPPER.replace(line, "")), edition("4")), "relaxation_time", at=77)
    assert (back.old, back.beyond, [share.cause for share in back.because]) == (
        None,
        "presence",
        ["measured.resistivity"],
    )


def test_another_lattice_is_one_cause(edition):
    found = errata(edition("1"), edition("2", copper=COPPER.replace("lattice: fcc", "lattice: bcc")))
    moved = the(found, "electron_density")
    assert moved.relative == pytest.approx(-0.5)  # two atoms per cell instead of four
    assert shares(moved) == {"structure": pytest.approx(moved.change)}


def test_valleys_of_a_two_dimensional_gas(edition):
    two = WELL.replace("  dimension: 2\n", "  dimension: 2\n  valleys: 2\n")
    found = errata(edition("1", well=WELL), edition("2", well=two))
    moved = the(found, "fermi_energy", "well")
    assert moved.relative == pytest.approx(-0.5)  # E_F goes as 1/g
    assert shares(moved) == {"electrons.valleys": pytest.approx(moved.change)}


def test_the_carriers_change_together(edition):
    density = COPPER.replace("  valence: 1\n", "  density: {value: 8.0e28 1/m³, from: here}\n")
    found = errata(edition("1"), edition("2", copper=density))
    assert set(shares(the(found, "fermi_energy"))) == {"electrons"}


def test_conditions_of_the_imprint(edition):
    found = errata(edition("1"), edition("2", "reference temperature: 300 K\ntemperatures: [300 K]\n"))
    assert set(found.program.conditions) == {"reference_temperature", "temperatures"}
    gone = the(found, "chemical_potential", at=77)
    assert [share.cause for share in gone.because] == ["the imprint"]


SPECIMENS = """\
specimens:
  - {name: F-1, form: film, thickness: 40(2) nm, specularity: 0.2}
  - {name: F-2, form: film, thickness: 20(2) nm, specularity: 0.2}
"""


def test_specimens_are_known_by_their_names(edition):
    old = COPPER + SPECIMENS
    new = COPPER + SPECIMENS.replace(
        "  - {name: F-1, form: film, thickness: 40(2) nm, specularity: 0.2}\n", ""
    ).replace("20(2)", "25(2)")
    found = errata(edition("1", copper=old), edition("2", copper=new))
    [material] = found.materials
    assert material.specimens == {"F-1": "withdrawn"}
    changed = {change.cause for change in material.inputs if change.old and change.new}
    assert changed == {"specimens[F-2].thickness"}
    moved = the(found, "film_resistivity_surface", specimen="F-2")
    assert shares(moved) == {"specimens[F-2].thickness": pytest.approx(moved.change)}
    assert not any(moved.point.specimen == "F-1" for moved in material.moved)


def test_standings_that_changed_and_why(edition):
    found = errata(edition("1"), edition("2", copper=COPPER.replace("0.695(10)", "2.10(1)")))
    [change] = found.materials[0].standings
    assert (change.point.quantity, change.kind, change.old, change.new, change.because) == (
        "heat_coefficient", "quantity", "adjust", "fails", ("measured.heat_coefficient",),
    )  # fmt: skip


def test_new_and_withdrawn_materials(edition):
    found = errata(edition("1", copper=COPPER), edition("2", silver=COPPER.replace("Copper", "Silver")))
    assert (found.new_materials, found.withdrawn) == ({"silver": "Silver"}, {"copper": "Copper"})


def test_the_program_itself(edition, data_alone):
    """The old edition states 2 % more than its own inputs give today, and its definition had another fingerprint."""
    old = data_alone(edition("1"))
    old.data["version"] = "0.0.9"
    old.data["quantities"]["fermi_energy"]["fingerprint"] = "0" * 16
    stated = old.materials["copper"]["quantities"]["fermi_energy"]
    today, stated["value"] = stated["value"], stated["value"] * 1.02
    found = errata(old, edition("2", copper=COPPER.replace("3.6149(3)", "3.62(1)")))
    assert found.program.definitions == {"fermi_energy": "changed"}
    assert found.program.version[0] == "0.0.9"
    moved = the(found, "fermi_energy")
    assert shares(moved) == {
        "the program": pytest.approx(-0.02 * today),
        "structure.a": pytest.approx(today * ((3.6149 / 3.62) ** 2 - 1), rel=1e-6),
    }


def test_data_files_alone_give_the_same_errata(edition, data_alone):
    new = COPPER.replace("3.6149(3)", "3.62(1)").replace("1.678(9)", "1.7(1)") + SPECIMENS
    old, new = edition("1", copper=COPPER, well=WELL), edition("2", copper=new, well=WELL.replace("0.067", "0.07"))
    assert errata(data_alone(old), data_alone(new)).as_json() == errata(old, new).as_json()
    assert errata(data_alone(old), new).as_json() == errata(old, new).as_json()


def test_data_without_conditions_are_taken_to_have_those_of_the_other_edition(edition, data_alone):
    conditions = "reference temperature: 300 K\ntemperatures: [300 K]\n"
    old = data_alone(edition("1", conditions))
    del old.data["conditions"]
    found = errata(old, edition("2", conditions))
    assert (found.program.conditions, found.count) == ({}, 0)


OWN = '''\
from sheetgen.quantities import Declarations

declarations = Declarations()


@declarations.quantity(symbol="A", unit="eV", formula="E", source="a test", section="Crystal")
def invented(fermi_energy):
    """Invented."""
    return {factor} * fermi_energy
'''


def test_a_groups_own_definition(tmp_path):
    editions = []
    for name, factor in (("1", 2.0), ("2", 3.0)):
        (tmp_path / name).mkdir()
        (tmp_path / name / "quantities.py").write_text(OWN.format(factor=factor), encoding="utf-8")
        imprint = IMPRINT.replace('"1"', f'"{name}"') + "own quantities: quantities.py\n"
        editions.append(edition_of(handbook_of(tmp_path / name, imprint, copper=COPPER)))
    found = errata(*editions)
    assert found.program.definitions == {"invented": "changed"}
    [moved] = found.materials[0].moved
    assert (moved.point.quantity, moved.relative) == ("invented", pytest.approx(0.5))
    assert shares(moved) == {"the program": pytest.approx(moved.change)}
