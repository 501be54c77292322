"""The tables that the scripts read: scripts themselves, complete, and true to the data."""

from __future__ import annotations

import json
import re

import pytest

from sheetgen.pages.tables import as_script, curves, marked, point_of, short, symbol_marked
from sheetgen.pages.words import STANDINGS


def table(site, name: str):
    """The content of a table, read as a browser would run it: one assignment of one frozen object."""
    text = site[f"tables/{name}.js"].decode()
    found = re.fullmatch(r"\(globalThis\.handbookTables\?\?=\{\}\)\[(.*?)\]=Object\.freeze\((.*)\);\n", text, re.DOTALL)
    assert json.loads(found[1]) == name
    return json.loads(found[2])


def test_materials_are_in_the_order_of_the_sheets(site, small_handbook):
    listed = table(site, "materials")
    assert listed["slug"] == list(small_handbook.slugs)
    assert {len(values) for values in listed.values()} == {len(small_handbook)}
    row = listed["slug"].index("copper")
    assert (listed["formula"][row], listed["lattice"][row], listed["elements"][row]) == ("Cu", "fcc", "Cu")
    assert [listed["draft"][listed["slug"].index(slug)] for slug in ("copper", "hostile")] == [0, 1]
    assert listed["electrons"][listed["slug"].index("well")] == "4.0(1)\u202f×\u202f10¹¹\u202fcm⁻²"


def test_a_column_holds_the_numbers_of_the_data(site, small_handbook):
    column = table(site, "columns/fermi_energy")[""]
    for row, sheet in enumerate(small_handbook.sheets):
        (entry,) = sheet.entries("fermi_energy")
        assert column["value"][row] == pytest.approx(entry["value"], rel=1e-8)
        assert column["spread"][row] == pytest.approx(entry["standard_uncertainty"], rel=1e-8)
        assert STANDINGS[int(column["standing"][row])] == entry["standing"]


def test_a_gap_is_null_and_never_a_number(site, small_handbook):
    column = table(site, "columns/electron_density")[""]
    row = small_handbook.slugs.index("well")
    assert column["value"][row] is None and column["standing"][row] == "-"


def test_another_unit_has_no_place_in_the_column(site, small_handbook):
    row = small_handbook.slugs.index("well")
    assert small_handbook["well"].entries("density_of_states")
    assert table(site, "columns/density_of_states")[""]["value"][row] is None


def test_points_of_a_list_stand_apart(site):
    points = [point for point, _ in table(site, "quantities")["level_spacing"]["points"]]
    assert points == ["@1", "@2", "@5", "@10", "@20", "@50"]
    assert list(table(site, "columns/level_spacing")) == points


def test_every_quantity_has_its_column_and_its_units(site, small_handbook):
    for id, about in table(site, "quantities").items():
        assert f"tables/columns/{id}.js" in site and f"quantities/{id}.html" in site
        assert about["units"][0][0] == small_handbook.imprint.units.get(id, small_handbook.registry[id].unit)


def test_own_table_agrees_with_the_columns(site, small_handbook):
    own = table(site, "materials/copper")["quantities"]
    row = small_handbook.slugs.index("copper")
    for id, points in own.items():
        columns = table(site, f"columns/{id}")
        for point, (value, _, standing, _) in points.items():
            assert columns[point]["value"][row] == value
            assert columns[point]["standing"][row] == str(standing)


def test_hostile_names_stay_inside_their_strings(site):
    assert "<script>alert(1)</script>" in " ".join(table(site, "materials")["name"])


def test_nan_is_refused():
    with pytest.raises(ValueError, match="JSON"):
        as_script("x", [float("nan")])


@pytest.mark.parametrize(
    "entry, axis, point",
    [
        ({}, None, ""),
        ({"temperature": 293.15}, "temperature", ""),
        ({"temperature": 295}, "resistivity", ""),
        ({"temperature": 77}, "temperature", "@77"),
        ({"temperature": 77}, "resistivity", None),
        ({"edge": 5}, "edge", "@5"),
        ({"photon_energy": 1.96}, "photon_energy", "@1.96"),
    ],
)
def test_point_of_an_entry(entry, axis, point):
    assert point_of(entry, axis, 293.15) == point


@pytest.mark.parametrize(
    "value, spread, expected",
    [(0.0, None, 0.0), (7, None, 7), (7.031512345678901, None, 7.03151235), (7.0315123456789, 0.0012, 7.031512346)],
)
def test_digits_that_mean_nothing_are_left_out(value, spread, expected):
    assert short(value, spread) == expected


@pytest.mark.parametrize(
    "latex, text", [(r"E_\mathrm{F}", "*E*_{F}"), (r"\hbar\omega_\mathrm{p}", "*ħ**ω*_{p}"), (r"\frac{a}{b}", "")]
)
def test_symbol_as_text(latex, text):
    assert symbol_marked(latex) == text


def test_curves_are_the_points_of_the_figures(handbook):
    from sheetgen.figures import draw_all

    found = curves(draw_all(handbook["copper"], handbook))
    assert set(found) == {"parabola", "density-of-states", "resistivity"}
    energy = found["parabola"]
    assert energy["names"] == ["k / nm⁻¹", "E / eV"]
    # E = ħ²k²/2m with ħ²/2m_e = 0.0380998212 eV nm² (CODATA 2022); the CSV has six digits,
    # and its curve is cut at the edge of the picture, between two of its points.
    inner = list(zip(energy["x"], energy["y"], strict=True))[1:-1]
    assert [y for _, y in inner] == pytest.approx([0.0380998212 * x**2 for x, _ in inner], rel=2e-5, abs=1e-5)


def test_curves_share_their_units_and_carry_their_fermi_level(handbook):
    from sheetgen.figures import draw_all

    sheet = handbook["gallium-arsenide-n"]
    found = marked(curves(draw_all(sheet, handbook)), sheet)
    assert found["parabola"]["names"] == ["k / nm⁻¹", "E / eV"]
    assert max(found["parabola"]["y"]) < 1
    assert found["parabola"]["level"] == pytest.approx(
        [sheet.entries(id)[0]["value"] for id in ("fermi_wavevector", "fermi_energy")]
    )
    assert ":" not in found["parabola"]["title"]
