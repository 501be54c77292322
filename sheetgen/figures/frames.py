"""Axes, ticks, labels and legends: drawn by matplotlib once per kind of figure and axis ranges, then kept.

matplotlib decides where everything goes; a renderer of our own writes it as short SVG with classes instead of
colours, and text stays text. The frame does not know any material, so that one frame serves many.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from functools import lru_cache

from sheetgen.figures import style
from sheetgen.figures.markup import spans
from sheetgen.figures.plot import Axis, Panel, Plot

_CLASSES = re.compile(r'class="([^"]*)"')


@dataclass(frozen=True)
class FrameSpec:
    """What a frame depends on: its height and its panels without data."""

    height: float
    panels: tuple[Panel, ...]


def spec_of(plot: Plot) -> FrameSpec:
    """The part of a plot that other materials share."""
    return FrameSpec(
        plot.height,
        tuple(replace(p, layers=(), x=_seen(p.x), y=_seen(p.y)) for p in plot.panels),
    )


def _seen(axis: Axis) -> Axis:
    """What a frame shows of an axis: of one without ticks, not even its range."""
    return replace(axis, low=0.0, high=1.0, scale="linear", column="") if axis.bare else replace(axis, column="")


@dataclass(frozen=True)
class Frame:
    """The SVG elements of a frame, and the classes that they have."""

    elements: str
    classes: frozenset[str]


@lru_cache(maxsize=1024)
def frame(spec: FrameSpec) -> Frame:
    """A frame, drawn when it is first asked for: only then is matplotlib loaded."""
    from sheetgen.figures.canvas import draw

    elements = draw(spec)
    return Frame(elements, classes_of(elements) | {"gr"})


def classes_of(elements: str) -> frozenset[str]:
    """The classes of SVG elements."""
    return frozenset(name for names in set(_CLASSES.findall(elements)) for name in names.split())


def text_element(x: float, y: float, text: str, classes: str, angle: float = 0.0) -> str:
    """An SVG text element; x and y in points from the top left corner, classes as in the style sheet."""
    size = {"la": style.LABEL_SIZE, "no": style.NOTE_SIZE}.get(classes.split()[0] if classes else "", style.TICK_SIZE)
    x, y = round(x * style.UNITS_PER_POINT), round(y * style.UNITS_PER_POINT)
    where = f'transform="translate({x},{y})rotate({-angle:g})"' if angle else f'x="{x}" y="{y}"'
    named = f' class="{classes}"' if classes else ""
    return f"<text {where}{named}>{spans(text, size * style.UNITS_PER_POINT)}</text>"
