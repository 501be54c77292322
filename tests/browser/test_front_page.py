"""The table of all materials: what a reader filters, sorts and chooses stands in the address and in the CSV."""

from __future__ import annotations

import csv
import io
import json
import re
from urllib.parse import quote

import pytest
from support.browsing import watched_page

from sheetgen.pages import entries, numbers
from sheetgen.pages.tables import Tables

pytestmark = pytest.mark.xdist_group("browser")

RYDBERG = 13.605693122990  # eV, CODATA 2022
BOHR = 0.0529177210544  # nm, CODATA 2022


@pytest.fixture
def table(browser, pressed_site):
    with watched_page(browser, accept_downloads=True) as (page, troubles):
        page.goto((pressed_site / "index.html").as_uri())
        yield page
        assert troubles == []


@pytest.fixture(scope="module")
def materials(pressed_site):
    return json.loads((pressed_site / "data" / "handbook.json").read_text(encoding="utf-8"))["materials"]


def settled(page) -> None:
    """Wait until everything that was asked of the table stands there."""
    page.wait_for_function("() => !document.getElementById('materials-table').hasAttribute('aria-busy')")


def names(page) -> list[str]:
    settled(page)
    return [name.strip() for name in page.locator("#materials-table tbody th a").all_inner_texts()]


def values(page, key: str) -> list[float | None]:
    """The numbers of a column as they stand, top to bottom; None where a material has none."""
    settled(page)
    column = page.locator("#materials-table thead th").evaluate_all(
        "(heads, key) => heads.findIndex(head => head.dataset.key === key)", key
    )
    read = "(rows, column) => rows.map(row => row.cells[column].dataset.value)"
    cells = page.locator("#materials-table tbody tr").evaluate_all(read, column)
    return [None if cell is None else float(cell) for cell in cells]


def stated(materials, id: str) -> dict[str, float]:
    """Name → value of every material that states a quantity as one number."""
    return {m["name"]: m["quantities"][id]["value"] for m in materials if id in m["quantities"]}


def reopen(page) -> None:
    """Open the address of the view anew, as someone to whom it was sent would."""
    address = page.url
    page.goto("about:blank")
    page.goto(address)


def condition(page, quantity: str, low: str, high: str) -> None:
    page.get_by_role("button", name="Add a range").click()
    line = page.get_by_role("group", name="Range").last
    line.locator("[name=key]").select_option(quantity)
    line.get_by_label("from", exact=True).fill(low)
    line.get_by_label("to", exact=True).fill(high)


# --- finding rows


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
    assert names(table) == ["Copper"]
    search.fill("")
    assert len(names(table)) == len(materials)


def test_number_of_rows_is_announced(table, materials):
    table.get_by_role("searchbox").fill("copper")
    settled(table)
    assert table.locator("output").inner_text() == f"1 of {len(materials)} materials"


def test_element_finds_its_compounds_too(table):
    table.locator("[name=element]").select_option("Ga")
    assert names(table) == ["Gallium", "Gallium arsenide, n-type", "Gallium arsenide quantum well"]


def test_lattice_is_matched_whole(table):
    table.locator("[name=lattice]").select_option("hcp")
    settled(table)
    lattices = table.locator("#materials-table tbody tr td:nth-child(3)").all_inner_texts()
    assert len(lattices) > 3 and set(lattices) == {"hcp"}


def test_standing_finds_materials_with_such_a_number(table, materials):
    table.locator("[name=standing]").first.select_option("fails")

    def fails(material) -> bool:
        listed = (stated if isinstance(stated, list) else [stated] for stated in material["quantities"].values())
        return any(stated[0]["standing"] == "fails" for stated in listed)

    expected = sorted(material["name"] for material in materials if fails(material))
    assert sorted(names(table)) == expected and 0 < len(expected) < len(materials)


def test_range_keeps_what_lies_within(table, materials):
    condition(table, "fermi_energy", "5", "8")
    expected = {name for name, value in stated(materials, "fermi_energy").items() if 5 <= value <= 8}
    assert set(names(table)) == expected and len(expected) > 3


