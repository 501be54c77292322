"""BibTeX entries for publications, and a bibliography that only grows."""

from __future__ import annotations

import string
from pathlib import Path

import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st

from sheetgen.drafting.bibliography import (
    Publication,
    appended,
    check_addition,
    cite,
    entry,
    read_bibliography,
)
from sheetgen.drafting.cif_text import plain_text
from sheetgen.faults import FaultLog, FaultsError
from sheetgen.records.sources import read_sources

MEASURED = Publication(
    authors=("Müller, K.", "van der Berg, A."),
    title="Structure of TiN & 5 % more",
    journal="Journal of Invented Crystals",
    volume="12",
    pages="34--56",
    year="1999",
    doi="10.5555/invented_12",
)


def read(text: str) -> dict:
    log = FaultLog()
    sources = read_sources(text, Path("sources.bib"), log)
    assert not list(log)
    return sources


def test_an_entry_reads_as_what_was_published():
    cited = cite(MEASURED, {}, "fallback")
    source = read(cited.addition)["muller1999"]
    assert (source.kind, source.title, source.year) == ("article", "Structure of TiN & 5 % more", "1999")
    assert source.authors == ("K. Müller", "A. van der Berg")
    assert source.link == "https://doi.org/10.5555/invented_12"
    assert (source.fields["volume"], source.fields["pages"]) == ("12", "34–56")


def test_a_source_that_stands_already_is_cited_and_not_repeated():
    sources = read(entry("muller1999", MEASURED))
    again = cite(MEASURED, sources, "fallback")
    assert (again.key, again.addition) == ("muller1999", "")


def test_the_same_doi_is_found_under_any_key():
    sources = read(entry("by_hand", MEASURED))
    assert cite(MEASURED, sources, "fallback").key == "by_hand"


def test_another_publication_of_the_same_year_gets_a_letter():
    sources = read(entry("muller1999", MEASURED))
    other = cite(Publication(MEASURED.authors, "Something else", year="1999"), sources, "fallback")
    assert other.key == "muller1999a"
    assert list(read(entry("muller1999", MEASURED) + other.addition)) == ["muller1999", "muller1999a"]


@pytest.mark.parametrize(
    "author, key",
    [("Smith, J. A.", "smith"), ("J. A. Smith", "smith"), ("Smith J A", "smith"), ("Smith R. W", "smith"),
     ("Li X", "li"), ("van der Berg, A.", "vanderberg"), ("Müller", "muller"), ("李, 明", "fallback")],
)  # fmt: skip
def test_the_key_is_the_surname(author, key):
    assert cite(Publication((author,), "Title"), {}, "fallback").key == key


def test_a_doi_that_is_none_is_left_out():
    assert "doi" not in entry("x", Publication(title="T", doi="see text"))


TEXTS = st.text(string.printable + "äéß日₂– ", max_size=60)


@settings(max_examples=150, deadline=None)
@given(authors=st.lists(TEXTS, max_size=4), title=TEXTS, journal=TEXTS, year=TEXTS, doi=TEXTS, note=TEXTS)
@example(["and", "A, B, C, D", "}{"], "{", "@article{x,", "}", "10.1/{", "\\")
@example([",", "and and and", '"'], "a\\b~c^d$e_f#g%h&i", '"', "", "", "")
def test_whatever_a_publication_says_its_entry_can_be_read(authors, title, journal, year, doi, note):
    clean = [" ".join(part.split()) for part in (title, journal, year, note)]
    publication = Publication(
        tuple(filter(None, map(str.strip, authors))), *clean[:2], year=clean[2], doi=doi, note=clean[3]
    )
    cited = cite(publication, {}, "fallback")
    assert list(read(cited.addition)) == [cited.key]


# ---------------------------------------------------------------- the file


OLD = "% by hand\n@misc{one, title = {One}}\n@misc{two, title = {Two}}"


@pytest.mark.parametrize("old", ["", OLD, f"{OLD}\n", f"{OLD}\n\n", OLD.replace("\n", "\r\n"), f"{OLD}\n% last words"])
def test_an_addition_leaves_what_stands_as_it_stands(old):
    text = appended(old, "@misc{new, title = {New}}\n")
    assert text.startswith(old)
    assert [*read(old), "new"] == list(read(text))


@pytest.mark.parametrize("open_end", ['\n@preamble{"', "\n@", "\n@misc{three, title = {Three"])
def test_an_end_that_swallows_what_follows_is_a_fault(tmp_path, open_end):
    (tmp_path / "sources.bib").write_text(OLD + open_end, encoding="utf-8")
    with pytest.raises(FaultsError) as caught:
        text, _ = read_bibliography(tmp_path)
        check_addition(tmp_path, text, cite(MEASURED, {}, ""))
    assert all(fault.place.file == str(tmp_path / "sources.bib") for fault in caught.value.faults)
    assert all(fault.place.line >= 3 for fault in caught.value.faults)


def test_a_broken_bibliography_is_not_added_to(tmp_path):
    (tmp_path / "sources.bib").write_text("@misc{one, title = {One}\n@misc{two,\n", encoding="utf-8")
    with pytest.raises(FaultsError, match=r"sources\.bib:\d+.*not readable as BibTeX"):
        read_bibliography(tmp_path)


# ---------------------------------------------------------------- texts of a CIF


# Codes of CIF 1.1, common semantic features, paragraphs 30 to 37.
@pytest.mark.parametrize(
    "coded, plain",
    [
        ("M\\\"uller", "Müller"), ("Jov\\'e", "Jové"), ("Fran\\,cois", "François"), ("\\%Angstr\\\"om", "Ångström"),
        ("\\/Orsted", "Ørsted"), ("Wa\\/l\\,esa", "Wałȩsa"), ("Stra\\&se", "Straße"), ("\\a-Fe~2~O~3~", "α-Fe₂O₃"),
        ("10^-3^ \\\\times 2", "10⁻³ × 2"), ("<i>cubic</i>  TiN\n", "cubic TiN"), ("\\D = 90\\%", "Δ = 90°"),
        ("100 \\ plain", "100 \\ plain"),
    ],
)  # fmt: skip
def test_codes_of_a_cif_are_plain_text(coded, plain):
    assert plain_text(coded) == plain


@given(st.text(max_size=60))
def test_any_text_of_a_cif_becomes_one_line(text):
    assert "\n" not in plain_text(text)
