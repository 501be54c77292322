"""Figures as vector plates."""

from __future__ import annotations

import pytest

from sheetgen.figures import draw_all
from sheetgen.paper.plates import Plate, rules
from sheetgen.paper.strokes import PlateError

FRAME = (
    '<svg xmlns="http://www.w3.org/2000/svg" class="sheetgen-figure" width="85mm" height="60mm" viewBox="0 0 850 600">'
    "{}</svg>"
)


def test_a_plate_has_the_size_of_its_figure():
    plate = Plate(FRAME.format("").encode())
    width, height, ratio = plate.get_intrinsic_size(None, None)
    assert width == pytest.approx(85 / 25.4 * 96)
    assert height == pytest.approx(60 / 25.4 * 96)
    assert ratio == pytest.approx(85 / 60)


def test_rules_carry_their_colours_and_leave_the_screen_out():
    sheet = (
        ".sheetgen-figure{--ink:#111111;--one:#1f4e79}"
        "@media screen and (prefers-color-scheme:dark){.sheetgen-figure{--ink:#eeeeee}}"
        ".sheetgen-figure .l-one{stroke:var(--one);stroke-width:3}"
        ".sheetgen-figure text{fill:var(--ink)}"
        ".sheetgen-figure a:hover path{stroke:var(--ink)}"
    )
    assert rules(sheet) == (
        ("", "l-one", {"stroke": "#1f4e79", "stroke-width": "3"}),
        ("text", "", {"fill": "#111111"}),
    )


@pytest.mark.parametrize(
    "inside, said",
    [
        ("<circle r='3'/>", "a figure holds <circle>, which plates do not draw"),
        ("<text transform='skewX(3)'>a</text>", r"a figure turns a text by 'skewX\(3\)', which plates do not know"),
    ],
)
def test_an_unknown_word_is_an_error_and_never_a_gap(inside, said):
    plate = Plate(FRAME.format(inside).encode())
    with pytest.raises(PlateError, match=said):
        for element in plate.root:
            list(plate._drawn(element, None))


def test_a_figure_without_a_size_is_refused():
    with pytest.raises(PlateError, match="a figure needs a size in millimetres and a viewBox"):
        Plate(b'<svg xmlns="http://www.w3.org/2000/svg"/>')


def test_every_figure_of_three_sheets_is_drawn(paper_machine, handbook):
    """Each word of SVG that figures use is known: an error here is one that a press would meet."""
    from sheetgen.paper.typesetting import Manuscript

    for slug in ("copper", "gallium-arsenide-quantum-well", "lead"):
        sheet = next(sheet for sheet in handbook.sheets if sheet.record.slug == slug)
        figures = {figure.id: figure.svg for figure in draw_all(sheet, handbook)}
        pictures = "".join(f'<p><img src="plate:{id}" alt="{id}"></p>' for id in figures)
        html = f'<html lang="en"><title>Plates</title><p>Letters <i>before</i></p>{pictures}</html>'
        printed = setter(handbook).set(Manuscript("plates", html, figures))
        assert printed.pages > 0 and printed.pdf.startswith(b"%PDF-1.7")


def setter(handbook):
    from sheetgen.pages.environment import template_folder
    from sheetgen.paper import sheets
    from sheetgen.paper.typesetting import Typesetter

    return Typesetter(sheets.style(handbook), f"{(template_folder() / 'fonts').as_uri()}/")
