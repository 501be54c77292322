"""Cells, neighbours, primitive lattices and zone faces, against known crystals, brute force and spglib."""

from __future__ import annotations

import warnings
from itertools import product

import numpy as np
import pytest
import spglib
from hypothesis import given
from hypothesis import strategies as st

from sheetgen.physics.crystals import (
    cell_matrix,
    half_reciprocal_length,
    ideal_fractions,
    merge_coincident_sites,
    nearest_diffracting_face,
    nearest_zone_face,
    neighbour_shells,
    primitive_lattice,
    reciprocal_basis,
    structure_factor,
)

RIGHT = (90.0, 90.0, 90.0)
HEXAGONAL = (90.0, 90.0, 120.0)
FACES = [(0, 0, 0), (0, 0.5, 0.5), (0.5, 0, 0.5), (0.5, 0.5, 0)]
IDEAL = np.sqrt(8 / 3)


def shifted(places, *shifts):
    return [tuple(np.add(place, shift) % 1) for shift in shifts for place in places]


# name: lengths, angles, positions, species, primitive cells, coordination, second shell's count, first diffracting face
CRYSTALS = {
    "simple cubic": ((1, 1, 1), RIGHT, [(0, 0, 0)], "P", 1, 6, 12, (1, 0, 0)),
    "body-centred cubic": ((1, 1, 1), RIGHT, shifted([(0, 0, 0)], (0, 0, 0), (0.5,) * 3), "NN", 2, 8, 6, (1, 1, 0)),
    "face-centred cubic": ((1, 1, 1), RIGHT, FACES, "CCCC", 4, 12, 6, (1, 1, 1)),
    "diamond": ((1, 1, 1), RIGHT, shifted(FACES, (0, 0, 0), (0.25,) * 3), "S" * 8, 4, 4, 12, (1, 1, 1)),
    "rock salt": ((1, 1, 1), RIGHT, shifted(FACES, (0, 0, 0), (0.5,) * 3), "TTTTNNNN", 4, 6, 12, (1, 1, 1)),
    "zinc blende": ((1, 1, 1), RIGHT, shifted(FACES, (0, 0, 0), (0.25,) * 3), "GGGGAAAA", 4, 4, 12, (1, 1, 1)),
    "caesium chloride": ((1, 1, 1), RIGHT, [(0, 0, 0), (0.5,) * 3], "AB", 1, 8, 6, (1, 0, 0)),
    "close-packed hexagonal": (
        (1, 1, IDEAL), HEXAGONAL, [(1 / 3, 2 / 3, 0.25), (2 / 3, 1 / 3, 0.75)], "MM", 1, 12, 6, (1, 0, 0)
    ),
    "hexagonal": ((1, 1, 1.2), HEXAGONAL, [(0, 0, 0)], "H", 1, 6, 2, (0, 0, 1)),
}  # fmt: skip


def build(name):
    lengths, angles, places, species, *expected = CRYSTALS[name]
    return (
        cell_matrix(np.array(lengths, float), np.radians(angles)),
        np.array(places),
        list(species),
        expected,
    )


@pytest.mark.parametrize("name", CRYSTALS)
def test_known_crystals(name):
    cell, places, species, (cells, coordination, second, face) = build(name)
    shells = neighbour_shells(cell, places, np.ones(len(places)))
    assert shells.coordination == coordination and shells.counts[1] == second
    assert np.linalg.norm(shells.nearest @ cell) == pytest.approx(shells.distances[0], rel=1e-14)
    primitive = primitive_lattice(places, species)
    assert 1 / abs(np.linalg.det(primitive)) == pytest.approx(cells)
    numbers = np.array([{"T": 22, "N": 7, "G": 31, "A": 33, "B": 30}.get(kind, 13) for kind in species])
    found = nearest_diffracting_face(cell, primitive, places, numbers)
    assert sorted(np.abs(found)) == sorted(face)


def test_hexagonal_close_packing_has_a_nearer_face_that_does_not_diffract():
    cell, places, species, _ = build("close-packed hexagonal")
    primitive = primitive_lattice(places, species)
    assert nearest_zone_face(cell, primitive).tolist() == [0, 0, 1]
    assert abs(structure_factor(np.array([0, 0, 1]), places, np.ones(2))) < 1e-12
    assert abs(structure_factor(np.array([1, 0, 0]), places, np.ones(2))) == pytest.approx(1)


def test_equal_scatterers_of_caesium_chloride_form_a_body_centred_lattice():
    cell, places, _, _ = build("caesium chloride")
    primitive = primitive_lattice(places, ["A", "B"])
    assert nearest_diffracting_face(cell, primitive, places, np.array([30, 30])).tolist() == [1, 1, 0]
    assert abs(np.linalg.det(primitive_lattice(places, ["A", "A"]))) == pytest.approx(0.5)


