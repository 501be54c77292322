"""At your conditions: what the page shows against the same numbers from the program."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from scipy import constants as c
from support.browsing import watched_page

from sheetgen.handbook import Handbook
from sheetgen.physics import bloch_grueneisen, counting, debye, films, occupation

pytestmark = pytest.mark.xdist_group("browser")

MATERIALS = Path(__file__).parents[2] / "materials"
AGREE = 1e-3
NANO = 1e-9
# temperature, field, size, specularity, grain size, grain reflection
SETTINGS = [
    (293.15, 1, 20, 0, 20, 0),
    (4.2, 0.5, 5, 0.3, 30, 0.25),
    (77, 12, 300, 0.9, 80, 0.6),
    (1500, 3, 1.5, 1, 2, 0.1),
    (0.3, 100, 40, 0, 1000, 0.9),
]
NAMES = ("temperature", "field", "size", "specularity", "grain-size", "grain-reflection")


@pytest.fixture(scope="module")
def sheets():
    return {sheet.record.slug: sheet for sheet in Handbook.load(MATERIALS).sheets}


def set_conditions(page, values) -> None:
    for name, value in zip(NAMES, values, strict=True):
        if page.locator(f"#set-{name}").count():
            page.locator(f"#set-{name}").fill(str(value))


def shown(page) -> dict[str, float]:
    """The numbers of the section as they are kept beside the printed ones, in SI."""
    rows = page.locator("tr[data-follow]").evaluate_all(
        "rows => rows.map(row => [row.dataset.follow, row.cells[2].dataset.value, "
        "SHEET.conditions.rows[row.dataset.follow][0]])"
    )
    return {id: float(value) * factor for id, value, factor in rows if value}


def expected(sheet, temperature, field, size, specularity, grain_size, reflection) -> dict[str, float]:
    """The same by the functions of the program, from the numbers of the sheet."""
    si, thickness = sheet.si, size * NANO
    theta, t = sheet.input_si("debye_temperature"), temperature / sheet.si("fermi_temperature")
    transport_theta = sheet.input_si("transport_debye_temperature")
    transport_theta = theta if np.isnan(transport_theta) else transport_theta
    reference = sheet.record.inputs["measured.resistivity"]
    residual = np.nan_to_num(sheet.input_si("residual_resistivity"))
    at = 293.15 if reference.temperature is None else reference.temperature
    rho = float(bloch_grueneisen.resistivity_from_debye(temperature, transport_theta, residual, reference.si, at))
    time = si("relaxation_time") * reference.si / rho
    path = si("fermi_velocity") * time
    alpha = films.alpha(path, grain_size * NANO, reflection)
    product = si("fermi_wavevector") * thickness
    states = 2 * counting.hard_wall_points(product / np.pi)
    gas_scale = si("heat_coefficient") * si("fermi_temperature") * 2 / np.pi**2
    return {
        "resistivity_from_debye": rho,
        "conductivity": 1 / rho,
        "relaxation_time": time,
        "mean_free_path": path,
        "path_wavevector_product": si("fermi_wavevector") * path,
        "mobility": si("mobility") * reference.si / rho,
        "electron_thermal_conductivity": si("lorenz_number") * temperature / rho,
        "cyclotron_angle": si("cyclotron_frequency_per_tesla") * time * field,
        "thermopower": si("thermopower") * temperature / 293.15,
        "chemical_potential": si("fermi_energy") * occupation.chemical_potential_ratio(t),
        "electron_heat_capacity": gas_scale * occupation.heat_capacity_ratio(t),
        "lattice_heat_capacity": 3 * c.R * debye.debye_heat_ratio(temperature, theta),
        "level_spacing": 2 / (thickness**3 * si("density_of_states")),
        "hard_wall_deficit": 1 - states / (product**3 / (3 * np.pi**2)),
        "film_resistivity_surface": rho * films.surface_factor(thickness / path, specularity),
        "film_resistivity_grain": rho * films.grain_factor(alpha),
        "film_resistivity": rho * films.film_factor(thickness / path, alpha, specularity),
    }


@pytest.fixture
def sheet_page(browser, pressed_site):
    with watched_page(browser) as (page, troubles):

        def opened(slug: str):
            page.goto((pressed_site / "materials" / f"{slug}.html").as_uri())
            return page

        yield opened
        assert troubles == []


@pytest.mark.parametrize("slug", ["copper", "lead", "sodium", "tungsten"])
def test_numbers_follow_the_conditions_as_the_program_has_them(sheet_page, sheets, slug):
    page = sheet_page(slug)
    for values in SETTINGS:
        set_conditions(page, values)
        found, wanted = shown(page), expected(sheets[slug], *values)
        assert {id: found.get(id) for id in wanted} == {
            id: pytest.approx(value, rel=AGREE, abs=1e-12) for id, value in wanted.items()
        }, values


def test_at_the_start_the_numbers_are_those_of_the_sheet(sheet_page, sheets):
    page = sheet_page("gold")
    for id, value in shown(page).items():
        entries = [entry for entry in sheets["gold"].entries(id) if entry.get("temperature") == 293.15]
        if entries:
            assert value == pytest.approx(sheets["gold"].si(id), rel=1e-4), id


def condition(page, id: str) -> str:
    return page.locator(f"tr[data-follow={id}] td.reason span").inner_text()


def test_standing_changes_where_an_assumption_goes_out_of_bounds(sheet_page):
    page = sheet_page("lead")
    assert condition(page, "conductivity") == "holds"
    page.locator("#set-temperature").fill("4.2")  # lead is a superconductor below 7.2 K
    assert condition(page, "conductivity") == "outside"
    assert "normal state" in page.locator("tr[data-follow=conductivity] td.reason").inner_text()
    page.wait_for_function("() => document.getElementById('conditions-said').textContent.includes('outside')")
    page.locator("#set-temperature").fill("30")
    assert condition(page, "conductivity") == "holds"


def test_a_film_thinner_than_a_wavelength_is_outside(sheet_page):
    page = sheet_page("copper")
    page.locator("#set-size").fill("0.5")
    page.locator("#set-size").fill("20")
    assert condition(page, "film_resistivity") != "outside"
    page.locator("tr[data-indicator='d/λ_F']").wait_for()
    page.evaluate("() => { const size = document.getElementById('set-size'); size.min = 0.1; }")
    page.locator("#set-size").fill("0.3")
    assert condition(page, "film_resistivity") == "outside"


def test_slider_and_field_go_together(sheet_page):
    page = sheet_page("copper")
    slider = page.locator("input[data-for=set-temperature]")
    slider.focus()
    before = shown(page)["resistivity_from_debye"]
    for _ in range(20):
        page.keyboard.press("ArrowRight")
    assert float(page.locator("#set-temperature").input_value()) > 293.15
    assert shown(page)["resistivity_from_debye"] > before
    assert slider.get_attribute("aria-valuetext") == page.locator("#set-temperature").input_value()


def test_unusable_setting_is_marked_and_changes_nothing(sheet_page):
    page = sheet_page("copper")
    before = shown(page)
    page.locator("#set-specularity").fill("1.5")
    assert page.locator("#set-specularity").get_attribute("aria-invalid") == "true"
    assert shown(page) == before
    page.get_by_role("button", name="Back to the start").click()
    assert page.locator("#set-specularity").get_attribute("aria-invalid") is None


def test_specimen_sets_its_conditions_and_meets_its_sheet_number(sheet_page, sheets):
    page = sheet_page("copper")
    specimen = next(one for one in sheets["copper"].data["specimens"] if "film_resistivity" in one["quantities"])
    page.get_by_role("button", name=f"As specimen {specimen['name']}", exact=True).click()
    wanted = specimen["quantities"]["film_resistivity"]["value"] * 1e-8
    # The specimen is compared with the bulk at the reference temperature, 0.15 K away from its own.
    assert shown(page)["film_resistivity"] == pytest.approx(wanted, rel=2e-3)


def test_two_dimensional_gas_follows_temperature_and_field(sheet_page, sheets):
    slug = next(slug for slug, sheet in sheets.items() if sheet.record.electrons.dimension == 2)
    page = sheet_page(slug)
    page.locator("#set-temperature").fill("50")
    t = 50 / sheets[slug].si("fermi_temperature")
    wanted = sheets[slug].si("fermi_energy") * occupation.chemical_potential_ratio_2d(t)
    assert shown(page)["chemical_potential"] == pytest.approx(wanted, rel=AGREE)


def test_without_a_script_the_section_says_so(browser, pressed_site):
    with watched_page(browser, java_script_enabled=False) as (page, _):
        page.goto((pressed_site / "materials" / "copper.html").as_uri())
        assert page.get_by_text("which needs a script").is_visible()
        assert not page.locator("#conditions").is_visible()
