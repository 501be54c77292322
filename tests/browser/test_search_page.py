"""Search in the page: however a reader writes it, by keyboard alone."""

from __future__ import annotations

import pytest
from support.browsing import watched_page

pytestmark = pytest.mark.xdist_group("browser")


@pytest.fixture
def search(browser, pressed_site):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "search.html").as_uri())
        yield page
        assert troubles == []


def found(page, words: str) -> list[str]:
    """Where the finds lead, best first."""
    page.get_by_role("searchbox").fill(words)
    return page.locator("#search-found a").evaluate_all("all => all.map(one => one.getAttribute('href'))")


@pytest.mark.parametrize(
    "words, address",
    [
        ("copper", "materials/copper.html"),
        ("Cu", "materials/copper.html"),
        ("fermi energy", "quantities/fermi_energy.html"),
        ("E_F", "quantities/fermi_energy.html"),
        ("EF", "quantities/fermi_energy.html"),
        ("gamma", "quantities/heat_coefficient.html"),
        ("γ", "quantities/heat_coefficient.html"),
        ("ω_p", "quantities/plasma_frequency.html"),
        ("omega p", "quantities/plasma_frequency.html"),
        ("hall coeff", "quantities/hall_coefficient.html"),
        ("thomas fermi", "quantities/thomas_fermi_length.html"),
        ("Thomas–Fermi", "quantities/thomas_fermi_length.html"),
        ("limits", "limits.html"),
    ],
)
def test_first_find(search, words, address):
    assert found(search, words)[0] == address


@pytest.mark.parametrize("words", ["Grüneisen", "gruneisen", "GRU\u0308NEISEN"])
def test_accents_do_not_matter(search, words):
    plain = found(search, "gruneisen")
    assert plain and found(search, words) == plain


def test_sources_are_found_by_author(search):
    assert any(address.startswith("sources.html#") for address in found(search, "ashcroft"))


def test_assumptions_are_found(search):
    assert "methods.html#assumption-flat_potential" in found(search, "flat potential")


@pytest.mark.parametrize("words", ["fermi velocity silver", "silver v_F", "Fermi velocity of Ag", "AG vf"])
def test_material_and_quantity_find_the_number(search, words):
    assert found(search, words)[0] == "materials/silver.html#fermi_velocity"
    value = search.locator(".find-value").first
    search.wait_for_function("() => document.querySelector('.find-value').textContent")
    # 1.39e6 m/s: Ashcroft & Mermin (1976), table 2.1
    assert value.inner_text().startswith("1391") and "km" in value.inner_text() and "(" in value.inner_text()


def test_by_keyboard_from_the_first_page_to_the_number(browser, pressed_site):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "index.html").as_uri())
        page.get_by_role("link", name="Search").focus()
        page.keyboard.press("Enter")
        page.wait_for_url("**/search.html#words")
        page.wait_for_function("() => document.activeElement.id === 'words'")
        page.keyboard.type("fermi velocity silver")
        page.keyboard.press("Enter")
        page.wait_for_url("**/materials/silver.html#fermi_velocity")
        assert page.locator("#fermi_velocity").is_visible()
        assert troubles == []


def test_arrow_keys_go_through_the_finds(search):
    addresses = found(search, "fermi")
    search.keyboard.press("ArrowDown")
    search.keyboard.press("ArrowDown")
    assert search.evaluate("() => document.activeElement.getAttribute('href')") == addresses[1]
    search.keyboard.press("ArrowUp")
    search.keyboard.press("ArrowUp")
    assert search.evaluate("() => document.activeElement.type") == "search"


def test_nothing_found_is_said(search):
    assert found(search, "zzzzqqq") == []
    assert "Nothing found" in search.locator("#search-said").inner_text()


def test_words_are_kept_in_the_address(search):
    shown = found(search, "debye")
    address = search.url
    search.goto("about:blank")
    search.goto(address)
    assert search.get_by_role("searchbox").input_value() == "debye"
    links = search.locator("#search-found a").evaluate_all("all => all.map(one => one.getAttribute('href'))")
    assert links == shown


def test_words_are_text_and_never_markup(search):
    found(search, "<img src=x onerror=alert(1)>")
    assert search.locator("#search img").count() == 0
