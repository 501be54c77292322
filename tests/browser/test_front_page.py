"""The table of all materials: found by words, sorted by column, kept in the address."""

from __future__ import annotations

import json

import pytest
from support.browsing import watched_page

pytestmark = pytest.mark.xdist_group("browser")

SHOWN = "#materials-table tbody tr:not([hidden])"


@pytest.fixture
def table(browser, pressed_site):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "index.html").as_uri())
        yield page
        assert troubles == []


@pytest.fixture(scope="module")
def materials(pressed_site):
    return json.loads((pressed_site / "data" / "handbook.json").read_text(encoding="utf-8"))["materials"]


def names(page) -> list[str]:
    return [name.strip() for name in page.locator(f"{SHOWN} th a").all_inner_texts()]


def numbers(page, key: str) -> list[float | None]:
    """The values of a column as they stand, top to bottom; None where a material has none."""
    column = page.locator("#materials-table thead th").evaluate_all(
        "(heads, key) => heads.findIndex(head => head.dataset.key === key)", key
    )
    values = "(rows, column) => rows.map(row => row.cells[column].dataset.value)"
    cells = page.locator(SHOWN).evaluate_all(values, column)
    return [None if cell is None else float(cell) for cell in cells]


def test_every_material_is_in_the_table(table, materials):
    assert sorted(names(table)) == sorted(material["name"] for material in materials)


@pytest.mark.parametrize("words, expected", [("copper", ["Copper"]), ("COPPER", ["Copper"]), ("no such name", [])])
def test_words_find_rows(table, words, expected):
    table.get_by_role("searchbox").fill(words)
    assert names(table) == expected


def test_several_words_narrow_the_search(table):
    table.get_by_role("searchbox").fill("fcc")
    fcc = set(names(table))
    table.get_by_role("searchbox").fill("fcc cop")
    assert set(names(table)) == {"Copper"} < fcc


def test_emptied_search_shows_all_again(table, materials):
    search = table.get_by_role("searchbox")
    search.fill("copper")
    search.fill("")
    assert len(names(table)) == len(materials)


def test_number_of_rows_is_announced(table, materials):
    table.get_by_role("searchbox").fill("copper")
    assert table.locator("output").inner_text() == f"1 of {len(materials)} materials"


@pytest.mark.parametrize("key", ["fermi_energy", "electron_density"])
def test_column_sorts_down_then_up_with_gaps_last(table, key):
    button = table.locator(f"th[data-key={key}] button")
    for direction, sign in (("descending", -1), ("ascending", 1)):
        button.click()
        assert table.locator(f"th[data-key={key}]").get_attribute("aria-sort") == direction
        values = numbers(table, key)
        stated = [value for value in values if value is not None]
        assert stated == sorted(stated, key=lambda value: sign * value)
        assert values == stated + [None] * (len(values) - len(stated))
        assert len(set(stated)) > 10


def test_names_sort_by_alphabet(table):
    table.locator("th[data-key=name] button").click()
    listed = names(table)
    assert listed == sorted(listed, key=str.casefold)


def test_view_is_kept_in_the_address(table, pressed_site):
    table.get_by_role("searchbox").fill("fcc")
    table.locator("th[data-key=fermi_energy] button").click()
    shown = names(table)
    address = table.url
    table.goto("about:blank")
    table.goto(address)
    assert names(table) == shown
    assert table.get_by_role("searchbox").input_value() == "fcc"


def test_table_is_worked_by_keyboard_alone(table):
    table.get_by_role("searchbox").focus()
    table.keyboard.type("copper")
    assert names(table) == ["Copper"]
    for _ in range(30):
        table.keyboard.press("Tab")
        if table.evaluate("() => document.activeElement.closest('th')?.dataset.key") == "fermi_energy":
            break
    table.keyboard.press("Tab")
    table.keyboard.press("Enter")
    assert table.locator("th[data-key=fermi_energy]").get_attribute("aria-sort") == "descending"
