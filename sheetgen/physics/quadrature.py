"""Fixed quadrature nodes and a bracketing root finder, both for whole arrays at once."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache

import numpy as np

# A bracket this narrow, in parts of the root, ends the search; its better end is far nearer, since the last
# steps converge faster than the bracket does.
_TOLERANCE = 1e-13


@cache
def unit_gauss_nodes(count: int) -> tuple[np.ndarray, np.ndarray]:
    """Gauss–Legendre nodes and weights on 0 … 1."""
    nodes, weights = np.polynomial.legendre.leggauss(count)
    return (nodes + 1) / 2, weights / 2


def bracketed_root(
    function: Callable[[np.ndarray, np.ndarray], np.ndarray],
    low: np.ndarray,
    high: np.ndarray,
    steps: int = 100,
) -> np.ndarray:
    """Roots of function(x, where) between low and high, to rounding; `where` indexes the unfinished elements.

    Each bracket must enclose a change of sign; elements whose ends have the same sign, or NaN, give NaN.
    Inverse quadratic steps with bisection as the safeguard: T. R. Chandrupatla, Advances in Engineering
    Software 28, 145 (1997).
    """
    low, high = (np.array(end, float) for end in np.broadcast_arrays(low, high))
    shape = low.shape
    newest, opposite = low.ravel(), high.ravel()
    every = np.arange(newest.size)
    at_newest, at_opposite = function(newest, every), function(opposite, every)
    root = np.where(at_newest == 0, newest, np.where(at_opposite == 0, opposite, np.nan))
    open_ = np.flatnonzero(at_newest * at_opposite < 0)
    newest, opposite, at_newest, at_opposite = (a[open_] for a in (newest, opposite, at_newest, at_opposite))
    part = np.clip(
        at_newest / (at_newest - at_opposite), 0.05, 0.95
    )  # most functions here are nearly straight
    for _ in range(steps):
        if not open_.size:
            break
        trial = newest + part * (opposite - newest)
        at_trial = function(trial, open_)
        same = np.sign(at_trial) == np.sign(at_newest)
        older, at_older = np.where(same, newest, opposite), np.where(same, at_newest, at_opposite)
        opposite, at_opposite = np.where(same, opposite, newest), np.where(same, at_opposite, at_newest)
        newest, at_newest = trial, at_trial
        best = np.where(np.abs(at_newest) < np.abs(at_opposite), newest, opposite)
        width = _TOLERANCE * np.abs(best) / np.maximum(np.abs(opposite - newest), 1e-300)
        done = (width > 0.5) | (at_newest == 0)
        root[open_] = np.where(at_newest == 0, newest, best)
        part = _next_part(newest, opposite, older, at_newest, at_opposite, at_older)
        part = np.clip(part, np.minimum(width, 0.5), 1 - np.minimum(width, 0.5))
        keep = ~done
        open_, part = open_[keep], part[keep]
        newest, opposite = newest[keep], opposite[keep]
        at_newest, at_opposite = at_newest[keep], at_opposite[keep]
    return root.reshape(shape)


def _next_part(newest, opposite, older, at_newest, at_opposite, at_older):
    """The part of the bracket to step by: inverse quadratic where it is safe, half elsewhere."""
    with np.errstate(all="ignore"):
        position = (newest - opposite) / (older - opposite)
        height = (at_newest - at_opposite) / (at_older - at_opposite)
        safe = (height**2 < position) & ((1 - height) ** 2 < 1 - position)
        first = at_newest / (at_opposite - at_newest) * at_older / (at_opposite - at_older)
        second = (older - newest) / (opposite - newest)
        second = second * at_newest / (at_older - at_newest) * at_opposite / (at_older - at_opposite)
        return np.where(safe, first + second, 0.5)
