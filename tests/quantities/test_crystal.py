"""Crystals of the named lattices, against what every textbook on crystals says of them and against ASE."""

import math

import pytest
from quantities.small import handbook_of

RECORD = """\
name: {name}
formula: {formula}
structure:
{structure}
electrons:
  valence: {valence}
"""
FCC, BCC, SC, DIAMOND, HCP = "fcc", "bcc", "sc", "diamond", "hcp"


def crystal(folder, formula: str, structure: str, valence: str = "1"):
    """The sheet of one invented crystal."""
    indented = "\n".join(f"  {line}" for line in structure.splitlines())
    text = RECORD.format(name="Crystal", formula=formula, structure=indented, valence=valence)
    return handbook_of(folder, crystal=text)["crystal"]


# Atoms per cell, neighbours, distance and packing of touching spheres: elementary geometry.
@pytest.mark.parametrize(
    "lattice, atoms, neighbours, distance, packing, primitive",
    [
        (SC, 1, 6, 1, math.pi / 6, 1),
        (BCC, 2, 8, math.sqrt(3) / 2, math.pi * math.sqrt(3) / 8, 2),
        (FCC, 4, 12, 1 / math.sqrt(2), math.pi * math.sqrt(2) / 6, 4),
        (DIAMOND, 8, 4, math.sqrt(3) / 4, math.pi * math.sqrt(3) / 16, 4),
    ],
)
def test_cubic_lattices(tmp_path, lattice, atoms, neighbours, distance, packing, primitive):
    sheet = crystal(tmp_path, "Cu", f"lattice: {lattice}\na: {{value: 4 Å, at: 293 K, from: here}}")
    value = {id: sheet.entries(id)[0]["value"] for id in sheet.data["quantities"] if id != "chemical_potential"}
    assert value["atoms_per_cell"] == atoms
    assert value["coordination_number"] == neighbours
    assert value["nearest_neighbour_distance"] == pytest.approx(4 * distance, rel=1e-12)
    assert value["packing_fraction"] == pytest.approx(packing, rel=1e-12)
    assert value["cell_volume"] == pytest.approx(64, rel=1e-12)
    assert value["zone_volume"] == pytest.approx(primitive * (2 * math.pi) ** 3 / 0.4**3, rel=1e-12)


# Shells of the cubic lattices: distances squared in units of a² and counts, by elementary counting.
@pytest.mark.parametrize(
    "lattice, shells",
    [
        (SC, [(1, 6), (2, 12), (3, 8)]),
        (BCC, [(0.75, 8), (1, 6), (2, 12)]),
        (FCC, [(0.5, 12), (1, 6), (1.5, 24)]),
        (DIAMOND, [(3 / 16, 4), (0.5, 12), (11 / 16, 12)]),
    ],
)
def test_neighbour_shells(tmp_path, lattice, shells):
    sheet = crystal(tmp_path, "Cu", f"lattice: {lattice}\na: {{value: 4 Å, at: 293 K, from: here}}")
    (entry,) = sheet.entries("neighbour_shells")
    assert entry["depends_on"] == ["structure.a"]
    assert entry["value"] == [
        {"distance": pytest.approx(4 * math.sqrt(square), rel=1e-12), "count": count} for square, count in shells
    ]


# Shortest reciprocal vectors: (111) of fcc, (110) of bcc, (100) of sc, and for hcp the face (10-10), whose
# structure factor is 1/2, against (0002) and the absent (0001).
@pytest.mark.parametrize(
    "lattice, face",
    [(FCC, math.sqrt(3)), (BCC, math.sqrt(2)), (SC, 1.0), (DIAMOND, math.sqrt(3))],
)
def test_nearest_faces_of_cubic_lattices(tmp_path, lattice, face):
    sheet = crystal(tmp_path, "Cu", f"lattice: {lattice}\na: {{value: 4 Å, at: 293 K, from: here}}")
    expected = math.pi / 0.4 * face
    for id in ("nearest_zone_face", "nearest_diffracting_face"):
        assert sheet.entries(id)[0]["value"] == pytest.approx(expected, rel=1e-12)


def test_hexagonal_close_packing_hides_its_first_face(tmp_path):
    sheet = crystal(tmp_path, "Mg", "lattice: hcp\na: {value: 3.2 Å, from: here}\nc/a: {value: 1.62, from: here}", "2")
    # (0001) bounds the zone, but its structure factor vanishes; (10-10) is the nearest that diffracts.
    assert sheet.entries("nearest_zone_face")[0]["value"] == pytest.approx(math.pi / (0.32 * 1.62), rel=1e-12)
    expected = math.pi / 0.32 * 2 / math.sqrt(3)
    assert sheet.entries("nearest_diffracting_face")[0]["value"] == pytest.approx(expected, rel=1e-12)


def test_a_general_cell_has_the_volume_of_its_vectors(tmp_path):
    sheet = crystal(
        tmp_path,
        "Bi",
        "lattice: triclinic\na: {value: 3 Å, from: here}\nb: {value: 4 Å, from: here}\nc: {value: 5 Å, from: here}\n"
        "alpha: {value: 80°, from: here}\nbeta: {value: 95°, from: here}\ngamma: {value: 110°, from: here}",
    )
    # Triple product of explicit vectors: a along x, b in the plane, c from its angles with both.
    cosines = [math.cos(math.radians(angle)) for angle in (80, 95, 110)]
    sine = math.sin(math.radians(110))
    c_y = (cosines[0] - cosines[1] * cosines[2]) / sine
    c_z = math.sqrt(1 - cosines[1] ** 2 - c_y**2)
    assert sheet.entries("cell_volume")[0]["value"] == pytest.approx(3 * 4 * sine * 5 * c_z, rel=1e-12)


# CIAAW abridged standard atomic weights 2021: Cu 63.546, Zn 65.38.
def test_mass_density_of_an_ordered_alloy(tmp_path):
    sheet = crystal(tmp_path, "CuZn", "lattice: cscl\na: {value: 2.95 Å, from: here}", "{Cu: 1, Zn: 2}")
    grams = (63.546 + 65.38) / 6.02214076e23
    assert sheet.entries("mass_density")[0]["value"] == pytest.approx(grams / 2.95e-8**3, rel=1e-12)
    assert sheet.missing["packing_fraction"] == "needs a single element (equal spheres)"
    assert sheet.entries("electron_density")[0]["value"] == pytest.approx(3 / 0.295**3, rel=1e-12)


def test_one_element_listed_twice_on_a_site_adds_up(tmp_path):
    atom = "{element: Cu, position: [0, 0, 0], occupancy: 0.5}"
    structure = f"lattice: fcc\na: {{value: 4 Å, from: here}}\natoms:\n  - {atom}\n  - {atom}"
    sheet = crystal(tmp_path, "Cu", structure)
    assert sheet.entries("atoms_per_cell")[0]["value"] == 4
    full = structure.replace("occupancy: 0.5", "occupancy: 1")
    assert crystal(tmp_path / "full", "Cu", full).entries("atoms_per_cell")[0]["value"] == 4
