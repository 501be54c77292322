"""Model against measurement: every ratio of a sheet on one logarithmic axis, with its uncertainty and standing."""

from __future__ import annotations

import math

import numpy as np

from sheetgen.figures.layout import BOTTOM, LEGEND_ROW, RIGHT, TOP
from sheetgen.figures.plot import Area, Axis, Figure, Key, Note, Panel, Plot, Points, Rule
from sheetgen.figures.ranking import opposite_sign
from sheetgen.figures.scales import decades
from sheetgen.figures.stamp import stamp
from sheetgen.figures.style import WIDTH
from sheetgen.figures.subject import Subject
from sheetgen.figures.words import enumeration

ROW = 13.0
LABELS = 98.0
# A shape for each standing; filled is good news.
LOOKS = {
    "agrees": "one",
    "undecided": "open",
    "adjust": "two",
    "fails": "cross",
    "outside": "opentriangle",
}
RANGES = ((0.1, 10.0), (0.01, 100.0), (1e-3, 1e3))


def draw(subject: Subject) -> Figure | None:
    """The confrontations of one material."""
    return stamp(plot(subject)) if _rows(subject) else None


def plot(subject: Subject) -> Plot:
    """One row a quantity, one marker a measurement; a ratio of opposite sign stands at its size and says so."""
    rows = _rows(subject)
    ratios = np.array([abs(one.ratio) for entries in rows.values() for one in entries])
    fitting = (pair for pair in RANGES if pair[0] < ratios.min() and ratios.max() < pair[1])
    axis = Axis("measured / model", *(next(fitting, None) or decades([*ratios, 1.0])), "log")
    count = len(rows)
    height = BOTTOM + TOP + LEGEND_ROW + ROW * count + 4
    box = (LABELS, BOTTOM, WIDTH - LABELS - RIGHT, ROW * count + 4)
    standings = [s for s in LOOKS if any(one.standing == s for entries in rows.values() for one in entries)]
    layers = (
        *_bands(count, _thresholds(subject)),
        Rule("", x=1.0, look="axis"),
        *(_markers(rows, standing) for standing in standings),
        *_labels(rows, axis),
    )
    panel = Panel(
        box,
        axis,
        Axis("", -0.15, count + 0.15, bare=True),
        layers,
        tuple(Key(standing, "points", LOOKS[standing]) for standing in LOOKS),
        5,
    )
    title = f"Model against measurement: {subject.name}"
    return Plot("confrontation", subject.slug, title, _words(subject, rows), (panel,), height)


def _rows(subject: Subject) -> dict[str, list]:
    """Name of the ratio → confrontations that have one, in the order of the sheet."""
    rows: dict[str, list] = {}
    for one in subject.sheet.confrontations:
        if one.ratio is not None and math.isfinite(one.ratio) and one.ratio != 0:
            comparison = subject.handbook.registry[one.quantity].comparison
            rows.setdefault(comparison.ratio if comparison else one.title, []).append(one)
    return rows


def _thresholds(subject: Subject) -> tuple[float, float]:
    stated = subject.handbook.imprint.thresholds
    return float(stated.get("agrees", 0.1)), float(stated.get("adjust", 2.0))


def _bands(count: int, thresholds: tuple[float, float]) -> list[Area]:
    """The ranges of ratios in which a number agrees, and in which a factor mends it."""
    agrees, adjust = thresholds
    edges = {"adjust": (1 / adjust, adjust), "agrees": (1 - agrees, 1 + agrees)}
    tall = np.array([-1.0, -1.0]), np.array([count + 1.0, count + 1.0])
    return [Area("", np.array(pair), *tall, look="faint", unlisted=True) for pair in edges.values()]


def _markers(rows: dict[str, list], standing: str) -> Points:
    placed = [
        (one, len(rows) - 0.5 - number, f"{name}: {standing}{', opposite sign' if one.ratio < 0 else ''}")
        for number, (name, entries) in enumerate(rows.items())
        for one in entries
        if one.standing == standing
    ]
    return Points(
        standing,
        np.array([abs(one.ratio) for one, _, _ in placed]),
        np.array([level for _, level, _ in placed]),
        LOOKS[standing],
        x_uncertainty=np.array([one.ratio_uncertainty or 0.0 for one, _, _ in placed]),
        names=tuple(name for _, _, name in placed),
    )


def _labels(rows: dict[str, list], axis: Axis) -> list[Note]:
    notes = []
    for number, (name, entries) in enumerate(rows.items()):
        level = len(rows) - 0.5 - number
        notes.append(Note(name, axis.low, level, "end", dx=-4, dy=-2.3))
        if any(one.ratio < 0 for one in entries):
            notes.append(opposite_sign([abs(one.ratio) for one in entries], axis, level))
    return notes


def _words(subject: Subject, rows: dict[str, list]) -> str:
    parts = []
    for name, entries in rows.items():
        ratios = [one.ratio for one in entries]
        spread = f"{min(ratios):.3g}" if len(ratios) == 1 else f"{min(ratios):.3g} to {max(ratios):.3g}"
        parts.append(f"{name} {spread} ({enumeration(sorted({one.standing for one in entries}))})")
    return f"Ratio of measured to modelled values for {subject.phrase}: " + "; ".join(parts) + "."
