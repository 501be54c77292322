"""The sheet of one material on paper: what its template shows, and where its figures go."""

from __future__ import annotations

import itertools
import re
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

from markupsafe import Markup, escape

from sheetgen.pages import numbers, words
from sheetgen.pages.changes import date_of
from sheetgen.pages.environment import Press
from sheetgen.pages.sheet import SheetPage, figure_size
from sheetgen.paper import codes, setting
from sheetgen.paper.typesetting import Manuscript

PIXELS_PER_MILLIMETRE = 96 / 25.4
CAPTION = 5.4  # millimetres that a caption and the gap below it take
GUTTER = 8.0  # millimetres between two columns
SIGNS = {
    "agrees": "●", "adjust": "◐", "undecided": "◇", "fails": "×", "outside": "⊘", "unchecked": "○",
    "holds": "●", "strained": "◐", "broken": "⊘",
}  # fmt: skip
_RAISED = re.compile(rf"<sup>([-{numbers.MINUS}]?\d+)</sup>")
# What a reader in a hurry wants to see beside the plain answer: the first two of these that a material has.
FIRST = ("parabola", "confrontation", "density-of-states", "heat")
# A page of nothing but figures is worth it where they fill at least this part of its two columns.
FULL_ENOUGH = 0.8


@dataclass(frozen=True)
class Paper:
    """A size of paper and what of it stays white, in millimetres; both sizes give columns of the same width."""

    name: str
    width: float
    height: float
    side: float
    top: float
    bottom: float

    @property
    def measure(self) -> float:
        """The width of one of two columns."""
        return (self.width - 2 * self.side - GUTTER) / 2

    @property
    def column(self) -> float:
        """The height that text and figures may take."""
        return self.height - self.top - self.bottom


PAPERS = {
    "a4": Paper("A4", 210, 297, 14, 15, 13),
    "letter": Paper("letter", 215.9, 279.4, 16.95, 13, 12),
}


@dataclass(frozen=True)
class Level:
    """How much a sheet is pressed together: its type, the figures left to the page on screen, what that saves in mm."""

    dense: bool
    left_out: tuple[str, ...]
    saves: float


LEVELS = (
    Level(False, (), 0.0),
    Level(True, (), 60.0),
    Level(True, ("bands", "chemical-potential"), 210.0),
    Level(True, ("bands", "chemical-potential", "density-of-states", "counting"), 370.0),
)
MOST_PAGES = 4
LEAST_ON_LAST = 45.0  # millimetres of column: what is less is better pressed into the pages before


@dataclass(frozen=True)
class Plates:
    """Where the figures of a sheet go: on the first page, on a page of their own, and in the columns of the others."""

    first: tuple[Any, ...]
    full: tuple[tuple[Any, ...], tuple[Any, ...]]
    in_column: tuple[Any, ...]


def paper_of(imprint: Any) -> Paper:
    """The paper that the imprint asks for."""
    return PAPERS.get(imprint.paper.casefold(), PAPERS["a4"])


def press(handbook: Any) -> Press:
    """The compiled templates of a handbook with what only paper needs; a group's own come first."""
    return _press(handbook.imprint.templates)


@cache
def _press(own: Path | None) -> Press:
    made = Press([own] if own else [])
    made.environment.filters.update(symbol=setting.symbol, equation=setting.equation, breakable=breakable)
    return made


def style(handbook: Any) -> str:
    """The style sheet of every document of the edition."""
    return press(handbook).render("paper/style.css", paper=paper_of(handbook.imprint)).decode()


def manuscript(sheet: Any, handbook: Any, figures: Sequence[Any], level: Level = LEVELS[0]) -> Manuscript:
    """The sheet of a material, ready to be set."""
    shown = [figure for figure in figures if figure.id not in level.left_out]
    context = SheetPage(sheet, handbook, shown).context()
    address = page_address(handbook.imprint, f"materials/{sheet.record.slug}.html")
    answer = context["answer"]
    html = press(handbook).render(
        "paper/sheet.html",
        imprint=handbook.imprint,
        language=words.language(handbook.imprint.language),
        created=date_of(handbook.imprint),
        address=address,
        code=codes.data_address(address) if address else "",
        plates=arranged(shown, paper_of(handbook.imprint)),
        caption=lambda figure: figure.title.removesuffix(f": {sheet.record.name}"),
        dense=level.dense,
        left_out=[figure for figure in figures if figure.id in level.left_out],
        signs=SIGNS,
        references=_References(context["cited"]),
        telling=telling,
        verdicts=verdicts(answer),
        **context,
    )
    return Manuscript(
        sheet.record.slug,
        plainer(html.decode()),
        {figure.id: figure.svg for figure in shown},
        most_pages=MOST_PAGES if level is not LEVELS[-1] else None,
        least_on_last=LEAST_ON_LAST if level is LEVELS[0] else 0.0,
    )


