"""Standard uncertainties: first-order propagation with a budget, and draws to check it.

JCGM 100:2008 (GUM), 5.1, for independent inputs; JCGM 101:2008 for the draws. An input that enters a quantity
along several paths counts once, since each input is moved in all of them together.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass, field

import numpy as np

from sheetgen.quantities import Definition
from sheetgen.quantities.batch import Batch
from sheetgen.quantities.evaluate import evaluate
from sheetgen.quantities.registry import Plan

STEP = 1e-4  # relative; the error of a central difference is then near 1e-8 of the derivative
FLAT = 1e-12  # relative change that is rounding: the paths of an input cancel


@dataclass(frozen=True)
class Number:
    """One value in SI with its standard uncertainty and budget; both absent where no input has one."""

    value: float
    standard_uncertainty: float | None = None
    budget: dict[str, float] = field(default_factory=dict)


@dataclass(frozen=True)
class Derived:
    """All values of a batch in SI, shape (rows, entries, …), and what each input's uncertainty adds to them.

    `contributions[id]` maps (input name, entry) to ∂f/∂x · u(x), shape (rows, entries).
    """

    batch: Batch
    plan: Plan
    values: dict[str, np.ndarray]
    contributions: dict[str, dict[tuple[str, int], np.ndarray]]

    def number(self, id: str, row: int, entry: int = 0) -> Number | None:
        """Value, uncertainty and budget of one entry, or None where it is absent."""
        value = self.value(id, row, entry)
        if value is None:
            return None
        parts: dict[str, float] = {}
        for (name, k), contribution in self.contributions.get(id, {}).items():
            part = float(contribution[row, entry if contribution.shape[1] > entry else 0])
            if part != 0:
                input_id = self.batch.ids[name][row][k]
                # Two paths of one input add as they are, before squaring.
                parts[input_id] = parts.get(input_id, 0.0) + part
        # fsum: the built-in sum adds floats in another way from Python 3.12 on, and every version gives the same bytes.
        variance = math.fsum(part**2 for part in parts.values())
        if variance <= 0:
            return Number(value)
        shares = {input_id: part**2 / variance for input_id, part in parts.items()}
        largest_first = sorted(shares.items(), key=lambda item: (-item[1], item[0]))
        return Number(value, float(variance**0.5), dict(largest_first))

    def value(self, id: str, row: int, entry: int = 0) -> float | None:
        """One entry in SI, or None where it is absent."""
        values = self.values.get(id)
        if values is None or entry >= values.shape[1]:
            return None
        value = float(values[row, entry])
        return value if np.isfinite(value) else None

    def entries(self, id: str) -> int:
        """How many entries the quantity has at most."""
        return self.values[id].shape[1] if id in self.values else 0


def propagate(plan: Plan, batch: Batch) -> Derived:
    """Evaluate a plan and its first-order uncertainties for every row at once."""
    nominal = evaluate(plan, batch.values)
    contributions: dict[str, dict[tuple[str, int], np.ndarray]] = {}
    for name, k in batch.uncertain:
        for id, contribution in _contributions(plan, batch, nominal, name, k):
            contributions.setdefault(id, {})[name, k] = contribution
    flat = {id: np.broadcast_to(value, (1, len(batch.records), *value.shape[2:]))[0] for id, value in nominal.items()}
    return Derived(batch, plan, flat, contributions)


def _contributions(plan: Plan, batch: Batch, nominal, name: str, k: int) -> Iterable[tuple[str, np.ndarray]]:
    """∂f/∂x · u(x) for one input, by central differences through the quantities' own functions.

    A kinked quantity has a slope that says nothing over the width of u(x): it takes the difference of the values at
    x ± u(x) in the derivative's place (GUM 5.1.3, note 2).
    """
    uncertainty = batch.uncertainties[name][:, k]
    here = batch.values[name][0, :, k]
    small = np.where(here == 0, uncertainty / 100, np.abs(here) * STEP)
    for kinked, size in ((False, small), (True, uncertainty)):
        step = np.where(uncertainty > 0, size, 0.0)
        wanted = [id for id in plan.readers.get(name, ()) if _propagates(plan.definitions[id], nominal[id], kinked)]
        if wanted:
            moved = np.repeat(batch.values[name], 2, axis=0)
            moved[0, :, k] += step
            moved[1, :, k] -= step
            reached = plan.readers[name] & plan.needed_for(wanted)
            shifted = evaluate(plan, {**nominal, name: moved}, only=reached)
            for id in wanted:
                slope = _slope(nominal[id][0], shifted[id], step[:, np.newaxis])
                yield id, slope * uncertainty[:, np.newaxis]


def _propagates(definition: Definition, value: np.ndarray, kinked: bool) -> bool:
    number = definition.form == "number" and value.ndim == 3
    return number and definition.carries_uncertainty and definition.kinked == kinked


def _slope(middle: np.ndarray, shifted: np.ndarray, step: np.ndarray) -> np.ndarray:
    """Derivative from the values one step up and one step down; one-sided where only one of them exists."""
    up, down = np.broadcast_to(shifted, (2, *shifted.shape[1:]))
    with np.errstate(all="ignore"):
        central = (up - down) / (2 * step)
        one_sided = np.where(np.isnan(up), (middle - down) / step, (up - middle) / step)
        slope = np.where(np.isnan(central), one_sided, central)
        unmoved = (step == 0) | ~np.isfinite(slope) | (np.abs(slope) * step <= FLAT * np.abs(middle))
    return np.where(unmoved, 0.0, slope)
