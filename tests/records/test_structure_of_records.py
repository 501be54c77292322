"""Structures: every named lattice by its space group, ties of the cell, atoms, and space groups."""

from __future__ import annotations

import ase.geometry
import ase.spacegroup
import numpy as np
import pytest
import spglib

from sheetgen.records import Crystal, Value, atomic_number
from sheetgen.records.cells import lengths_and_angles, nearest_neighbour_distance, snapped

# spglib announces a change of its error handling on every call.
pytestmark = pytest.mark.filterwarnings("ignore:Set OLD_ERROR_HANDLING:DeprecationWarning")


def ase_cell(crystal: Crystal) -> np.ndarray:
    """Rows a, b, c in angstrom, by ASE."""
    lengths, angles = lengths_and_angles(crystal)
    return ase.geometry.cellpar_to_cell([*(1e10 * length for length in lengths), *np.degrees(angles)])


def space_group(crystal: Crystal) -> int:
    """The number of the space group, found by spglib."""
    positions = [site.position for site in crystal.sites]
    numbers = [atomic_number(site.element) for site in crystal.sites]
    return spglib.get_symmetry_dataset((ase_cell(crystal), positions, numbers), symprec=1e-4).number


def record(formula: str, structure: str) -> str:
    return f"name: X\nformula: {formula}\nstructure: {{{structure}}}\n"


# The space groups of highest symmetry of the Bravais lattices and of the structure types:
# International Tables for Crystallography, volume A, table 3.1.2.2, and the types A_h, A2, A1, A3, A4, B3, B1, B2.
NAMED = [
    ("Po", "lattice: sc, a: 3.35 Å", 1, 221),
    ("W", "lattice: bcc, a: 3.165 Å", 2, 229),
    ("Cu", "lattice: fcc, a: 3.615 Å", 4, 225),
    ("Mg", "lattice: hcp, a: 3.209 Å, c: 5.211 Å", 2, 194),
    ("Mg", "lattice: hcp, a: 3.209 Å, c/a: 1.6238", 2, 194),
    ("Mg", "lattice: hcp, a: 3.209 Å", 2, 194),
    ("Si", "lattice: diamond, a: 5.431 Å", 8, 227),
    ("GaAs", "lattice: zincblende, a: 5.653 Å", 8, 216),
    ("TiN", "lattice: rocksalt, a: 4.24 Å", 8, 225),
    ("CuZn", "lattice: cscl, a: 2.95 Å", 2, 221),
    ("In", "lattice: bct, a: 3.2523 Å, c: 4.9461 Å", 2, 139),
    ("X1", "lattice: tetragonal, a: 3 Å, c: 5 Å", 1, 123),
    ("X1", "lattice: tetragonal, a: 3 Å, c/a: 1.7", 1, 123),
    ("X1", "lattice: hexagonal, a: 3 Å, c: 5 Å", 1, 191),
    ("Hg", "lattice: rhombohedral, a: 3.005 Å, alpha: 70.53°", 1, 166),
    ("Hg", "lattice: rhombohedral, a: 3.005 Å, alpha: 70.53", 1, 166),
    ("Hg", "lattice: rhombohedral, a: 3.005 Å, alpha: 1.231 rad", 1, 166),
    ("Hg", "lattice: rhombohedral, a: 3.4657 Å, c: 6.6844 Å", 3, 166),
    ("X1", "lattice: orthorhombic, a: 3 Å, b: 4 Å, c: 5 Å", 1, 47),
    ("X1", "lattice: base-centred-orthorhombic, a: 3 Å, b: 4 Å, c: 5 Å", 2, 65),
    ("X1", "lattice: base-centered orthorhombic, a: 3 Å, b: 4 Å, c: 5 Å", 2, 65),
    ("X1", "lattice: body_centred_orthorhombic, a: 3 Å, b: 4 Å, c: 5 Å", 2, 71),
    ("X1", "lattice: face-centered-orthorhombic, a: 3 Å, b: 4 Å, c: 5 Å", 4, 69),
    ("X1", "lattice: monoclinic, a: 3 Å, b: 4 Å, c: 5 Å, beta: 100°", 1, 10),
    ("X1", "lattice: base-centred-monoclinic, a: 3 Å, b: 4 Å, c: 5 Å, beta: 100°", 2, 12),
    ("X1", "lattice: triclinic, a: 3 Å, b: 4 Å, c: 5 Å, alpha: 80°, beta: 85°, gamma: 95°", 1, 2),
]


