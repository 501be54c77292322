"""CIFs beside a record: cells with their uncertainties, symmetry, occupancies, and what is wrong with a broken one."""

from __future__ import annotations

import io

import ase.io
import gemmi
import pytest

RECORD = "name: X\nformula: {formula}\nstructure: {{cif: x.cif}}\nelectrons: {{density: 1e22 cm^-3}}\n"

# Abrahams and Bernstein, J. Chem. Phys. 55, 3206 (1971), recalled; what matters here are the brackets.
RUTILE = """\
data_rutile
_cell_length_a 4.593659(18)
_cell_length_b 4.593659(18)
_cell_length_c 2.958682(8)
_cell_angle_alpha 90
_cell_angle_beta 90
_cell_angle_gamma 90
_cell_measurement_temperature 298(2)
_space_group_name_H-M_alt 'P 42/m n m'
loop_
_atom_site_label
_atom_site_type_symbol
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
_atom_site_occupancy
Ti1 Ti4+ 0 0 0 1
O1 O2- 0.30479(10) 0.30479(10) 0 1.0(0)
"""
ALLOY = """\
data_alloy
_cell_length_a 2.95
_cell_length_b 2.95
_cell_length_c 2.95
_cell_angle_alpha 90.
_cell_angle_beta 90.
_cell_angle_gamma 90.
loop_
_symmetry_equiv_pos_as_xyz
'x, y, z'
'x+1/2, y+1/2, z+1/2'
loop_
_atom_site_label
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
_atom_site_occupancy
CU1 0 0 0 0.6
Zn1 0 0 0 0.4
"""


@pytest.fixture
def crystal(read_record):
    """The crystal of a record whose structure is the given CIF."""
    return lambda cif, formula="TiO2": read_record(RECORD.format(formula=formula), files={"x.cif": cif}).crystal


@pytest.fixture
def cif_faults(faults):
    """The faults of a record whose structure is the given CIF."""
    return lambda cif, formula="TiO2": faults(RECORD.format(formula=formula), files={"x.cif": cif})


def test_cell_keeps_uncertainties_temperature_and_ties(crystal):
    rutile = crystal(RUTILE)
    assert rutile.lattice == "tetragonal"
    assert (rutile.a.value, rutile.a.standard_uncertainty, rutile.a.unit) == (4.593659, pytest.approx(1.8e-5), "Å")
    assert (rutile.c.value, rutile.c.standard_uncertainty) == (2.958682, pytest.approx(8e-6))
    assert rutile.a.temperature == 298.0
    assert rutile.b is None and rutile.gamma == 90.0
    assert str(rutile.a.place) == "m/x.cif:2"
    assert rutile.a.note == "from x.cif"


def test_sites_are_those_of_ase(crystal):
    ours = {(site.element, *(round(x, 5) % 1 for x in site.position)) for site in crystal(RUTILE).sites}
    theirs = ase.io.read(io.BytesIO(RUTILE.encode()), format="cif")
    symbols, positions = theirs.get_chemical_symbols(), theirs.get_scaled_positions()
    assert ours == {(e, *(round(float(x), 5) % 1 for x in p)) for e, p in zip(symbols, positions, strict=True)}
    assert len(ours) == 6


def test_partial_occupancy_and_listed_operations(crystal):
    alloy = crystal(ALLOY, "Cu0.6Zn0.4")
    # Two operations without the cubic ones make a triclinic cell, whatever its edges look like.
    assert alloy.lattice == "triclinic" and alloy.beta.value == 90.0
    assert [(site.element, site.occupancy) for site in alloy.sites] == [("Cu", 0.6)] * 2 + [("Zn", 0.4)] * 2


def test_listed_operations_of_a_whole_group_tie_the_cell(crystal):
    operations = "\n".join(f"'{operation.triplet()}'" for operation in gemmi.SpaceGroup("P 42/m n m").operations())
    listed = f"loop_\n_space_group_symop_operation_xyz\n{operations}\n"
    rutile = crystal(RUTILE.replace("_space_group_name_H-M_alt 'P 42/m n m'\n", listed))
    assert (rutile.lattice, rutile.b, len(rutile.sites)) == ("tetragonal", None, 6)


@pytest.mark.parametrize("temperature", ["?", "room", "-5", "1e9"])
def test_an_odd_temperature_is_as_good_as_none(crystal, temperature):
    assert crystal(RUTILE.replace("298(2)", temperature)).a.temperature is None


def test_inputs_are_the_free_constants(read_record):
    record = read_record(RECORD.format(formula="TiO2"), files={"x.cif": RUTILE})
    assert list(record.inputs) == ["structure.a", "structure.c", "electrons.density"]


@pytest.mark.parametrize(
    "symmetry",
    ["_symmetry_space_group_name_Hall '-P 4n 2n'", "_space_group_IT_number 136", "_symmetry_Int_Tables_number 136"],
)
def test_symmetry_by_other_tags(crystal, symmetry):
    assert len(crystal(RUTILE.replace("_space_group_name_H-M_alt 'P 42/m n m'", symmetry)).sites) == 6


