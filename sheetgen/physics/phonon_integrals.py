"""The two families of integrals over a Debye spectrum, written so that no factor cancels or overflows."""

from __future__ import annotations

import numpy as np

from sheetgen.physics.quadrature import unit_gauss_nodes

# Beyond this upper limit the integrands add less than rounding: 60⁵ e⁻⁶⁰ is 1e-17.
_LAST = 60.0
# The integrands are analytic up to their poles at ±2πi, which fixes the error of this rule: below 1e-16.
_NODES = 64


def scaled_transport_integral(order: int, x: np.ndarray) -> np.ndarray:
    """x^{1−n} ∫₀ˣ sⁿ eˢ/(eˢ−1)² ds for n = order ≥ 2 and x ≥ 0, infinity included; 1/(n−1) at x = 0.

    Its integrand is positive and its limits are finite, so it is exact to rounding from x = 0 to infinity.
    """
    return _scaled_integral(x, lambda s: (_half_over_sinh(s / 2)) ** 2, order - 2)


def scaled_bose_integral(order: int, x: np.ndarray) -> np.ndarray:
    """x^{−n} ∫₀ˣ sⁿ/(eˢ−1) ds for n = order ≥ 1 and x ≥ 0, infinity included; 1/n at x = 0."""
    return _scaled_integral(x, lambda s: s / np.expm1(s), order - 1)


def _half_over_sinh(half: np.ndarray) -> np.ndarray:
    return half / np.sinh(half)


def _scaled_integral(x: np.ndarray, shape, power: int) -> np.ndarray:
    """∫₀¹ v^power shape(xv) dv, with the part beyond xv = 60 left out."""
    nodes, weights = unit_gauss_nodes(_NODES)
    x = np.asarray(x, float)
    end = np.minimum(x, _LAST)
    # Both shapes are 1 at zero to rounding well before the smallest normal number.
    values = shape(np.maximum(end[..., None] * nodes, 1e-150))
    with np.errstate(invalid="ignore", divide="ignore"):
        kept = np.where(x > _LAST, _LAST / x, 1.0) ** (power + 1)
    return kept * (values @ (weights * nodes**power))
