"""The program as a library: the documented examples, the shapes of its answers, and its messages."""

from __future__ import annotations

import doctest
import math
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest

import sheetgen
from sheetgen import FaultsError, Handbook, NotDerivedError, NotFoundError, StatedNumber

DOCUMENT = Path(__file__).parents[1] / "docs" / "as-a-library.md"


@pytest.fixture
def small(small_handbook) -> Handbook:
    """Copper with a resistivity at 293 K, and sodium without one."""
    return Handbook.load(small_handbook)


def test_the_document_shows_what_happens(root, monkeypatch):
    pytest.importorskip("pandas")
    monkeypatch.chdir(root)
    options = doctest.NORMALIZE_WHITESPACE | doctest.ELLIPSIS
    text = DOCUMENT.read_text(encoding="utf-8").replace("```", "")
    test = doctest.DocTestParser().get_doctest(text, {}, DOCUMENT.name, str(DOCUMENT), 0)
    told: list[str] = []
    results = doctest.DocTestRunner(optionflags=options).run(test, out=told.append)
    assert results.attempted > 20
    assert not results.failed, "".join(told)


def test_importing_the_package_costs_nothing_and_offers_its_names():
    program = "import sys, sheetgen; print(sorted(set(sheetgen.__all__) - set(dir(sheetgen))), 'numpy' in sys.modules)"
    run = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=True)
    assert run.stdout == "[] False\n"
    assert all(getattr(sheetgen, name) is not None for name in sheetgen.__all__)


def test_a_name_that_is_not_there_is_an_attribute_error():
    with pytest.raises(AttributeError, match="module 'sheetgen' has no attribute 'Handbok'"):
        sheetgen.Handbok  # noqa: B018


def test_faults_of_the_folder_are_told_together(small_handbook):
    (small_handbook / "copper.yaml").write_text("name: Copper\nformla: Cu\n", encoding="utf-8")
    with pytest.raises(FaultsError) as caught:
        Handbook.load(small_handbook)
    assert len(caught.value.faults) == len(str(caught.value).splitlines()) >= 2
    assert {Path(fault.place.file).name for fault in caught.value.faults} == {"copper.yaml"}


def test_the_package_is_typed():
    assert (Path(sheetgen.__file__).parent / "py.typed").is_file()


# ---------------------------------------------------------------- one number


def test_a_number_says_all_that_the_data_file_does(handbook):
    """Every entry of every sheet, specimens included."""
    compared = 0
    for sheet in handbook:
        for id, stated in sheet.data["quantities"].items():
            entries = stated if isinstance(stated, list) else [stated]
            if isinstance(entries[0]["value"], list):
                continue
            for number, entry in zip(sheet.numbers(id), entries, strict=True):
                compared += 1
                assert (number.material, number.quantity) == (sheet.record.slug, id)
                for field in ("value", "unit", "standing", "standard_uncertainty", "temperature", "edge"):
                    assert getattr(number, field) == entry.get(field)
                assert number.budget == entry.get("budget", {})
                assert number.photon_energy == entry.get("photon_energy")
    assert compared > 4000


def test_numbers_are_frozen_compare_and_hash(small):
    number = small["copper"].number("fermi_energy")
    assert number == small["copper"].number("fermi_energy")
    assert len({number, small["copper"].number("fermi_energy")}) == 1
    assert float(number) == number.value
    with pytest.raises(AttributeError):
        number.value = 1.0


def test_another_unit_scales_value_and_uncertainty(small):
    number = small["copper"].number("fermi_energy")
    other = number.in_unit("J")
    # CODATA 2022: 1 eV is 1.602176634e-19 J exactly
    assert other.value == pytest.approx(number.value * 1.602176634e-19, rel=1e-12)
    assert other.relative_uncertainty == pytest.approx(number.relative_uncertainty, rel=1e-12)
    with pytest.raises(ValueError, match="fermi_energy is in 'eV', which 'K' does not measure"):
        number.in_unit("K")
    with pytest.raises(ValueError, match="'elV' is no unit known here"):
        number.in_unit("elV")


