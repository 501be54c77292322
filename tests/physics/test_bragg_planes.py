"""Filling of the zones: sums, small spheres, full zones, and sampling along directions."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from sheetgen.physics.bragg_planes import LARGEST_FILLING, zone_occupation
from sheetgen.physics.crystals import cell_matrix, half_reciprocal_length, nearest_zone_face, reciprocal_basis
from sheetgen.physics.lattices import vectors_within

FACE = np.array([[0, 0.5, 0.5], [0.5, 0, 0.5], [0.5, 0.5, 0]])
BODY = np.array([[-0.5, 0.5, 0.5], [0.5, -0.5, 0.5], [0.5, 0.5, -0.5]])
CUBE = np.eye(3) * 4e-10
HEXAGONAL = cell_matrix(np.array([2.66e-10, 2.66e-10, 4.95e-10]), np.radians([90, 90, 120]))
TRICLINIC = cell_matrix(np.array([3e-10, 4.1e-10, 5.3e-10]), np.radians([80, 95, 111]))
LATTICES = {
    "face-centred": (CUBE, FACE),
    "body-centred": (CUBE, BODY),
    "simple cubic": (CUBE, np.eye(3)),
    "hexagonal": (HEXAGONAL, np.eye(3)),
    "triclinic": (TRICLINIC, np.eye(3)),
}


def wavevector(cell, primitive, electrons):
    """k_F of so many electrons per primitive cell."""
    return np.cbrt(3 * np.pi**2 * electrons / abs(np.linalg.det(primitive @ cell)))


def sampled(cell, primitive, fermi_wavevector, directions):
    """The filled parts by counting Bragg planes along rays: exact in each direction, sampled over directions."""
    basis = reciprocal_basis(primitive @ cell)
    vectors = vectors_within(basis, 2 * fermi_wavevector)[1:] @ basis
    index = np.arange(directions)
    height, azimuth = 1 - (2 * index + 1) / directions, index * np.pi * (3 - np.sqrt(5))
    ring = np.sqrt(1 - height**2)
    rays = np.stack([ring * np.cos(azimuth), ring * np.sin(azimuth), height], axis=1)
    along = rays @ vectors.T
    with np.errstate(divide="ignore"):
        crossings = np.where(along > 0, (vectors**2).sum(axis=1) / 2 / along, np.inf)
    radii = np.sort(np.minimum(crossings, fermi_wavevector), axis=1)
    ends = np.full((directions, 1), fermi_wavevector)
    shells = np.diff(np.hstack([0 * ends, radii, ends]) ** 3, axis=1).mean(axis=0)
    return 4 * np.pi / 3 * shells / abs(np.linalg.det(basis))


@pytest.mark.parametrize("lattice", LATTICES)
@pytest.mark.parametrize("electrons", [1, 2, 3, 4, 5, 9, 12])
def test_filling_against_sampling(lattice, electrons):
    cell, primitive = LATTICES[lattice]
    radius = wavevector(cell, primitive, electrons)
    parts = zone_occupation(cell, primitive, radius)
    expected = sampled(cell, primitive, radius, 40_000)
    assert parts == pytest.approx(expected[: len(parts)], abs=2e-5 if electrons < 6 else 3e-4)
    assert expected[len(parts) :].sum() < 1e-5


@pytest.mark.parametrize("electrons", [24, 50])
def test_many_zones_against_sampling(electrons):
    cell, primitive = LATTICES["triclinic"]
    radius = wavevector(cell, primitive, electrons)
    parts = zone_occupation(cell, primitive, radius)
    assert parts == pytest.approx(sampled(cell, primitive, radius, 30_000)[: len(parts)], abs=2e-3)
    assert parts.sum() == pytest.approx(electrons / 2, rel=1e-9)


@given(
    lengths=st.tuples(*[st.floats(2e-10, 8e-10)] * 3),
    angles=st.tuples(*[st.floats(60, 120)] * 3),
    electrons=st.floats(0.01, 9),
)
def test_parts_add_up_and_lie_between_empty_and_full(lengths, angles, electrons):
    cell = cell_matrix(np.array(lengths), np.radians(angles))
    assume(np.isfinite(cell).all() and np.linalg.det(cell) > 0.1 * np.prod(lengths))
    parts = zone_occupation(cell, np.eye(3), wavevector(cell, np.eye(3), electrons))
    assert parts.sum() == pytest.approx(electrons / 2, rel=1e-8, abs=3e-8)
    assert np.all(parts >= 0) and np.all(parts <= 1) and parts[-1] > 0
    assert np.all(np.diff(parts) <= 1e-9)  # a zone never holds less than the next one out


@pytest.mark.parametrize("lattice", LATTICES)
def test_a_sphere_inside_the_first_zone_is_all_there(lattice):
    cell, primitive = LATTICES[lattice]
    face = half_reciprocal_length(cell, nearest_zone_face(cell, primitive))
    volume = abs(np.linalg.det(reciprocal_basis(primitive @ cell)))
    parts = zone_occupation(cell, primitive, face * (1 - 1e-9))
    assert parts == pytest.approx([4 * np.pi / 3 * face**3 / volume], rel=1e-8)
    assert len(zone_occupation(cell, primitive, face * 1.01)) == 2


def test_caps_beyond_the_first_faces_by_elementary_geometry():
    """Simple cubic, k_F between the face centre and the edge: six caps of the sphere leave the first zone."""
    face = np.pi / 4e-10
    radius = 1.2 * face
    cap = np.pi / 3 * (radius - face) ** 2 * (2 * radius + face)
    parts = zone_occupation(CUBE, np.eye(3), radius)
    assert parts == pytest.approx(
        [(4 * np.pi / 3 * radius**3 - 6 * cap) / (2 * face) ** 3, 6 * cap / (2 * face) ** 3]
    )


def test_a_sphere_around_the_first_zone_fills_it():
    corner = np.sqrt(3) * np.pi / 4e-10
    assert zone_occupation(CUBE, np.eye(3), corner * 1.0001)[0] == 1.0
    assert zone_occupation(CUBE, np.eye(3), corner * 0.99)[0] < 1.0


def test_filling_does_not_depend_on_the_setting_of_the_cell():
    other = np.array([[1, 2, 0], [0, 1, -3], [0, 0, 1]])
    radius = wavevector(TRICLINIC, np.eye(3), 4)
    expected = zone_occupation(TRICLINIC, np.eye(3), radius)
    assert zone_occupation(other @ TRICLINIC, np.eye(3), radius) == pytest.approx(expected, abs=1e-8)


def test_nothing_to_fill_and_too_much_to_fill():
    for radius in (np.nan, 0.0, -1.0, wavevector(CUBE, np.eye(3), 2.01 * LARGEST_FILLING)):
        assert zone_occupation(CUBE, np.eye(3), radius).size == 0
