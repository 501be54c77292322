"""Numbers as a source prints them: equal within what the printed digits can mean."""

from __future__ import annotations

from decimal import Decimal

import pytest


def printed(text: str, inputs: float = 0.0):
    """The printed number with half a unit of its last digit as tolerance.

    `inputs` adds what half a unit in each printed input can move the answer, relative to the answer.
    """
    number = Decimal(text)
    half_a_unit = Decimal(5).scaleb(int(number.as_tuple().exponent) - 1)
    # A unit in the last place more: half a unit is meant in decimal, and the number compared is binary.
    allowed = float(half_a_unit) * (1 + 1e-9) + abs(float(number)) * inputs
    return pytest.approx(float(number), rel=0, abs=allowed)
