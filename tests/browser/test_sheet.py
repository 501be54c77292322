"""A sheet in use: fold, copy, link, ask a symbol, enlarge a figure, cite."""

from __future__ import annotations

import json
import re

import pytest
from support.browsing import watched_page

pytestmark = pytest.mark.xdist_group("browser")

COPIED = "() => navigator.clipboard.readText()"


@pytest.fixture
def sheet_page(browser, served_site):
    """The sheet of copper from a server, allowed to read back what it copies."""
    with watched_page(browser, permissions=["clipboard-read", "clipboard-write"]) as (page, troubles):
        page.goto(f"{served_site}/materials/copper.html")
        yield page
        assert troubles == []


@pytest.fixture(scope="module")
def stated(pressed_site):
    return json.loads((pressed_site / "data" / "materials" / "copper.json").read_text(encoding="utf-8"))["quantities"]


def choose(page, form: str) -> None:
    page.get_by_role("radio", name=form, exact=True).check()


def copied(page, selector: str) -> str:
    page.locator(f"{selector} .copy").first.click()
    page.wait_for_function("() => document.getElementById('sheet-said').textContent.startsWith('Copied')")
    return page.evaluate(COPIED)


def test_number_is_copied_as_text_with_unit_and_uncertainty(sheet_page):
    choose(sheet_page, "text")
    assert re.fullmatch(r"7\.0\d+\(\d\d\) eV", copied(sheet_page, "#fermi_energy"))


def test_number_is_copied_for_latex(sheet_page):
    choose(sheet_page, "LaTeX")
    assert re.fullmatch(r"\\qty\{7\.0\d+\(\d\d\)\}\{\\electronvolt\}", copied(sheet_page, "#fermi_energy"))


def test_number_with_a_power_is_copied_for_latex(sheet_page):
    choose(sheet_page, "LaTeX")
    text = copied(sheet_page, "#plasma_frequency")
    assert re.fullmatch(r"\\qty\{1\.64\d+\(\d\d\)e16\}\{\\radian\\per\\second\}", text)


def test_number_is_copied_as_json(sheet_page, stated):
    choose(sheet_page, "JSON")
    found = json.loads(copied(sheet_page, "#fermi_energy"))
    wanted = stated["fermi_energy"]
    assert found["value"] == pytest.approx(wanted["value"], abs=wanted["standard_uncertainty"] / 10)
    assert found["standard_uncertainty"] == pytest.approx(wanted["standard_uncertainty"], rel=0.05)
    assert (found["material"], found["quantity"], found["unit"]) == ("copper", "fermi_energy", "eV")


def test_number_of_a_list_is_copied_in_its_own_unit_not_that_of_the_column(sheet_page, stated):
    choose(sheet_page, "JSON")
    entry = next(one for one in stated["conductivity"] if one["temperature"] == 293)
    found = json.loads(copied(sheet_page, "[id='conductivity@293K']"))
    assert found["at"] == "293K"
    assert found["value"] == pytest.approx(entry["value"], rel=1e-2)


def test_every_number_of_the_data_can_be_copied(sheet_page, stated):
    entries = [entry for found in stated.values() for entry in (found if isinstance(found, list) else [found])]
    single = [entry for entry in entries if not isinstance(entry["value"], list)]
    buttons = sheet_page.locator("table.numbers:not(.followed) .copy, table.band .copy").count()
    assert buttons >= len(single)


def test_copying_by_keyboard_says_what_was_copied(sheet_page):
    sheet_page.locator("#fermi_energy .copy").focus()
    sheet_page.keyboard.press("Enter")
    sheet_page.wait_for_function("() => document.getElementById('sheet-said').textContent.includes('eV')")
    assert sheet_page.evaluate("() => document.activeElement.className") == "copy"


def test_copying_works_from_a_folder(browser, pressed_site):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "materials" / "copper.html").as_uri())
        page.locator("#fermi_energy .copy").click()
        page.wait_for_function("() => document.getElementById('sheet-said').textContent !== ''")
        assert "eV" in page.locator("#sheet-said").inner_text()
        assert troubles == []


def test_every_number_has_a_link_that_leads_to_it(sheet_page):
    link = sheet_page.locator("[id='mobility@80K'] .place")
    assert link.get_attribute("aria-label") == "Link to Mobility at 80 K"
    link.focus()
    sheet_page.keyboard.press("Enter")
    assert sheet_page.url.endswith("#mobility@80K")
    assert sheet_page.locator("[id='mobility@80K']").evaluate("cell => cell.matches(':target')")
    choose(sheet_page, "link")
    assert copied(sheet_page, "#fermi_energy").endswith("/materials/copper.html#fermi_energy")