@pytest.mark.parametrize("formula, structure, sites, group", NAMED)
def test_named_lattice_has_its_sites_and_its_symmetry(read_record, formula, structure, sites, group):
    crystal = read_record(record(formula.replace("X1", "Cu"), structure)).crystal
    assert len(crystal.sites) == sites
    assert all(0 <= x < 1 for site in crystal.sites for x in site.position)
    assert space_group(crystal) == group


def test_both_descriptions_of_a_rhombohedral_lattice_are_one(read_record):
    # a_hex = 2 a sin(alpha/2), c_hex² = 9a² - 3a_hex²: International Tables A, section 1.5.3.1.
    edge, angle = 3.005, np.radians(70.53)
    wide = 2 * edge * np.sin(angle / 2)
    high = np.sqrt(9 * edge**2 - 3 * wide**2)
    primitive = read_record(record("Hg", f"lattice: rhombohedral, a: {edge} Å, alpha: {angle} rad")).crystal
    hexagonal = read_record(record("Hg", f"lattice: rhombohedral, a: {wide} Å, c: {high} Å")).crystal
    volume = abs(np.linalg.det(ase_cell(primitive)))
    assert abs(np.linalg.det(ase_cell(hexagonal))) == pytest.approx(3 * volume, rel=1e-12)
    assert nearest_neighbour_distance(hexagonal) == pytest.approx(nearest_neighbour_distance(primitive), rel=1e-12)


def test_ties_leave_only_the_free_constants(read_record):
    cubic = read_record(record("Cu", "lattice: fcc, a: 3.6149(2) Å"))
    assert (cubic.crystal.b, cubic.crystal.c, cubic.crystal.c_over_a) == (None, None, None)
    assert (cubic.crystal.alpha, cubic.crystal.beta, cubic.crystal.gamma) == (90.0, 90.0, 90.0)
    assert list(cubic.inputs) == ["structure.a"]
    rhombohedral = read_record(record("Hg", "lattice: rhombohedral, a: 3.005 Å, alpha: 70.53(2)°"))
    angle = rhombohedral.crystal.alpha
    assert isinstance(angle, Value) and rhombohedral.crystal.angles_tied
    assert rhombohedral.crystal.beta is angle and rhombohedral.crystal.gamma is angle
    assert list(rhombohedral.inputs) == ["structure.a", "structure.alpha"]
    assert angle.si == pytest.approx(np.radians(70.53)) and angle.si_uncertainty == pytest.approx(np.radians(0.02))


def test_hcp_without_a_ratio_takes_the_ideal_one_and_says_so(read_record):
    magnesium = read_record(record("Mg", "lattice: hcp, a: 3.209 Å"))
    assert magnesium.crystal.c_over_a.si == pytest.approx(np.sqrt(8 / 3), rel=1e-15)
    assert magnesium.inputs["structure.c_over_a"].note == "ideal ratio of close-packed spheres, assumed"
    assert [str(remark) for remark in magnesium.remarks][0] == (
        "m/copper.yaml:1:1: remark: the record has no electrons; nothing about the electron gas can be derived. Add"
        " valence or density."
    )
    assert str(magnesium.remarks[1]) == (
        "m/copper.yaml:3:12: remark: hcp has neither c nor c/a; the ideal ratio c/a = √(8/3) is taken."
        " Add 'c' or 'c/a'."
    )
    # Twelve equal neighbours are what makes it ideal.
    assert nearest_neighbour_distance(magnesium.crystal) == pytest.approx(3.209e-10, rel=1e-12)


def test_listed_atoms_replace_the_implied_basis_and_take_the_centring(read_record):
    atoms = "[{element: Cu, position: [0, 0, 0]}, {element: Zn, position: [1/2, 0.5, 0.5000(3)]}]"
    crystal = read_record(record("CuZn", f"lattice: fcc, a: 5 Å, atoms: {atoms}")).crystal
    assert space_group(crystal) == 225
    assert [site.element for site in crystal.sites] == ["Cu"] * 4 + ["Zn"] * 4


def test_coincident_atoms_count_once(read_record):
    atoms = "[{element: Cu, position: [0, 0, 0]}, {element: Cu, position: [0.5, 0.5, 0.5]}]"
    assert len(read_record(record("Cu", f"lattice: bcc, a: 3 Å, atoms: {atoms}")).crystal.sites) == 2


def test_atoms_may_share_a_site(read_record):
    atoms = "[{element: Al, position: [0, 0, 0], occupancy: 0.3}, {element: Ga, position: [0, 0, 0], occupancy: 0.7},\n"
    atoms += "   {element: As, position: [1/4, 1/4, 1/4]}]"
    crystal = read_record(record("Al0.3Ga0.7As", f"lattice: fcc, a: 5.65 Å, atoms: {atoms}")).crystal
    assert len(crystal.sites) == 12
    assert sum(site.occupancy for site in crystal.sites) == pytest.approx(8)


