"""The sheet of one material: what it says and in which order."""

from __future__ import annotations

import re

import pytest


@pytest.fixture(scope="session")
def copper(pages):
    return pages["materials/copper.html"]


def test_the_reading_order(site):
    headings = re.findall(r'<h2 id="([^"]+)"', site["materials/copper.html"].decode())
    wanted = """answer key-numbers cautions inputs section-crystal held-against assumptions specimens figures notes
        sources downloads""".split()  # noqa: SIM905
    assert [heading for heading in headings if heading in wanted] == wanted


def test_the_plain_answer_comes_from_the_standings(copper, small_handbook):
    answer = small_handbook["copper"].answer
    assert answer.scale
    for line in (*answer.use, *answer.scale, *answer.avoid):
        assert line.title in copper.text
        assert line.reason.split(":")[0] in copper.text


def test_a_number_is_rounded_by_its_uncertainty_and_names_where_that_comes_from(copper):
    assert re.search(r"Fermi energy\s*7\.03155\(78\)\s*eV\s*unchecked\s*lattice constant a", copper.text)


def test_the_unit_that_the_imprint_prefers_is_used(copper):
    assert re.search(r"Fermi velocity\s*1572\.719\(87\)\s*km s−1", copper.text.replace("\u202f", " "))


def test_a_recalled_value_says_so(copper):
    assert "recalled, not yet seen in print" in copper.text


def test_a_draft_says_so_and_a_reviewed_sheet_says_by_whom(pages):
    assert "nobody has reviewed" in pages["materials/hostile.html"].text
    assert "nobody has reviewed" in pages["materials/well.html"].text
    assert "Reviewed by AB, 2 November 2026" in pages["materials/copper.html"].text
    assert "nobody has reviewed" not in pages["materials/copper.html"].text


def test_cautions_carry_code_and_statement_and_defer(copper, pages):
    assert "H410" in copper.text and "Very toxic to aquatic life with long lasting effects" in copper.text
    for slug in ("copper", "well"):
        text = pages[f"materials/{slug}.html"].text
        assert "not design allowables" in text and "safety data sheet" in text


def test_an_invented_specimen_says_so(copper):
    assert re.search(r"F-12, film\s*invented", copper.text)


def test_what_is_absent_is_named_with_the_reason(pages, small_handbook):
    missing = small_handbook["well"].missing
    assert missing
    text = pages["materials/well.html"].text
    for id, reason in missing.items():
        assert reason in text, id


def test_every_number_of_the_data_is_on_the_sheet(small_handbook, pages):
    for sheet in small_handbook.sheets:
        anchors = pages[f"materials/{sheet.record.slug}.html"].anchors
        assert set(sheet.data["quantities"]) <= set(anchors)


def test_a_figure_has_its_words_its_size_and_its_files(copper):
    picture = next(image for image in copper.all("img"))
    assert picture["alt"].startswith("Parabola: Energy")
    assert (picture["width"], picture["height"]) == ("321", "225")
    links = [a.get("href") for a in copper.all("a")]
    assert "../figures/copper/parabola.svg" in links and "../figures/copper/parabola.csv" in links


def test_standing_is_said_in_words_beside_its_mark(site):
    html = site["materials/copper.html"].decode()
    for standing in ("agrees", "adjust", "outside", "unchecked"):
        assert f'<span class="standing {standing}">{standing}</span>' in html


def test_a_measurement_stands_beside_the_model_with_ratio_and_meaning(copper, small_handbook):
    confrontation = next(c for c in small_handbook["copper"].confrontations if c.quantity == "heat_coefficient")
    assert re.search(r"0\.50\d+\(\d\d\)\s*0\.695\(10\)", copper.text)
    assert confrontation.meaning in copper.text.replace("Electrons at", "electrons at")


def test_both_sides_of_a_comparison_stand_in_the_unit_of_the_page(copper):
    text = copper.text.replace("\u202f", " ").replace("−", "-")
    assert re.search(r"Hall coefficient\s*293 K\s*-0\.0737\d+\(\d+\)\s*-0\.0540\(40\)\s*mm3 C-1", text)
    # Heat conduction is compared as a Lorenz number, which has no preferred unit here.
    assert re.search(r"2\.443\d* × 10-8\s*2\.29\d+\(\d+\) × 10-8\s*W Ω K-2", text)
