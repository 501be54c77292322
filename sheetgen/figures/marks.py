"""The shapes of markers as SVG path strings, and error bars."""

from __future__ import annotations

from functools import lru_cache

from sheetgen.figures.style import MARKERS, RADIUS, UNITS_PER_POINT


@lru_cache(maxsize=64)
def _shape(look: str) -> tuple[float, float, str]:
    """Offset to the first point, and the rest relative to it, in user units."""
    shape, _, filled = MARKERS[look]
    r = RADIUS * UNITS_PER_POINT
    if shape == "circle" and filled:
        return 0, 0, "h0"  # a line without length under a round cap is a disc
    if shape == "circle":
        d = round(r)
        return -d, 0, f"a{d} {d} 0 1 0 {2 * d} 0a{d} {d} 0 1 0 {-2 * d} 0z"
    if shape == "square":
        d = round(0.88 * r)
        return -d, -d, f"h{2 * d}v{2 * d}h{-2 * d}z"
    if shape == "diamond":
        d = round(1.25 * r)
        return -d, 0, f"l{d} {-d} {d} {d} {-d} {d}z"
    if shape == "cross":
        d = round(0.95 * r)
        return -d, -d, f"l{2 * d} {2 * d}m0 {-2 * d}l{-2 * d} {2 * d}"
    d = round(1.2 * r)
    return -d, round(0.8 * d), f"h{2 * d}l{-d} {-round(1.8 * d)}z"


def marker_path(look: str, x: float, y: float) -> str:
    """A marker at a place in points from the top left corner."""
    dx, dy, rest = _shape(look)
    return f"M{round(x * UNITS_PER_POINT + dx)} {round(y * UNITS_PER_POINT + dy)}{rest}"


def bar_path(x0: float, y0: float, x1: float, y1: float, cap: float = 1.3) -> str:
    """An error bar from one place to another, upright or level, with caps."""
    x0, y0, x1, y1, cap = (round(v * UNITS_PER_POINT) for v in (x0, y0, x1, y1, cap))
    if x0 == x1:
        caps = "".join(f"M{x0 - cap} {y}h{2 * cap}" for y in (y0, y1))
        return f"M{x0} {y0}V{y1}{caps}"
    caps = "".join(f"M{x} {y0 - cap}v{2 * cap}" for x in (x0, x1))
    return f"M{x0} {y0}H{x1}{caps}"
