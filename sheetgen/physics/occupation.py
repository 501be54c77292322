"""How heat occupies the states: chemical potential and heat capacity of the Fermi gas at any temperature."""

from __future__ import annotations

from functools import cache
from math import pi, sqrt

import numpy as np

from sheetgen.physics.fermi_integrals import (
    DEGENERATE,
    fermi_integral,
    inverse_fermi_integral,
    occupations,
    series,
    sommerfeld_coefficients,
    trapezoidal_nodes,
)
from sheetgen.physics.phonon_integrals import scaled_transport_integral

__all__ = [
    "chemical_potential_ratio",
    "chemical_potential_ratio_2d",
    "chemical_potential_series",
    "fermi_integral",
    "heat_capacity_ratio",
    "heat_capacity_ratio_2d",
    "inverse_fermi_integral",
]

# Below this T/T_F the reduced potential µ/k_BT exceeds 40 and the asymptotic series holds to rounding.
_COLD = 1 / (DEGENERATE + 1)
# Above this T/T_F the contracted series of the chemical potential is no longer stated.
_SERIES_LIMIT = 0.3
_ROWS = 2048


def chemical_potential_ratio(t: np.ndarray) -> np.ndarray:
    """µ/E_F in three dimensions at t = T/T_F > 0 (1 at t = 0), from n = ∫ g(E) f(E) dE."""
    t = np.asarray(t, float)
    cold, warm = t <= _COLD, t > _COLD
    ratio = np.full(t.shape, np.nan)
    if cold.any():
        ratio[cold] = _cold_potential(t[cold])
    if warm.any():
        ratio[warm] = t[warm] * _reduced_potential(t[warm])
    return ratio[()]


def chemical_potential_ratio_2d(t: np.ndarray) -> np.ndarray:
    """µ/E_F in two dimensions, t ln(e^{1/t} − 1), without overflow at low and cancellation at high t."""
    with np.errstate(divide="ignore", invalid="ignore"):
        inverse = 1 / np.asarray(t, float)
        hot = t * np.log(np.expm1(np.minimum(inverse, 1.0)))
        cold = 1 + t * np.log1p(-np.exp(-inverse))
    return np.where(inverse > 1, cold, hot)[()]


def chemical_potential_series(t: np.ndarray) -> np.ndarray:
    """Leading terms 1 − (π²/12)t² − (π⁴/80)t⁴ of µ/E_F in three dimensions; NaN for t > 0.3."""
    square = np.asarray(t, float) ** 2
    bracket = 1 - pi**2 / 12 * square - pi**4 / 80 * square**2
    return np.where(np.asarray(t) <= _SERIES_LIMIT, bracket, np.nan)[()]


def heat_capacity_ratio(t: np.ndarray) -> np.ndarray:
    """C_V/nk_B in three dimensions at t = T/T_F: π²t/2 for small, 3/2 for large t.

    Equal to (15/4)F_{3/2}/F_{1/2} − (9/4)F_{1/2}/F_{−1/2}, whose two terms agree to t² of themselves. Here it
    is the variance of the energy about the Fermi surface, a sum of positive terms, and in the degenerate
    range the asymptotic series with that cancellation done in exact rational numbers.
    """
    t = np.asarray(t, float)
    cold, warm = t <= _COLD, t > _COLD
    ratio = np.full(t.shape, np.nan)
    if cold.any():
        ratio[cold] = _cold_heat(t[cold])
    if warm.any():
        ratio[warm] = _warm_heat(_reduced_potential(t[warm]))
    return ratio[()]


def heat_capacity_ratio_2d(t: np.ndarray) -> np.ndarray:
    """C_V/nk_B in two dimensions at t = T/T_F: π²t/3 for small, 1 for large t.

    U = ∫ E g f dE with a constant g and µ = k_BT ln(e^{1/t} − 1) gives C_V/nk_B = 2F_1/F_0 − F_0(1 + e^{−η}).
    Landen's identity for the dilogarithm in F_1 turns that into t ∫₀^{1/t} s² eˢ/(eˢ−1)² ds, where nothing
    cancels. (The Bose gas has the same heat capacity: R. M. May, Physical Review 135, A1515 (1964).)
    """
    with np.errstate(divide="ignore", invalid="ignore"):
        return scaled_transport_integral(2, 1 / np.asarray(t, float))


def _reduced_potential(t: np.ndarray) -> np.ndarray:
    """η = µ/k_BT in three dimensions."""
    return inverse_fermi_integral(0.5, 4 / (3 * sqrt(pi)) * t**-1.5)


def _cold_potential(t: np.ndarray) -> np.ndarray:
    """y = µ/E_F from y^{3/2} Σ a_k (πt/y)^{2k} = 1; each pass of the iteration gains a factor t²."""
    coefficients = sommerfeld_coefficients(0.5)
    ratio = np.ones_like(t)
    for _ in range(8):
        ratio = series(coefficients, (pi * t / ratio) ** 2) ** (-2 / 3)
    return ratio


@cache
def _heat_coefficients() -> tuple:
    """d_k of a^{3/2} a^{−1/2} − (a^{1/2})² = Σ d_k (π/η)^{2k}, without the vanishing d_0."""
    upper, middle, lower = (sommerfeld_coefficients(order) for order in (1.5, 0.5, -0.5))
    return tuple(
        sum(upper[i] * lower[k - i] - middle[i] * middle[k - i] for i in range(k + 1))
        for k in range(1, len(middle))
    )


def _cold_heat(t: np.ndarray) -> np.ndarray:
    reduced = t / _cold_potential(t)  # 1/η
    square = (pi * reduced) ** 2
    spread = series(_heat_coefficients(), square)
    middle, lower = (series(sommerfeld_coefficients(order), square) for order in (0.5, -0.5))
    return 1.5 * pi**2 * reduced * spread / (middle * lower)


def _warm_heat(eta: np.ndarray) -> np.ndarray:
    """Variance of x with weight √x f(1 − f), over the number ∫ √x f; the integrals are over u = √x."""
    nodes = trapezoidal_nodes(eta.max())
    states, energies = nodes**2, nodes**2
    result = np.empty_like(eta)
    for start in range(0, eta.size, _ROWS):
        rows = slice(start, start + _ROWS)
        occupied, empty = occupations(nodes, eta[rows])
        weight = occupied * empty * states
        mean = (weight @ energies) / weight.sum(axis=-1)
        result[rows] = (weight * (energies - mean[:, None]) ** 2).sum(axis=-1) / (occupied @ states)
    return result
