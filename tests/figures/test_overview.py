"""Figures of the whole handbook: every material is there, ranked, linked and read back."""

import csv
import io
from types import SimpleNamespace
from xml.etree import ElementTree

import pytest
from figures import sample

from sheetgen.figures import ranking
from sheetgen.figures.overview import draw_handbook

SVG = "{http://www.w3.org/2000/svg}"


@pytest.fixture(scope="module")
def figures():
    """id → figure of the sample handbook."""
    return {figure.id: figure for figure in draw_handbook(sample.handbook(), root="../")}


def links(figure):
    """Where the links of a figure lead."""
    return [link.get("href") for link in ElementTree.fromstring(figure.svg).iter(SVG + "a")]


def rows(figure):
    """The CSV as dictionaries."""
    return list(csv.DictReader(io.StringIO(figure.csv.decode())))


def test_the_figures_of_a_handbook(figures):
    assert list(figures) == [
        "fermi-energy",
        "thermal-mass-ratio",
        "hall-ratio",
        "lorenz-ratio",
        "ranking-resistivity_path_product",
        "interaction-map",
    ]


def test_each_material_of_a_map_leads_to_its_sheet(figures):
    slugs = [s.record.slug for s in sample.handbook().sheets if s.record.electrons.dimension == 3]
    for id in ("interaction-map",):
        assert links(figures[id]) == [f"../materials/{slug}.html" for slug in slugs]
    dense = [slug for slug in slugs if sample.sheet(slug).si("electron_density") > 378e27 / 200]
    assert links(figures["fermi-energy"]) == [f"../materials/{slug}.html" for slug in dense]


def test_the_points_of_the_density_map_are_the_sheets(figures):
    points = {row["series"]: row for row in rows(figures["fermi-energy"])}
    copper = sample.sheet("copper")
    assert float(points["Copper"]["n / nm⁻³"]) == pytest.approx(copper.si("electron_density") * 1e-27, rel=1e-5)
    assert float(points["Copper"]["E_F / eV"]) == pytest.approx(copper.entries("fermi_energy")[0]["value"], rel=1e-5)


def test_free_electron_metals_lie_on_the_line_of_slope_two_thirds(figures):
    table = rows(figures["fermi-energy"])
    line = [row for row in table if row["series"].startswith("free-electron mass")]
    (n0, e0), (n1, e1) = ((float(row["n / nm⁻³"]), float(row["E_F / eV"])) for row in (line[0], line[-1]))
    assert e1 / e0 == pytest.approx((n1 / n0) ** (2 / 3), rel=1e-4)
    for row in table:
        if row["series"] in ("Copper", "Aluminium", "Tungsten"):
            assert float(row["E_F / eV"]) == pytest.approx(e0 * (float(row["n / nm⁻³"]) / n0) ** (2 / 3), rel=1e-4)


def test_a_ratio_of_opposite_sign_says_so(figures):
    assert b"opposite sign" in figures["hall-ratio"].svg
    assert b"opposite sign" not in figures["thermal-mass-ratio"].svg
    assert "Aluminium (negative)" in {row["series"] for row in rows(figures["hall-ratio"])}


def test_a_ranking_runs_from_the_largest_to_the_smallest_with_uncertainties():
    handbook = sample.handbook()
    figure = ranking.draw(handbook, "electron_density")
    table = rows(figure)
    values = [float(row["n / nm⁻³"]) for row in table]
    assert values == sorted(values, reverse=True)
    silicon = next(row for row in table if row["series"] == "Silicon n")
    assert float(silicon["u(n / nm⁻³)"]) == pytest.approx(3e-3)
    assert links(figure)[0] == "../../materials/tungsten.html"
    assert figure.description.startswith("Density of conduction electrons, of 5 materials, largest first: Tungsten")


def test_a_ranking_says_at_which_temperature_or_edge():
    assert ranking.draw(sample.handbook(), "thermopower").title.endswith("at 293.15 K")
    assert ranking.draw(sample.handbook(), "level_spacing").title.endswith("at 1 nm")


def test_every_published_quantity_can_be_ranked_or_is_left_out():
    handbook = sample.handbook()
    drawn = {id for id in handbook.registry if ranking.draw(handbook, id)}
    assert {"fermi_energy", "hall_coefficient", "skin_depth", "bulk_edge"} <= drawn
    assert not drawn & {"neighbour_shells", "zone_occupation", "sheet_density"}


def test_negative_numbers_stand_at_their_sizes():
    figure = ranking.draw(sample.handbook(), "hall_coefficient")
    assert b"negative" in figure.svg and b"positive" in figure.svg
    assert next(row for row in rows(figure) if row["series"].startswith("Copper"))["series"] == "Copper (negative)"


def test_a_handbook_of_one_material_has_no_overview():
    handbook = sample.handbook()
    lone = SimpleNamespace(imprint=handbook.imprint, registry=handbook.registry, sheets=handbook.sheets[:1])
    assert draw_handbook(lone) == []
    assert ranking.draw(lone, "fermi_energy") is None
