"""What a sheet says of its own weak points: values from memory, uncertainties that draws refute, reviews to be done."""

from __future__ import annotations

import dataclasses
import re

import pytest

from sheetgen.handbook import Handbook
from sheetgen.pages import about, entries, lay_out
from sheetgen.records.model import Review

WIDE = """\
name: Wide
formula: Cu
structure: {lattice: fcc, a: 3.6149(2) Å}
electrons: {valence: 1}
measured:
  resistivity: {value: 1.7(6) µΩ cm, at: 293 K}
  debye temperature: {value: 343 K, recalled: true}
review: {state: draft, by: AB, date: 2026-11-02}
"""


@pytest.fixture(scope="module")
def wide(tmp_path_factory):
    folder = tmp_path_factory.mktemp("wide")
    (folder / "handbook.yaml").write_text("title: Wide\ndate: 2026-12-01\nreview interval: 2 years\n", encoding="utf-8")
    (folder / "wide.yaml").write_text(WIDE, encoding="utf-8")
    handbook = Handbook.load(folder, draws=2000)
    return handbook, dict(lay_out(handbook, {}))


def test_uncertainty_that_the_draws_refute_shows_their_interval(wide):
    handbook, site = wide
    entry = handbook.sheets[0].data["quantities"]["relaxation_time"][0]
    assert entry["first_order"] == "not valid"
    page = site["materials/wide.html"].decode()
    row = re.search(r'<tr id="relaxation_time">.*?</tr>', page, re.DOTALL)[0]
    low, high = (float(end) for end in re.search(r'class="interval">95\u202f%: ([^<\s]+) to ([^<\s]+)<', row).groups())
    assert (low, high) == pytest.approx(entry["coverage_interval"], abs=0.5)  # to whole fs


def test_valid_uncertainty_shows_no_interval():
    entry = {"value": 1.0, "unit": "eV", "coverage_interval": [0.8, 1.2], "first_order": "valid"}
    assert entries.interval("fermi_energy", entry, entries.Preference({})) == ""


def test_sheet_says_how_the_check_by_draws_came_out(wide):
    handbook, site = wide
    quantities = handbook.sheets[0].data["quantities"].values()
    told = [e.get("first_order") for q in quantities for e in (q if isinstance(q, list) else [q])]
    page = site["materials/wide.html"].decode()
    assert f"{told.count('valid')} numbers keep theirs; {told.count('not valid')} do not" in page


def test_sheet_without_draws_says_nothing_of_them(site):
    assert b"propagated to first order" not in site["materials/copper.html"]


def test_numbers_on_values_from_memory_are_marked_and_no_others(wide):
    handbook, site = wide
    page = site["materials/wide.html"].decode()
    marked = {found[1] for found in re.finditer(r'<tr id="(\w+)">(?:(?!</tr>).)*?class="from-memory"', page, re.DOTALL)}
    assert marked == set(handbook.sheets[0].recalled) == {
        "lattice_heat_capacity", "heat_crossover_temperature", "resistivity_from_debye",
    }  # fmt: skip
    assert (
        b'class="from-memory" href="../materials/wide.html#from-memory"'
        in site["quantities/lattice_heat_capacity.html"]
    )


def test_review_page_lists_drafts_and_values_from_memory(wide):
    page = wide[1]["review.html"].decode()
    assert '<a href="materials/wide.html">Wide</a>: a draft by AB' in page
    assert re.search(r"Debye temperature 343\u202fK.*3 numbers rest on it", page)


@pytest.mark.parametrize(
    "review, why",
    [
        (None, "nobody has reviewed it"),
        (Review("reviewed", "AB", ""), "its review has no date"),
        (Review("reviewed", "AB", "2024-11-30"), ""),  # 24 months, which the imprint allows
        (Review("reviewed", "AB", "2024-10-30"), "its review of 30 October 2024 is 25 months old"),
        (Review("reviewed", "AB", "2025-01-01"), ""),
    ],
)
def test_review_waits_for_the_reason_that_holds(wide, review, why):
    assert about._why(review, wide[0].imprint) == why


def test_no_review_is_too_old_without_a_date_of_the_edition(wide):
    imprint = dataclasses.replace(wide[0].imprint, date="")
    assert about._why(Review("reviewed", "AB", "1990-01-01"), imprint) == ""


def test_about_page_says_how_to_read_a_sheet(site):
    page = site["about.html"].decode()
    for word in ("agrees", "adjust", "undecided", "fails", "outside", "unchecked"):
        assert f'<span class="standing {word}">' in page
    assert "CODATA 2022" in page and "CC-BY-4.0" in page and "mailto:handbook@marrow-point.example" in page
