"""The periodic table: a second way in, shaded as the reader chooses, worked by keyboard."""

from __future__ import annotations

import json

import pytest
from support.browsing import watched_page

pytestmark = pytest.mark.xdist_group("browser")


@pytest.fixture
def table(browser, pressed_site):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "periodic-table.html").as_uri())
        page.locator("#shade-legend li").first.wait_for()
        yield page
        assert troubles == []


def of(page, symbol: str):
    return page.locator("#periodic td.element").filter(has=page.get_by_text(symbol, exact=True))


def step(page, symbol: str) -> int:
    return int(of(page, symbol).get_attribute("class").split("step-")[1][0])


def test_elements_stand_where_they_belong(table):
    places = table.locator("#periodic td.element").evaluate_all(
        "all => all.map(cell => [cell.querySelector('.z').textContent, cell.parentElement.rowIndex, cell.cellIndex])"
    )
    where = {int(number): (row, column) for number, row, column in places}
    assert sorted(where) == list(range(1, 119))
    # IUPAC: period and group
    for number, place in {1: (1, 1), 2: (1, 18), 5: (2, 13), 26: (4, 8), 47: (5, 11), 72: (6, 4), 118: (7, 18)}.items():
        assert where[number] == place
    assert [where[number][0] for number in (57, 71, 89, 103)] == [8, 8, 9, 9]


def test_larger_value_is_never_lighter(table, pressed_site):
    data = json.loads((pressed_site / "data" / "handbook.json").read_text(encoding="utf-8"))["materials"]
    energy = {m["formula"]: m["quantities"]["fermi_energy"]["value"] for m in data}
    metals = ["Cs", "Na", "Li", "Ag", "Cu", "Zn", "Al", "Be"]
    steps = [step(table, symbol) for symbol in sorted(metals, key=energy.get)]
    assert steps == sorted(steps) and steps[0] < steps[-1] == 7


def test_steps_darken_one_by_one(table):
    """Lightness alone tells the steps apart, so that grey and any colour vision do."""
    colours = table.locator(".swatch").evaluate_all("all => all.map(one => getComputedStyle(one).backgroundColor)")
    light = [luminance(colour) for colour in colours]
    assert len(light) == 7
    assert all(after < 0.9 * before for before, after in zip(light, light[1:], strict=False))


def luminance(colour: str) -> float:
    """WCAG 2.2, relative luminance."""
    channels = [int(part) / 255 for part in colour[4:-1].split(",")]
    linear = [part / 12.92 if part <= 0.04045 else ((part + 0.055) / 1.055) ** 2.4 for part in channels]
    return sum(weight * part for weight, part in zip((0.2126, 0.7152, 0.0722), linear, strict=True))


def test_standing_is_a_mark_with_a_word(table):
    table.get_by_label("Shade by").select_option("hall_coefficient")
    table.get_by_label("its standing").check()
    of(table, "Be").get_by_role("img", name="fails").wait_for()
    assert "Hall coefficient" in table.locator("#shade-caption").inner_text()
    assert "fails" in table.locator("#shade-legend").inner_text()


def test_choice_is_kept_in_the_address(table):
    table.get_by_label("Shade by").select_option("mean_free_path")
    table.get_by_text("Mean free path, in nm").wait_for()
    address, shown = table.url, of(table, "Ag").inner_text()
    table.goto("about:blank")
    table.goto(address)
    table.get_by_text("Mean free path, in nm").wait_for()
    assert of(table, "Ag").inner_text() == shown


def test_arrow_keys_go_to_the_next_element_with_a_sheet(table):
    table.get_by_role("link", name="Ag", exact=True).focus()
    for key, symbol in (("ArrowUp", "Cu"), ("ArrowRight", "Zn"), ("ArrowDown", "Cd"), ("ArrowLeft", "Ag")):
        table.keyboard.press(key)
        assert table.evaluate("() => document.activeElement.textContent") == symbol
    table.keyboard.press("Enter")
    table.wait_for_url("**/materials/silver.html")


def test_every_sheet_is_linked_without_a_script(browser, pressed_site):
    with watched_page(browser, java_script_enabled=False) as (page, troubles):
        page.goto((pressed_site / "periodic-table.html").as_uri())
        links = {link.split("/")[-1] for link in page.locator("main a").evaluate_all("all => all.map(one => one.href)")}
        assert links >= {path.name for path in (pressed_site / "materials").glob("*.html")}
        assert troubles == []


def test_narrow_screen_scrolls_the_table_and_not_the_page(browser, pressed_site):
    with watched_page(browser, viewport={"width": 320, "height": 640}) as (page, _):
        page.goto((pressed_site / "periodic-table.html").as_uri())
        assert page.evaluate("() => document.documentElement.scrollWidth") <= 320
        region = page.get_by_role("region", name="Periodic table")
        assert region.evaluate("one => one.scrollWidth > one.clientWidth")
