"""The bibliography: plain Unicode, places, and broken entries."""

from __future__ import annotations

import time

import pytest

SOURCES = r"""
@string{jpcrd = "J. Phys. Chem. Ref. Data"}
% A comment line between entries.
@article{matula1979,
  author = {Matula, R. A.},
  title  = {Electrical resistivity of copper, gold, palladium, and silver},
  journal = jpcrd, volume = 8, number = 4, pages = {1147--1298}, year = 1979, doi = {10.1063/1.555614}
}
@Article{riviere1957, author={Rivi{\`e}re, J. C. and {\"O}zg{\"u}r, {\"U}. and others}, year={1957},
  title={Films of In{$_2$}O$_3$ on $\beta$-SiC$^{4+}$}, url={https://example.org/a\_b}}
@book{prince, editor = "Prince, E. and van der Waals, J. D.", title = {International Tables, volume C},
  publisher={Kluwer}, edition={3}}
@misc{wiki, title={A page}, note={read \& checked}}
"""


@pytest.fixture
def sources(read):
    return read(record=None, sources=SOURCES).sources


def test_entries_keep_their_order_place_and_bibtex(sources):
    assert list(sources) == ["matula1979", "riviere1957", "prince", "wiki"]
    assert [str(source.place) for source in sources.values()] == [f"m/sources.bib:{line}:1" for line in (4, 9, 11, 13)]
    assert sources["wiki"].bibtex == r"@misc{wiki, title={A page}, note={read \& checked}}"
    assert sources["riviere1957"].kind == "article"


def test_latex_becomes_plain_unicode(sources):
    riviere = sources["riviere1957"]
    assert riviere.authors == ("J. C. Rivière", "Ü. Özgür", "others")
    assert riviere.title == "Films of In₂O₃ on β-SiC⁴⁺"
    assert sources["wiki"].note == "read & checked"


@pytest.mark.parametrize(
    "key, text",
    [
        (
            "matula1979",
            "R. A. Matula: Electrical resistivity of copper, gold, palladium, and silver."
            " J. Phys. Chem. Ref. Data 8(4), 1147–1298 (1979).",
        ),
        ("riviere1957", "J. C. Rivière, Ü. Özgür and others: Films of In₂O₃ on β-SiC⁴⁺. (1957)."),
        ("prince", "E. Prince and J. D. van der Waals (ed.): International Tables, volume C. edition 3, Kluwer."),
        ("wiki", "A page."),
    ],
)
def test_reference_reads_as_one(sources, key, text):
    assert sources[key].text == text


def test_links_come_from_doi_or_address(sources):
    assert sources["matula1979"].link == "https://doi.org/10.1063/1.555614"
    assert sources["riviere1957"].link == "https://example.org/a_b"
    assert sources["wiki"].link is None


def test_doi_written_as_an_address(read):
    read_sources = read(record=None, sources="@misc{a, title={x}, doi={https://doi.org/10.1063/1.555614}}").sources
    assert read_sources["a"].link == "https://doi.org/10.1063/1.555614"


MEND = "Check the braces, quotes and commas of this entry and the one before."


@pytest.mark.parametrize(
    "sources, messages",
    [
        ("@misc{good2000, title={x}\n@misc{b, title={y}}", [f"2: not readable as BibTeX: '}}' expected. {MEND}"]),
        ("@misc{good2000, title=x}", [f"1: not readable as BibTeX: undefined string 'x'. {MEND}"]),
        ('@misc{good2000, title="a}"}', [f"1: not readable as BibTeX: unbalanced braces. {MEND}"]),
        ("@misc{good2000, title={x", [f"1: not readable as BibTeX: premature end of file. {MEND}"]),
        (
            "@misc{good2000, title={x}}\n@misc{good2000, title={y}}",
            ["2:1: the source 'good2000' stands a second time (first in line 1); keep one of them."],
        ),
        (
            "@misc{good2000, title={x}, Title={y}}",
            ["1:1: the source 'good2000': the field 'title' stands twice; keep one of them."],
        ),
        (
            "@misc{good2000, year=2000}",
            ["1:1: the source 'good2000': says neither title, author nor note; add what a reader needs to find it."],
        ),
        (
            "@misc{good2000, author={A, B, C, D}}",
            [
                "1:1: the source 'good2000': the name 'A, B, C, D' has too many commas; write 'Family, Given' and put"
                " 'and' between names."
            ],
        ),
        (
            "@misc{good2000, title={x}, doi={1.555614}}",
            ["1:1: the source 'good2000': the doi '1.555614' is none; expected a form such as 10.1063/1.555614."],
        ),
        (
            "@misc{good2000, title={x}, url={javascript:alert(1)}}",
            [
                "1:1: the source 'good2000': the url 'javascript:alert(1)' is no web address; expected one that begins"
                " with https://."
            ],
        ),
    ],
)
def test_fault_of_the_bibliography(faults, sources, messages):
    assert faults(sources=sources) == [f"m/sources.bib:{message}" for message in messages]


def test_abbreviations_that_blow_up_are_refused_at_once(faults):
    bomb = '@string{a0 = "xxxxxxxxxx"}' + "".join(f"@string{{a{n} = a{n - 1} # a{n - 1}}}\n" for n in range(1, 40))
    began = time.perf_counter()
    found = faults(record=None, sources=bomb)
    assert time.perf_counter() - began < 1
    assert f"m/sources.bib:11: not readable as BibTeX: a field of more than 20000 characters. {MEND}" in found


def test_a_huge_bibliography_is_refused_in_bounded_time(faults):
    began = time.perf_counter()
    found = faults(record=None, sources="".join(f"@misc{{k{number},title={{x}}}}\n" for number in range(100_000)))
    assert found == ["m/sources.bib:5001:1: more than 5000 sources; expected fewer. Keep those that are cited."]
    assert time.perf_counter() - began < 5


def test_without_a_bibliography_only_citing_is_a_fault(faults):
    assert faults(record="name: X\nformula: Cu\n", sources=None) == []
    assert faults(sources=None)[0] == (
        "m/copper.yaml:5:44: the source 'good2000' is not in sources.bib; expected one of its keys. Add an entry"
        " 'good2000' there, or correct the key."
    )
