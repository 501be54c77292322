"""Fermi–Dirac integrals F_j(η) = (1/Γ(j+1)) ∫₀^∞ xʲ/(e^{x−η}+1) dx of order −1/2, 0, 1/2, 1, 3/2; inverses.

Three exact routes share the work. Up to η = 40 the integral over u = √x is that of an even function, analytic
in a strip about the real axis, for which the trapezoidal rule converges exponentially (L. N. Trefethen and
J. A. C. Weideman, SIAM Review 56, 385 (2014)). Beyond, Sommerfeld's asymptotic series ends below rounding.
The integer orders have closed forms.
"""

from __future__ import annotations

from fractions import Fraction
from functools import cache
from math import factorial, gamma, pi

import numpy as np

ORDERS = (-0.5, 0, 0.5, 1, 1.5)

# From here on the smallest term of the asymptotic series, about e^{−η}, is below rounding.
DEGENERATE = 40.0
_TERMS = 18
# The poles nearest to the real axis, √(η ± iπ), leave an error of e^{−2π·0.248/STEP} = 1e-17 at η = 40.
STEP = 0.04
_REACH = 6.6  # integrands are followed until e^{−43} of their size
_ROWS = 2048  # rows of the table of integrands held at once


def fermi_integral(order: float, eta: np.ndarray) -> np.ndarray:
    """Normalised integral of the given order, which tends to e^η for η → −∞; relative error about 1e-15.

    Order is one of −1/2, 0, 1/2, 1, 3/2, else ValueError. Normalisation of J. S. Blakemore, Solid-State
    Electronics 25, 1067 (1982).
    """
    eta = np.asarray(eta, float)
    if order == 0:
        return _zeroth_order(eta)
    if order == 1:
        return _first_order(eta)
    _check(order)
    return _by_range(eta, lambda low: _trapezoidal(order, low), lambda high: _degenerate(order, high))


def fermi_integral_slope(order: float, eta: np.ndarray) -> np.ndarray:
    """Derivative of the integral by η, which is the integral of order − 1; relative error about 1e-15."""
    eta = np.asarray(eta, float)
    if order == 0:
        return 1 / (1 + np.exp(-np.maximum(eta, -700.0)))
    if order == 1:
        return _zeroth_order(eta)
    _check(order)
    return _by_range(
        eta, lambda low: _trapezoidal(order, low, slope=True), lambda high: _degenerate(order - 1, high)
    )


def inverse_fermi_integral(order: float, value: np.ndarray) -> np.ndarray:
    """The η at which the integral of that order has the value; NaN unless the value is positive."""
    value = np.asarray(value, float)
    with np.errstate(invalid="ignore", divide="ignore"):
        value = np.where(value > 0, value, np.nan)
        if order == 0:
            return _inverse_zeroth_order(value)
        _check(order)
        target = np.log(value)
        power_law = (gamma(order + 2) * value) ** (1 / (order + 1))
        eta = np.where(value < 1, target, power_law)
    # ln F is concave in η, so Newton's steps from any start end in a monotone and quadratic approach.
    for _ in range(40):
        integral = fermi_integral(order, eta)
        step = (np.log(integral) - target) * integral / fermi_integral_slope(order, eta)
        eta = eta - step
        if not np.any(np.abs(step) > 1e-9 * np.maximum(np.abs(eta), 1e-3)):
            break
    return eta


def _inverse_zeroth_order(value: np.ndarray) -> np.ndarray:
    small = np.log(np.expm1(np.minimum(value, 1.0)))
    return np.where(value > 1, value + np.log1p(-np.exp(-value)), small)[()]