def test_two_ranges_are_both_met(table, materials):
    condition(table, "fermi_energy", "5", "")
    condition(table, "electron_density", "", "100")
    energy, density = stated(materials, "fermi_energy"), stated(materials, "electron_density")
    expected = {name for name in energy.keys() & density.keys() if energy[name] >= 5 and density[name] <= 100}
    assert set(names(table)) == expected and len(expected) > 2


def test_removed_range_shows_all_again(table, materials):
    condition(table, "fermi_energy", "5", "8")
    table.get_by_role("button", name="Remove range 1").click()
    assert len(names(table)) == len(materials)


# --- order, columns, units


@pytest.mark.parametrize("key", ["fermi_energy", "electron_density"])
def test_column_sorts_down_then_up_with_gaps_last(table, key):
    button = table.locator(f"th[data-key={key}] button")
    for direction, sign in (("descending", -1), ("ascending", 1)):
        button.click()
        assert table.locator(f"th[data-key={key}]").get_attribute("aria-sort") == direction
        found = values(table, key)
        present = [value for value in found if value is not None]
        assert present == sorted(present, key=lambda value: sign * value)
        assert found == present + [None] * (len(found) - len(present))
        assert len(set(present)) > 10


def test_names_sort_by_alphabet(table):
    table.locator("th[data-key=name] button").click()
    listed = names(table)
    assert listed == sorted(listed, key=str.casefold)


def test_chosen_column_is_added_and_taken_away(table, materials):
    table.locator("summary", has_text="Columns").click()
    box = table.get_by_role("checkbox", name="Bulk modulus of the electron gas")
    box.check()
    expected = stated(materials, "bulk_modulus")
    shown = dict(zip(names(table), values(table, "bulk_modulus"), strict=True))
    assert {name: shown[name] for name in expected} == pytest.approx(expected, rel=1e-8)
    box.uncheck()
    settled(table)
    assert table.locator("th[data-key=bulk_modulus]").count() == 0


def test_column_can_stand_at_another_edge(table, materials):
    table.goto(f"{table.url}#columns=level_spacing@5")
    shown = dict(zip(names(table), values(table, "level_spacing@5"), strict=True))
    copper = next(material for material in materials if material["slug"] == "copper")
    spacing = next(entry for entry in copper["quantities"]["level_spacing"] if entry["edge"] == 5)
    assert shown["Copper"] == pytest.approx(spacing["value"], rel=1e-8)


@pytest.mark.parametrize(
    "key, unit, factor",
    [("fermi_energy", "Ry", 1 / RYDBERG), ("fermi_energy", "J", 1.602176634e-19), ("mean_free_path", "bohr", 1 / BOHR)],
)
def test_unit_is_changed_where_the_column_is_headed(table, key, unit, factor):
    table.goto(f"{table.url}#columns={key}")
    before = values(table, key)
    table.locator(f"th[data-key={key}] select").select_option(unit)
    after = values(table, key)
    pairs = [(a, b) for a, b in zip(before, after, strict=True) if a is not None]
    assert len(pairs) > 10
    assert [b for _, b in pairs] == pytest.approx([a * factor for a, _ in pairs], rel=1e-9)


def test_range_follows_the_unit(table):
    condition(table, "fermi_energy", "5", "8")
    before = names(table)
    table.locator("th[data-key=fermi_energy] select").select_option("Ry")
    assert names(table) == before
    assert float(table.get_by_label("from", exact=True).input_value()) == pytest.approx(5 / RYDBERG, rel=1e-8)


def test_the_script_prints_numbers_as_the_pages_do(table, handbook):
    """Every column, every material: same digits, same rounding, same powers of ten."""
    tables = Tables(handbook)
    columns = tables.columns
    keys = [f"{id}{next(iter(points))}" for id, points in columns.items()]
    table.goto(f"{table.url}#columns={quote(','.join(keys))}")
    settled(table)
    cells = "rows => rows.map(row => [...row.cells].slice(4, -1).map(cell => cell.textContent))"
    shown = table.locator("#materials-table tbody tr").evaluate_all(cells)
    preference = entries.Preference(handbook.imprint.units)
    for place, (id, points) in enumerate(columns.items()):
        point = next(iter(points))
        definition = handbook.registry.definitions_of(id)[0]
        # Of two at one temperature the first one counts.
        found = [dict(reversed(list(tables.stated(sheet, definition)))).get(point) for sheet in handbook]
        pairs = [preference.number(id, entry) if entry else None for entry in found]
        _, expected = numbers.column(pairs, whole="whole" in points[point])
        assert [row[place] for row in shown] == [re.sub("<.*?>", "", cell) for cell in expected], id


