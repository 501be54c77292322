"""States counted in a cube against the continuum, and the error that a bulk number makes in a small cube."""

from __future__ import annotations

from functools import lru_cache

import numpy as np

from sheetgen.figures.layout import stacked
from sheetgen.figures.plot import Axis, Curve, Figure, Note, Panel, Plot, Points, Rule, keys_of
from sheetgen.figures.stamp import stamp
from sheetgen.figures.subject import Subject
from sheetgen.figures.words import number
from sheetgen.physics import counting

NANOMETRE = 1e-9
EDGES = np.geomspace(1.0, 100.0, 181)
LAST_PRODUCT = 20.0
ONE_PERCENT = 0.01


def draw(subject: Subject) -> Figure | None:
    """Counts in a cube for one material."""
    return stamp(plot(subject)) if subject.has("fermi_wavevector", "bulk_edge") else None


def plot(subject: Subject) -> Plot:
    """Counts over k_F·L, the same for every material; below, the deficit over the edge for this one."""
    height, upper, lower = stacked(88, 78, (2, 1))
    counts, deficits = universal_counts(), _deficits(subject)
    panels = (
        Panel(upper, Axis("*k*_{F}*L*", 0, LAST_PRODUCT), Axis("*N*/*g*", 0, 140), counts, keys_of(counts), 3),
        Panel(
            lower,
            Axis("*L* / nm", 1, 100, "log"),
            Axis("1 − *N*_{hard}/*N*", 1e-3, 1, "log"),
            deficits,
            keys_of(deficits),
            3,
        ),
    )
    return Plot("counting", subject.slug, f"States in a cube: {subject.name}", _words(subject), panels, height)


@lru_cache(maxsize=1)
def universal_counts() -> tuple:
    """Wavevectors in a cube with k ≤ k_F, by k_F·L: exact counts as stairs, the continuum, and Weyl's terms."""
    smooth = np.linspace(0.0, LAST_PRODUCT, 101)
    volume, surface, edge = counting.weyl_terms(smooth / np.pi)
    return (
        Curve("continuum", smooth, volume, "ink"),
        _stairs("hard walls", counting.hard_wall_points, np.pi, "one"),
        _stairs("periodic", counting.periodic_points, 2 * np.pi, "two"),
        Curve("Weyl terms", smooth, np.maximum(volume + surface + edge, 0), "four"),
    )


def _stairs(name: str, count, spacing: float, look: str) -> Curve:
    """A count as stairs: it can change only where (k_F·L / spacing)² is an integer."""
    steps = np.arange(0, int((LAST_PRODUCT / spacing) ** 2) + 1)
    # Half-way between integers the count is that of the step, whatever the rounding.
    heights = count(np.sqrt(steps + 0.5)).astype(float)
    places = np.append(np.sqrt(steps) * spacing, LAST_PRODUCT)
    x = np.repeat(places, 2)[1:-1]
    y = np.repeat(heights, 2)
    rising = np.flatnonzero(np.append(True, (np.diff(x) != 0) | (np.diff(y) != 0)))
    return Curve(name, x[rising], y[rising], look)


def _deficits(subject: Subject) -> tuple:
    exact = subject.curve("hard_wall_deficit", edge=EDGES * NANOMETRE)
    leading = subject.curve("hard_wall_deficit_leading", edge=EDGES * NANOMETRE)
    stated = [(entry["edge"], entry["value"]) for entry in subject.sheet.entries("hard_wall_deficit")]
    layers = [
        Curve("exact count", EDGES, exact),
        Curve("leading terms", EDGES, leading, "four"),
        Points("on the sheet", *np.array(stated, dtype=float).T, "open"),
        Rule("", y=ONE_PERCENT),
    ]
    last = subject.si("bulk_edge") / NANOMETRE
    if last < EDGES[-1]:
        layers.append(Rule("", x=last))
    layers.append(Note(f"bulk beyond {number(last)} nm", 1, 1e-3, dx=4, dy=4))
    return tuple(layers)


def _words(subject: Subject) -> str:
    return (
        "Number of wavevectors up to the Fermi wavevector in a cube, against the Fermi wavevector times the edge: "
        "counted with hard walls and with periodic boundaries, by the continuum, and by Weyl's volume, surface and "
        f"edge terms. Below, the share of states that hard walls take from a cube of {subject.phrase} of 1 to 100 "
        "nanometre edge; it stays under one per cent beyond "
        f"{number(subject.si('bulk_edge') / NANOMETRE)} nanometre."
    )
