"""What the printer gets: whole sheets on the paper that the imprint names, no page blank, every word in the PDF."""

from __future__ import annotations

import io
import json

import pytest
from support.browsing import watched_page

from sheetgen.press import press

pytestmark = pytest.mark.xdist_group("browser")

PAPERS = {"A4": (210, 297), "letter": (216, 279)}  # mm: ISO 216; ANSI/ASME Y14.1, 8.5 in × 11 in


def printed_pages(page) -> list:
    """The pages of the PDF that the browser makes of what it shows."""
    from pypdf import PdfReader

    return list(PdfReader(io.BytesIO(page.pdf(prefer_css_page_size=True))).pages)


def millimetres(printed) -> tuple[int, int]:
    return tuple(round(float(points) * 25.4 / 72) for points in printed.mediabox[2:])


MARGINS = 24  # mm: left and right of a sheet together
LEAST_LINES = 20  # on every page but the last: a page with less is mostly empty


def millimetres_wide(page, width: int) -> float:
    """How wide the page lies on paper when it is given `width` mm; wider than that, the browser would shrink it."""
    page.set_viewport_size({"width": round(width * 96 / 25.4), "height": 1000})
    page.emulate_media(media="print")
    return page.evaluate("document.documentElement.scrollWidth") * 25.4 / 96


def test_every_sheet_takes_two_to_four_full_pages(browser, pressed_site):
    found = {}
    with watched_page(browser) as (page, troubles):
        for sheet in sorted((pressed_site / "materials").glob("*.html")):
            if sheet.stem != "index":
                page.goto(sheet.as_uri())
                found[sheet.stem] = printed_pages(page)
        assert troubles == []
    assert len(found) == len(list((pressed_site / "data" / "materials").glob("*.json")))
    assert {slug: len(pages) for slug, pages in found.items() if not 2 <= len(pages) <= 4} == {}
    assert {millimetres(one) for pages in found.values() for one in pages} == {PAPERS["A4"]}
    texts = {slug: [one.extract_text() for one in pages] for slug, pages in found.items()}
    assert [slug for slug, pages in texts.items() if "Cautions" not in pages[0] or "plain answer" not in pages[0]] == []
    empty = {slug for slug, pages in texts.items() for text in pages[:-1] if len(text.splitlines()) < LEAST_LINES}
    assert empty == set()


@pytest.mark.parametrize("slug", ["copper", "titanium-nitride", "gallium-arsenide-quantum-well"])
def test_sheet_names_itself_and_is_not_shrunk(browser, pressed_site, slug):
    data = json.loads((pressed_site / "data" / "materials" / f"{slug}.json").read_text(encoding="utf-8"))
    with watched_page(browser) as (page, _):
        page.goto((pressed_site / "materials" / f"{slug}.html").as_uri())
        texts = [one.extract_text() for one in printed_pages(page)]
        for width, _ in PAPERS.values():
            assert millimetres_wide(page, width - MARGINS) <= width - MARGINS + 0.3
    assert all(data["name"] in text and data["edition"] in text for text in texts)
    assert all(f"page {number} of {len(texts)}" in text for number, text in enumerate(texts, 1))
    assert f"materials/{slug}.html" in texts[0]


@pytest.mark.parametrize("path, most", [("index.html", 4), ("methods.html", 16), ("sources.html", 20)])
def test_other_pages_print(browser, pressed_site, path, most):
    with watched_page(browser) as (page, _):
        page.goto((pressed_site / path).as_uri())
        pages = printed_pages(page)
    assert 1 <= len(pages) <= most
    assert all(one.extract_text().strip() for one in pages)


@pytest.mark.parametrize("paper", PAPERS)
def test_imprint_chooses_the_paper(browser, small_handbook, tmp_path, paper):
    imprint = small_handbook / "handbook.yaml"
    imprint.write_text(imprint.read_text(encoding="utf-8") + f"paper: {paper}\n", encoding="utf-8")
    press(small_handbook, tmp_path / "site")
    with watched_page(browser) as (page, _):
        page.goto((tmp_path / "site" / "materials" / "copper.html").as_uri())
        pages = printed_pages(page)
    assert {millimetres(one) for one in pages} == {PAPERS[paper]}


def test_fullest_sheet_fits_letter_too(browser, pressed_site):
    style = (pressed_site / "style" / "handbook.css").read_text(encoding="utf-8")
    assert "size: A4;" in style
    with watched_page(browser) as (page, _):
        on_letter = style.replace("size: A4;", "size: letter;")
        page.route("**/handbook.css", lambda route: route.fulfill(body=on_letter, content_type="text/css"))
        page.goto((pressed_site / "materials" / "copper.html").as_uri())
        pages = printed_pages(page)
    assert {millimetres(one) for one in pages} == {PAPERS["letter"]}
    assert 2 <= len(pages) <= 4


def test_every_word_of_the_sheet_is_on_paper(browser, pressed_site):
    with watched_page(browser) as (page, _):
        page.goto((pressed_site / "materials" / "copper.html").as_uri())
        page.emulate_media(media="print")
        shown = page.locator("main").inner_text()
        text = "".join(one.extract_text() for one in printed_pages(page))
    words = {word for word in shown.split() if len(word) > 6 and word.isascii() and word.isalpha()}
    on_paper = "".join(text.split()).replace("-", "").lower()
    missing = [word for word in words if word.lower() not in on_paper]
    assert len(words) > 200
    assert missing == []