@cache
def sommerfeld_coefficients(order: float) -> tuple[Fraction, ...]:
    """Rational a_k of F_j(η) = η^{j+1}/Γ(j+2) · Σ a_k (π/η)^{2k}, a_0 = 1.

    A. Sommerfeld, Zeitschrift für Physik 47, 1 (1928): a_k π^{2k} = 2(1 − 2^{1−2k}) ζ(2k) (j+1)j…(j+2−2k).
    """
    coefficients = [Fraction(1)]
    top = Fraction(order) + 1
    falling = Fraction(1)
    for k in range(1, _TERMS + 1):
        falling *= (top - 2 * k + 2) * (top - 2 * k + 1)
        eta_value = (2 ** (2 * k) - 2) * abs(_bernoulli(2 * k)) / factorial(2 * k)
        coefficients.append(falling * eta_value)
    return tuple(coefficients)


def series(coefficients: tuple[Fraction, ...], square: np.ndarray) -> np.ndarray:
    """Σ c_k squareᵏ by Horner's rule."""
    total = np.zeros_like(square)
    for coefficient in reversed(coefficients):
        total = total * square + float(coefficient)
    return total


def trapezoidal_nodes(highest: float) -> np.ndarray:
    """Nodes u = √x from zero on that follow the integrands for every η up to highest."""
    reach = np.sqrt(max(highest, 0.0) + _REACH**2)
    return np.arange(0.0, reach, STEP)


def _check(order: float) -> None:
    if order not in ORDERS:
        raise ValueError(f"order {order} of a Fermi–Dirac integral; expected one of {ORDERS}")


@cache
def _bernoulli(index: int) -> Fraction:
    """Bernoulli number with that index, by the recurrence Σ C(m+1, k) B_k = 0."""
    if index == 0:
        return Fraction(1)
    binomial, total = Fraction(1), Fraction(0)
    for k in range(index):
        total += binomial * _bernoulli(k)
        binomial = binomial * (index + 1 - k) / (k + 1)
    return -total / (index + 1)


def _by_range(eta: np.ndarray, low, high) -> np.ndarray:
    """Each element by its route; NaN stays NaN."""
    result = np.full(eta.shape, np.nan)
    degenerate, ordinary = eta > DEGENERATE, eta <= DEGENERATE
    if degenerate.any():
        result[degenerate] = high(eta[degenerate])
    if ordinary.any():
        result[ordinary] = low(eta[ordinary])
    return result if result.ndim else result[()]


def _degenerate(order: float, eta: np.ndarray) -> np.ndarray:
    return eta ** (order + 1) / gamma(order + 2) * series(sommerfeld_coefficients(order), (pi / eta) ** 2)


def _trapezoidal(order: float, eta: np.ndarray, slope: bool = False) -> np.ndarray:
    nodes = trapezoidal_nodes(eta.max())
    weights = 2 * STEP * nodes ** int(2 * order + 1) / gamma(order + 1)
    weights[0] /= 2
    result = np.empty_like(eta)
    for start in range(0, eta.size, _ROWS):
        rows = slice(start, start + _ROWS)
        occupied, empty = occupations(nodes, eta[rows])
        result[rows] = (occupied * empty if slope else occupied) @ weights
    return result


def occupations(nodes: np.ndarray, eta: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Occupied and empty parts f and 1 − f, (..., nodes), each with its own relative accuracy."""
    exponent = np.clip(nodes**2 - eta[..., None], -700.0, 700.0)
    return 1 / (1 + np.exp(exponent)), 1 / (1 + np.exp(-exponent))


def _zeroth_order(eta: np.ndarray) -> np.ndarray:
    return np.maximum(eta, 0.0) + np.log1p(np.exp(-np.abs(eta)))


def _first_order(eta: np.ndarray) -> np.ndarray:
    """−Li₂(−e^η); the reflection formula carries η > 0 over to η < 0."""
    from scipy.special import spence  # here, because importing it costs more than most runs need

    mirrored = np.exp(-np.abs(eta))
    small = mirrored < 0.1
    powers = np.arange(1, 17)
    terms = np.where(small, mirrored, 0.0)[..., None] ** powers * (-1.0) ** (powers + 1) / powers**2
    reflected = np.where(small, terms.sum(axis=-1), -spence(1 + mirrored))
    return np.where(eta > 0, pi**2 / 6 + eta**2 / 2 - reflected, reflected)[()]
