"""Thin films: subbands between two walls, and resistivity from surfaces and grain boundaries."""

from __future__ import annotations

from functools import cache
from math import pi

import numpy as np

from sheetgen.physics.quadrature import bracketed_root, unit_gauss_nodes

# Step of the trapezoidal rules. The integrands are analytic up to ±iπ/2: the error is e^{−π²/STEP} = 5e-12.
_STEP = 0.38
# Below this exponent z − (1 − e⁻ᶻ) is taken from its series, since the difference cancels.
_SMALL = 0.2
_ROWS = 64  # specimens whose double integrals are held in memory at once


def film_subbands(density: np.ndarray, thickness: np.ndarray, degeneracy: np.ndarray) -> np.ndarray:
    """Number of occupied subbands of a film with hard walls at the bulk density, as a float.

    A subband whose bottom just reaches the Fermi energy holds nobody and does not count.
    """
    return _subbands(_filling(np.asarray(density, float) * thickness, thickness, degeneracy))


def film_fermi_wavevector(density: np.ndarray, thickness: np.ndarray, degeneracy: np.ndarray) -> np.ndarray:
    """The k, in 1/m, at which a film holds the bulk density: nd = (g/4π) Σ (k² − (πj/d)²), j ≥ 1."""
    return _wavevector(np.asarray(density, float) * thickness, thickness, degeneracy)


def neutral_film_fermi_wavevector(
    density: np.ndarray, thickness: np.ndarray, degeneracy: np.ndarray
) -> np.ndarray:
    """The same with each wall moved out by 3π/8k_F, which keeps the surface neutral.

    The nd electrons per area stay; k_F is that of the bulk. J. Bardeen, Physical Review 49, 653 (1936).
    """
    density = np.asarray(density, float)
    bulk = np.cbrt(6 * pi**2 * density / degeneracy)
    return _wavevector(density * thickness, thickness + 3 * pi / (4 * bulk), degeneracy)


def surface_factor(kappa: np.ndarray, specularity: np.ndarray) -> np.ndarray:
    """ρ/ρ₀ of a film of thickness κ mean free paths, of which each surface reflects a part p specularly.

    The exact integral of K. Fuchs, Mathematical Proceedings of the Cambridge Philosophical Society 34, 100
    (1938), and E. H. Sondheimer, Advances in Physics 1, 1 (1952), written with a positive integrand so that
    thin films keep their relative accuracy.
    """
    kappa, specularity = np.broadcast_arrays(np.asarray(kappa, float), np.asarray(specularity, float))
    inverse_cosines, weights = polar_nodes()
    freedom = _freedom(kappa[..., None] * inverse_cosines, specularity[..., None])
    return 1 / (freedom @ weights)


def grain_factor(alpha: np.ndarray) -> np.ndarray:
    """ρ/ρ₀ of a bulk of grains, 1/f(α), f = 1 − 3α/2 + 3α² − 3α³ ln(1 + 1/α).

    A. F. Mayadas and M. Shatzkes, Physical Review B 1, 1382 (1970). For large α the closed form cancels;
    f = 3 ∫₀¹ w³/(w + α) dw does not.
    """
    alpha = np.asarray(alpha, float)
    nodes, weights = unit_gauss_nodes(24)
    integral = 3 * (nodes**3 / (nodes + np.maximum(alpha, 0.5)[..., None])) @ weights
    with np.errstate(divide="ignore", invalid="ignore"):
        logarithm = np.where(alpha > 0, np.log1p(1 / alpha), 0.0)
    closed = 1 - 1.5 * alpha + 3 * alpha**2 - 3 * alpha**3 * logarithm
    return 1 / np.where(alpha < 0.5, closed, integral)


def alpha(path: np.ndarray, grain_size: np.ndarray, reflection: np.ndarray) -> np.ndarray:
    """Strength of the grain boundaries, (l/D) R/(1 − R)."""
    return np.asarray(path, float) / grain_size * reflection / (1 - np.asarray(reflection, float))


