"""Finished figures: well-formed, labelled, light, the same every time, and read back from their CSV."""

import csv
import io
import os
import re
import subprocess
import sys
from pathlib import Path
from xml.etree import ElementTree

import numpy as np
import pytest
from figures import sample

from sheetgen.figures import draw_all
from sheetgen.figures.plot import Area, Axis, Curve, Note, Panel, Plot, Points, Rule, Shape, keys_of
from sheetgen.figures.stamp import stamp
from sheetgen.figures.style import UNITS_PER_POINT, WIDTH

SVG = "{http://www.w3.org/2000/svg}"
HEAVIEST = 15_000


@pytest.fixture(scope="module")
def figures():
    """(slug, figure) of every figure of every sample material."""
    return [(s.record.slug, figure) for s in sample.handbook().sheets for figure in draw_all(s, sample.handbook())]


def test_every_picture_is_labelled_for_a_screen_reader(figures):
    for _, figure in figures:
        root = ElementTree.fromstring(figure.svg)
        named = {element.get("id"): element for element in root if element.get("id")}
        assert root.get("role") == "img"
        title, description = (named[id] for id in root.get("aria-labelledby").split())
        assert (title.tag, description.tag) == (SVG + "title", SVG + "desc")
        assert title.text == figure.title and description.text == figure.description
        assert len(figure.description) > 60


def test_ids_are_unique_across_all_figures(figures):
    ids = [id for _, figure in figures for id in re.findall(rb' id="([^"]+)"', figure.svg)]
    assert len(ids) == len(set(ids)) == 2 * len(figures)


def test_every_picture_is_light(figures):
    assert max(len(figure.svg) for _, figure in figures) <= HEAVIEST


def test_no_picture_is_empty_or_has_a_missing_number(figures):
    for slug, figure in figures:
        assert b"nan" not in figure.svg.replace(b"nanometre", b"") and b"inf" not in figure.svg, (slug, figure.id)
        root = ElementTree.fromstring(figure.svg)
        drawn = [path.get("class") for path in root.iter(SVG + "path")]
        assert any(name[:2] in ("l-", "m-", "a-") and name not in ("l-axis", "l-grid") for name in drawn)


def test_text_is_text_and_no_smaller_than_six_points(figures):
    for _, figure in figures:
        assert b"<glyph" not in figure.svg and b"<use" not in figure.svg
        sizes = [float(size) for size in re.findall(rb"font-size:([\d.]+)px", figure.svg)]
        assert min(sizes) >= 6 * UNITS_PER_POINT
        root = ElementTree.fromstring(figure.svg)
        assert root.get("width") == "85.0mm"
        assert float(root.get("viewBox").split()[2]) == pytest.approx(85 / 25.4 * 72 * UNITS_PER_POINT, rel=1e-3)


def test_nothing_is_fetched_from_outside(figures):
    for _, figure in figures:
        assert set(re.findall(rb"https?://[^\"' )]+", figure.svg)) == {b"http://www.w3.org/2000/svg"}
        assert b"url(" not in figure.svg and b"@import" not in figure.svg


def test_the_same_sheet_gives_the_same_bytes(figures):
    again = [figure for sheet in sample.handbook().sheets for figure in draw_all(sheet, sample.handbook())]
    assert [figure for _, figure in figures] == again


def test_another_process_with_another_hash_seed_gives_the_same_bytes(figures):
    code = (
        "import hashlib; from figures import sample; from sheetgen.figures import draw_all\n"
        "for f in draw_all(sample.sheet('copper'), sample.handbook()):\n"
        "    print(f.id, hashlib.sha256(f.svg + f.csv).hexdigest())"
    )
    tests = Path(__file__).parents[1]
    runs = [
        subprocess.run(
            [sys.executable, "-c", code],
            env={**os.environ, "PYTHONHASHSEED": seed, "PYTHONPATH": f"{tests}{os.pathsep}{tests.parent}"},
            capture_output=True,
            text=True,
            check=True,
        ).stdout
        for seed in ("1", "4711")
    ]
    assert runs[0] == runs[1]
    assert [line.split()[0] for line in runs[0].splitlines()] == [f.id for slug, f in figures if slug == "copper"]


