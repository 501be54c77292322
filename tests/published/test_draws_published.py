"""Worked examples of JCGM 101:2008 through the same draws as the numbers of a sheet.

The numbers are quoted from memory of the supplement's tables 2 and 6. Rectangular inputs of the examples are drawn
here from normal distributions of the same standard deviation, which leaves the standard deviation of the result as
it is to the digits that are compared, since only second moments enter it.
"""

import math
from types import SimpleNamespace

import numpy as np
import pytest
from support.printed import printed

from sheetgen.draws import INVALID, VALID, Interval, draw_intervals
from sheetgen.quantities.batch import Batch
from sheetgen.quantities.declaration import Declarations
from sheetgen.quantities.registry import Registry
from sheetgen.uncertainty import propagate


def drawn(model, draws: int = 2**20, **inputs: tuple[float, float]) -> Interval:
    """The interval of a model of inputs (estimate, standard uncertainty)."""
    declared = Declarations()
    declared.quantity(symbol="y", unit="1", formula="y", source="", section="Crystal", id="result")(model)
    batch = Batch(
        records=(SimpleNamespace(slug="example"),),
        specimens=(None,),
        values={name: np.full((1, 1, 1), float(estimate)) for name, (estimate, _) in inputs.items()},
        uncertainties={name: np.full((1, 1), float(u)) for name, (_, u) in inputs.items()},
        ids={name: [[name]] for name in inputs},
    )
    plan = Registry([declared], inputs).plans["material", 3]
    return draw_intervals(propagate(plan, batch), 0, draws, seed=1)["result"][0]


# JCGM 101:2008, 9.2.2 and table 2: the sum of four standard normal inputs, u = 2.00, interval [−3.92, 3.92], valid.
def test_additive_model_of_jcgm_101_9_2():
    def total(first, second, third, fourth):
        """Sum of four inputs"""
        return first + second + third + fourth

    interval = drawn(total, first=(0, 1), second=(0, 1), third=(0, 1), fourth=(0, 1))
    assert interval.standard_deviation == printed("2.00")
    assert interval.low == printed("-3.92")
    assert interval.high == printed("3.92")
    assert interval.first_order == VALID


# JCGM 101:2008, 9.2.4: the same with one input of u = 10, which decides: u = 10.1.
def test_one_input_that_decides_of_jcgm_101_9_2_4():
    def total(first, second, third, fourth):
        """Sum of four inputs"""
        return first + second + third + fourth

    assert drawn(total, first=(0, 1), second=(0, 1), third=(0, 1), fourth=(0, 10)).standard_deviation == printed("10.1")


# JCGM 101:2008, 9.3.2 and table 6: first order gives u = 0.0539 mg, the draws 0.0754 mg: not valid.
def test_mass_calibration_of_jcgm_101_9_3():
    def deviation(reference, added, air, weight, standard):
        """Deviation from the nominal mass"""
        return (reference + added) * (1 + (air - 1.2) * (1 / weight - 1 / standard)) - 100000

    interval = drawn(
        deviation,
        reference=(100000.000, 0.050),
        added=(1.234, 0.020),
        air=(1.20, 0.10 / math.sqrt(3)),
        weight=(8000.0, 1000 / math.sqrt(3)),
        standard=(8000.0, 50 / math.sqrt(3)),
    )
    assert interval.mean == printed("1.234")
    # A normal density of the weight reaches further than the rectangle, so its reciprocal spreads by 1 % more.
    assert interval.standard_deviation == pytest.approx(0.0754, rel=0.02)
    assert interval.first_order == INVALID
