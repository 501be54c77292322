"""The words for a ratio and for an indicator, at and around each bound."""

import pytest

from sheetgen.quantities import registry
from sheetgen.standing.grading import Thresholds, grade_indicator

RULE = Thresholds()


@pytest.mark.parametrize(
    "ratio, uncertainty, word",
    [
        (1.0, 0.0, "agrees"),
        (1.10, 0.0, "agrees"),
        (0.90, 0.0, "agrees"),
        (1.11, 0.0, "adjust"),
        (1.11, 0.06, "agrees"),  # within two of its standard uncertainties, which is below 0.25
        (1.5, 0.25, "agrees"),
        (1.5, 0.26, "undecided"),  # the same, but so uncertain that agreement proves nothing
        (5.0, 3.0, "undecided"),
        (1.05, 0.9, "agrees"),  # near 1 agrees however uncertain
        (2.0, 0.0, "adjust"),
        (0.5, 0.0, "adjust"),
        (2.01, 0.0, "fails"),
        (0.49, 0.0, "fails"),
        (-1.0, 0.0, "fails"),
        (-1.0, 1.5, "undecided"),
    ],
)
def test_a_ratio(ratio, uncertainty, word):
    assert RULE.grade(ratio, uncertainty) == word


def test_thresholds_of_the_imprint_move_the_bounds():
    tight = Thresholds(agrees=0.02, undecided=0.1, adjust=1.5)
    assert [tight.grade(ratio, 0) for ratio in (1.02, 1.05, 1.6)] == ["agrees", "adjust", "fails"]


def assumption(id: str):
    return next(a for a in registry().assumptions if a.id == id)


@pytest.mark.parametrize(
    "id, value, expected",
    [
        ("degenerate_gas", 0.1, ("holds", 0.1)),
        ("degenerate_gas", 0.11, ("strained", 0.1)),
        ("degenerate_gas", 0.31, ("broken", 0.3)),
        ("independent_electrons", 4.1, ("strained", 4)),
        ("flat_potential", 1.5, ("strained", 0.9)),  # has no second bound
        ("one_band", 2.0, ("holds", 2)),
        ("one_band", 1.9, ("strained", 2)),
        ("one_band", 0.9, ("broken", 1)),
        ("defined_paths", 0.5, ("broken", 1)),
        ("elastic_scattering", 0.05, ("holds", 0.1)),
        ("elastic_scattering", 0.5, ("strained", 0.1)),
        ("elastic_scattering", 1.5, ("holds", 0.1)),
        ("normal_state", 0.9, ("broken", 1)),
        ("normal_state", 1.1, ("holds", 1)),  # has no first bound: the second is named
    ],
)
def test_an_indicator(id, value, expected):
    assert grade_indicator(assumption(id), value, {}) == expected


def test_an_imprint_can_set_the_bounds_of_an_assumption():
    assert grade_indicator(assumption("degenerate_gas"), 0.06, {"degenerate_gas": (0.05, 0.2)}) == ("strained", 0.05)
    assert grade_indicator(assumption("degenerate_gas"), 0.25, {"degenerate_gas": (0.05, 0.2)}) == ("broken", 0.2)


def test_every_assumption_names_a_source_or_common_practice():
    for one in registry().assumptions:
        assert one.source and one.sentence and one.title
        assert one.strained is not None or one.broken is not None


def test_every_assumption_covers_something():
    for one in registry().assumptions:
        if one.id != "continuum":  # an entry of its own, which marks no number
            assert registry().resting_on(one.id), one.id
