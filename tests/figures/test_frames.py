"""Frames: shared by materials, with every label inside the picture and none upon another."""

import re
import sys
from functools import cache
from subprocess import run
from xml.etree import ElementTree

import numpy as np
import pytest
from figures import sample

from sheetgen.figures import MODULES, draw_all, draw_handbook, draw_ranking, style
from sheetgen.figures.frames import frame, spec_of
from sheetgen.figures.plot import Axis, Curve, Panel, Plot
from sheetgen.figures.stamp import stamp

SVG = "{http://www.w3.org/2000/svg}"
BOX = (40.0, 28.0, 190.0, 120.0)


def a_plot(slug, high=10.0, points=5):
    """A plot of one curve."""
    x = np.linspace(0, high, points)
    panel = Panel(BOX, Axis("*x* / m", 0, high), Axis("*y* / s", 0, 1), (Curve("a", x, x / high),))
    return Plot("kind", slug, slug, slug, (panel,))


def test_materials_with_the_same_axes_share_a_frame():
    assert spec_of(a_plot("a", points=5)) == spec_of(a_plot("b", points=9))
    assert spec_of(a_plot("a")) != spec_of(a_plot("a", high=20.0))


def test_a_frame_is_drawn_once():
    stamp(a_plot("first", high=7.0))
    before = frame.cache_info()
    stamp(a_plot("second", high=7.0))
    assert (frame.cache_info().misses, frame.cache_info().hits) == (before.misses, before.hits + 1)


def test_importing_the_figures_loads_no_matplotlib():
    code = (
        "import sys, importlib, sheetgen.figures\n"
        f"for name in {MODULES + ('overview', 'ranking')!r}: importlib.import_module('sheetgen.figures.' + name)\n"
        "print('matplotlib' in sys.modules)"
    )
    assert run([sys.executable, "-c", code], capture_output=True, text=True, check=True).stdout == "False\n"


def test_pyplot_is_never_loaded():
    stamp(a_plot("a"))
    assert "matplotlib" in sys.modules
    assert "matplotlib.pyplot" not in sys.modules


@cache
def width_of(text):
    """Width of a text at size 1 in the widest usual font; sub- and superscripts are narrower than that."""
    from matplotlib.font_manager import FontProperties
    from matplotlib.textpath import TextPath

    return TextPath((0, 0), text, size=1, prop=FontProperties("DejaVu Sans")).get_extents().width


def text_boxes(svg):
    """(text, left, top, right, bottom) of every level text of a picture in points, by matplotlib's wide font."""
    sizes = {"la": style.LABEL_SIZE, "no": style.NOTE_SIZE}
    for element in ElementTree.fromstring(svg).iter(SVG + "text"):
        classes = (element.get("class") or "").split()
        size = next((sizes[name] for name in classes if name in sizes), style.TICK_SIZE)
        text = "".join(element.itertext())
        if element.get("transform"):
            x, y = map(int, re.match(r"translate\((\d+),(\d+)\)", element.get("transform")).groups())
        else:
            x, y = int(element.get("x")), int(element.get("y"))
        length = width_of(text) * size
        x, y = x / style.UNITS_PER_POINT, y / style.UNITS_PER_POINT
        if element.get("transform"):
            yield text, x - 0.75 * size, y - length / 2, x, y + length / 2
        else:
            start = x - {"mi": length / 2, "en": length}.get(next((n for n in classes if n in ("mi", "en")), ""), 0)
            yield text, start, y - 0.72 * size, start + length, y


@pytest.fixture(scope="module")
def pictures(handbook):
    """(name, svg) of all figures of the sample handbook and of the real one."""
    figures = []
    for book in (sample.handbook(), handbook):
        figures += [(f"{s.record.slug} {f.id}", f.svg) for s in book.sheets for f in draw_all(s, book)]
        figures += [(figure.id, figure.svg) for figure in draw_handbook(book)]
    return figures + [(id, figure.svg) for id in handbook.registry if (figure := draw_ranking(handbook, id))]


def test_every_picture_of_the_handbook_is_light(pictures):
    assert max((len(svg), name) for name, svg in pictures)[0] <= 15_000


def test_no_text_is_cut(pictures):
    for name, svg in pictures:
        height = float(ElementTree.fromstring(svg).get("viewBox").split()[3]) / style.UNITS_PER_POINT
        for text, left, top, right, bottom in text_boxes(svg):
            assert left > 0 and right < style.WIDTH + 0.5 and top > 0 and bottom < height, (name, text)


def test_no_text_stands_upon_another(pictures):
    for name, svg in pictures:
        boxes = list(text_boxes(svg))
        for index, (text, left, top, right, bottom) in enumerate(boxes):
            for other, other_left, other_top, other_right, other_bottom in boxes[index + 1 :]:
                apart = (
                    right <= other_left + 0.5
                    or other_right <= left + 0.5
                    or bottom <= other_top + 0.5
                    or other_bottom <= top + 0.5
                )
                assert apart, (name, text, other)
