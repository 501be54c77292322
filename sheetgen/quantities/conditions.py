"""What the numbers take for granted, each with an indicator that shows how far a material keeps to it."""

import numpy as np
from scipy import constants as c

from sheetgen.quantities.declaration import Declarations

declarations = Declarations()
assumption = declarations.assumption
PRACTICE = "common practice, no source"


@assumption(
    indicator="T/T_F",
    formula=r"T/T_\mathrm{F}",
    strained=0.1,
    broken=0.3,
    source=PRACTICE,
    listed_by="temperature",
)
def degenerate_gas(temperature, fermi_temperature):
    """Degenerate gas

    Only electrons within a few times the thermal energy of the Fermi level take part. Far below the Fermi
    temperature they are a small share; near it the formulas for T = 0 no longer hold.
    """
    return temperature / fermi_temperature


@assumption(
    indicator="r_s*",
    formula=r"r_\mathrm{s}^*",
    strained=4,
    broken=40,
    source=PRACTICE,
)
def independent_electrons(effective_electron_sphere_radius):
    """Independent electrons

    Each electron feels only the mean of the others. The larger the space per electron, measured in effective
    Bohr radii, the more the repulsion counts beside the kinetic energy.
    """
    return effective_electron_sphere_radius


@assumption(
    indicator="k_F/k_zone",
    formula=r"k_\mathrm{F}/k_\mathrm{zone}",
    strained=0.9,
    broken=None,
    source=PRACTICE,
)
def flat_potential(fermi_to_zone_ratio):
    """Flat potential

    The ions are smeared out. Where the Fermi sphere comes near a zone face or is cut by it, the lattice bends
    the bands just where it matters.
    """
    return fermi_to_zone_ratio


@assumption(
    indicator="interband threshold/photon energy",
    formula=r"E_\mathrm{interband}/\hbar\omega",
    strained=2,
    broken=1,
    below=True,
    source=PRACTICE,
    listed_by="photon_energy",
)
def one_band(measured_interband_threshold, photon_energy):
    """One band only

    Light moves electrons within their band; from the threshold of transitions between bands on, these absorb
    and screen as well.
    """
    return measured_interband_threshold / photon_energy


@assumption(
    indicator="k_F·l",
    formula=r"k_\mathrm{F} l",
    strained=10,
    broken=1,
    below=True,
    source="ioffe1960",
    listed_by="resistivity",
)
def defined_paths(path_wavevector_product):
    """Defined paths

    Between two collisions an electron runs many wavelengths. Where the path shrinks to the wavelength the
    picture of flights and collisions ends.
    """
    return path_wavevector_product


@assumption(
    indicator="T/θ",
    formula=r"T/\theta",
    strained=0.1,
    broken=None,
    strained_until=1,
    source="ashcroft1976, ch. 26",
    listed_by="resistivity",
)
def elastic_scattering(resistivity_temperature, transport_debye_temperature):
    """Elastic scattering

    Collisions turn an electron without changing its energy: true of defects at low and of phonons at high
    temperature, not between about a tenth of the Debye temperature and the Debye temperature itself.
    """
    return resistivity_temperature / transport_debye_temperature


@assumption(
    indicator="δ/l",
    formula=r"\delta/l",
    strained=10,
    broken=1,
    below=True,
    source="pippard1947",
    listed_by="resistivity",
)
def classical_skin_effect(skin_depth, mean_free_path):
    """Classical skin effect

    The field hardly changes along a free path. In pure metals in the cold the path outgrows the skin depth.
    """
    return skin_depth / mean_free_path


@assumption(
    indicator="T/T_c",
    formula=r"T/T_\mathrm{c}",
    strained=None,
    broken=1,
    below=True,
    source="tinkham1996, ch. 1",
    listed_by="temperature",
)
def normal_state(temperature, measured_critical_temperature):
    """Normal state

    Below its critical temperature a superconductor carries current without resistance, and its heat capacity
    is not that of free electrons.
    """
    return temperature / measured_critical_temperature


@assumption(
    indicator="independent components of the conductivity tensor",
    formula=r"N_\sigma",
    strained=1,
    broken=None,
    source="nye1957, ch. 1",
)
def isotropy(tensor_components):
    """Isotropy

    All directions are alike, as in a cubic crystal. In any other, resistance and reflectance depend on the
    direction, and one number is an average or belongs to one axis.
    """
    return tensor_components


@assumption(
    indicator="n^(1/3)·effective Bohr radius",
    formula=r"n^{1/3} a_\mathrm{B}^*",
    strained=0.26,
    broken=None,
    below=True,
    source="edwards1978",
)
def delocalised_carriers(carrier_density, effective_mass, background_permittivity):
    """Delocalised carriers

    The carriers of a doped semiconductor form one gas only where the orbitals of the dopants overlap (Mott's
    criterion); below it they freeze out onto the dopants in the cold.
    """
    bohr_radius = c.value("Bohr radius") * background_permittivity * c.m_e / effective_mass
    return np.cbrt(carrier_density) * bohr_radius


@assumption(
    indicator="T/T_order",
    formula=r"T/T_\mathrm{order}",
    strained=None,
    broken=1,
    below=True,
    source="ashcroft1976, ch. 33",
    listed_by="temperature",
)
def magnetic_disorder(temperature, measured_magnetic_ordering_temperature):
    """No magnetic order

    The spins point either way at random but for the field. Below an ordering temperature they hold one another,
    and the susceptibility of free electrons says nothing.
    """
    return temperature / measured_magnetic_ordering_temperature


@assumption(
    id="bulk",
    indicator="d/λ_F",
    formula=r"d/\lambda_\mathrm{F}",
    strained=10,
    broken=1,
    below=True,
    source=PRACTICE,
    listed_by="specimen",
    scope="specimen",
)
def many_wavelengths(specimen_size, fermi_wavelength):
    """Bulk

    The specimen is so thick that it holds the levels of the bulk; near the Fermi wavelength it has a few
    subbands of its own.
    """
    return specimen_size / fermi_wavelength


@assumption(
    id="bulk",
    indicator="d/l",
    formula=r"d/l",
    strained=10,
    broken=None,
    below=True,
    source=PRACTICE,
    listed_by="specimen",
    scope="specimen",
)
def many_paths(specimen_size, bulk_mean_free_path):
    """Bulk

    The specimen is so thick that its surfaces do not shorten the paths; below about ten mean free paths the
    transport numbers of the bulk do not apply to it.
    """
    return specimen_size / bulk_mean_free_path


@assumption(
    indicator="level spacing/k_BT",
    formula=r"\delta/k_\mathrm{B} T",
    strained=0.1,
    broken=1,
    source="kubo1962",
    listed_by="specimen",
    scope="specimen",
)
def continuum(level_spacing, reference_temperature):
    """Continuum of levels

    The levels lie so close that heat blurs them; in the smallest particles single levels show.
    """
    return level_spacing / (c.k * reference_temperature)
