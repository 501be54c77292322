"""Formulas on paper."""

from __future__ import annotations

import base64
import re

import pytest

from sheetgen.pages.formulas import FormulaError
from sheetgen.paper.setting import equation, symbol


@pytest.mark.parametrize(
    "latex, html",
    [
        (r"E_\mathrm{F}", "<i>E</i><sub>F</sub>"),
        (r"\hbar\omega_\mathrm{p}", "<i>ħ</i><i>ω</i><sub>p</sub>"),
        (r"r_\mathrm{s}^*", "<i>r</i><sub>s</sub><sup>*</sup>"),
        (r"L_{1\,\%}", "<i>L</i><sub>1%</sub>"),
        ("", ""),
    ],
)
def test_a_symbol_is_set_in_letters(latex, html):
    assert symbol(latex) == html


@pytest.mark.parametrize("latex", [r"\frac{9 \pi}{4 k_\mathrm{F} L}", r"\sqrt{n_2}"])
def test_what_letters_cannot_show_is_drawn(latex):
    assert symbol(latex).startswith('<img class="formula" alt="')


def test_a_formula_can_be_heard():
    picture = equation(r"E_\mathrm{F} = \frac{\hbar^2 k_\mathrm{F}^2}{2 m}")
    assert 'alt="E sub F = (ħ squared' in picture.replace("ℏ", "ħ")


def test_a_formula_is_drawn_within_its_box():
    picture = equation(r"\frac{\hbar^2 k_\mathrm{F}^2}{2 m}")
    svg = base64.b64decode(re.search(r"base64,([^\"]+)", picture)[1]).decode()
    left, top, width, height = (float(number) for number in re.search(r'viewBox="([^"]+)"', svg)[1].split())
    points = [(float(x), float(y)) for x, y in re.findall(r"(-?\d+\.\d+) (-?\d+\.\d+)", svg.split("<path")[1])]
    assert len(points) > 50
    slack = 1.0  # of 10 points: letters may lean out of their boxes a little
    assert all(left - slack <= x <= left + width + slack for x, _ in points)
    assert all(top - slack <= y <= top + height + slack for _, y in points)


def test_every_formula_of_the_handbook_can_be_set(handbook):
    definitions = [definition for definition in handbook.registry.all if definition.formula]
    assert len(definitions) > 80
    for definition in definitions:
        assert "<path" in base64.b64decode(re.search(r"base64,([^\"]+)", equation(definition.formula))[1]).decode()
    for assumption in handbook.registry.assumptions:
        symbol(assumption.formula)


def test_a_formula_that_cannot_be_set_is_named():
    with pytest.raises(FormulaError, match="cannot be set on paper"):
        equation(r"\frac{a}{b} \overbrace{c}")
