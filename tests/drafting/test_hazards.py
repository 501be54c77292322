"""The cautions that a draft starts with."""

from __future__ import annotations

import re

import pytest

from sheetgen.drafting.hazards import COMPOUNDS, ELEMENTS, LAST, LASTING, hazards
from sheetgen.records import composition
from sheetgen.records.schema import HAZARD_PATTERN

ALL = [*ELEMENTS.values(), *COMPOUNDS.values()]


def codes(formula: str) -> set[str]:
    return {code for hazard in hazards(composition(formula)) for code in hazard.codes}


def test_codes_have_the_form_of_hazard_statements():
    assert all(re.match(HAZARD_PATTERN, code) for hazard in ALL for code in hazard.codes)
    assert all(len(hazard.codes) == len(set(hazard.codes)) for hazard in ALL)


def test_codes_of_elements_stand_in_the_reviewed_records(handbook):
    """Two lists written by different people: what a draft says of an element, its reviewed record says, too."""
    compared = 0
    for sheet in handbook.sheets:
        record = sheet.record
        reviewed = {code for caution in record.cautions for code in caution.hazard}
        if len(record.composition) == 1 and record.electrons.valence and reviewed:
            (element,) = record.composition
            compared += 1
            assert ELEMENTS[element].codes
            assert set(ELEMENTS[element].codes) <= reviewed, element
    assert compared > 20


# GHS statements that suppliers' sheets of these materials carry (H350 cancer, H330 fatal if inhaled, H260 gases with
# water that ignite, H372 organ damage).
@pytest.mark.parametrize(
    "formula, gravest",
    [("Be", {"H330", "H350i"}), ("Na", {"H260", "H314"}), ("GaAs", {"H350", "H372"}), ("InP", {"H350", "H372"}),
     ("PbTe", {"H360FD", "H372"}), ("NiAl", {"H351", "H317"}), ("HgTe", {"H330"}), ("CuBe", {"H330", "H350i"})],
)  # fmt: skip
def test_the_gravest_dangers_stand_in_a_draft(formula, gravest):
    assert gravest <= codes(formula)


def test_a_salt_does_not_inherit_what_its_metal_does_alone():
    assert codes("NaCl") == set()
    assert codes("TiN") == set()


def test_radioactive_elements_need_a_licence_and_stay_so_in_compounds():
    for formula in ("Pu", "UO2", "Tc"):
        assert any("Radioactive" in hazard.text for hazard in hazards(composition(formula)))


def test_what_lasts_is_in_the_table():
    assert set(LASTING) <= set(ELEMENTS)


def test_the_last_caution_defers():
    for words in ("safety data sheet", "local codes", "licensed practice", "not design allowables"):
        assert words in LAST