def film_factor(kappa: np.ndarray, alpha: np.ndarray, specularity: np.ndarray) -> np.ndarray:
    """ρ/ρ₀ from surfaces and grain boundaries together: the double integral of Mayadas and Shatzkes (1970).

    With w the cosine to the current and u = √(1−w²) cos ψ the cosine to the normal, f(α) and the loss at the
    surfaces are one integral, (6/π) ∫dw ∫dψ w³/(w+α) (1 − loss), of a positive function. With w = tanh x and
    cos ψ = sech y the trapezoidal rule converges exponentially for it. Relative error below 1e-10.
    """
    arrays = np.broadcast_arrays(*(np.asarray(array, float) for array in (kappa, alpha, specularity)))
    flat = [array.ravel() for array in arrays]
    conductance = np.full(flat[0].size, np.nan)
    known = np.flatnonzero(~np.isnan(sum(flat)))  # most entries of a table of materials have no film
    for start in range(0, known.size, _ROWS):
        rows = known[start : start + _ROWS]
        conductance[rows] = _conductance(*(array[rows] for array in flat))
    return (1 / conductance).reshape(arrays[0].shape)[()]


def explained_ratios(kappa: np.ndarray, alpha: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """The least and the largest ρ/ρ₀ that a specularity can explain: mirror-like and diffuse surfaces."""
    return film_factor(kappa, alpha, 1.0), film_factor(kappa, alpha, 0.0)


def explaining_specularity(ratio: np.ndarray, kappa: np.ndarray, alpha: np.ndarray) -> np.ndarray:
    """The specularity 0 ≤ p ≤ 1 at which film_factor equals the measured ratio; NaN where none does.

    Which of the two bounds a ratio misses, explained_ratios tells.
    """
    ratio, kappa, alpha = np.broadcast_arrays(*(np.asarray(a, float) for a in (ratio, kappa, alpha)))
    flat = [array.ravel() for array in (ratio, kappa, alpha)]

    def excess(diffuseness: np.ndarray, where: np.ndarray) -> np.ndarray:
        measured, thickness, grains = (array[where] for array in flat)
        return film_factor(thickness, grains, (1 - diffuseness) / (1 + diffuseness)) / measured - 1

    # In q = (1 − p)/(1 + p) the resistivity of a thin film is nearly straight.
    diffuseness = bracketed_root(excess, np.zeros(ratio.size), np.ones(ratio.size))
    return ((1 - diffuseness) / (1 + diffuseness)).reshape(ratio.shape)[()]


def explaining_grain_reflection(
    ratio: np.ndarray, kappa: np.ndarray, grain_ratio: np.ndarray, specularity: np.ndarray
) -> np.ndarray:
    """The grain reflection 0 ≤ R < 1 at which film_factor equals the measured ratio; NaN where none does.

    grain_ratio is l/D. Every ratio from surface_factor(κ, p) upwards is explained by some R.
    """
    arrays = np.broadcast_arrays(*(np.asarray(a, float) for a in (ratio, kappa, grain_ratio, specularity)))
    measured, thickness, grains, surfaces = (array.ravel() for array in arrays)

    def excess(strength: np.ndarray, where: np.ndarray) -> np.ndarray:
        return film_factor(thickness[where], strength, surfaces[where]) / measured[where] - 1

    # f(α) < 3/4α, so grains alone reach the measured ratio before α = 3/4 of it.
    strength = bracketed_root(excess, np.zeros(measured.size), 0.75 * measured)
    return (strength / (strength + grains)).reshape(arrays[0].shape)[()]


def _filling(areal_density: np.ndarray, width: np.ndarray, degeneracy: np.ndarray) -> np.ndarray:
    """Σ (q² − j²) over the occupied subbands, for k = πq/width."""
    return 4 * pi * np.asarray(areal_density, float) / degeneracy * (np.asarray(width, float) / pi) ** 2


def _subbands(filling: np.ndarray) -> np.ndarray:
    """Largest s whose bottom, q = s, is reached: s(s−1)(4s+1)/6 < filling."""
    estimate = np.floor(np.cbrt(1.5 * filling) + 0.25)
    candidates = np.maximum(np.asarray(estimate)[..., None] + np.arange(-2, 3), 1.0)
    bottoms = candidates * (candidates - 1) * (4 * candidates + 1) / 6
    occupied = np.where(bottoms < np.asarray(filling)[..., None], candidates, 0.0).max(axis=-1)
    return np.where(filling > 0, occupied, np.where(np.isnan(filling), np.nan, 0.0))[()]


def _wavevector(areal_density: np.ndarray, width: np.ndarray, degeneracy: np.ndarray) -> np.ndarray:
    """k of the Fermi discs from the filling: q² = (filling + Σ j²)/s."""
    filling = _filling(areal_density, width, degeneracy)
    subbands = np.maximum(_subbands(filling), 1.0)
    square = filling / subbands + (subbands + 1) * (2 * subbands + 1) / 6
    return pi / np.asarray(width, float) * np.sqrt(square)


def _freedom(exponent: np.ndarray, specularity: np.ndarray) -> np.ndarray:
    """1 − (1−p)(1−e⁻ᶻ)/(z(1−p e⁻ᶻ)): what surfaces leave of the mean free path, z path lengths apart."""
    exponent = np.minimum(exponent, 1e100)
    scattered = 1 - np.exp(-exponent)
    difference = 1 - scattered / exponent
    small = exponent < _SMALL
    few = exponent[small]
    difference[small] = exact = _small_difference(few)
    scattered[small] = few * (1 - exact)
    diffuse = 1 - specularity
    return (diffuse * difference + specularity * scattered) / (diffuse + specularity * scattered)


def _small_difference(exponent: np.ndarray) -> np.ndarray:
    """1 − (1−e⁻ᶻ)/z = z/2! − z²/3! + … by Horner's rule."""
    total = np.zeros_like(exponent)
    for order in range(12, 1, -1):
        total = (1 - total) * exponent / order
    return total


@cache
def polar_nodes() -> tuple[np.ndarray, np.ndarray]:
    """What surface_factor sums over: 1/u and weights of (3/2) ∫₀¹ (1 − u²) … du, trapezoidal in s, u = 1/(1 + e⁻ˢ)."""
    s = np.arange(-32.0, 14.0, _STEP)
    cosine = 1 / (1 + np.exp(-s))
    rest = 1 / (1 + np.exp(s))
    weights = 1.5 * _STEP * rest * (1 + cosine) * cosine * rest
    weights[0] *= _tail(1)
    return 1 + np.exp(-s), weights


@cache
def film_nodes() -> tuple[np.ndarray, np.ndarray, np.ndarray, np.ndarray, np.ndarray]:
    """What film_factor sums over: w, 1/√(1−w²), weights in s, x = ln(1 + eˢ), w = tanh x; cosh y, weights in y."""
    s = np.arange(-9.0, 12.5, _STEP)
    growth = 1 + np.exp(s)
    inverse_sine = (growth + 1 / growth) / 2
    cosine = np.exp(s) * (growth + 1) / (growth**2 + 1)
    outer = _STEP / (1 + np.exp(-s)) / inverse_sine**2
    outer[-1] *= _tail(2)
    y = np.arange(0.0, 18.5, _STEP)
    inner = _STEP / np.cosh(y)
    inner[0] /= 2
    inner[-1] *= _tail(1)
    return cosine, inverse_sine, outer, np.cosh(y), inner


def _tail(rate: int) -> float:
    """Sum of the nodes from the last one on, over it: out there only the weight e^{−rate·s} still changes."""
    return 1 / -np.expm1(-rate * _STEP)


def _conductance(kappa: np.ndarray, alpha: np.ndarray, specularity: np.ndarray) -> np.ndarray:
    """ρ₀/ρ of specimens (N,)."""
    cosine, inverse_sine, outer, inverse_azimuth, inner = film_nodes()
    slowing = 1 + alpha[:, None] / cosine
    exponent = (kappa[:, None] * slowing * inverse_sine)[..., None] * inverse_azimuth
    freedom = _freedom(exponent, specularity[:, None, None]) @ inner
    return 6 / pi * (freedom * outer * cosine**2 / slowing).sum(axis=-1)