def tighter(level: Level, excess: float) -> Level:
    """The next level that brings a sheet, which at this one is too long by some millimetres, back to its pages."""
    following = LEVELS[LEVELS.index(level) + 1 :]
    return next((one for one in following if one.saves >= level.saves + excess), LEVELS[-1])


@dataclass(frozen=True)
class Verdict:
    """One column of the plain answer; `share` of the width goes by how much it has to say."""

    kind: str
    lines: list[tuple[str, list[Any]]]
    share: float


def verdicts(answer: Any) -> list[Verdict]:
    """What to use, to scale and to avoid."""
    found = []
    for kind in ("use", "scale", "avoid"):
        lines = by_reason(getattr(answer, kind))
        said = sum(len(reason) + sum(len(line.title) + 12 for line in alike) for reason, alike in lines)
        found.append(Verdict(kind, lines, round(1 + min(said / 500, 1.6), 2)))
    return found


class _References:
    """The numbers under which a sheet's own list names sources."""

    def __init__(self, cited: Sequence[Any]):
        self.numbers = {source.key: number for number, source in enumerate(cited, 1)}

    def __call__(self, citations: Sequence[Any]) -> str:
        """As "[2, 7]"; a source that the handbook does not list by its key."""
        named = sorted(self.numbers[one.key] for one in citations if one.key in self.numbers)
        words = [str(number) for number in named] + [one.label for one in citations if one.key not in self.numbers]
        return f"[{', '.join(words)}]" if words else ""


def telling(evaluations: Sequence[dict[str, Any]]) -> list[dict[str, Any]]:
    """The evaluations of an assumption that say how it stands: the first, and the first of each worse standing."""
    found: dict[str, dict[str, Any]] = {}
    for one in evaluations:
        found.setdefault(one["standing"], one)
    return list(found.values())


def by_reason(lines: Sequence[Any]) -> list[tuple[str, list[Any]]]:
    """Lines of the plain answer, those with the same reason together."""
    found: dict[str, list[Any]] = {}
    for line in lines:
        found.setdefault(line.reason, []).append(line)
    return list(found.items())


def plainer(html: str) -> str:
    """The same text in fewer elements, each of which costs time: figures raised by Unicode, breaks at spaces."""
    raised = _RAISED.sub(lambda power: numbers.superscript(int(power[1].replace(numbers.MINUS, "-"))), html)
    return raised.replace(f"<wbr>{numbers.NARROW}", " ")


def page_address(imprint: Any, path: str) -> str:
    """Where a page of the site can be read; "" where the imprint gives no address."""
    return f"{imprint.base_address.rstrip('/')}/{path}" if imprint.base_address else ""


def breakable(address: str) -> Markup:
    """An address that may break after each slash."""
    return Markup("/<wbr>").join(escape(part) for part in address.split("/"))


# --- where figures go ------------------------------------------------------------------------------------------------


def height(figure: Any) -> float:
    """The height of a figure with its caption, in millimetres."""
    size = figure_size(figure.svg)
    return (size[1] / PIXELS_PER_MILLIMETRE if size else 60.0) + CAPTION


def arranged(figures: Sequence[Any], paper: Paper) -> Plates:
    """The figures of the first page, a page full of others, and what is left for the columns.

    A figure is never cut nor shrunk, so that it is the choice of neighbours that saves paper.
    """
    first = tuple(sorted((figure for figure in figures if figure.id in FIRST), key=_rank)[:2])
    others = [figure for figure in figures if figure not in first]
    left, right = fullest(others, paper.column)
    if sum(map(height, left + right)) < FULL_ENOUGH * 2 * paper.column:
        left, right = (), ()
    rest = tuple(figure for figure in others if figure not in left + right)
    return Plates(first, (left, right), rest)


def _rank(figure: Any) -> int:
    return FIRST.index(figure.id)


def fullest(figures: Sequence[Any], column: float) -> tuple[tuple[Any, ...], tuple[Any, ...]]:
    """The two stacks, each no higher than the column, that together are the highest; in the order of the sheet."""
    heights = [height(figure) for figure in figures]
    numbered = range(len(figures))
    fitting = [
        (total, chosen)
        for size in range(len(figures) + 1)
        for chosen in itertools.combinations(numbered, size)
        if (total := sum(heights[index] for index in chosen)) <= column
    ]
    fitting.sort(key=lambda stack: (-stack[0], stack[1]))
    best, pair = -1.0, ((), ())
    for total, chosen in fitting:
        if 2 * total <= best:
            break
        other = next((stack for stack in fitting if not set(stack[1]) & set(chosen)), (0.0, ()))
        if total + other[0] > best:
            best, pair = total + other[0], tuple(sorted((chosen, other[1])))
    return tuple(tuple(figures[index] for index in stack) for stack in pair)