def test_relative_uncertainty_of_nothing_is_none():
    nought = StatedNumber("x", "y", 0.0, "1", 0.1, "unchecked")
    assert nought.relative_uncertainty is None
    assert StatedNumber("x", "y", 2.0, "1", None, "unchecked").relative_uncertainty is None
    assert StatedNumber("x", "y", -2.0, "1", 0.5, "unchecked").relative_uncertainty == 0.25


def test_draws_give_a_coverage_interval(small_handbook):
    number = Handbook.load(small_handbook, draws=2000)["copper"].number("fermi_energy")
    low, high = number.coverage_interval
    # Of a normal distribution 95 % lie within 1.96 standard uncertainties; 2000 draws find that to some per cent.
    assert (high - low) / (2 * 1.96 * number.standard_uncertainty) == pytest.approx(1, abs=0.1)
    assert number.in_unit("meV").coverage_interval == pytest.approx((low * 1e3, high * 1e3))


@pytest.mark.parametrize(
    "words, points, message",
    [
        (("fermi_energie",), {}, "The handbook has no quantity 'fermi_energie'. Did you mean 'fermi_energy'?"),
        (("chemical_potential",), {"at": 78}, "chemical_potential is stated at 293.15, 4.2, 77 K, and not at 78 K."),
        (("states_hard_wall",), {}, "states_hard_wall is stated at 1, 2, 5, 10, 20, 50 nm; say which with edge=."),
        (("normal_reflectance",), {},
         "normal_reflectance is stated at 0.1, 0.5, 1, 1.96, 3, 6 eV; say which with photon_energy=."),
        (("fermi_energy",), {"edge": 5}, "fermi_energy is not stated by edge; leave edge out."),
        (("fermi_energy",), {"photon_energy": 5},
         "fermi_energy is not stated by photon energy; leave photon_energy out."),
        (("zone_occupation",), {}, "zone_occupation is a list in itself; take sheet.entries('zone_occupation')."),
        (("film_resistivity",), {"specimen": "F"}, "Copper has no specimen 'F'. It has none."),
    ],
)  # fmt: skip
def test_what_is_not_there_is_said_in_one_line(small, words, points, message):
    with pytest.raises(NotFoundError) as caught:
        small["copper"].number(*words, **points)
    assert str(caught.value) == message
    assert isinstance(caught.value, KeyError)


def test_what_cannot_be_derived_says_what_is_missing(small):
    with pytest.raises(NotDerivedError) as caught:
        small["sodium"].number("relaxation_time")
    assert str(caught.value).startswith("Sodium has no relaxation_time: ")
    assert "resistivity" in str(caught.value)
    assert small["sodium"].numbers("relaxation_time") == ()


def test_what_two_dimensions_do_not_have_is_said_so(handbook):
    with pytest.raises(NotDerivedError, match="has no electron_density: it is not defined in 2 dimensions"):
        handbook["gallium-arsenide-quantum-well"].number("electron_density")


def test_a_specimen_is_named(handbook):
    with pytest.raises(NotFoundError) as caught:
        handbook["copper"].number("film_resistivity", specimen="F12")
    assert "Did you mean 'F-12'?" in str(caught.value)
    with pytest.raises(NotFoundError, match="Specimens have no quantity 'film_resistivty'"):
        handbook["copper"].number("film_resistivty", specimen="F-12")


def test_without_a_reference_resistivity_a_temperature_is_asked_for(small_handbook):
    text = (small_handbook / "copper.yaml").read_text(encoding="utf-8")
    colder = text.replace("resistivity: {value: 1.678(9) µΩ cm, at: 293 K, from: tables}",
                          "resistivity: [{value: 0.2 µΩ cm, at: 77 K}, {value: 0.7 µΩ cm, at: 150 K}]")  # fmt: skip
    (small_handbook / "copper.yaml").write_text(colder, encoding="utf-8")
    handbook = Handbook.load(small_handbook)
    with pytest.raises(NotFoundError, match="relaxation_time is stated at 77, 150 K; say which with at="):
        handbook["copper"].number("relaxation_time")
    assert handbook["copper"].number("relaxation_time", at=150).temperature == 150
    assert np.isnan(handbook.array("relaxation_time")).all()
    assert np.isfinite(handbook.array("relaxation_time", at=77)).tolist() == [True, False]


