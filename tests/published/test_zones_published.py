"""Spheres and zones against the numbers that the theory of metals and alloys quotes."""

from __future__ import annotations

import numpy as np
import pytest
from support.printed import printed

from sheetgen.physics.crystals import half_reciprocal_length, nearest_diffracting_face, primitive_lattice
from sheetgen.physics.zones import zone_polyhedron

CUBE = np.eye(3)
FACE_CENTRED = np.array([(0, 0, 0), (0, 0.5, 0.5), (0.5, 0, 0.5), (0.5, 0.5, 0)])
BODY_CENTRED = np.array([(0, 0, 0), (0.5, 0.5, 0.5)])


def nearest(places):
    primitive = primitive_lattice(places, ["A"] * len(places))
    face = nearest_diffracting_face(CUBE, primitive, places, np.ones(len(places)))
    return half_reciprocal_length(CUBE, face)


def contact(distance, atoms_per_cell):
    """Electrons per atom at which the free-electron sphere reaches that far."""
    return distance**3 / (3 * np.pi**2 * atoms_per_cell)


# N. F. Mott and H. Jones, The Theory of the Properties of Metals and Alloys (1936): the electron-to-atom ratios at
# which the sphere touches the zone of the α and β phases.
@pytest.mark.parametrize("places, printed_ratio", [(FACE_CENTRED, "1.36"), (BODY_CENTRED, "1.48")])
def test_contact_ratios_of_alpha_and_beta_brass(places, printed_ratio):
    assert contact(nearest(places), len(places)) == printed(printed_ratio)


def test_contact_ratio_of_gamma_brass():
    """H. Jones, Proceedings of the Royal Society A 144, 225 (1934): 1.54 for {330} and {411}, 52 atoms."""
    faces = half_reciprocal_length(CUBE, np.array([[3, 3, 0], [4, 1, 1]]))
    assert contact(faces, 52) == pytest.approx([contact(faces[0], 52)] * 2, rel=1e-14)
    assert contact(faces[0], 52) == printed("1.54")


# N. W. Ashcroft and N. D. Mermin, Solid State Physics (1976), ch. 15: k_F over the distance to the nearest face,
# for the alkali and the noble metals.
@pytest.mark.parametrize("places, printed_ratio", [(BODY_CENTRED, "0.877"), (FACE_CENTRED, "0.903")])
def test_monovalent_spheres_stay_inside_the_zone(places, printed_ratio):
    assert np.cbrt(3 * np.pi**2 * len(places)) / nearest(places) == printed(printed_ratio)


def test_electrons_per_cell_whose_sphere_reaches_a_face():
    """U. Mizutani et al., Acta Physica Polonica A 126, 531 (2014): e/uc = (π/3)(|G|²)^{3/2}, G in 2π/a."""
    indices = np.array([[1, 0, 0], [1, 1, 1], [3, 3, 0]])
    squares = (indices**2).sum(axis=1)
    assert contact(half_reciprocal_length(CUBE, indices), 1) == pytest.approx(
        np.pi / 3 * squares**1.5, rel=1e-13
    )


def test_shapes_of_the_cubic_zones():
    """Ashcroft and Mermin, ch. 5: a truncated octahedron for the fcc, a rhombic dodecahedron for the bcc lattice."""
    octahedron = zone_polyhedron(CUBE, primitive_lattice(FACE_CENTRED, "AAAA"))
    assert sorted(len(ring) for ring in octahedron.faces) == [4] * 6 + [6] * 8
    dodecahedron = zone_polyhedron(CUBE, primitive_lattice(BODY_CENTRED, "AA"))
    assert [len(ring) for ring in dodecahedron.faces] == [4] * 12
