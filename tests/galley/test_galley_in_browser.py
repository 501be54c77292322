"""An open page follows the records by itself, in a real browser and within its content security policy."""

from __future__ import annotations

import pytest
from support.browsing import watched_page
from support.folders import FILES

pytestmark = pytest.mark.xdist_group("galley")


def save(galley, text: str) -> None:
    (galley.folder / "copper.yaml").write_text(text, encoding="utf-8")
    galley.workshop.press()


def test_a_page_reloads_when_it_changed_and_only_then(galley, browser):
    with watched_page(browser) as (page, troubles):
        page.goto(f"http://127.0.0.1:{galley.port}/materials/copper.html")
        page.evaluate("window.marked = true")
        save(galley, FILES["copper.yaml"] + "# nothing that a page shows\n")
        save(galley, "name: Copper\nformla: Cu\n")
        page.locator("#galley-faults li").first.wait_for(timeout=20_000)
        board = page.locator("#galley-faults").inner_text()
        assert f"{galley.folder}/copper.yaml:2:1" in board and "formla" in board
        assert page.evaluate("window.marked")
        with page.expect_navigation(timeout=20_000):
            save(galley, FILES["copper.yaml"].replace("3.6149(3)", "3.7777(3)"))
        page.locator("h1").wait_for()
        assert page.evaluate("window.marked") is None
        assert "3.7777(3)" in page.locator("main").inner_text()
        assert page.locator("#galley-faults").is_hidden()
        assert [trouble for trouble in troubles if "/-/events" not in trouble] == []


def test_another_material_is_left_where_it_is(galley, browser):
    with watched_page(browser) as (page, troubles):
        page.goto(f"http://127.0.0.1:{galley.port}/materials/sodium.html")
        page.evaluate("window.marked = true")
        save(galley, FILES["copper.yaml"].replace("3.6149(3)", "3.6666(3)"))
        save(galley, "name: Copper\nformla: Cu\n")  # its faults arrive after the change that was not ours
        page.locator("#galley-faults li").first.wait_for(timeout=20_000)
        assert page.evaluate("window.marked")
        assert troubles == []


def test_no_script_of_another_origin_can_read_it(galley, browser):
    with watched_page(browser) as (page, _):
        page.goto("data:text/html,<title>elsewhere</title>")
        read = f"fetch('http://127.0.0.1:{galley.port}/index.html').then(r => r.text(), e => 'refused')"
        assert page.evaluate(read) == "refused"
