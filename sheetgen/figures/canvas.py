"""A matplotlib renderer that writes compact SVG, and the drawing of frames with it.

Loaded only when a frame has to be drawn: matplotlib takes a third of a second to import.
"""

from __future__ import annotations

import math
from collections.abc import Iterable

import matplotlib as mpl
from matplotlib.backend_bases import FigureCanvasBase, RendererBase
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.markers import TICKDOWN, TICKLEFT
from matplotlib.patches import Patch
from matplotlib.path import Path
from matplotlib.ticker import (
    FixedFormatter,
    FixedLocator,
    FuncFormatter,
    MaxNLocator,
    NullFormatter,
    NullLocator,
)

from sheetgen.figures import style
from sheetgen.figures.frames import FrameSpec, text_element
from sheetgen.figures.marks import marker_path
from sheetgen.figures.markup import visible
from sheetgen.figures.plot import Axis, Key, Panel
from sheetgen.figures.scales import number_label, power_label

LEGEND_START = 5.0  # points from the left edge: legends may use the whole width
LEGEND_RISE = 3.0  # above the axes, clear of the topmost tick label

SETTINGS = {
    "font.family": "DejaVu Sans",
    "font.size": style.TICK_SIZE,
    "axes.labelsize": style.LABEL_SIZE,
    "axes.labelpad": 2.5,
    "axes.linewidth": 0.6,
    "xtick.labelsize": style.TICK_SIZE,
    "ytick.labelsize": style.TICK_SIZE,
    "xtick.major.size": 2.8,
    "ytick.major.size": 2.8,
    "xtick.minor.size": 1.5,
    "ytick.minor.size": 1.5,
    "xtick.major.pad": 2.2,
    "ytick.major.pad": 2.2,
    "grid.color": style.LIGHT["grid"],
    "legend.fontsize": style.NOTE_SIZE,
    "legend.frameon": False,
    "legend.handlelength": 2.2,
    "legend.handletextpad": 0.5,
    "legend.columnspacing": 1.1,
    "legend.labelspacing": 0.35,
    "legend.borderpad": 0.0,
    "legend.borderaxespad": 0.3,
    "axes.unicode_minus": True,
}


def draw(spec: FrameSpec) -> str:
    """Draw the axes, ticks, labels and legends of a frame; returns SVG elements in hundredths of a point."""
    with mpl.rc_context(SETTINGS):
        figure = figure_of(spec)
        renderer = CompactRenderer(spec.height)
        figure.draw(renderer)
    return renderer.elements()


def figure_of(spec: FrameSpec) -> Figure:
    """The matplotlib figure of a frame, one unit of dpi per point."""
    figure = Figure(figsize=(style.WIDTH / 72, spec.height / 72), dpi=72)
    FigureCanvasBase(figure)
    figure.patch.set_visible(False)
    for panel in spec.panels:
        _add_axes(figure, panel, spec.height)
    return figure


def _add_axes(figure: Figure, panel: Panel, height: float) -> None:
    left, bottom, width, tall = panel.box
    axes = figure.add_axes((left / style.WIDTH, bottom / height, width / style.WIDTH, tall / height))
    axes.patch.set_visible(False)
    _set_axis(axes, "x", panel.x, width)
    _set_axis(axes, "y", panel.y, tall)
    if panel.spines == "none":
        axes.set_axis_off()
    for side in ("top", "right"):
        axes.spines[side].set_visible(panel.spines == "all")
    if panel.spines != "none":
        axes.set_axisbelow(True)
        axes.grid(True, linewidth=0.5)
    if panel.keys:
        legend = axes.legend(
            handles=[_handle(key) for key in panel.keys],
            loc="lower left",
            bbox_to_anchor=((LEGEND_START - left) / width, 1.0 + LEGEND_RISE / tall),
            ncols=panel.columns,
            handlelength=1.0 if all(key.kind == "points" for key in panel.keys) else 2.2,
        )
        # A legend draws copies of its handles; the name of the look has to be put on those.
        for drawn, key in zip(legend.legend_handles, panel.keys, strict=True):
            drawn.set_gid(f"{_PREFIXES[key.kind]}-{key.look}")


def _set_axis(axes, name: str, axis: Axis, length: float) -> None:
    own = getattr(axes, f"{name}axis")
    getattr(axes, f"set_{name}scale")(axis.scale)
    getattr(axes, f"set_{name}lim")(axis.low, axis.high)
    ends = {"loc": "right" if name == "x" else "top"} if axis.aside else {}
    getattr(axes, f"set_{name}label")(axis.label, **ends)
    if axis.bare:
        own.set_major_locator(NullLocator())
    elif axis.ticks is not None:
        own.set_major_locator(FixedLocator([position for position, _ in axis.ticks]))
        own.set_major_formatter(FixedFormatter([label for _, label in axis.ticks]))
    elif axis.scale == "log":
        _log_ticks(axes, name, axis, length)
    else:
        room = 26 if name == "x" else 17
        own.set_major_locator(MaxNLocator(max(2, min(7, int(length / room))), steps=[1, 2, 2.5, 5, 10]))
        own.set_major_formatter(FuncFormatter(lambda tick, _: number_label(tick)))
    if axis.blank:
        own.set_major_formatter(NullFormatter())
    own.set_minor_locator(NullLocator())


