"""Crystal: what the cell and the atoms in it fix."""

import numpy as np
from scipy import constants as c

from sheetgen.physics import crystals
from sheetgen.quantities.declaration import Comparison, Declarations

declarations = Declarations()
quantity, step = declarations.quantity, declarations.step
BOTH = (3, 2)  # a structure says the same of a three- and of a two-dimensional gas
CRYSTAL = {"section": "Crystal", "dimensions": BOTH}


@step(dimensions=BOTH)
def cell(lattice_a, lattice_b, lattice_c, lattice_c_over_a, lattice_alpha, lattice_beta, lattice_gamma):
    """Rows a, b, c of the conventional cell; what a record leaves out equals a."""
    b = np.where(np.isnan(lattice_b), lattice_a, lattice_b)
    c_over_a = np.where(np.isnan(lattice_c_over_a), 1.0, lattice_c_over_a)
    c_axis = np.where(np.isnan(lattice_c), lattice_a * c_over_a, lattice_c)
    lengths = np.broadcast_arrays(lattice_a, b, c_axis)
    angles = np.broadcast_arrays(lattice_alpha, lattice_beta, lattice_gamma)
    return crystals.cell_matrix(np.stack(lengths, axis=-1), np.stack(angles, axis=-1))


@quantity(
    symbol=r"N_\mathrm{c}",
    unit="1",
    formula=r"N_\mathrm{c}",
    source="hahn2005",
    carries_uncertainty=False,
    **CRYSTAL,
)
def atoms_per_cell(atoms_in_cell):
    """Atoms per conventional cell

    Occupancies are counted, the centring is applied, and sites that coincide count once.
    """
    return atoms_in_cell


@quantity(
    symbol=r"V_\mathrm{c}",
    unit="angstrom^3",
    formula=r"a b c \sqrt{1 - \cos^2\alpha - \cos^2\beta - \cos^2\gamma + 2 \cos\alpha \cos\beta \cos\gamma}",
    source="hahn2005",
    **CRYSTAL,
)
def cell_volume(cell):
    """Volume of the conventional cell"""
    return np.abs(np.linalg.det(cell))


@quantity(
    symbol=r"n_\mathrm{at}",
    unit="1/nm^3",
    formula=r"\frac{N_\mathrm{c}}{V_\mathrm{c}}",
    source="ashcroft1976, ch. 1",
    **CRYSTAL,
)
def atomic_density(atoms_per_cell, cell_volume):
    """Number density of atoms"""
    return atoms_per_cell / cell_volume


@quantity(
    symbol=r"\rho_\mathrm{m}",
    unit="g/cm^3",
    formula=r"\frac{1}{V_\mathrm{c}} \sum_i m_i",
    source="prohaska2022",
    comparison=Comparison(
        measured="mass_density",
        ratio="density ratio",
        above="the specimen is denser than its cell: the cell belongs to another temperature or phase, or there is "
        "more in it than the formula says",
        below="the specimen is lighter than its cell: pores, vacancies, or a cell of a lower temperature",
    ),
    **CRYSTAL,
)
def mass_density(cell_mass, cell_volume):
    """X-ray mass density

    The sum runs over the atoms of the cell, with the abridged standard atomic weights, taken as exact.
    """
    return cell_mass * c.gram / c.N_A / cell_volume


@quantity(
    symbol=r"d_\mathrm{nn}",
    unit="angstrom",
    formula=r"\min_{i \neq j} \left| \mathbf{r}_i - \mathbf{r}_j \right|",
    source="hahn2005",
    **CRYSTAL,
)
def nearest_neighbour_distance(cell, neighbour_vector):
    """Nearest-neighbour distance

    The shortest distance between sites, periodic images included.
    """
    return np.linalg.norm(np.einsum("...i,...ij->...j", neighbour_vector, cell), axis=-1)


@quantity(symbol="z", unit="1", formula="z", source="hahn2005", carries_uncertainty=False, **CRYSTAL)
def coordination_number(neighbour_count):
    """Coordination number

    Neighbours within 1 % of the nearest-neighbour distance, as the mean over the sites weighted by occupancy.
    """
    return neighbour_count


@quantity(
    symbol=r"d_1, d_2, d_3",
    unit="angstrom",
    formula=r"d_1, d_2, d_3",
    source="hahn2005",
    form="shells",
    carries_uncertainty=False,
    **CRYSTAL,
)
def neighbour_shells(shells):
    """First three shells of neighbours

    A shell holds all distances within 1 % of the shortest in it and is named by that distance; its count is
    taken as for the coordination number.
    """
    return shells


@quantity(
    symbol="f",
    unit="1",
    formula=r"\frac{\pi}{6} n_\mathrm{at} d_\mathrm{nn}^3",
    source="hahn2005",
    needs=("single_element",),
    **CRYSTAL,
)
def packing_fraction(atomic_density, nearest_neighbour_distance):
    """Packing fraction of equal touching spheres"""
    return np.pi / 6 * atomic_density * nearest_neighbour_distance**3


@quantity(
    symbol="r_0",
    unit="angstrom",
    formula=r"\left( \frac{3}{4 \pi n_\mathrm{at}} \right)^{1/3}",
    source="ashcroft1976, ch. 1",
    **CRYSTAL,
)
def wigner_seitz_radius(atomic_density):
    """Wigner–Seitz radius: the sphere that holds one atom"""
    return np.cbrt(3 / (4 * np.pi * atomic_density))


@step(dimensions=BOTH)
def primitive_cell_volume(cell_volume, primitive_basis):
    """Volume of the cell of the largest translation group of the atoms."""
    return cell_volume * np.abs(np.linalg.det(primitive_basis))


@quantity(
    symbol=r"\Omega_\mathrm{BZ}",
    unit="1/nm^3",
    formula=r"\frac{(2 \pi)^3}{V_\mathrm{p}}",
    source="ashcroft1976, ch. 5",
    **CRYSTAL,
)
def zone_volume(primitive_cell_volume):
    """Volume of the Brillouin zone

    V_p is the volume of the primitive cell: the cell of the largest group of translations that map the
    atoms onto themselves.
    """
    return (2 * np.pi) ** 3 / primitive_cell_volume


@quantity(
    symbol=r"k_\mathrm{face}",
    unit="1/nm",
    formula=r"\frac{1}{2} \min_{\mathbf{G} \neq 0} \left| \mathbf{G} \right|",
    source="ashcroft1976, ch. 5",
    **CRYSTAL,
)
def nearest_zone_face(cell, zone_face_indices):
    """Distance of the nearest zone face

    Half the shortest reciprocal vector of the primitive lattice.
    """
    return crystals.half_reciprocal_length(cell, zone_face_indices)


@quantity(
    symbol=r"k_\mathrm{zone}",
    unit="1/nm",
    formula=r"\frac{1}{2} \min_{S_\mathbf{G} \neq 0} \left| \mathbf{G} \right|",
    source="ashcroft1976, ch. 6 and 9",
    **CRYSTAL,
)
def nearest_diffracting_face(cell, diffracting_face_indices):
    """Distance of the nearest diffracting zone face

    Half the shortest reciprocal vector whose structure factor is not zero, the atoms weighted by their
    atomic numbers: only such a face can open a gap in first order.
    """
    return crystals.half_reciprocal_length(cell, diffracting_face_indices)
