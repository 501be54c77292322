"""What stands on a sheet, and where its figures go."""

from __future__ import annotations

from dataclasses import dataclass

import pytest

from sheetgen.paper import sheets


@dataclass(frozen=True)
class Drawn:
    """A figure of some height in millimetres."""

    id: str
    millimetres: float

    @property
    def svg(self) -> bytes:
        return f'<svg width="85.0mm" height="{self.millimetres}mm">'.encode()


A4, LETTER = sheets.PAPERS["a4"], sheets.PAPERS["letter"]


@pytest.mark.parametrize("paper", [A4, LETTER], ids=lambda paper: paper.name)
def test_columns_are_wide_enough_for_a_figure(paper):
    assert paper.measure >= 87 - 1e-9
    assert 2 * paper.measure + sheets.GUTTER + 2 * paper.side == pytest.approx(paper.width)


def test_a_page_of_figures_is_filled_as_well_as_can_be():
    figures = [Drawn(str(number), height) for number, height in enumerate([100, 90, 80, 70, 60, 95])]
    left, right = sheets.fullest(figures, 200.0)
    totals = [sum(map(sheets.height, stack)) for stack in (left, right)]
    assert all(total <= 200 for total in totals)
    assert not set(left) & set(right)
    # By hand, with captions: 105.4 + 85.4 and 95.4 + 100.4; no other two pairs reach as much below 200 each.
    assert sum(totals) == pytest.approx(386.6, abs=0.6)


def test_figures_keep_the_order_of_the_sheet_within_a_stack():
    figures = [Drawn(str(number), 50) for number in range(6)]
    left, right = sheets.fullest(figures, 170.0)
    assert [figure.id for figure in left] == sorted(figure.id for figure in left)
    assert [figure.id for figure in right] == sorted(figure.id for figure in right)


def test_no_figure_is_lost_or_shown_twice():
    figures = [Drawn(name, 70) for name in ("parabola", "a", "b", "confrontation", "c", "d", "e", "f", "g")]
    found = sheets.arranged(figures, A4)
    shown = [*found.first, *found.full[0], *found.full[1], *found.in_column]
    assert sorted(figure.id for figure in shown) == sorted(figure.id for figure in figures)
    assert [figure.id for figure in found.first] == ["parabola", "confrontation"]


def test_a_page_that_figures_would_not_fill_is_not_begun():
    found = sheets.arranged([Drawn("a", 60), Drawn("parabola", 60), Drawn("b", 60)], A4)
    assert found.full == ((), ())
    assert [figure.id for figure in found.in_column] == ["a", "b"]


@pytest.mark.parametrize(
    "level, excess, then",
    [(0, 1.0, 1), (0, 60.0, 1), (0, 61.0, 2), (0, 9999.0, 3), (1, 1.0, 2), (1, 200.0, 3), (2, 0.1, 3)],
)
def test_a_sheet_is_pressed_no_more_than_it_must_be_and_never_as_before(level, excess, then):
    assert sheets.tighter(sheets.LEVELS[level], excess) is sheets.LEVELS[then]


def test_figures_are_raised_by_unicode():
    assert sheets.plainer("10<sup>\u221228</sup> nm<sup>-3</sup> k<sup>*</sup>") == "10⁻²⁸ nm⁻³ k<sup>*</sup>"


def test_an_address_may_break_after_its_slashes_and_is_escaped():
    assert sheets.breakable("https://a.example/<b>") == "https:/<wbr>/<wbr>a.example/<wbr>&lt;b&gt;"