def _log_ticks(axes, name: str, axis: Axis, length: float) -> None:
    decades = math.log10(axis.high / axis.low)
    room = length / decades
    every = max(1, math.ceil((24 if name == "x" else 13) / room))
    subs = (1, 2, 3, 4, 5, 6, 8) if decades < 0.7 else (1, 2, 5) if decades < 1.6 else (1,)
    own = getattr(axes, f"{name}axis")
    own.set_major_locator(FixedLocator(_within(axis, subs, every)))
    own.set_major_formatter(FuncFormatter(lambda tick, _: power_label(tick)))
    _minor_ticks(axes, name, _within(axis, range(2, 10) if room > 22 else (1,), 1))


def _within(axis: Axis, subs: Iterable[int], every: int) -> list[float]:
    """Multiples of every so many powers of ten that lie on the axis."""
    powers = range(math.floor(math.log10(axis.low)), math.ceil(math.log10(axis.high)) + 1)
    ticks = [sub * 10.0**power for power in powers if power % every == 0 for sub in subs]
    return [tick for tick in ticks if axis.low * (1 - 1e-9) <= tick <= axis.high * (1 + 1e-9)]


def _minor_ticks(axes, name: str, places: list[float]) -> None:
    """Small ticks as one line of markers: as tick objects they take most of the time of a frame."""
    edge = [0.0] * len(places)
    x, y, marker, transform = (
        (places, edge, TICKDOWN, axes.get_xaxis_transform())
        if name == "x"
        else (edge, places, TICKLEFT, axes.get_yaxis_transform())
    )
    line = Line2D(x, y, linestyle="", marker=marker, markersize=1.5, transform=transform, clip_on=False)
    axes.add_artist(line)


_PREFIXES = {"area": "a", "points": "m", "line": "l"}


def _handle(key: Key):
    if key.kind == "area":
        return Patch(label=key.name)
    if key.kind == "points":
        return Line2D([], [], linestyle="", marker="o", label=key.name)
    return Line2D([], [], label=key.name)


_ANCHORS = {"left": "", "center": "mi", "right": "en"}


class CompactRenderer(RendererBase):
    """Writes what matplotlib draws as SVG paths gathered by class, and text as text.

    A layer's class is the gid of its artist; axes and grid are told apart by colour.
    """

    def __init__(self, height: float):
        super().__init__()
        self.height = height
        self._paths: dict[str, list[str]] = {}
        self._texts: list[str] = []
        self._gids: list[str | None] = []
        self._grid = mpl.colors.to_rgb(style.LIGHT["grid"])

    def elements(self) -> str:
        """All that was drawn, grid first."""
        order = sorted(self._paths, key=lambda name: (name != "l-grid", name != "l-axis"))
        paths = (f'<path class="{name}" d="{"".join(self._paths[name])}"/>' for name in order)
        return "".join((*paths, *self._texts))

    def open_group(self, s: str, gid: str | None = None) -> None:
        """Remember the artist that is drawn now."""
        self._gids.append(gid)

    def close_group(self, s: str) -> None:
        """Forget it again."""
        self._gids.pop()

    def get_canvas_width_height(self) -> tuple[float, float]:
        """The size of the figure in points."""
        return style.WIDTH, self.height

    def points_to_pixels(self, points: float) -> float:
        """A pixel is a point here."""
        return points

    def _gid(self) -> str | None:
        return next((gid for gid in reversed(self._gids) if gid), None)

    def draw_path(self, gc, path, transform, rgbFace=None) -> None:
        """A line, a spine, a grid line or the swatch of a legend."""
        name = self._gid() or ("l-grid" if gc.get_rgb()[:3] == self._grid else "l-axis")
        self._paths.setdefault(name, []).append(self._path_string(path, transform))

    def draw_markers(self, gc, marker_path_given, marker_trans, path, trans, rgbFace=None) -> None:
        """A tick, or the marker of a legend: ours by name, so that it is the shape that the data have."""
        places = trans.transform(path.vertices)
        name = self._gid()
        for x, y in places:
            if name and name.startswith("m-"):
                drawn = marker_path(name[2:], x, self.height - y)
            else:
                drawn = self._path_string(marker_path_given, marker_trans.frozen().translate(x, y))
            self._paths.setdefault(name or "l-axis", []).append(drawn)

    def draw_text(self, gc, x, y, s, prop, angle, ismath=False, mtext=None) -> None:
        """A label, anchored as the artist is, so that another font moves nothing out of place."""
        kind = {style.LABEL_SIZE: "la", style.NOTE_SIZE: "no"}.get(prop.get_size_in_points(), "")
        anchor = "mi" if angle else _ANCHORS[mtext.get_horizontalalignment()]
        along, across = mtext.get_transform().transform(mtext.get_unitless_position())
        # The baseline is where matplotlib puts it; along it, the artist's own point is the anchor.
        x, y = (x, self.height - across) if angle else (along, y)
        classes = " ".join(filter(None, (kind, anchor)))
        self._texts.append(text_element(x, y, s, classes, angle))

    def get_text_width_height_descent(self, s, prop, ismath):
        """Size of the text without its mark-up, by matplotlib's own font: wider than most, so that all fits."""
        return super().get_text_width_height_descent(visible(s) if ismath != "TeX" else s, prop, ismath)

    def _path_string(self, path: Path, transform) -> str:
        pieces = []
        unit = style.UNITS_PER_POINT
        for vertices, code in path.iter_segments(transform, simplify=False, curves=False):
            if code == Path.CLOSEPOLY:
                pieces.append("z")
                continue
            x, y = round(vertices[-2] * unit), round((self.height - vertices[-1]) * unit)
            pieces.append(f"{'M' if code == Path.MOVETO else 'L'}{x} {y}")
        return "".join(pieces)
