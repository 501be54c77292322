"""Curves reduced to what the eye resolves: clipping at the panel, and decimation within a stated distance."""

from __future__ import annotations

import numpy as np

TOLERANCE = 0.05  # points on paper


def clip(x: np.ndarray, y: np.ndarray, low: float, high: float) -> tuple[np.ndarray, np.ndarray]:
    """The polyline within low ≤ y ≤ high: points are added where it crosses a bound, and NaN breaks it outside."""
    for bound, beyond in ((low, np.less), (high, np.greater)):
        outside = beyond(y, bound)
        if not outside.any():
            continue
        crossing = np.flatnonzero(outside[1:] != outside[:-1])
        crossing = crossing[np.isfinite(y[crossing]) & np.isfinite(y[crossing + 1])]
        share = (bound - y[crossing]) / (y[crossing + 1] - y[crossing])
        met = x[crossing] + share * (x[crossing + 1] - x[crossing])
        y = np.where(outside, np.nan, y)
        parts = [0, *(crossing + 1).tolist(), len(x)]
        x = _joined(x, parts, met)
        y = _joined(y, parts, np.full(len(met), bound))
    return x, y


def _joined(values: np.ndarray, parts: list[int], between: np.ndarray) -> np.ndarray:
    """The parts of an array with one value more between each two; np.insert takes three times as long."""
    pieces = [values[: parts[1]]]
    for index, (start, end) in enumerate(zip(parts[1:], parts[2:], strict=False)):
        pieces += [between[index : index + 1], values[start:end]]
    return np.concatenate(pieces)


def runs(x: np.ndarray, y: np.ndarray) -> list[tuple[np.ndarray, np.ndarray]]:
    """The unbroken pieces, of two points or more, between NaNs."""
    good = np.isfinite(x) & np.isfinite(y)
    if good.all():
        return [(x, y)] if len(x) > 1 else []
    edges = np.flatnonzero(np.diff(np.concatenate(([False], good, [False]))))
    return [(x[a:b], y[a:b]) for a, b in zip(edges[::2], edges[1::2], strict=True) if b - a > 1]


def thin(x: np.ndarray, y: np.ndarray, starts: np.ndarray, tolerance: float = TOLERANCE) -> np.ndarray:
    """Which points to keep so that no dropped one lies further than the tolerance from its chord.

    Several polylines are worked on at once, each beginning at an index of `starts`. A first guess spaces points by
    curvature (a chord over an arc of length s with curvature c is off by c·s²/8); then every chord that is still
    too far off is split at its worst point (Ramer 1972, Douglas and Peucker 1973) until none is.
    """
    keep = np.zeros(len(x), dtype=bool)
    keep[starts] = True
    keep[starts[1:] - 1] = True
    keep[-1] = True
    _guess(x, y, keep, tolerance)
    while True:
        anchors = np.flatnonzero(keep)
        chord = np.repeat(np.arange(len(anchors) - 1), np.diff(anchors))
        left, right = anchors[chord], anchors[chord + 1]
        across, up = x[right] - x[left], y[right] - y[left]
        from_x, from_y = x[:-1] - x[left], y[:-1] - y[left]
        length = np.sqrt(across * across + up * up)
        # A closed outline begins as a chord without length: there the distance to its end counts.
        apart = np.where(length > 0, np.abs(across * from_y - up * from_x), np.sqrt(from_x**2 + from_y**2))
        apart /= np.where(length > 0, length, 1.0)
        worst = np.maximum.reduceat(apart, anchors[:-1])
        too_far = worst > tolerance
        if not too_far.any():
            return keep
        keep[:-1] |= too_far[chord] & (apart == worst[chord])


def _guess(x: np.ndarray, y: np.ndarray, keep: np.ndarray, tolerance: float) -> None:
    across, up = np.diff(x), np.diff(y)
    step = np.sqrt(across * across + up * up)
    turn = np.abs(across[:-1] * up[1:] - up[:-1] * across[1:])
    with np.errstate(divide="ignore", invalid="ignore"):
        curvature = 2 * turn / (step[:-1] * step[1:] * (step[:-1] + step[1:]))
    curvature[~np.isfinite(curvature)] = 0.0
    chords = np.sqrt(curvature / (8 * 0.7 * tolerance)) * (step[:-1] + step[1:]) / 2
    counted = np.floor(np.cumsum(chords))
    keep[2:-1] |= counted[1:] > counted[:-1]