def test_weights_that_scatter_nothing_are_refused():
    with pytest.raises(ValueError, match="expected a positive sum"):
        nearest_diffracting_face(np.eye(3), np.eye(3), np.zeros((1, 3)), np.zeros(1))


@given(
    lengths=st.tuples(*[st.floats(1, 9)] * 3), angles=st.tuples(*[st.floats(65, 110)] * 3)
)  # fmt: skip
def test_cell_matrix_has_the_lengths_angles_and_volume_asked_for(lengths, angles):
    angles = np.radians(angles)
    cell = cell_matrix(np.array(lengths), angles)
    assert np.linalg.norm(cell, axis=1) == pytest.approx(lengths, rel=1e-12)
    for number, (i, j) in enumerate([(1, 2), (2, 0), (0, 1)]):
        assert cell[i] @ cell[j] / (lengths[i] * lengths[j]) == pytest.approx(
            np.cos(angles[number]), abs=1e-12
        )
    a, b, g = np.cos(angles)
    volume = np.prod(lengths) * np.sqrt(1 - a * a - b * b - g * g + 2 * a * b * g)
    assert np.linalg.det(cell) == pytest.approx(volume, rel=1e-10)
    assert cell @ reciprocal_basis(cell).T == pytest.approx(2 * np.pi * np.eye(3), abs=1e-10)


def test_cells_broadcast_and_impossible_angles_are_nan():
    cells = cell_matrix(np.ones((4, 1, 3)), np.radians(np.full((5, 3), 80.0)))
    assert cells.shape == (4, 5, 3, 3)
    assert np.isnan(cell_matrix(np.ones(3), np.radians([40.0, 40.0, 100.0]))).any()
    assert half_reciprocal_length(cells, np.array([1, 0, 0])).shape == (4, 5)
    assert half_reciprocal_length(np.eye(3), np.array([[1, 0, 0], [1, 1, 0]])) == pytest.approx(
        np.pi * np.sqrt([1, 2])
    )


def test_simple_fractions_are_made_exact_and_others_left_alone():
    given_ = np.array([0.3333, 0.16669, 0.6249, 0.9999, -0.0004, 0.4166, 0.1, 0.2345])
    exact = [1 / 3, 1 / 6, 5 / 8, 0.0, 0.0, 5 / 12, 0.1, 0.2345]
    assert ideal_fractions(given_).tolist() == pytest.approx(exact, abs=0)


def test_elements_that_share_a_place_are_one_site():
    places, totals = merge_coincident_sites(
        np.array([[0, 0, 0], [0.5, 0.5, 0.5], [0.9999, 0, 0]]), [0.5, 1.0, 0.5]
    )
    assert places.tolist() == [[0, 0, 0], [0.5, 0.5, 0.5]] and totals.tolist() == [1.0, 1.0]
    mixed = [(0, 0, 0), (0, 0, 0), (0.5, 0.5, 0.5), (0.5, 0.5, 0.5)]
    assert neighbour_shells(np.eye(3), np.array(mixed), np.full(4, 0.5)).coordination == 8


def test_coordination_is_the_mean_weighted_by_occupancy():
    """In a row of two kinds of site, a full one with 2 and a half-filled one with 1 near neighbour."""
    cell = np.diag([10.0, 30.0, 30.0])
    places = np.array([[0.0, 0, 0], [0.21, 0, 0], [0.42, 0, 0]])
    shells = neighbour_shells(cell, places, np.array([1.0, 0.5, 1.0]), shells=1)
    assert shells.coordination == pytest.approx((1 * 1 + 0.5 * 2 + 1 * 1) / 2.5)


@pytest.mark.parametrize("seed", range(6))
def test_shells_against_a_large_block_of_images(seed):
    rng = np.random.default_rng(seed)
    cell = cell_matrix(rng.uniform(2, 7, 3), np.radians(rng.uniform(65, 115, 3)))
    places = rng.random((int(rng.integers(1, 5)), 3)).round(3)
    shells = neighbour_shells(cell, places, np.ones(len(places)))
    images = np.array(list(product(range(-6, 7), repeat=3)))
    exact = ideal_fractions(places)
    steps = (exact[None, :, None] - exact[:, None, None] + images).reshape(-1, 3)
    distances = np.sort(np.linalg.norm(steps @ cell, axis=1))
    distances = distances[distances > 1e-9]
    for distance, count in zip(shells.distances, shells.counts, strict=True):
        assert distances[0] == pytest.approx(distance, rel=1e-12)
        inside = distances <= distance * 1.01
        assert inside.sum() / len(places) == pytest.approx(count)
        distances = distances[~inside]


