"""Formulas as MathML."""

from __future__ import annotations

from xml.etree import ElementTree

import pytest

from sheetgen.pages.formulas import FormulaError, formula


def test_every_formula_of_the_handbook_can_be_set(small_handbook):
    texts = {text for d in small_handbook.registry.all if d.published for text in (d.symbol, d.formula) if text}
    texts |= {assumption.formula for assumption in small_handbook.registry.assumptions}
    for text in texts:
        root = ElementTree.fromstring(formula(text))
        assert root.tag == "math" and root.get("alttext"), text
        assert "\\" not in "".join(root.itertext()), text


@pytest.mark.parametrize(
    ("latex", "words"),
    [
        (r"E_\mathrm{F}", "E sub F"),
        (r"\frac{\hbar^2}{2 m}", "(ℏ squared) over (2 m)"),
        (r"n^{1/3}", "n to the power (1 / 3)"),
        (r"\sqrt{x}", "square root of (x)"),
    ],
)
def test_a_formula_can_be_read_aloud(latex, words):
    assert ElementTree.fromstring(formula(latex)).get("alttext") == words


def test_upright_subscripts_stay_upright():
    subscript = ElementTree.fromstring(formula(r"E_\mathrm{F}")).find(".//msub")[1]
    assert (subscript.tag, subscript.text) == ("mtext", "F")


@pytest.mark.parametrize(
    "latex",
    [r"\frac{1}{", r"\nosuchcommand{x}", r"\text{<script>alert(1)</script>}", r"\text{<img src=x onerror=y>}", "x_a_b"],
)
def test_what_is_no_formula_is_refused(latex):
    with pytest.raises(FormulaError, match="formula"):
        formula(latex)


def test_no_style_and_no_link_comes_out_of_a_formula():
    html = formula(r"\color{red}{x} \href{javascript:alert(1)}{y}")
    assert "javascript" not in html and "red" not in html


def test_no_formula_is_set_as_nothing():
    assert formula("") == ""