# ---------------------------------------------------------------- many numbers


def test_a_handbook_is_a_collection_of_sheets(small):
    assert repr(small) == "<Handbook 'Two Metals' of 2 sheets>"
    assert small.slugs == ("copper", "sodium")
    assert [sheet.record.slug for sheet in small] == ["copper", "sodium"]
    assert (len(small), "copper" in small, "lead" in small) == (2, True, False)
    with pytest.raises(KeyError) as caught:
        small["coper"]
    assert str(caught.value) == "The handbook has no material 'coper'. Did you mean 'copper'?"


def test_arrays_hold_what_single_numbers_do(handbook):
    for id in ("fermi_energy", "relaxation_time", "chemical_potential", "density_of_states"):
        values, uncertainties = handbook.array(id), handbook.array(id, "standard_uncertainty")
        standings, unit = handbook.array(id, "standing"), handbook.registry[id].unit
        for sheet, value, u, standing in zip(handbook, values, uncertainties, standings, strict=True):
            found = sheet.numbers(id)
            if math.isnan(value):
                assert not found or found[0].unit != unit or id == "relaxation_time"
            else:
                assert (value, standing) == (found[0].value, found[0].standing)
                assert u == found[0].standard_uncertainty or (math.isnan(u) and found[0].standard_uncertainty is None)


def test_an_array_does_not_mix_units(handbook):
    """A density of states is per volume, and in two dimensions per area."""
    well = handbook.slugs.index("gallium-arsenide-quantum-well")
    assert handbook["gallium-arsenide-quantum-well"].number("density_of_states").unit == "1/(eV nm^2)"
    assert math.isnan(handbook.array("density_of_states")[well])
    assert handbook.array("density_of_states", "standing")[well] == ""


def test_arrays_refuse_what_no_material_has(small):
    with pytest.raises(NotFoundError, match="no quantity 'fermi_energie'. Did you mean 'fermi_energy'?"):
        small.array("fermi_energie")
    with pytest.raises(NotFoundError, match="states_hard_wall is stated at 1, 2, 5, 10, 20, 50 nm; say which"):
        small.array("states_hard_wall")
    with pytest.raises(ValueError, match="what='unit'; expected one of value, standard_uncertainty, standing"):
        small.array("fermi_energy", "unit")
    assert np.isnan(small.array("chemical_potential", at=12.5)).all()


def test_the_table_has_every_number_once(handbook):
    pytest.importorskip("pandas")
    table = handbook.table()
    stated = sum(
        len(stated) if isinstance(stated, list) else 1
        for sheet in handbook
        for part in (sheet.data, *sheet.data["specimens"])
        for stated in part["quantities"].values()
        if not isinstance((stated[0] if isinstance(stated, list) else stated)["value"], list)
    )
    assert len(table) == stated
    copper = table[(table.material == "copper") & (table.quantity == "fermi_energy")]
    assert copper.value.tolist() == [handbook["copper"].number("fermi_energy").value]
    assert table.value.notna().all()
    assert set(table[table.quantity == "film_resistivity"].specimen) >= {"F-12"}


def test_a_table_of_chosen_quantities(small):
    pytest.importorskip("pandas")
    assert set(small.table("fermi_energy", "cell_volume").quantity) == {"fermi_energy", "cell_volume"}
    with pytest.raises(NotFoundError, match="no quantity 'fermi'"):
        small.table("fermi")


def test_without_pandas_a_table_says_what_to_do(small, monkeypatch):
    monkeypatch.setitem(sys.modules, "pandas", None)
    with pytest.raises(ImportError) as caught:
        small.table()
    assert str(caught.value) == (
        "a table needs pandas, which is not installed: pip install pandas. "
        "handbook.array() and the site's data/handbook.csv do without it."
    )
