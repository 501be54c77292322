"""Stamped data lie where matplotlib itself would draw them."""

import io
import re
from dataclasses import replace
from importlib import import_module
from xml.etree import ElementTree

import numpy as np
import pytest
from figures import afresh, sample
from PIL import Image

from sheetgen.figures.plot import Note, Points
from sheetgen.figures.stamp import stamp
from sheetgen.figures.style import UNITS_PER_POINT

SVG = "{http://www.w3.org/2000/svg}"
# A curve may be off by the decimation (0.05 pt) and the rounding to a hundredth of a point.
NEAR = 0.05 + 0.02


def stamped_lines(svg: bytes) -> dict[str, list[np.ndarray]]:
    """Class → polylines of an SVG in points from the top left: absolute starts, relative steps."""
    lines: dict[str, list[np.ndarray]] = {}
    for path in ElementTree.fromstring(svg).iter(SVG + "path"):
        for start, steps in re.findall(r"M(-?\d+ -?\d+)l([-\d ]+)", path.get("d")):
            numbers = np.array([*start.split(), *steps.split()], dtype=float).reshape(-1, 2)
            lines.setdefault(path.get("class"), []).append(np.cumsum(numbers, axis=0) / UNITS_PER_POINT)
    return lines


def distances(points: np.ndarray, polylines: list[np.ndarray]) -> np.ndarray:
    """Distance of each point to the nearest of the polylines."""
    nearest = np.full(len(points), np.inf)
    for line in polylines:
        start, along = line[:-1], np.diff(line, axis=0)
        squared = np.maximum((along**2).sum(axis=1), 1e-12)
        share = np.clip(((points[:, None] - start) * along).sum(axis=2) / squared, 0, 1)
        foot = start + share[:, :, None] * along
        nearest = np.minimum(nearest, np.linalg.norm(points[:, None] - foot, axis=2).min(axis=1))
    return nearest


@pytest.mark.parametrize(
    ("module", "slug"),
    [
        ("parabola", "copper"),
        ("density_of_states", "quantum-well"),
        ("resistivity", "copper"),
        ("optics", "copper"),
        ("heat", "aluminium"),
        ("chemical_potential", "silicon-n"),
        ("counting", "copper"),
        ("film", "copper"),
        ("bands", "aluminium"),
    ],
)
def test_every_computed_point_lies_on_the_stamped_curve(module, slug):
    plot = import_module(f"sheetgen.figures.{module}").plot(sample.subject(slug))
    stamped = stamped_lines(stamp(plot).svg)
    placed = afresh.curve_paths(plot)
    assert len(placed) >= 2
    for name, points in placed:
        if len(points):
            assert distances(points, stamped[name]).max() <= NEAR


@pytest.fixture
def raster(browser):
    """A function that rasterises an SVG at three pixels a point, as an array of grey levels from 0 to 1."""
    page = browser.new_page(viewport={"width": 723, "height": 900})

    def rasterise(svg: bytes) -> np.ndarray:
        page.set_content(f'<body style="margin:0">{svg.decode()}')
        # The dashes of a line shift with its length, which decimation shortens a little: compare whole lines.
        page.add_style_tag(content="svg{width:723px;height:auto;display:block}path{stroke-dasharray:none!important}")
        return np.asarray(Image.open(io.BytesIO(page.screenshot())).convert("L"), dtype=float) / 255

    yield rasterise
    page.close()


@pytest.mark.parametrize(("module", "slug"), [("heat", "copper"), ("density_of_states", "copper")])
def test_a_stamped_picture_looks_like_one_drawn_afresh(module, slug, raster):
    plot = import_module(f"sheetgen.figures.{module}").plot(sample.subject(slug))
    # Words and error bars are ours in both: what is compared is what matplotlib draws.
    bare = {"y_uncertainty": None, "x_uncertainty": None}
    panels = tuple(
        replace(
            panel,
            layers=tuple(
                replace(layer, **bare) if isinstance(layer, Points) else layer
                for layer in panel.layers
                if not isinstance(layer, Note)
            ),
        )
        for panel in plot.panels
    )
    plot = replace(plot, panels=panels)
    stamped, drawn = raster(stamp(plot).svg), raster(afresh.same_look(plot))
    assert stamped.min() < 0.5  # something is there
    assert np.abs(stamped - drawn).mean() < 1e-3
