"""Words, citations and hazards."""

from __future__ import annotations

from types import SimpleNamespace

import pytest

from sheetgen.pages import citations, hazards, words


@pytest.mark.parametrize(
    ("identifier", "expected"),
    [
        ("structure.a", "lattice constant a"),
        ("electrons.valence.Ti", "electrons per Ti atom"),
        ("measured.resistivity@77", "resistivity at 77 K"),
        ("measured.resistivity@77#2", "resistivity at 77 K, no. 2"),
        ("measured.refractive_index.3.n", "refractive index, point 3: n"),
        ("specimens.1.grain_size", "grain size of F-12"),
        ("electrons.effective_mass", "effective mass"),
    ],
)
def test_inputs_in_words(identifier, expected):
    assert words.input_words(identifier, ("F-12",)) == expected


@pytest.mark.parametrize(
    ("formula", "expected"),
    [
        ("In2O3", "In<sub>2</sub>O<sub>3</sub>"),
        ("Al0.3Ga0.7As", "Al<sub>0.3</sub>Ga<sub>0.7</sub>As"),
        ("<b>2", "&lt;b&gt;2"),
    ],
)
def test_chemical_formulas(formula, expected):
    assert words.chemical(formula) == expected


def test_dates():
    assert words.date("2026-11-02") == "2 November 2026"
    assert words.date("some day") == "some day"


def test_a_css_string_cannot_be_left():
    assert words.css_string('a"}') == "a\\22 \\7d "


@pytest.mark.parametrize(
    ("link", "stays"),
    [
        ("https://doi.org/10.1/x", True),
        ("javascript:alert(1)", False),
        ("//evil.example", False),
        ("http://[broken", False),
        (None, False),
    ],
)
def test_links_of_sources(link, stays):
    assert (citations.safe_link(link) == link and link is not None) is stays


def source(authors, year="1979", title="A title: with more"):
    return SimpleNamespace(authors=authors, year=year, title=title)


@pytest.mark.parametrize(
    ("authors", "expected"),
    [
        (("Matula, R. A.",), "Matula 1979"),
        (("M. E. Straumanis", "L. S. Yu"), "Straumanis & Yu 1979"),
        (("A, B.", "C, D.", "E, F."), "A et al. 1979"),
        ((), "A title 1979"),
    ],
)
def test_short_citations(authors, expected):
    assert citations.citation("key", {"key": source(authors)}).label == expected
    assert citations.citation("other", {}).label == "other"


def test_keys_in_a_text_become_links():
    linked = citations.linked("matula1979, ch. 2; <b>", {"matula1979": source(("Matula, R. A.",))}, "../")
    assert linked == '<a href="../sources.html#matula1979">Matula 1979</a>, ch. 2; &lt;b&gt;'


def test_a_source_lists_the_values_that_it_supplies(pages):
    text = pages["sources.html"].text
    assert "lattice constant a 3.6149(2)" in text.replace("\u202f", " ")
    assert "recalled" in text


# United Nations, GHS, annex 3.
def test_hazard_statements():
    assert hazards.statement("H301") == "Toxic if swallowed"
    assert hazards.statement("H360FD") == hazards.statement("H360") == "May damage fertility or the unborn child"
    assert hazards.statement("H999") == ""
