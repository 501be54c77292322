"""Pages for finding: periodic table, leaves of a long table, search index, figures within pages."""

from __future__ import annotations

import re
from types import SimpleNamespace

import pytest

from sheetgen.pages import front, gallery, periodic
from sheetgen.pages.search_index import index


# IUPAC periodic table: period and group, counted here from 0; 7 and 8 are the two series.
@pytest.mark.parametrize(
    "number, place",
    [(1, (0, 0)), (2, (0, 17)), (3, (1, 0)), (5, (1, 12)), (13, (2, 12)), (21, (3, 2)), (29, (3, 10)), (47, (4, 10)),
     (56, (5, 1)), (57, (7, 2)), (71, (7, 16)), (72, (5, 3)), (79, (5, 10)), (92, (8, 5)), (103, (8, 16)),
     (104, (6, 3)), (118, (6, 17))],
)  # fmt: skip
def test_position(number, place):
    assert periodic.position(number) == place


def test_every_element_has_a_place_of_its_own():
    places = [periodic.position(number) for number in range(1, 119)]
    assert len(set(places)) == 118


def test_pure_matter_stands_at_its_element_and_the_rest_below(small_handbook):
    context = periodic.context(small_handbook)
    places = {place.symbol: place for _, row in context["periods"] for place in row if place and place.symbol}
    assert [record.slug for _, record in places["Cu"].sheets] == ["copper"]
    assert not places["Fe"].sheets
    assert [record.slug for _, record in context["compounds"]] == ["well"]


def test_a_long_table_is_spread_over_pages(small_handbook):
    many = SimpleNamespace(
        sheets=small_handbook.sheets * 150, registry=small_handbook.registry, imprint=small_handbook.imprint
    )
    assert front.leaves(many) == ["index.html", "materials-2.html", "materials-3.html"]
    sizes = [len(front.leaf(many, number)["materials"]) for number in (1, 2, 3)]
    assert sizes == [200, 200, 50]


def test_whatever_the_search_finds_is_there(site, pages, small_handbook):
    for kind, title, _, address, _ in index(small_handbook):
        path, _, anchor = address.partition("#")
        assert path in site, (kind, title)
        assert not anchor or anchor in pages[path].anchors, address


def test_every_quantity_material_and_source_can_be_found(small_handbook):
    found = {address for _, _, _, address, _ in index(small_handbook)}
    assert {f"materials/{slug}.html" for slug in small_handbook.slugs} <= found
    assert {f"quantities/{id}.html" for id in small_handbook.registry.published()} <= found
    assert {f"sources.html#{key}" for key in small_handbook.sources} <= found


def test_ranking_stands_in_the_page_of_its_quantity(site, pages):
    page = site["quantities/fermi_energy.html"].decode()
    picture = re.search(r"<svg [^>]*sheetgen-figure.*?</svg>", page, re.DOTALL)[0]
    assert 'role="img"' in picture and "<style" not in picture and "<a " not in picture
    assert {"figures/quantities/fermi_energy.svg", "figures/quantities/fermi_energy.csv"} <= set(site)


def test_figures_of_the_handbook_keep_their_links(site):
    page = site["figures.html"].decode()
    assert 'href="materials/copper.html"' in page
    assert "../" not in page
    assert "<style" not in page


def test_style_sheet_of_figures_has_the_rules_that_each_figure_carries(site):
    """Taken out of the figures, every rule is in the one style sheet."""
    sheet = site["style/figures.css"].decode()
    svg = site["figures/quantities/fermi_energy.svg"].decode()
    rules = re.search(r"<style>(.*?)</style>", svg, re.DOTALL)[1]
    assert len(rules) > 500
    for rule in re.findall(r"\.sheetgen-figure [^{}]+\{[^{}]*\}", rules):
        # Which SVG has as an attribute, and CSS of pages not yet.
        assert rule.replace("paint-order:stroke;", "") in sheet
    noted = re.findall(r'<text[^>]*class="[^"]*\bno\b', site["quantities/fermi_energy.html"].decode())
    assert noted and all("paint-order" in text for text in noted)


def test_links_of_a_figure_lead_from_where_it_is_shown():
    svg = b'<svg><title>t</title><style>.x{}</style><a href="../../materials/copper.html"><text>Cu</text></a></svg>\n'
    assert gallery.inline(svg, "") == '<svg><title>t</title><a href="materials/copper.html"><text>Cu</text></a></svg>'