def test_rhombohedral_axes_are_told_by_the_cell(crystal):
    cif = RUTILE.split("loop_")[0].replace("'P 42/m n m'", "'R -3 m'").replace("_angle_alpha 90", "_angle_alpha 57.2")
    cif = cif.replace("_angle_beta 90", "_angle_beta 57.2").replace("_angle_gamma 90", "_angle_gamma 57.2")
    cif = cif.replace("2.958682(8)", "4.593659(18)")
    tags = ["loop_", *(f"_atom_site_{tag}" for tag in ("label", "fract_x", "fract_y", "fract_z"))]
    bismuth = crystal(cif + "\n".join([*tags, "Bi1 0.2339 0.2339 0.2339\n"]), "Bi")
    assert bismuth.lattice == "rhombohedral" and bismuth.angles_tied and len(bismuth.sites) == 2


BROKEN = [
    (
        RUTILE.replace("_cell_length_b 4.593659(18)\n", "_cell_length_b\n"),
        "m/x.cif:3: not readable as CIF: _cell_length_b has no value. Mend the file, or give lattice and atoms in"
        " the record.",
    ),
    (
        "not a cif",
        "m/x.cif:1:1: not readable as CIF: expected block header (data_). Mend the file, or give lattice and"
        " atoms in the record.",
    ),
    (
        "data_a\n_x 1\n",
        "m/x.cif: no block with a cell; expected one. Keep the block of this material alone, with its cell.",
    ),
    (
        RUTILE + RUTILE.replace("data_rutile", "data_other"),
        "m/x.cif: 2 blocks ('rutile, other') with a cell; expected one. Keep the block of this material alone,"
        " with its cell.",
    ),
    (
        RUTILE.replace("_cell_length_c 2.958682(8)", "_cell_length_c ?"),
        "m/x.cif: '_cell_length_c' has no value; expected all lengths and angles of the cell.",
    ),
    (
        RUTILE.replace("_cell_length_c 2.958682(8)", "_cell_length_c 0"),
        "m/x.cif:4: _cell_length_c: '0 Å' is out of the physical range of a length; expected 1 Å to 10000 Å."
        " Check the number and its unit.",
    ),
    (
        RUTILE.replace("_cell_length_b 4.593659(18)", "_cell_length_b 4.6"),
        "m/x.cif: _cell_length_b is 4.6 Å, but the symmetry makes it equal to a; correct one of them.",
    ),
    (
        RUTILE.replace("_cell_angle_beta 90", "_cell_angle_beta 91"),
        "m/x.cif: _cell_angle_beta is 91°, but the symmetry fixes 90°; correct one of them.",
    ),
    (
        RUTILE.replace("_space_group_name_H-M_alt 'P 42/m n m'", "_other x"),
        "m/x.cif: no symmetry is stated; expected a space group or its operations. Add the one or the other.",
    ),
    (
        RUTILE.replace("'P 42/m n m'", "'P 99'"),
        "m/x.cif: 'P 99' is no space group; expected a symbol such as 'Fm-3m' or a number from 1 to 230.",
    ),
    (
        ALLOY.replace("'x, y, z'", "'x, y, 2**z'"),
        "m/x.cif: 'x, y, 2**z' is no symmetry operation; expected such as '-x, y+1/2, -z'.",
    ),
    (
        RUTILE.split("loop_")[0],
        "m/x.cif: 0 atom sites with fractional coordinates; expected 1 to 500."
        " Give the loop of _atom_site_fract_x, y and z.",
    ),
    (
        RUTILE.replace("Ti1 Ti4+", "Xx1 Xx"),
        "m/x.cif: the atom site 'Xx1' names no element; expected a type symbol such as Ti.",
    ),
    (
        RUTILE.replace("Ti1 Ti4+ 0", "Ti1 Ti4+ ?"),
        "m/x.cif: the atom site 'Ti1' has no position; expected three fractions of the cell edges.",
    ),
    (
        RUTILE.replace("Ti1 Ti4+ 0", "Ti1 Ti4+ x"),
        "m/x.cif: the atom site 'Ti1': 'x' does not begin with a number; expected a form such as 1.03(2), 1.03(2)e19 or"
        " 1.03 ± 0.02.",
    ),
    (
        RUTILE.replace("0 0 0 1\n", "0 0 0 2\n"),
        "m/x.cif: the atom site 'Ti1' has the occupancy 2; expected above 0 and at most 1.",
    ),
    (
        RUTILE.replace("Ti1 Ti4+ 0 0 0 1", "Ti1 Ti4+ 0.31 0.31 0 1"),
        "m/x.cif: Ti at (0.31, 0.31, 0) and O at (0.3048, 0.3048, 0) overlap; correct the positions, or occupancies"
        " that exceed 1 in sum.",
    ),
    (
        RUTILE.replace("O1 O2-", "O1 N3-"),
        "m/copper.yaml:2:10: formula 'TiO2' disagrees with the content of the cell, Ti2 N4; expected the same elements"
        " in the same ratio. Correct the formula, the lattice or the atoms.",
    ),
]


@pytest.mark.parametrize("cif, message", BROKEN)
def test_broken_cif_is_a_fault_with_its_mend(cif_faults, cif, message):
    assert cif_faults(cif) == [message]
