"""Pages load: from a folder and from a server, without a fault and without asking anyone outside."""

from __future__ import annotations

import pytest
from support.browsing import pages_of, watched_page

pytestmark = pytest.mark.xdist_group("browser")


def test_every_page_from_the_folder(browser, pressed_site):
    pages = pages_of(pressed_site)
    with watched_page(browser) as (page, troubles):
        for path in pages:
            page.goto(path.as_uri())
            assert troubles == [], path.name
            assert page.title()
    assert len(pages) > 40


def test_pages_from_a_server(browser, pressed_site, served_site):
    with watched_page(browser) as (page, troubles):
        for path in pages_of(pressed_site)[::4]:
            page.goto(f"{served_site}/{path.relative_to(pressed_site).as_posix()}")
            assert troubles == [], path.name


def test_every_picture_is_shown(browser, pressed_site):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "materials" / "copper.html").as_uri())
        page.evaluate("() => document.querySelectorAll('img').forEach(image => image.loading = 'eager')")
        page.wait_for_function("() => [...document.images].every(image => image.complete)")
        widths = page.evaluate("() => [...document.images].map(image => image.naturalWidth)")
        assert troubles == []
    assert widths and min(widths) > 0


def test_pages_read_without_a_script(browser, pressed_site):
    with watched_page(browser, java_script_enabled=False) as (page, _):
        page.goto((pressed_site / "index.html").as_uri())
        slugs = [path.stem for path in (pressed_site / "materials").glob("*.html")]
        for slug in slugs:
            assert page.locator(f"main a[href='materials/{slug}.html']").first.is_visible(), slug


@pytest.mark.parametrize("width", [375, 1280])
@pytest.mark.parametrize("path", ["index.html", "materials/copper.html", "methods.html", "sources.html"])
def test_page_does_not_scroll_sideways(browser, pressed_site, path, width):
    with watched_page(browser, viewport={"width": width, "height": 800}) as (page, _):
        page.goto((pressed_site / path).as_uri())
        assert page.evaluate("() => document.documentElement.scrollWidth") <= width
