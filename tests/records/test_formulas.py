"""Formulas into counts of atoms."""

from __future__ import annotations

import ase.formula
import pytest
from hypothesis import given
from hypothesis import strategies as st

from sheetgen.records import composition
from sheetgen.records.elements import elements
from sheetgen.records.unreadable import UnreadableError


@pytest.mark.parametrize(
    "formula, counts",
    [
        ("Cu", {"Cu": 1}),
        ("GaAs", {"Ga": 1, "As": 1}),
        ("In2O3", {"In": 2, "O": 3}),
        ("In₂O₃", {"In": 2, "O": 3}),
        ("Al0.3Ga0.7As", {"Al": 0.3, "Ga": 0.7, "As": 1}),
        ("Mg(OH)2", {"Mg": 1, "O": 2, "H": 2}),
        ("Ba2[Cu(OH)6]0.5", {"Ba": 2, "Cu": 0.5, "O": 3, "H": 3}),
        ("No", {"No": 1}),
        ("CCC", {"C": 3}),
    ],
)
def test_formula_is_counted(formula, counts):
    assert composition(formula) == pytest.approx(counts)
    assert list(composition(formula)) == list(counts)


@given(st.lists(st.tuples(st.sampled_from(sorted(elements())), st.integers(1, 99)), min_size=1, max_size=8))
def test_counts_agree_with_ase(parts):
    formula = "".join(f"{element}{count if count > 1 else ''}" for element, count in parts)
    assert composition(formula) == ase.formula.Formula(formula).count()


@pytest.mark.parametrize(
    "formula, message",
    [
        ("", "a formula of 0 characters; expected 1 to 120, such as 'GaAs'"),
        ("C" * 121, "a formula of 121 characters; expected 1 to 120, such as 'GaAs'"),
        (
            "CuQ3",
            "formula 'CuQ3' names 'Q', which is no element; expected symbols such as Cu or Ga.",
        ),
        (
            "copper",
            "formula 'copper' has an unexpected 'c'; expected element symbols, counts and brackets, such as GaAs or"
            " Al0.3Ga0.7As",
        ),
        (
            "CuSO4·5H2O",
            "formula 'CuSO4·5H2O' has an unexpected '·'; expected element symbols, counts and brackets, such as GaAs or"
            " Al0.3Ga0.7As",
        ),
        ("Mg(OH", "formula 'Mg(OH' leaves a bracket open; close it"),
        ("MgOH)2", "formula 'MgOH)2' closes a bracket that it never opened; remove it"),
        ("Cu0", "formula 'Cu0' counts an element or a bracket 0 times; leave it out"),
        ("()", "formula '()' names no element; expected such as GaAs"),
        ("((((((Cu))))))", "formula '((((((Cu))))))' has brackets nested deeper than 5"),
        (
            "((((Cu9999)9999)9999)9999)",
            "formula '((((Cu9999)9999)9999)9999)' counts more than 10000 atoms of one element",
        ),
    ],
)
def test_complaint_says_what_was_found_and_expected(formula, message):
    with pytest.raises(UnreadableError) as caught:
        composition(formula)
    assert str(caught.value) == message


@given(st.text(alphabet="CuGaAs()[]0123456789.·₂ \n\x00", max_size=130))
def test_no_text_does_anything_but_be_a_formula_or_a_complaint(text):
    try:
        counts = composition(text)
    except UnreadableError as error:
        assert str(error)
    else:
        assert all(0 < count <= 10_000 for count in counts.values())
