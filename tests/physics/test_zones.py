"""The zone as a body, its special points, and the bands of the empty lattice."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.constants import electron_mass, hbar

from sheetgen.physics.crystals import cell_matrix, reciprocal_basis
from sheetgen.physics.lattices import vectors_within
from sheetgen.physics.zones import HBAR, empty_lattice_bands, special_points, standard_path, zone_polyhedron

PRIMITIVE = {
    "P": np.eye(3),
    "I": np.array([[-1, 1, 1], [1, -1, 1], [1, 1, -1]]) / 2,
    "F": np.array([[0, 1, 1], [1, 0, 1], [1, 1, 0]]) / 2,
    "A": np.array([[2, 0, 0], [0, 1, 1], [0, -1, 1]]) / 2,
    "B": np.array([[1, 0, 1], [0, 2, 0], [-1, 0, 1]]) / 2,
    "C": np.array([[1, 1, 0], [-1, 1, 0], [0, 0, 2]]) / 2,
    "R": np.array([[2, 1, 1], [-1, 1, 1], [-1, -2, 1]]) / 3,
}
# lengths, angles, centring: name of the path, corners and faces of the zone
LATTICES = [
    ((4, 4, 4), (90, 90, 90), "P", "simple cubic", 8, 6),
    ((4, 4, 4), (90, 90, 90), "F", "face-centred cubic", 24, 14),
    ((4, 4, 4), (90, 90, 90), "I", "body-centred cubic", 14, 12),
    ((3, 3, 5), (90, 90, 120), "P", "hexagonal", 12, 8),
    ((3, 3, 5), (90, 90, 90), "P", "tetragonal", 8, 6),
    ((5, 5, 3), (90, 90, 90), "I", "body-centred tetragonal", 18, 12),
    ((3, 3, 5), (90, 90, 90), "I", "body-centred tetragonal", 24, 14),
    ((3.2523, 3.2523, 4.9461), (90, 90, 90), "I", "body-centred tetragonal", 24, 14),
    ((3, 4, 5), (90, 90, 90), "P", "orthorhombic", 8, 6),
    ((3, 4, 5), (90, 90, 90), "C", "base-centred orthorhombic", 12, 8),
    ((4, 3, 5), (90, 90, 90), "C", "base-centred orthorhombic", 12, 8),
    ((4, 3, 5), (90, 90, 90), "A", "base-centred orthorhombic", 12, 8),
    ((4, 3, 5), (90, 90, 90), "B", "base-centred orthorhombic", 12, 8),
    ((3, 4, 5), (90, 90, 90), "I", "body-centred orthorhombic", 24, 14),
    ((5, 3, 4), (90, 90, 90), "I", "body-centred orthorhombic", 24, 14),
    ((4, 4, 4), (57, 57, 57), "P", "rhombohedral", 24, 14),
    ((4, 4, 4), (100, 100, 100), "P", "rhombohedral", 14, 12),
    ((4.546, 4.546, 11.86), (90, 90, 120), "R", "rhombohedral", 24, 14),
    ((4.5, 4.5, 4), (90, 90, 120), "R", "rhombohedral", 14, 12),
    ((3, 4, 5), (90, 90, 90), "F", "general", None, None),
    ((3, 4, 5), (90, 105, 90), "P", "general", 12, 8),
    ((3, 4, 5), (80, 100, 110), "P", "general", 24, 14),
]
IDS = [f"{lattice[3]} {lattice[0]} {lattice[2]}" for lattice in LATTICES]


def build(lattice):
    return cell_matrix(np.array(lattice[0]) * 1e-10, np.radians(lattice[1])), PRIMITIVE[lattice[2]]


@pytest.mark.parametrize("lattice", LATTICES, ids=IDS)
def test_zone_has_the_volume_of_a_reciprocal_cell_and_closes(lattice):
    cell, primitive = build(lattice)
    zone = zone_polyhedron(cell, primitive)
    assert zone.volume == pytest.approx(abs(np.linalg.det(reciprocal_basis(primitive @ cell))), rel=1e-9)
    edges = [frozenset(edge) for ring in zone.faces for edge in zip(ring, ring[1:] + ring[:1], strict=True)]
    assert all(edges.count(edge) == 2 for edge in edges)
    assert len(zone.vertices) - len(edges) // 2 + len(zone.faces) == 2  # Euler
    if lattice[4]:
        assert (len(zone.vertices), len(zone.faces)) == lattice[4:]


@pytest.mark.parametrize("lattice", LATTICES, ids=IDS)
def test_zone_is_what_is_nearer_to_its_centre_than_to_any_other(lattice):
    cell, primitive = build(lattice)
    zone = zone_polyhedron(cell, primitive)
    basis = reciprocal_basis(primitive @ cell)
    others = vectors_within(basis, 3 * np.linalg.norm(zone.vertices, axis=1).max())[1:] @ basis
    excess = zone.vertices @ others.T - (others**2).sum(axis=1) / 2
    assert excess.max() < 1e-8 * (others[0] @ others[0])
    ring = zone.vertices[list(zone.faces[0])]
    assert np.cross(ring[1] - ring[0], ring[2] - ring[1]) @ zone.normals[0] > 0


@pytest.mark.parametrize("lattice", LATTICES, ids=IDS)
def test_special_points_lie_on_the_surface_of_the_zone(lattice):
    cell, primitive = build(lattice)
    special = special_points(cell, primitive)
    assert special.lattice == lattice[3]
    basis = reciprocal_basis(primitive @ cell)
    others = vectors_within(basis, np.linalg.norm(basis, axis=1).sum())[1:] @ basis
    for label, point in special.points.items():
        nearest = np.linalg.norm(point - others, axis=1).min()
        assert label == "Γ" or nearest == pytest.approx(np.linalg.norm(point), rel=1e-9), label


@pytest.mark.parametrize("lattice", LATTICES, ids=IDS)
def test_path_is_sampled_evenly_and_labelled_where_it_turns(lattice):
    cell, primitive = build(lattice)
    path = standard_path(cell, primitive, samples=200)
    assert len(path.labels) == len(path.ticks) and path.labels[0] == "Γ"
    assert np.all(np.diff(path.ticks) > 0) and np.all(np.diff(path.distances) >= 0)
    assert 180 < len(path.points) < 280 and path.distances[-1] == pytest.approx(path.ticks[-1])
    steps = np.linalg.norm(np.diff(path.points, axis=0), axis=1)
    along = np.diff(path.distances) > 0
    assert steps[along] == pytest.approx(np.diff(path.distances)[along], rel=1e-6)
    points = special_points(cell, primitive).points
    for label, tick in zip(path.labels, path.ticks, strict=True):
        here = path.points[np.isclose(path.distances, tick, rtol=0, atol=1e-9 * path.ticks[-1])]
        for name in label.split("|"):
            assert np.linalg.norm(here - points[name], axis=1).min() < 1e-6 * path.ticks[-1]


def test_bands_at_the_centre_of_a_simple_cube():
    """0, then 6 of 1, 12 of 2, 8 of 3, 6 of 4 in units of ħ²(2π/a)²/2m."""
    a = 3e-10
    unit = hbar**2 * (2 * np.pi / a) ** 2 / (2 * electron_mass)
    energies = empty_lattice_bands(np.zeros((1, 3)), np.eye(3) * 2 * np.pi / a, electron_mass, 33) / unit
    assert energies[0] == pytest.approx([0] + [1] * 6 + [2] * 12 + [3] * 8 + [4] * 6, abs=1e-9)
    assert pytest.approx(hbar, rel=1e-15) == HBAR


def test_bands_are_complete_and_periodic():
    cell = cell_matrix(np.array([3e-10, 4.1e-10, 5.3e-10]), np.radians([80, 95, 111]))
    basis = reciprocal_basis(cell)
    points = np.random.default_rng(3).uniform(-1, 1, (20, 3)) @ basis
    energies = empty_lattice_bands(points, basis, electron_mass, 12)
    grid = np.stack(np.meshgrid(*[np.arange(-7, 8)] * 3, indexing="ij"), axis=-1).reshape(-1, 3) @ basis
    squares = np.sort(((points[:, None] + grid) ** 2).sum(axis=-1), axis=1)[:, :12]
    assert energies == pytest.approx(hbar**2 * squares / (2 * electron_mass), rel=1e-12)
    shifted = empty_lattice_bands(points + np.array([2, -1, 3]) @ basis, basis, electron_mass, 12)
    assert shifted == pytest.approx(energies, rel=1e-9)
