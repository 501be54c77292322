"""Evaluation of a plan: every definition in turn, over all rows of a batch at once."""

from __future__ import annotations

import re
import traceback
from collections.abc import Collection, Mapping

import numpy as np

from sheetgen.faults import Fault, FaultsError, Place
from sheetgen.quantities.declaration import Assumption, Definition
from sheetgen.quantities.registry import Plan

# What NumPy says of a function that is not written for whole arrays, and how to write it.
_MENDS = (
    ("truth value", "take np.where(condition, …, …) instead of if, for a whole array at once"),
    ("can be converted to Python scalars", "take NumPy's function, such as np.sqrt, instead of one of math"),
    ("must be real number", "take NumPy's function, such as np.sqrt, instead of one of math"),
    ("read-only", "make a new array instead of changing the one that was given"),
    ("expected (draws", "keep to NumPy operations on whole arrays, which keep their shape"),
)
_DEFAULT_MEND = "mend this line; the arguments are arrays of the shape (draws, materials, entries)"


def evaluate(plan: Plan, given: Mapping[str, np.ndarray], only: Collection[str] | None = None) -> dict[str, np.ndarray]:
    """Values of the definitions of a plan, beside what was given.

    `given` holds SI arrays of shape (draws, rows, entries). With `only`, just those ids are computed, and the
    others that they read must be among the given ones. What cannot be computed, infinities included, is NaN.
    Raises FaultsError naming the declaration where a function fails or returns another shape.
    """
    values = dict(given)
    for id, definition in plan.definitions.items():
        if only is None or id in only:
            values[id] = _apply(definition, values)
    return values


def indicator(assumption: Assumption, values: Mapping[str, np.ndarray]) -> np.ndarray:
    """The indicator of an assumption, shape (draws, rows, entries), NaN where it cannot be formed."""
    return _call(assumption, values)


def _apply(definition: Definition, values: Mapping[str, np.ndarray]) -> np.ndarray:
    result = _call(definition, values)
    for name in definition.needs:
        needed = values[name]
        result = np.where(np.isnan(needed) if needed.ndim == result.ndim else False, np.nan, result)
    return result


def _call(declared: Definition | Assumption, values: Mapping[str, np.ndarray]) -> np.ndarray:
    arguments = [values[name] for name in declared.parameters]
    try:
        # Absent inputs are NaN on purpose, and what overflows is absent: neither deserves a warning.
        with np.errstate(all="ignore"):
            result = np.asarray(declared.function(*arguments), dtype=float)
    except Exception as error:
        raise _failure(declared, f"{type(error).__name__}: {error}", error) from error
    rows = max((np.shape(argument)[1] for argument in arguments), default=1)
    if result.ndim < 3 or result.shape[1] != rows:
        raise _failure(declared, f"it returned the shape {result.shape}, expected (draws, {rows}, entries)")
    return np.where(np.isfinite(result), result, np.nan)


def _failure(declared: Definition | Assumption, what: str, error: Exception | None = None) -> FaultsError:
    """The line of the declaring file where it happened, what did, and how to mend it."""
    frames = traceback.extract_tb(error.__traceback__) if error else []
    lines = [frame.lineno for frame in frames if frame.filename == declared.place.file]
    place = Place(declared.place.file, (lines[-1] if lines else None) or declared.place.line)
    said = re.sub(r"\s+", " ", what).rstrip(".")
    mend = next((mend for part, mend in _MENDS if part in said), _DEFAULT_MEND)
    return FaultsError([Fault(place, f"{declared.function.__name__}() cannot be evaluated: {said}; {mend}.")])
