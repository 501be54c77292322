"""Declarations are checked when they are loaded, and ordered by what needs what."""

import pytest

from sheetgen.faults import FaultsError
from sheetgen.quantities import Declarations, Registry, registry, registry_with

FIELDS = {"symbol": "x", "unit": "1", "formula": "x", "source": "", "section": "Crystal"}


def faults(declarations: Declarations) -> list[str]:
    """The messages of loading declarations beside ours, without the place, which must be in this file."""
    with pytest.raises(FaultsError) as caught:
        registry_with([declarations])
    for fault in caught.value.faults:
        assert fault.place.file == __file__
        assert fault.place.line > 0
    return [fault.message for fault in caught.value.faults]


def test_a_misspelt_parameter_is_named_with_a_guess():
    own = Declarations()

    @own.quantity(**FIELDS)
    def figure(fermi_wavevectr):
        """A figure"""
        return fermi_wavevectr

    assert faults(own) == [
        "figure() takes 'fermi_wavevectr', but no quantity or input has that name; rename it. "
        "Did you mean 'fermi_wavevector'?"
    ]


def test_an_unknown_assumption_is_named_with_a_guess():
    own = Declarations()

    @own.quantity(assumes=("degenerate_gass",), **FIELDS)
    def figure(fermi_wavevector):
        """A figure"""
        return fermi_wavevector

    assert faults(own) == ["figure() assumes 'degenerate_gass', which is not declared. Did you mean 'degenerate_gas'?"]


def test_a_name_that_is_taken_is_a_fault():
    own = Declarations()

    @own.quantity(**FIELDS)
    def fermi_energy(fermi_wavevector):
        """Again"""
        return fermi_wavevector

    @own.quantity(**FIELDS)
    def temperature(fermi_wavevector):
        """An input's name"""
        return fermi_wavevector

    first, second = faults(own)
    assert first.startswith("fermi_energy() is declared in 3 dimensions already at ")
    assert first.endswith("rename one of the two")
    assert second == "temperature() has the name of an input; give it another name"


def test_a_ring_is_a_fault():
    own = Declarations()

    @own.quantity(**FIELDS)
    def hen(egg):
        """Hen"""
        return egg

    @own.quantity(**FIELDS)
    def egg(hen):
        """Egg"""
        return hen

    (message,) = faults(own)
    assert message.startswith("quantities need each other in a ring: ")
    assert message.endswith("; break the ring")


def test_fields_outside_their_choices_and_a_missing_title_are_faults():
    own = Declarations()

    @own.quantity(**{**FIELDS, "section": "Weather"}, listed_by="colour")
    def figure(fermi_wavevector):
        return fermi_wavevector

    assert faults(own) == [
        "figure() has listed_by='colour'; expected one of None, temperature, resistivity, edge, photon_energy",
        "figure() has no docstring; its first line is the quantity's title",
        "figure() has section='Weather'; expected one of Crystal, Electron gas at T = 0, Heat and magnetism, "
        "Transport, Optics, Finite specimens, Specimens",
    ]


def test_whatever_a_definition_reads_is_evaluated_before_it():
    for plan in registry().plans.values():
        done = set(registry().inputs)
        for id, definition in plan.definitions.items():
            assert done.issuperset(definition.reads)
            done.add(id)


def test_readers_are_found_near_and_far():
    readers = registry().plans["material", 3].readers
    assert {"cell_volume", "fermi_energy", "mean_free_path", "heat_coefficient"} <= readers["lattice_a"]
    assert "fermi_energy" not in readers["measured_debye_temperature"]


def test_two_dimensions_lack_what_the_contract_leaves_out():
    three, two = (registry().plans["material", dimension].definitions for dimension in (3, 2))
    for id in ("electron_density", "plasma_energy", "hall_coefficient", "skin_depth", "heat_coefficient"):
        assert id in three and id not in two
    for id in ("sheet_density", "sheet_hall_coefficient"):
        assert id in two and id not in three
    assert "lorenz_number" in two and "thermopower" in two and "chemical_potential" in two


def test_own_quantities_come_after_ours_in_their_section():
    own = Declarations()

    @own.quantity(**{**FIELDS, "section": "Transport"})
    def figure(fermi_wavevector):
        """A figure"""
        return fermi_wavevector

    joined = registry_with([own])
    assert isinstance(joined, Registry)
    order = list(joined.published())
    assert order.index("conductivity") < order.index("figure") < order.index("plasma_edge_energy")
    assert "figure" in joined and "figure" not in registry()
