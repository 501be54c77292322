"""Paths of figures as operators of a PDF page."""

from __future__ import annotations

import math
import re

import pytest

from sheetgen.paper.strokes import PlateError, colour, outline, painted


def numbers_of(operators: bytes) -> list[float]:
    return [float(number) for number in re.findall(r"-?\d+\.?\d*", operators.decode())]


@pytest.mark.parametrize(
    "data, operators",
    [
        ("M1 2L3 4", "1 2 m 3 4 l"),
        ("M1 2 3 4", "1 2 m 3 4 l"),
        ("m1 2l3 4", "1 2 m 4 6 l"),
        ("M1 2H5V7h-1v-2", "1 2 m 5 2 l 5 7 l 4 7 l 4 5 l"),
        ("M1 2l1 0 0 1zl5 5", "1 2 m 2 2 l 2 3 l h 6 7 l"),
        ("M0-1L.5-.5", "0 -1 m 0.5 -0.5 l"),
    ],
)
def test_lines_keep_their_points(data, operators):
    assert outline(data).decode() == operators


def test_two_half_circles_stay_on_the_circle():
    operators = outline("M-2 0a2 2 0 1 0 4 0a2 2 0 1 0 -4 0z").decode()
    ends = re.findall(r"(\S+) (\S+) c", operators)
    assert len(ends) == 4  # quarters, each of which one curve shows
    assert [math.hypot(float(x), float(y)) for x, y in ends] == pytest.approx([2] * 4, abs=1e-4)
    # A Bézier curve is half way where (p0 + 3 p1 + 3 p2 + p3) / 8 lies: also there within 0.03 % of the circle.
    numbers = numbers_of(outline("M-2 0a2 2 0 1 0 4 0"))
    start, one, two, end = (complex(*numbers[place : place + 2]) for place in range(0, 8, 2))
    assert abs((start + 3 * one + 3 * two + end) / 8) == pytest.approx(2, rel=3e-4)


def test_no_number_has_an_exponent():
    assert outline("M1e-9 1e6L-1e-9 0.00001").decode() == "0 1000000 m 0 0 l"


@pytest.mark.parametrize("sweep, side", [(1, -1), (0, 1)])
def test_an_arc_bends_to_the_side_that_its_flag_says(sweep, side):
    # SVG 2, 9.3.8: with the flag the angle grows, which on a page whose y goes down is clockwise.
    half_way = numbers_of(outline(f"M0 0A1 1 0 0 {sweep} 2 0"))[7]
    assert math.copysign(1, half_way) == side
    assert abs(half_way) == pytest.approx(1, abs=1e-5)


def test_an_arc_that_is_too_small_for_its_ends_grows():
    assert numbers_of(outline("M0 0A1 1 0 0 1 6 0"))[-2:] == pytest.approx([6, 0], abs=1e-4)
    assert min(numbers_of(outline("M0 0A1 1 0 0 1 6 0"))) == pytest.approx(-3, abs=1e-4)


def test_fill_and_stroke_are_told_apart():
    style = {"fill": "#ff0000", "stroke": "#000", "stroke-width": "3", "stroke-dasharray": "4 2"}
    operators = list(painted("M0 0L1 1", style, lambda opacity: b"?"))
    assert b"1 0 0 rg" in operators and b"0 0 0 RG" in operators
    assert b"3 w" in operators and b"[4 2] 0 d" in operators
    assert operators[-2:] == [b"B", b"Q"]


def test_an_opacity_is_asked_for():
    style = {"fill": "#0000ff", "fill-opacity": "0.25"}
    assert b"/half gs" in list(painted("M0 0L1 1", style, lambda opacity: b"/half gs"))


def test_what_is_neither_filled_nor_stroked_is_not_drawn():
    assert list(painted("M0 0L1 1", {"fill": "none"}, lambda opacity: b"")) == []


def test_a_colour_without_a_number_is_refused():
    with pytest.raises(PlateError, match="a figure uses the colour 'rebeccapurple'; plates know #rrggbb"):
        colour("rebeccapurple")