@pytest.mark.parametrize(
    "written, meant", [(0.3333, 1 / 3), (0.667, 2 / 3), (0.1667, 1 / 6), (0.9996, 0), (-0.25, 0.75)]
)
def test_position_near_a_simple_fraction_is_that_fraction(written, meant):
    assert snapped(np.array([written])) == pytest.approx([meant], abs=1e-15)


def test_position_away_from_simple_fractions_is_kept():
    assert snapped(np.array([0.2345])) == [0.2345]


# Marezio, Acta Cryst. 20, 723 (1966): In2O3, I a -3, a = 10.117(1) Å.
BIXBYITE = (
    "a: 10.117(1) Å, space group: {group}, atoms: [{{element: In, position: [1/4, 1/4, 1/4]}}, {{element: In, position:"
    " [0.466, 0, 1/4]}}, {{element: O, position: [0.390, 0.154, 0.382]}}]"
)


@pytest.mark.parametrize("group", ["Ia-3", "I a -3", "206", '"I a -3"', "-I 2b 2c 3"])
def test_space_group_spreads_the_asymmetric_unit(read_record, group):
    crystal = read_record(record("In2O3", BIXBYITE.format(group=group))).crystal
    assert crystal.lattice == "bcc" and len(crystal.sites) == 80
    assert space_group(crystal) == 206
    ours = {(site.element, *(round(x, 6) % 1 for x in site.position)) for site in crystal.sites}
    theirs = ase.spacegroup.crystal(
        ["In", "In", "O"], [(0.25, 0.25, 0.25), (0.466, 0, 0.25), (0.390, 0.154, 0.382)], spacegroup=206,
        cellpar=[10.117] * 3 + [90] * 3,
    )  # fmt: skip
    symbols, positions = theirs.get_chemical_symbols(), theirs.get_scaled_positions()
    assert ours == {(e, *(round(x, 6) % 1 for x in p)) for e, p in zip(symbols, positions, strict=True)}


@pytest.mark.parametrize(
    "structure, name, free",
    [
        ("space group: 225, a: 4 Å", "fcc", ["a"]),
        ("space group: Fd-3m, lattice: diamond, a: 4 Å", "diamond", ["a"]),
        ("space group: 139, a: 4 Å, c: 5 Å", "bct", ["a", "c"]),
        ("space group: 194, a: 4 Å, c/a: 1.6", "hexagonal", ["a", "c_over_a"]),
        ("space group: R-3m, a: 4 Å, c: 10 Å", "rhombohedral", ["a", "c"]),
        ("space group: R-3m, a: 4 Å, alpha: 57°", "rhombohedral", ["a", "alpha"]),
        ("space group: 64, a: 4 Å, b: 5 Å, c: 6 Å", "base-centred-orthorhombic", ["a", "b", "c"]),
        ("space group: 14, a: 4 Å, b: 5 Å, c: 6 Å, beta: 100°", "monoclinic", ["a", "b", "c", "beta"]),
        ("space group: P 1 1 2, a: 4 Å, b: 5 Å, c: 6 Å, gamma: 100°", "monoclinic", ["a", "b", "c", "gamma"]),
        (
            "space group: 1, a: 4 Å, b: 5 Å, c: 6 Å, alpha: 80°, beta: 85°, gamma: 95°",
            "triclinic",
            ["a", "b", "c", "alpha", "beta", "gamma"],
        ),
    ],
)
def test_space_group_ties_the_cell_as_its_system_does(read_record, structure, name, free):
    atoms = "atoms: [{element: Cu, position: [0, 0, 0]}]"
    read = read_record(record("Cu", f"{structure}, {atoms}"))
    assert read.crystal.lattice == name
    assert list(read.inputs) == [f"structure.{key}" for key in free]


def test_nearest_neighbour_distance_of_a_skew_cell(read_record):
    crystal = read_record(record("Hg", "lattice: rhombohedral, a: 4 Å, alpha: 110°")).crystal
    vectors = np.array(np.meshgrid(*[range(-3, 4)] * 3)).reshape(3, -1).T @ ase_cell(crystal)
    distances = np.linalg.norm(vectors, axis=1)
    assert nearest_neighbour_distance(crystal) == pytest.approx(1e-10 * distances[distances > 0.1].min(), rel=1e-12)
