"""Remarks on a record that does not fit itself, and a strict proof of its origins."""

import datetime

import pytest
from quantities.small import COPPER, IMPRINT, handbook_of

from sheetgen.faults import FaultsError
from sheetgen.handbook import Handbook
from sheetgen.standing.strict import strict_faults

TODAY = datetime.date(2026, 12, 1)


def remarks(folder, text: str) -> list[str]:
    book = handbook_of(folder, copper=text)
    return [str(remark).removeprefix(str(folder) + "/") for remark in book.remarks if "at' counts" not in str(remark)]


def with_measured(lines: str) -> str:
    return COPPER.replace("  work function:", f"{lines}\n  work function:")


def test_a_record_that_fits_gets_no_remark(tmp_path):
    assert remarks(tmp_path, COPPER) == []


@pytest.mark.parametrize(
    "text, expected",
    [
        (
            with_measured("  mass density: {value: 9.3 g/cm³, at: 293 K, from: here}"),
            "density: the measured density 9.3 g/cm³ is 4.1% above the X-ray density 8.935 g/cm³ of the cell; "
            "expected within 2%. Check the cell, its temperature and the phase.",
        ),
        (
            COPPER.replace("0.21(1) µΩ cm, at: 77 K", "2.10(1) µΩ cm, at: 77 K"),
            "resistivity slope: resistivity 1.678(9) µΩ cm at 293.15 K is below 2.10(1) µΩ cm at 77 K; expected to "
            "rise with temperature in a metal. Check both and their units.",
        ),
        (
            with_measured("  thermal conductivity: {value: 40.1 W/(m K), at: 293.15 K, from: here}"),
            "Lorenz ratio: the Lorenz number κρ/T over the theoretical one at 293.15 K is 0.094; expected 0.5 to 2. "
            "Check that κ and ρ are of one sample, within 5 K.",
        ),
        (
            COPPER.replace("0.695(10)", "69.5(10)"),
            "heat coefficient: heat coefficient over that of free electrons is 138; expected 0.1 to 25. Check that it "
            "is per mole of formula units and not per gram.",
        ),
        (
            COPPER.replace("at: 293 K", "at: 5 K"),
            "temperatures: the cell is given at 5 K, the reference temperature is 293.15 K; expected within 60 K. The "
            "density, and with it each number, is that of the cell.",
        ),
    ],
)
def test_what_does_not_fit_is_told_with_numbers(tmp_path, text, expected):
    messages = remarks(tmp_path, text)
    assert any(message.partition("remark: ")[2] == expected for message in messages), messages
    assert all(message.split(":")[1].isdigit() and message.split(":")[2].isdigit() for message in messages)


def test_the_imprint_can_make_a_remark_a_fault(tmp_path):
    text = with_measured("  mass density: {value: 9.3 g/cm³, at: 293 K, from: here}")
    with pytest.raises(FaultsError, match="above the X-ray density"):
        handbook_of(tmp_path, imprint=IMPRINT + "remarks as faults: [density]\n", copper=text)


REVIEWED = COPPER + "review: {state: reviewed, by: EM, date: 2024-01-31}\n"


def strict(folder, text: str, imprint: str = IMPRINT) -> list[str]:
    book = handbook_of(folder, imprint=imprint, copper=text)
    return [fault.message for fault in strict_faults(book["copper"].record, book.imprint, TODAY)]


def test_a_sourced_and_reviewed_record_is_in_order(tmp_path):
    assert strict(tmp_path, REVIEWED.replace("valence: 1", "valence: {value: 1, from: here}")) == []


def test_memory_and_missing_sources_are_faults(tmp_path):
    text = REVIEWED.replace("343(5) K, from: here}", "343(5) K, from: here, recalled: true}")
    assert strict(tmp_path, text) == [
        "electrons.valence: 1 has no source. Add 'from' with a key of sources.bib.",
        "measured.debye_temperature: 343(5) K is from memory. See it in print, then drop 'recalled'.",
    ]


def test_a_record_without_a_review_is_a_fault(tmp_path):
    assert strict(tmp_path, COPPER)[-1] == (
        "the record is not reviewed. Check it, then add 'review' with state, by and date."
    )


@pytest.mark.parametrize("interval, stale", [("34 months", False), ("33 months", True), ("2 years", True)])
def test_a_review_grows_old(tmp_path, interval, stale):
    # From 31 January 2024 to 1 December 2026 are 34 whole months.
    found = strict(tmp_path, REVIEWED, IMPRINT + f"review interval: {interval}\n")
    assert any("months old" in message for message in found) is stale


def test_the_date_of_the_edition_counts_where_there_is_one(tmp_path):
    imprint = IMPRINT + "review interval: 12 months\ndate: 2024-06-01\n"
    assert not any("months old" in message for message in strict(tmp_path, REVIEWED, imprint))


def test_a_strict_handbook_raises_all_of_them(tmp_path):
    handbook_of(tmp_path, copper=COPPER)
    with pytest.raises(FaultsError) as caught:
        Handbook.load(tmp_path).require_strict()
    assert len(caught.value.faults) == 2
