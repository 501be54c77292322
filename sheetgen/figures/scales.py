"""From values on an axis to places on paper and back, and the ranges that axes may have."""

from __future__ import annotations

import math

import numpy as np

from sheetgen.figures.plot import Axis

# Few steps, so that figures of many materials share their axes.
STEPS = (1.0, 2.0, 5.0, 10.0)


def place(axis: Axis, values, start: float, length: float) -> np.ndarray:
    """Distance along the paper in points; on a log axis what is not positive has no place (NaN)."""
    values = np.asarray(values, dtype=float)
    if axis.scale == "linear":
        return start + (values - axis.low) * (length / (axis.high - axis.low))
    positive = values > 0
    values = np.log(values) if positive.all() else np.log(np.where(positive, values, np.nan))
    low = math.log(axis.low)
    return start + (values - low) * (length / (math.log(axis.high) - low))


def place_one(axis: Axis, number: float, start: float, length: float) -> float:
    """`place` of a single number, without the cost of an array."""
    if axis.scale == "linear":
        return start + (number - axis.low) * (length / (axis.high - axis.low))
    return start + math.log(number / axis.low) * (length / math.log(axis.high / axis.low))


def value(axis: Axis, places: np.ndarray, start: float, length: float) -> np.ndarray:
    """The inverse of `place`."""
    share = (places - start) / length
    if axis.scale == "linear":
        return axis.low + share * (axis.high - axis.low)
    return axis.low * np.exp(share * math.log(axis.high / axis.low))


def snap_up(largest: float, steps: tuple[float, ...] = STEPS) -> float:
    """The smallest of 1, 2, 5 times a power of ten (or other steps) that is not below the value."""
    if not (largest > 0 and math.isfinite(largest)):
        raise ValueError(f"an axis cannot end at {largest}; expected a positive finite number")
    power = 10.0 ** math.floor(math.log10(largest))
    ends = (step * power for step in (*steps, 10 * steps[0]) if step * power >= largest * (1 - 1e-9))
    return float(f"{next(ends):.12g}")


FINE_STEPS = (1.0, 1.5, 2.0, 3.0, 4.0, 5.0, 6.0, 8.0, 10.0)


def decades(values, least: int = 1, every: int = 1) -> tuple[float, float]:
    """Powers of ten around all positive finite values, at least `least` decades, ends at multiples of `every`."""
    values = np.asarray(values, dtype=float)
    exponents = np.log10(values[np.isfinite(values) & (values > 0)])
    low = math.floor(exponents.min() / every + 1e-9) * every
    high = math.ceil(exponents.max() / every - 1e-9) * every
    while high - low < least:
        low, high = (
            low - every * (high - exponents.max() > exponents.min() - low),
            high + every * (high - exponents.max() <= exponents.min() - low),
        )
    return 10.0**low, 10.0**high


def spread(values) -> tuple[float, float]:
    """Round ends of a logarithmic axis with some room around all values."""
    values = np.asarray(values, dtype=float)
    # 1/x turns "round up" into "round down" on the same steps.
    return 1 / snap_up(1.25 / values.min(), FINE_STEPS), snap_up(1.25 * values.max(), FINE_STEPS)


_SUPERSCRIPTS = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")


def power_label(number: float) -> str:
    """A tick on a log axis: plain between 0.01 and 1000, else a power of ten."""
    exponent = round(math.log10(number))
    if -2 <= exponent <= 3:
        return f"{number:g}"
    mantissa = number / 10.0**exponent
    times = "" if abs(mantissa - 1) < 1e-9 else f"{mantissa:g}·"
    return f"{times}10{str(exponent).translate(_SUPERSCRIPTS)}"


def number_label(number: float) -> str:
    """A tick on a linear axis, with a true minus sign."""
    if abs(number) < 1e-15:
        return "0"
    if 1e-3 <= abs(number) < 1e5:
        return f"{number:.6g}".replace("-", "−")
    mantissa, _, power = f"{number:.3e}".partition("e")
    return f"{float(mantissa):g}·10{str(int(power)).translate(_SUPERSCRIPTS)}".replace("-", "−")
