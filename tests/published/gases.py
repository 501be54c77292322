"""One quantity of one electron gas, for checks against printed tables: no record, only the inputs of a formula."""

from __future__ import annotations

from decimal import Decimal

import numpy as np

from sheetgen.quantities import registry
from sheetgen.quantities.evaluate import evaluate

EXACT = {"effective_mass_ratio": 1.0, "valleys": 1.0, "background_permittivity": 1.0, "charge_sign": -1.0}


def of_gas(id: str, dimension: int = 3, **inputs: float) -> float:
    """The quantity in SI from inputs in SI, named as quantities name them: `carrier_density`, `measured_resistivity` …

    A quantity may be given in place of what it is computed from. What is not given is the bare electron's.
    """
    plan = registry().plans["material", dimension]
    given = {name: np.array([[[value]]], dtype=float) for name, value in {**EXACT, **inputs}.items()}
    missing = registry().inputs - given.keys()
    given |= {name: np.full((1, 1, 1), np.nan) for name in missing}
    wanted = plan.needed_for([id]) - inputs.keys()
    return float(evaluate(plan, given, only=wanted)[id].item())


def half_unit(text: str) -> float:
    """Half a unit in the last printed digit, relative to the printed number: what rounding can hide in an input."""
    number = Decimal(text)
    return float(Decimal(5).scaleb(int(number.as_tuple().exponent) - 1) / abs(number))
