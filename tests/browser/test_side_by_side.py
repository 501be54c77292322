"""Materials side by side: chosen by name, numbers with ratios, curves laid over each other."""

from __future__ import annotations

import json

import pytest
from support.browsing import watched_page

pytestmark = pytest.mark.xdist_group("browser")


@pytest.fixture
def compare(browser, pressed_site):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "side-by-side.html").as_uri())
        yield page
        assert troubles == []


def add(page, *names: str) -> None:
    for name in names:
        page.get_by_label("Add").first.fill(name)
        page.keyboard.press("Enter")
    page.locator("#compare-chosen li").nth(len(names) - 1).wait_for()


def cells(page, quantity: str) -> list[str]:
    row = page.locator("#compare-table tr").filter(has=page.locator(f"a[href='quantities/{quantity}.html']")).first
    return row.locator("td").all_inner_texts()


@pytest.fixture
def energy(pressed_site):
    def read(slug: str) -> float:
        path = pressed_site / "data" / "materials" / f"{slug}.json"
        return json.loads(path.read_text(encoding="utf-8"))["quantities"]["fermi_energy"]["value"]

    return read


def test_two_materials_by_name_and_by_formula(compare, energy):
    add(compare, "copper", "Ag")
    unit, copper, silver = cells(compare, "fermi_energy")
    assert unit == "eV"
    assert copper.startswith(f"{energy('copper'):.6f}"[:5])
    ratio = energy("silver") / energy("copper")
    assert f"{ratio:.3g}" in silver and "▼" in silver


def test_first_column_has_no_ratio(compare):
    add(compare, "copper", "silver")
    assert "×" not in cells(compare, "fermi_energy")[1]


def test_choice_is_kept_in_the_address(compare):
    add(compare, "copper", "silver", "sodium")
    address, shown = compare.url, cells(compare, "fermi_energy")
    compare.goto("about:blank")
    compare.goto(address)
    compare.locator("#compare-chosen li").nth(2).wait_for()
    compare.locator("#compare-table tbody").first.wait_for()
    assert cells(compare, "fermi_energy") == shown


def test_only_what_differs(compare):
    add(compare, "copper", "silver")
    everything = compare.locator("#compare-table tbody tr").count()
    compare.get_by_label("only numbers that differ").check()
    compare.wait_for_function(
        "count => document.querySelectorAll('#compare-table tbody tr').length < count", arg=everything
    )
    # Both are face-centred cubic.
    assert compare.locator("a[href='quantities/coordination_number.html']").count() == 0
    assert cells(compare, "fermi_energy")


def test_quantity_that_one_has_not_is_absent_there(compare):
    add(compare, "copper", "Gallium arsenide quantum well")
    assert cells(compare, "electron_density")[2] == "absent"


def test_curves_of_all_lie_in_one_picture(compare):
    add(compare, "copper", "silver", "sodium")
    pictures = compare.locator("#compare-charts svg[role=img]")
    pictures.first.wait_for()
    assert pictures.count() == 3
    for picture in pictures.all():
        assert picture.locator("path.curve").count() == 3
        said = picture.locator("desc").text_content()
        assert "Copper" in said and "Sodium" in said
        box = picture.bounding_box()
        for curve in picture.locator("path.curve").all():
            inner = curve.bounding_box()
            assert inner["x"] >= box["x"] and inner["x"] + inner["width"] <= box["x"] + box["width"] + 1
            assert inner["y"] >= box["y"] and inner["y"] + inner["height"] <= box["y"] + box["height"] + 1


def test_no_more_than_six(compare):
    add(compare, "copper", "silver", "gold", "sodium", "potassium", "lead")
    compare.get_by_label("Add").first.fill("tin, white")
    compare.keyboard.press("Enter")
    assert "remove one" in compare.locator("#compare-said").inner_text()
    assert compare.locator("#compare-chosen li").count() == 6


def test_unknown_name_is_said(compare):
    compare.get_by_label("Add").first.fill("unobtainium")
    compare.get_by_role("button", name="Add", exact=True).click()
    assert "unobtainium" in compare.locator("#compare-said").inner_text()


def test_material_is_taken_away(compare):
    add(compare, "copper", "silver", "sodium")
    compare.get_by_role("button", name="Remove Copper").click()
    compare.wait_for_function("() => document.querySelectorAll('#compare-chosen li').length === 2")
    assert "×" not in cells(compare, "fermi_energy")[1]


def test_number_leads_to_its_line_on_the_sheet(compare):
    add(compare, "copper", "silver")
    compare.locator("#compare-table a[href='materials/silver.html#fermi_energy']").click()
    compare.wait_for_url("**/materials/silver.html#fermi_energy")


def test_address_with_strangers_shows_those_that_are_there(browser, pressed_site):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "side-by-side.html").as_uri() + "#materials=copper,nowhere,../copper,silver,copper")
        page.locator("#compare-table tbody").first.wait_for()
        assert page.locator("#compare-chosen a").all_inner_texts() == ["Copper", "Silver"]
        assert troubles == []