def spglib_primitive_cells(cell, places, species):
    kinds = {kind: number for number, kind in enumerate(dict.fromkeys(species), start=1)}
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        found = spglib.find_primitive((cell, places, [kinds[kind] for kind in species]), symprec=1e-5)
    return len(places) / len(found[1])


@pytest.mark.parametrize("name", CRYSTALS)
def test_primitive_lattice_of_known_crystals_against_spglib(name):
    cell, places, species, _ = build(name)
    ours = 1 / abs(np.linalg.det(primitive_lattice(places, species)))
    assert ours == pytest.approx(spglib_primitive_cells(cell, places, species))


@pytest.mark.parametrize("seed", range(40))
def test_primitive_lattice_of_random_supercells_against_spglib(seed):
    """A random basis repeated over a random superlattice, whose cell need not be in any standard setting."""
    rng = np.random.default_rng(seed)
    small = cell_matrix(rng.uniform(3, 6, 3), np.radians(rng.uniform(70, 110, 3)))
    basis = rng.random((int(rng.integers(1, 4)), 3)).round(4)
    kinds = list(rng.choice(["A", "B"], len(basis)))
    while True:
        multiples = rng.integers(-2, 3, (3, 3))
        if 1 <= abs(round(np.linalg.det(multiples))) <= 8:
            break
    images = np.array(list(product(range(-4, 5), repeat=3)))
    places, species = [], []
    for place, kind in zip(basis, kinds, strict=True):
        inside = ((images + place) @ np.linalg.inv(multiples)) % 1.0
        unique: list[np.ndarray] = []
        for candidate in inside:
            if all(np.abs((candidate - other + 0.5) % 1.0 - 0.5).max() > 1e-6 for other in unique):
                unique.append(candidate)
        assert len(unique) == abs(round(np.linalg.det(multiples)))
        places += unique
        species += [kind] * len(unique)
    cell = multiples @ small
    primitive = primitive_lattice(np.array(places), species)
    assert 1 / abs(np.linalg.det(primitive)) == pytest.approx(spglib_primitive_cells(cell, places, species))


def test_sites_that_nearly_repeat_do_not_break_the_group():
    """Quarters that hold for some steps within the tolerance and for others not: only a closed set may count."""
    places = np.array([[0.0, 0, 0], [0.2507, 0, 0], [0.5014, 0, 0], [0.7507, 0, 0]])
    for offset in np.linspace(0.03, 0.04, 20):
        cells = 1 / abs(np.linalg.det(primitive_lattice(places + [offset, 0, 0], ["A"] * 4)))
        assert min(abs(cells - whole) for whole in (1, 2, 4)) < 1e-9


@pytest.mark.parametrize("seed", range(20))
def test_nearest_faces_against_a_large_block(seed):
    rng = np.random.default_rng(100 + seed)
    cell = cell_matrix(
        rng.uniform(2, 9, 3), np.radians(rng.uniform(55, 120, 3) if seed % 2 else [90, 90, 120])
    )
    places, weights = rng.integers(0, 12, (3, 3)) / 12, rng.integers(5, 80, 3).astype(float)
    species = [f"{weight}" for weight in weights]
    primitive = primitive_lattice(places, species)
    block = np.array([h for h in product(range(-9, 10), repeat=3) if any(h)])
    allowed = block @ primitive.T
    reciprocal = block[np.all(np.abs(allowed - np.round(allowed)) < 1e-9, axis=1)]
    shortest = half_reciprocal_length(cell, reciprocal).min()
    assert half_reciprocal_length(cell, nearest_zone_face(cell, primitive)) == pytest.approx(
        shortest, rel=1e-12
    )
    strong = np.abs(structure_factor(block, places, weights)) ** 2 > 1e-9 * weights.sum() ** 2
    shortest = half_reciprocal_length(cell, block[strong]).min()
    found = nearest_diffracting_face(cell, primitive, places, weights)
    assert half_reciprocal_length(cell, found) == pytest.approx(shortest, rel=1e-12)


def test_a_face_of_a_flat_and_skewed_cell_is_not_missed():
    """The same tetragonal lattice in an absurd setting."""
    plain = np.diag([1.0, 1.0, 40.0])
    skew = np.array([[1, 0, 0], [17, 1, 0], [-23, 31, 1]])
    for cell in (plain, skew @ plain):
        face = nearest_zone_face(cell, np.eye(3))
        assert half_reciprocal_length(cell, face) == pytest.approx(np.pi / 40, rel=1e-9)
    shells = neighbour_shells(skew @ plain, np.zeros((1, 3)), np.ones(1))
    assert shells.distances == pytest.approx([1, np.sqrt(2), 2]) and shells.counts.tolist() == [4, 4, 4]
