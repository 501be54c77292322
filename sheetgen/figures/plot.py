"""What a figure shows, apart from how it is drawn: axes, and layers of data in the units of the axes."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from sheetgen.figures.style import HEIGHT


@dataclass(frozen=True)
class Figure:
    """A figure ready to be published: the picture and, beside it, the points that it draws."""

    id: str
    title: str
    description: str
    svg: bytes
    csv: bytes


@dataclass(frozen=True)
class Axis:
    """One axis: its label as `quantity / unit`, its range, and its ticks where they are not left to matplotlib.

    A `bare` axis has no ticks, a `blank` one ticks without numbers; `aside` sets the label flush with the end, for
    one longer than the axis. `column` heads the CSV where it is not the label; with neither there is no column.
    """

    label: str
    low: float
    high: float
    scale: str = "linear"
    ticks: tuple[tuple[float, str], ...] | None = None
    bare: bool = False
    blank: bool = False
    aside: bool = False
    column: str = ""


@dataclass(frozen=True)
class Key:
    """One entry of a legend: the name, and the look of the layer that it stands for."""

    name: str
    kind: str
    look: str


@dataclass(frozen=True)
class Curve:
    """A line through points (x, y); a NaN in y breaks it.

    `unlisted` keeps it out of the CSV; a layer without a name is in neither the CSV nor the legend.
    """

    name: str
    x: np.ndarray
    y: np.ndarray
    look: str = "one"
    unlisted: bool = False
    closed: bool = False


@dataclass(frozen=True)
class Area:
    """The area between two curves over the same x."""

    name: str
    x: np.ndarray
    lower: np.ndarray
    upper: np.ndarray
    look: str = "one"
    unlisted: bool = False


@dataclass(frozen=True)
class Points:
    """Markers, with standard uncertainties of y (or of x) where they are known.

    Each point may have a link (where to, and what it is called) and, for the CSV, a name of its own.
    """

    name: str
    x: np.ndarray
    y: np.ndarray
    look: str = "one"
    y_uncertainty: np.ndarray | None = None
    x_uncertainty: np.ndarray | None = None
    links: tuple[tuple[str, str], ...] = ()
    names: tuple[str, ...] = ()
    unlisted: bool = False


@dataclass(frozen=True)
class Rule:
    """A straight line across the panel at one x or one y."""

    name: str
    x: float | None = None
    y: float | None = None
    look: str = "rule"


@dataclass(frozen=True)
class Note:
    """Words at a point of the panel; `dx`, `dy` shift them by points, dy upwards; `link` is where they lead."""

    text: str
    x: float
    y: float
    anchor: str = "start"
    dx: float = 0.0
    dy: float = 0.0
    ink: str = "ink"
    link: str = ""


@dataclass(frozen=True)
class Shape:
    """A closed outline, filled."""

    name: str
    x: np.ndarray
    y: np.ndarray
    look: str = "one"
    unlisted: bool = True


Layer = Curve | Area | Shape | Points | Rule | Note


@dataclass(frozen=True)
class Panel:
    """One pair of axes with its layers; `box` is left, bottom, width, height in points."""

    box: tuple[float, float, float, float]
    x: Axis
    y: Axis
    layers: tuple[Layer, ...]
    keys: tuple[Key, ...] = ()
    columns: int = 2
    spines: str = "all"


@dataclass(frozen=True)
class Plot:
    """A whole figure before it is drawn; `id` is its kind, `owner` the slug of the sheet that it belongs to."""

    id: str
    owner: str
    title: str
    description: str
    panels: tuple[Panel, ...]
    height: float = HEIGHT


def keys_of(layers: tuple[Layer, ...]) -> tuple[Key, ...]:
    """A legend that names every curve, area, set of points and rule that has a name once, in their order."""
    kinds = {Curve: "line", Area: "area", Shape: "area", Points: "points", Rule: "line"}
    keys = [Key(layer.name, kinds[type(layer)], layer.look) for layer in layers if type(layer) in kinds and layer.name]
    return tuple(dict.fromkeys(keys))