def test_each_table_is_read_back_with_a_unit_for_each_column(figures):
    for slug, figure in figures:
        header, *rows = list(csv.reader(io.StringIO(figure.csv.decode())))
        assert header[0] == "series" and len(header) >= 3 and rows, (slug, figure.id)
        assert all(len(row) == len(header) for row in rows)
        assert not any("*" in cell or "{" in cell for row in (header, *rows) for cell in row)
        numbers = np.array([float(cell) for row in rows for cell in row[1:] if cell])
        assert np.isfinite(numbers).all()


BOX = (40.0, 28.0, 190.0, 120.0)


def one_panel(*layers, x=Axis("*x* / m", 0, 10), y=Axis("*y* / s", 0, 4)):  # noqa: B008
    """A plot of one panel."""
    return Plot("test", "slug", "Title <&>", "A description", (Panel(BOX, x, y, layers, keys_of(layers)),))


def rows_of(figure):
    """The CSV as lists of cells."""
    return list(csv.reader(io.StringIO(figure.csv.decode())))


def paths(figure, name):
    """The d attributes of the paths of a class."""
    root = ElementTree.fromstring(figure.svg)
    return [path.get("d") for path in root.iter(SVG + "path") if path.get("class") == name]


def test_a_straight_curve_keeps_its_ends():
    x = np.linspace(0, 10, 101)
    assert rows_of(stamp(one_panel(Curve("a, b", x, 0.4 * x)))) == [
        ["series", "x / m", "y / s"],
        ["a, b", "0", "0"],
        ["a, b", "10", "4"],
    ]


def test_a_curve_stands_where_the_axes_say():
    figure = stamp(one_panel(Curve("a", np.array([0.0, 10.0]), np.array([0.0, 4.0]), "three")))
    # From the lower left corner (4000, 16800 − 2800) to the upper right one, 190 pt along and 120 pt up.
    assert paths(figure, "l-three")[-1] == "M4000 14000l19000 -12000"


def test_points_outside_the_panel_are_left_out_of_picture_and_table():
    figure = stamp(
        one_panel(Points("p", np.array([1.0, 11.0]), np.array([2.0, 2.0]), y_uncertainty=np.array([0.5, 0.5])))
    )
    assert rows_of(figure)[1:] == [["p", "1", "2", "0.5"]]
    # Marker of the point and marker of the legend; error bar with two caps.
    assert sum(d.count("M") for d in paths(figure, "m-one")) == 2
    assert [d.count("M") for d in paths(figure, "e-one")] == [3]


def test_rules_outside_the_panel_are_left_out():
    figure = stamp(one_panel(Rule("in", x=5.0), Rule("out", x=12.0), Rule("level", y=1.0)))
    assert rows_of(figure)[1:] == [["in", "5", ""], ["level", "", "1"]]


def test_an_area_gives_its_upper_edge_and_a_shape_nothing():
    x = np.array([0.0, 5.0, 10.0])
    figure = stamp(one_panel(Area("part", x, 0 * x, np.array([0.0, 2.0, 0.0])), Shape("", x, x / 4)))
    assert rows_of(figure)[1:] == [["part", "0", "0"], ["part", "5", "2"], ["part", "10", "0"]]


def test_points_that_lead_somewhere_are_links_and_the_picture_a_group():
    links = (("../a.html", "A & B"),)
    figure = stamp(one_panel(Points("", np.array([1.0]), np.array([1.0]), links=links, names=("A & B",))))
    root = ElementTree.fromstring(figure.svg)
    (link,) = root.iter(SVG + "a")
    assert root.get("role") == "group"
    assert link.get("href") == "../a.html" and link.find(SVG + "title").text == "A & B"
    assert rows_of(figure)[1:] == [["A & B", "1", "1"]]


def test_a_note_is_marked_up_and_placed():
    figure = stamp(one_panel(Note("*E*_{F}", 5, 2, "middle", dx=1, dy=2)))
    root = ElementTree.fromstring(figure.svg)
    note = next(text for text in root.iter(SVG + "text") if "".join(text.itertext()) == "EF")
    assert (note.get("x"), note.get("y")) == ("13600", "7800")
    assert note.get("class") == "no mi"


def test_the_width_is_one_column_of_a_journal():
    assert pytest.approx(85, abs=0.01) == WIDTH * 25.4 / 72