def test_sections_fold_and_a_link_into_one_opens_it(sheet_page):
    head = sheet_page.get_by_role("button", name="Transport", exact=True)
    assert head.get_attribute("aria-expanded") == "true"
    head.focus()
    sheet_page.keyboard.press("Enter")
    assert head.get_attribute("aria-expanded") == "false"
    assert not sheet_page.locator("#mobility").is_visible() or sheet_page.locator(".folded").count() == 1
    sheet_page.evaluate("() => { location.hash = '#mobility'; }")
    sheet_page.wait_for_function("() => document.querySelectorAll('.folded').length === 0")
    assert head.get_attribute("aria-expanded") == "true"


def test_all_sections_fold_at_once_and_print_open(sheet_page):
    sheet_page.get_by_role("button", name="Fold all").click()
    height = "() => document.querySelector('#section-transport').closest('.part').querySelector('.body').offsetHeight"
    assert sheet_page.evaluate(height) == 0
    sheet_page.emulate_media(media="print")
    assert sheet_page.evaluate(height) > 100
    sheet_page.emulate_media(media="screen")
    sheet_page.get_by_role("button", name="Open all").click()
    assert sheet_page.evaluate(height) > 100


def test_symbol_tells_what_it_is_on_hover_and_goes_on_escape(sheet_page):
    symbol = sheet_page.locator("#fermi_wavevector td.symbol math")
    symbol.hover()
    tip = sheet_page.get_by_role("tooltip")
    assert tip.inner_text().startswith("Fermi wavevector: 13.")
    assert symbol.get_attribute("aria-describedby") == tip.get_attribute("id")
    sheet_page.keyboard.press("Escape")
    assert not tip.is_visible()


def test_symbol_in_a_sentence_is_reached_by_keyboard(browser, pressed_site):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "materials" / "gallium-arsenide-n.html").as_uri())
        page.locator("button.sign").first.focus()
        assert page.get_by_role("tooltip").inner_text().startswith("Fermi temperature: ")
        assert troubles == []


def test_figure_is_enlarged_and_focus_comes_back(sheet_page):
    button = sheet_page.locator("figure .enlarge").first
    button.focus()
    sheet_page.keyboard.press("Enter")
    dialog = sheet_page.get_by_role("dialog")
    first = dialog.locator("h2").inner_text()
    sheet_page.keyboard.press("ArrowRight")
    assert dialog.locator("h2").inner_text() != first
    assert dialog.locator("img").evaluate("image => image.complete || image.decode().then(() => true)")
    sheet_page.keyboard.press("Escape")
    assert not dialog.is_visible()
    assert button.evaluate("element => element === document.activeElement")


def test_figure_is_saved_as_points_and_as_files(sheet_page, pressed_site):
    sheet_page.locator("figure .enlarge").first.click()
    dialog = sheet_page.get_by_role("dialog")
    sheet_page.wait_for_function("() => document.querySelector('#enlarged img').complete")
    with sheet_page.expect_download() as saved:
        dialog.get_by_role("button", name="Save as PNG").click()
    content = saved.value.path().read_bytes()
    assert content.startswith(b"\x89PNG") and int.from_bytes(content[16:20], "big") == 2400
    assert saved.value.suggested_filename.endswith(".png")
    for name, ending in (("Picture (SVG)", ".svg"), ("Plotted points (CSV)", ".csv")):
        link = dialog.get_by_role("link", name=name)
        assert link.get_attribute("download").endswith(ending)
        assert (pressed_site / "materials" / link.get_attribute("href")).resolve().is_file()


def test_sheet_is_cited_as_text_and_as_bibtex(sheet_page):
    text = sheet_page.locator("#citation-text").inner_text()
    assert "Copper (Cu)" in text and "materials/copper.html" in text
    sheet_page.get_by_role("button", name="Copy BibTeX").click()
    sheet_page.wait_for_function("() => document.getElementById('sheet-said').textContent !== ''")
    assert sheet_page.evaluate(COPIED).startswith("@incollection{copper-")


def test_sheet_is_whole_without_a_script(browser, pressed_site):
    with watched_page(browser, java_script_enabled=False) as (page, _):
        page.goto((pressed_site / "materials" / "copper.html").as_uri())
        assert page.locator("#mobility").is_visible()
        assert page.locator("#citation-bibtex").is_visible()
        assert not page.locator("#sheet-tools").is_visible()
        assert page.locator(".plain-button:visible").count() == 0
