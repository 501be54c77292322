"""When a number counts as moved, and which entries belong together."""

from __future__ import annotations

import pytest

from sheetgen.errata.comparing import entries_of, in_unit, last_digit, moved_beyond, paired
from sheetgen.errata.model import Point


@pytest.mark.parametrize(
    "value, spread, digit",
    [
        (7.0384, 0.0012, 1e-4),  # 7.0384(12)
        (7.0384, 0.0996, 1e-2),  # 7.04(10): the uncertainty rounds up to 0.10
        (7.0384, 0.0994, 1e-3),  # 7.038(99)
        (1234.5678, None, 1e-2),  # 1234.57
        (-0.00123456789, None, 1e-8),
        (6.0e28, 3.0e26, 1e25),
        (0.0, None, 0.0),
    ],
)
def test_last_printed_digit(value, spread, digit):
    assert last_digit(value, spread) == pytest.approx(digit)


def entry(value, spread=None, unit="eV"):
    return {"value": value, "unit": unit} | ({"standard_uncertainty": spread} if spread else {})


@pytest.mark.parametrize(
    "old, new, beyond",
    [
        (entry(7.0384, 0.0012), entry(7.03844, 0.0012), None),
        (entry(7.0384, 0.0012), entry(7.03846, 0.0012), "rounding"),
        (entry(7.0384, 0.0012), entry(7.0398, 0.0012), "uncertainty"),
        (entry(7.0384, 0.0012), entry(7.0384, 0.0014), "its uncertainty"),
        (entry(7.0384, 0.00120), entry(7.0384, 0.001203), None),
        (entry(7.0384, 0.0012), entry(7.0384), "its uncertainty"),
        (entry(1.234561), entry(1.234563), None),
        (entry(1.23456), entry(1.23457), "rounding"),
        (entry(12), entry(13), "rounding"),
        (entry(0.0), entry(0.0), None),
        (entry([0.5, 0.25]), entry([0.5, 0.25]), None),
        (entry([0.5, 0.25]), entry([0.5, 0.26]), "list"),
        (entry([0.5, 0.25]), entry([0.5]), "list"),
        (entry([{"distance": 2.5, "count": 12}]), entry([{"distance": 2.5, "count": 8}]), "list"),
    ],
)
def test_what_a_number_moved_beyond(old, new, beyond):
    assert moved_beyond(old, new) == beyond


def test_a_change_of_unit_alone_moves_nothing():
    metres, kilometres = entry(1.57e6, 2e3, "m/s"), entry(1570.0, 2.0, "km/s")
    assert moved_beyond(in_unit(metres, "km/s"), kilometres) is None
    assert in_unit(entry(1.0, None, "eV"), "no such unit")["unit"] == "eV"


def material(*temperatures):
    entries = [{"temperature": t, **entry(float(t))} for t in temperatures]
    return {"quantities": {"relaxation_time": entries}}


def test_entries_of_one_temperature_belong_together():
    old, new = entries_of(material(293, 77, 77)), entries_of(material(293, 77, 4.2, 77))
    pairs = {(point.at, point.repeat): (o and o["value"], n and n["value"]) for point, o, n in paired(old, new)}
    assert pairs == {(293, 0): (293, 293), (77, 0): (77, 77), (77, 1): (77, 77), (4.2, 0): (None, 4.2)}


def test_a_resistivity_taken_at_another_temperature_replaces_its_predecessor():
    old, new = entries_of(material(293, 77)), entries_of(material(295, 77))
    apart = [(o, n) for _, o, n in paired(old, new) if o is None or n is None]
    assert len(apart) == 2
    together = {point: (o["value"], n["value"]) for point, o, n in paired(old, new, ["relaxation_time"])}
    assert together[Point("relaxation_time", None, "temperature", 295.0)] == (293.0, 295.0)


def test_of_several_left_over_the_one_at_nearly_the_same_temperature_is_replaced():
    old, new = entries_of(material(293, 273)), entries_of(material(295))
    pairs = [(o and o["value"], n and n["value"]) for _, o, n in paired(old, new, ["relaxation_time"])]
    assert pairs == [(293.0, 295.0), (273.0, None)]
