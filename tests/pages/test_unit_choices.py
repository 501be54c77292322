"""Units that a reader may choose: of the right kind, with true factors."""

from __future__ import annotations

import pytest

from sheetgen.pages.unit_choices import KINDS, choices
from sheetgen.records.units import dimension_matches

# CODATA 2022
FACTORS = [
    ("eV", "Ry", 1 / 13.605693122990),
    ("eV", "hartree", 1 / 27.211386245981),
    ("eV", "J", 1.602176634e-19),
    ("nm", "angstrom", 10.0),
    ("nm", "bohr", 1 / 0.0529177210544),
    ("1/nm^3", "1/cm^3", 1e21),
    ("m/s", "km/s", 1e-3),
    ("uohm cm", "nohm m", 10.0),
]


@pytest.mark.parametrize("unit, other, factor", FACTORS)
def test_factor(unit, other, factor):
    offered = {name: scale for name, _, scale in choices(unit, unit)}
    # The Bohr radius of 2018, which units libraries have, differs by 7e-10.
    assert offered[other] == pytest.approx(factor, rel=1e-9)
    assert offered[unit] == 1


def test_preferred_unit_comes_first_and_once():
    names = [name for name, _, _ in choices("m/s", "km/s")]
    assert names[:2] == ["km/s", "m/s"] and len(names) == len(set(names))


def test_pure_number_has_no_choice():
    assert choices("1", "1") == [("1", "", 1.0)]


@pytest.mark.parametrize("kind", KINDS)
def test_units_of_a_kind_measure_the_same(kind):
    assert all(dimension_matches(kind[0], unit) for unit in kind)


def test_every_unit_of_the_handbook_has_only_units_of_its_dimension(handbook):
    for definition in handbook.registry.published().values():
        assert all(dimension_matches(definition.unit, name) for name, _, _ in choices(definition.unit, definition.unit))


def test_angular_frequency_is_not_offered_as_frequency():
    assert [name for name, _, _ in choices("rad/s", "rad/s")] == ["rad/s"]
