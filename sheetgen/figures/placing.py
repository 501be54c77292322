"""Names beside points of a map: each where it hides nothing, further off with a leader, or left out."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from sheetgen.figures.markup import visible
from sheetgen.figures.plot import Axis, Curve, Note
from sheetgen.figures.scales import place, value
from sheetgen.figures.style import NOTE_SIZE, RADIUS

# Where a name may stand beside its point, best first: anchor, shift to the side, shift upwards (of the baseline).
BESIDE = (
    ("start", 3.2, -2.3),
    ("end", -3.2, -2.3),
    ("middle", 0.0, 3.6),
    ("middle", 0.0, -8.2),
    ("start", 2.4, 2.4),
    ("end", -2.4, 2.4),
    ("start", 2.4, -7.0),
    ("end", -2.4, -7.0),
)
# Further off, at the end of a leader: lengths in points and directions in degrees.
REACHES = (9.0, 14.0, 20.0, 27.0, 35.0, 44.0)
DIRECTIONS = (135.0, -45.0, 115.0, -65.0, 155.0, -25.0, 90.0, -90.0, 180.0, 0.0)
# Widths of letters in ems, by the widest of the usual sans-serif faces; others are 0.64.
WIDE = {"N": 0.75, "W": 1.0, "M": 0.88, "m": 0.97, "O": 0.8, "i": 0.3, "l": 0.3, "I": 0.32}
TALL = 0.74 * NOTE_SIZE

Box = tuple[float, float, float, float]


@dataclass(frozen=True)
class Label:
    """A name and the point that it belongs to, in the units of the axes."""

    text: str
    x: float
    y: float


def placed(box: Box, x: Axis, y: Axis, labels: list[Label]) -> list[Note | Curve]:
    """Notes for the labels, in their order, and leaders to those that stand off.

    A name that would cover a point, another name or the frame wherever it is tried is left out.
    """
    left, bottom, width, tall = box
    points = np.column_stack(
        (place(x, [label.x for label in labels], left, width), place(y, [label.y for label in labels], bottom, tall))
    )
    taken = np.column_stack((points - RADIUS, points + RADIUS))
    layers: list[Note | Curve] = []
    for label, point in zip(labels, points, strict=True):
        for anchor, dx, dy, leader in _spots():
            spot = _extent(label.text, point, anchor, dx, dy)
            inside = spot[0] > left and spot[1] > bottom and spot[2] < left + width and spot[3] < bottom + tall
            if not inside or _meets(spot, taken).any():
                continue
            if leader is not None:
                ends = np.array([point, point + leader])
                if _crosses(ends, taken[len(points) :]):
                    continue
                places = value(x, ends[:, 0], left, width), value(y, ends[:, 1], bottom, tall)
                layers.append(Curve("", *places, "leader", unlisted=True))
            layers.append(Note(label.text, label.x, label.y, anchor, dx, dy))
            taken = np.vstack((taken, spot))
            break
    return layers


def _spots() -> Iterator[tuple[str, float, float, np.ndarray | None]]:
    """Anchor, shifts and the leader (or None) of every place that is tried, nearest first."""
    for anchor, dx, dy in BESIDE:
        yield anchor, dx, dy, None
    for reach in REACHES:
        for direction in np.deg2rad(DIRECTIONS):
            end = reach * np.array((np.cos(direction), np.sin(direction)))
            anchor = "start" if end[0] > 1 else "end" if end[0] < -1 else "middle"
            gap = {"start": 1.0, "end": -1.0, "middle": 0.0}[anchor]
            lift = -TALL / 2 if anchor != "middle" else (1.5 if end[1] > 0 else -TALL - 1.5)
            yield anchor, end[0] + gap, end[1] + lift, end


def _extent(text: str, point: np.ndarray, anchor: str, dx: float, dy: float) -> np.ndarray:
    """Left, bottom, right, top of a name in points."""
    length = sum(WIDE.get(letter, 0.64) for letter in visible(text)) * NOTE_SIZE
    start = point[0] + dx - {"start": 0.0, "middle": length / 2, "end": length}[anchor]
    base = point[1] + dy
    return np.array([start - 0.7, base - 0.8, start + length + 0.7, base + TALL])


def _meets(spot: np.ndarray, taken: np.ndarray) -> np.ndarray:
    return (taken[:, 0] < spot[2]) & (taken[:, 2] > spot[0]) & (taken[:, 1] < spot[3]) & (taken[:, 3] > spot[1])


def _crosses(ends: np.ndarray, names: np.ndarray) -> bool:
    """Whether a leader runs through a name."""
    if not len(names):
        return False
    along = ends[0] + np.linspace(0, 1, 9)[:, None] * (ends[1] - ends[0])
    inside = (along[:, None] > names[:, :2]) & (along[:, None] < names[:, 2:])
    return bool(inside.all(axis=2).any())