# --- sent on and saved


def test_view_is_kept_in_the_address(table):
    table.get_by_role("searchbox").fill("c")
    table.locator("[name=lattice]").select_option("fcc")
    condition(table, "fermi_energy", "2", "12")
    table.locator("summary", has_text="Columns").click()
    table.get_by_role("checkbox", name="Bulk modulus of the electron gas").check()
    settled(table)
    table.locator("th[data-key=fermi_energy] select").select_option("Ry")
    table.locator("th[data-key=fermi_energy] button").click()
    shown, numbers_shown = names(table), values(table, "fermi_energy")
    reopen(table)
    assert names(table) == shown and len(shown) > 2
    assert values(table, "fermi_energy") == numbers_shown
    assert table.get_by_role("searchbox").input_value() == "c"
    assert table.locator("th[data-key=bulk_modulus]").is_visible()
    assert table.locator("th[data-key=fermi_energy]").get_attribute("aria-sort") == "descending"


@pytest.mark.parametrize(
    "address",
    [
        "#columns=no_such,fermi_energy&sort=-none&where=none:1:2:&units=fermi_energy:parsec,x:y&from=99999",
        "#columns=constructor,__proto__,fermi_energy&where=fermi_energy:much:more:fine&sort=toString&lattice=<b>",
    ],
)
def test_address_that_asks_for_what_is_not_there_is_met_as_far_as_possible(table, materials, address):
    table.goto(table.url + address)
    assert len(names(table)) == len(materials)
    heads = table.locator("#materials-table thead th").evaluate_all("heads => heads.map(head => head.dataset.key)")
    assert heads == ["name", "formula", "lattice", "electrons", "fermi_energy", "standing"]


def test_csv_holds_what_is_shown(table):
    table.goto(f"{table.url}#lattice=fcc&sort=-fermi_energy&columns=fermi_energy,bulk_modulus&units=fermi_energy:Ry")
    shown, energies = names(table), values(table, "fermi_energy")
    with table.expect_download() as waiting:
        table.get_by_role("button", name="CSV").click()
    text = waiting.value.path().read_text(encoding="utf-8")
    rows = list(csv.DictReader(io.StringIO(text)))
    assert waiting.value.suggested_filename == "materials.csv"
    assert [row["material"] for row in rows] == shown
    assert [float(row["fermi_energy / Ry"]) for row in rows] == pytest.approx(energies, rel=1e-11)
    copper = next(row for row in rows if row["material"] == "Copper")
    assert 0 < float(copper["u(fermi_energy) / Ry"]) < 1e-3 * float(copper["fermi_energy / Ry"])
    assert copper["standing of bulk_modulus"] == "fails"


def test_start_again_forgets_the_view(table, materials):
    table.goto(f"{table.url}#find=copper&columns=bulk_modulus")
    assert names(table) == ["Copper"]
    table.get_by_role("button", name="Start again").click()
    assert len(names(table)) == len(materials)
    assert "#" not in table.url


def test_table_is_worked_by_keyboard_alone(table):
    table.get_by_role("searchbox").focus()
    table.keyboard.type("copper")
    assert names(table) == ["Copper"]
    for _ in range(60):
        table.keyboard.press("Tab")
        if table.evaluate("() => document.activeElement.getAttribute('aria-label')") == "Sort by Fermi energy":
            break
    table.keyboard.press("Enter")
    settled(table)
    assert table.locator("th[data-key=fermi_energy]").get_attribute("aria-sort") == "descending"
    assert table.evaluate("() => document.activeElement.closest('th').dataset.key") == "fermi_energy"


def test_works_from_a_server_too(browser, served_site):
    with watched_page(browser) as (page, troubles):
        page.goto(f"{served_site}/index.html#find=copper&columns=bulk_modulus")
        assert names(page) == ["Copper"]
        assert troubles == []
