"""Which figures a material has: none that means nothing for it, and each within its range."""

import pytest
from figures import sample

from sheetgen.figures import draw_all

METAL = [
    "parabola",
    "bands",
    "zone",
    "density-of-states",
    "counting",
    "resistivity",
    "optics",
    "heat",
    "chemical-potential",
    "film",
    "confrontation",
]


@pytest.mark.parametrize(
    ("slug", "expected"),
    [
        ("aluminium", METAL),
        ("copper", METAL),
        ("tungsten", METAL),
        # No Debye temperature: neither a resistivity law nor a heat capacity of the lattice.
        ("silicon-n", ["parabola", "density-of-states", "counting", "optics", "chemical-potential", "film"]),
        # Nothing measured at all.
        ("germanium-p", ["parabola", "density-of-states", "counting", "chemical-potential"]),
        ("quantum-well", ["parabola", "density-of-states", "chemical-potential"]),
    ],
)
def test_the_figures_of_a_sheet(slug, expected):
    assert [figure.id for figure in draw_all(sample.sheet(slug), sample.handbook())] == expected


def test_each_figure_names_its_material():
    for sheet in sample.handbook().sheets:
        for figure in draw_all(sheet, sample.handbook()):
            assert figure.title.endswith(f": {sheet.record.name}")
            assert sheet.record.name.lower() in figure.description.lower()


def test_holes_say_that_they_are_holes():
    figure = draw_all(sample.sheet("germanium-p"), sample.handbook())[0]
    assert "The carriers are holes" in figure.description
