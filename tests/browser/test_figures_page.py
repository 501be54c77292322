"""Figures within pages: their links are alive, and they turn dark with the page."""

from __future__ import annotations

import pytest
from support.browsing import watched_page

pytestmark = pytest.mark.xdist_group("browser")


def test_a_point_leads_to_its_sheet(browser, pressed_site):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "figures.html").as_uri())
        page.locator("svg.sheetgen-figure a[href$='materials/caesium.html']").first.focus()
        page.keyboard.press("Enter")
        page.wait_for_url("**/materials/caesium.html")
        assert troubles == []


@pytest.mark.parametrize("scheme, dark", [("light", False), ("dark", True)])
@pytest.mark.parametrize("path", ["figures.html", "quantities/fermi_energy.html"])
def test_figure_has_the_ground_of_the_page(browser, pressed_site, path, scheme, dark):
    with watched_page(browser, color_scheme=scheme) as (page, troubles):
        page.goto((pressed_site / path).as_uri())
        ground = page.locator("svg.sheetgen-figure path.gr").first.evaluate("one => getComputedStyle(one).fill")
        assert (sum(int(part) for part in ground[4:-1].split(",")) < 200) is dark
        assert troubles == []
