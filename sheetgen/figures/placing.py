"""Names beside points of a map: each where it hides nothing, or left out where there is no such place."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from sheetgen.figures.markup import visible
from sheetgen.figures.plot import Axis, Note
from sheetgen.figures.scales import place
from sheetgen.figures.style import NOTE_SIZE, RADIUS

# Where a name may stand, best first: anchor, shift to the side, shift upwards (of the baseline).
SPOTS = (
    ("start", 3.2, -2.3),
    ("end", -3.2, -2.3),
    ("middle", 0.0, 3.6),
    ("middle", 0.0, -8.2),
    ("start", 2.4, 2.4),
    ("end", -2.4, 2.4),
    ("start", 2.4, -7.0),
    ("end", -2.4, -7.0),
)
CHARACTER = 0.6 * NOTE_SIZE


@dataclass(frozen=True)
class Label:
    """A name and the point that it belongs to, in the units of the axes."""

    text: str
    x: float
    y: float


def placed(box: tuple[float, float, float, float], x: Axis, y: Axis, labels: list[Label]) -> list[Note]:
    """Notes for the labels, in their order; one that would cover a point, a name or the frame is left out."""
    left, bottom, width, tall = box
    points = np.column_stack(
        (place(x, [label.x for label in labels], left, width), place(y, [label.y for label in labels], bottom, tall))
    )
    taken = np.column_stack((points - RADIUS, points + RADIUS))
    notes = []
    for label, point in zip(labels, points, strict=True):
        for anchor, dx, dy in SPOTS:
            spot = _extent(label.text, point, anchor, dx, dy)
            inside = spot[0] > left and spot[1] > bottom and spot[2] < left + width and spot[3] < bottom + tall
            if inside and not _meets(spot, taken).any():
                notes.append(Note(label.text, label.x, label.y, anchor, dx, dy))
                taken = np.vstack((taken, spot))
                break
    return notes


def _extent(text: str, point: np.ndarray, anchor: str, dx: float, dy: float) -> np.ndarray:
    """Left, bottom, right, top of a name in points."""
    length = CHARACTER * len(visible(text))
    start = point[0] + dx - {"start": 0.0, "middle": length / 2, "end": length}[anchor]
    base = point[1] + dy
    return np.array([start, base - 1.0, start + length, base + 0.72 * NOTE_SIZE])


def _meets(spot: np.ndarray, taken: np.ndarray) -> np.ndarray:
    return (taken[:, 0] < spot[2]) & (taken[:, 2] > spot[0]) & (taken[:, 1] < spot[3]) & (taken[:, 3] > spot[1])
