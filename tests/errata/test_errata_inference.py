"""Causes from data files alone, of an edition whose records cannot be put together again."""

from __future__ import annotations

import pytest
from quantities.small import COPPER

from sheetgen.errata import errata


@pytest.fixture
def inferred(edition, data_alone):
    """The errata from the data alone, and those that deriving gives, of the same two editions."""

    def compare(new: str):
        old, new = edition("1"), edition("2", copper=new)
        bare = errata(data_alone(old, assemblies=False), data_alone(new, assemblies=False))
        return bare.materials[0], errata(old, new).materials[0]

    return compare


def by_point(material):
    return {moved.point: moved for moved in material.moved}


def test_the_only_input_that_changed_is_the_cause(inferred):
    bare, derived = inferred(COPPER.replace("3.6149(3)", "3.62(1)"))
    assert {moved.how for moved in bare.moved} == {"inferred"}
    assert by_point(bare).keys() == by_point(derived).keys()
    for moved in bare.moved:
        assert [share.cause for share in moved.because] == ["structure.a"]
        assert moved.because[0].change == moved.change


def test_several_causes_have_the_sizes_that_the_budget_gives(inferred):
    """First order, so within the square of the changes (about 1 %) of what deriving gives."""
    bare, derived = inferred(COPPER.replace("3.6149(3)", "3.6500(3)").replace("1.678(9)", "1.690(9)"))
    exact = {point: {s.cause: s.change for s in moved.because} for point, moved in by_point(derived).items()}
    judged = 0
    for point, moved in by_point(bare).items():
        if point.quantity in ("relaxation_time", "mean_free_path") and len(moved.because) == 2:
            judged += 1
            for share in moved.because:
                assert share.change == pytest.approx(exact[point][share.cause], rel=0.03)
    assert judged == 2


def test_a_cause_without_uncertainty_has_no_size(inferred):
    new = COPPER.replace("3.6149(3)", "3.65(1)").replace("valence: 1", "valence: 1.1")
    moved = {moved.point.quantity: moved for moved in inferred(new)[0].moved}["fermi_energy"]
    assert {(share.cause, share.change) for share in moved.because} == {
        ("structure.a", None), ("electrons.valence", None),
    }  # fmt: skip


def test_a_changed_definition_is_named(edition, data_alone):
    old, new = (data_alone(edition(name), assemblies=False) for name in ("1", "2"))
    old.data["quantities"]["fermi_velocity"]["fingerprint"] = "0" * 16
    for entry in old.materials["copper"]["quantities"]["mean_free_path"]:
        entry["value"] *= 1.1
    [material] = errata(old, new).materials
    assert [share.cause for share in material.moved[0].because] == ["definition of fermi_velocity"]
