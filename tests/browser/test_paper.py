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


@pytest.mark.parametrize("slug", ["copper", "sodium", "titanium-nitride", "gallium-arsenide-quantum-well"])
def test_sheet_takes_a_few_full_pages(browser, pressed_site, slug):
    with watched_page(browser) as (page, troubles):
        page.goto((pressed_site / "materials" / f"{slug}.html").as_uri())
        pages = printed_pages(page)
        assert troubles == []
    data = json.loads((pressed_site / "data" / "materials" / f"{slug}.json").read_text(encoding="utf-8"))
    assert 2 <= len(pages) <= 2 + len(data["figures"]) / 2
    texts = [one.extract_text() for one in pages]
    assert {millimetres(one) for one in pages} == {PAPERS["A4"]}
    assert data["name"] in texts[0]
    assert min(len(text) for text in texts) > 60


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
