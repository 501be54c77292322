"""Electron gas at T = 0: everything that the density of electrons and their mass fix."""

import numpy as np
from scipy import constants as c

from sheetgen.physics import zones
from sheetgen.quantities.declaration import Comparison, Declarations

declarations = Declarations()
quantity, step = declarations.quantity, declarations.step
BOTH = (3, 2)
FLAT = ("flat_potential",)
FERMI = FLAT + ("delocalised_carriers",)
GAS = {"section": "Electron gas at T = 0"}
COULOMB = c.e**2 / (4 * np.pi * c.epsilon_0)
BOHR_RADIUS = c.value("Bohr radius")
VALENCE = ("electrons_per_cell", "single_valley")


@step(dimensions=BOTH)
def effective_mass(effective_mass_ratio):
    """Mass that fixes the density of states."""
    return effective_mass_ratio * c.m_e


@step(dimensions=BOTH)
def conductivity_mass(stated_conductivity_mass_ratio, effective_mass):
    """Mass in transport; the effective mass where a record gives no other."""
    stated = stated_conductivity_mass_ratio * c.m_e
    return np.where(np.isnan(stated), effective_mass, stated)


@step(dimensions=BOTH)
def optical_mass(stated_optical_mass_ratio, effective_mass):
    """Mass in optics; the effective mass where a record gives no other."""
    stated = stated_optical_mass_ratio * c.m_e
    return np.where(np.isnan(stated), effective_mass, stated)


@step(dimensions=BOTH)
def degeneracy(valleys):
    """States per wavevector: two spins in each valley."""
    return 2 * valleys


@step()
def electrons_per_cell(valence, valence_sites):
    """Conduction electrons in the conventional cell, where the record gives a valence."""
    each = valence * valence_sites
    total = np.nansum(each, axis=-1, keepdims=True)
    return np.where(np.all(np.isnan(each), axis=-1, keepdims=True), np.nan, total)


@quantity(
    symbol="n",
    unit="1/nm^3",
    formula=r"\frac{1}{V_\mathrm{c}} \sum_i Z_i",
    source="ashcroft1976, ch. 1",
    **GAS,
)
def electron_density(electrons_per_cell, cell_volume, carrier_density):
    """Density of conduction electrons

    The sum of the valences Z of the sites in the cell, or the carrier density where the record gives that.
    All valleys together.
    """
    return np.where(np.isnan(carrier_density), electrons_per_cell / cell_volume, carrier_density)


@quantity(symbol="n_2", unit="1/cm^2", formula="n_2", source="ando1982", dimensions=(2,), **GAS)
def sheet_density(carrier_sheet_density):
    """Electrons per area

    As the record gives it; all valleys together.
    """
    return carrier_sheet_density


@quantity(
    symbol=r"r_\mathrm{s}",
    unit="1",
    formula=r"\frac{1}{a_0} \left( \frac{3}{4 \pi n} \right)^{1/3}",
    source="ashcroft1976, ch. 1",
    **GAS,
)
def electron_sphere_radius(electron_density):
    """Radius of the sphere that holds one electron, in Bohr radii"""
    return np.cbrt(3 / (4 * np.pi * electron_density)) / BOHR_RADIUS


@quantity(
    id="electron_sphere_radius",
    symbol=r"r_\mathrm{s}",
    unit="1",
    formula=r"\frac{1}{a_0 \sqrt{\pi n_2}}",
    source="ando1982",
    dimensions=(2,),
    **GAS,
)
def electron_disc_radius(sheet_density):
    """Radius of the disc that holds one electron, in Bohr radii"""
    return 1 / np.sqrt(np.pi * sheet_density) / BOHR_RADIUS


@quantity(
    symbol=r"r_\mathrm{s}^*",
    unit="1",
    formula=r"r_\mathrm{s} \frac{m}{m_\mathrm{e} \varepsilon_\mathrm{b}}",
    source="giuliani2005, ch. 1",
    dimensions=BOTH,
    **GAS,
)
def effective_electron_sphere_radius(electron_sphere_radius, effective_mass, background_permittivity):
    """Electron sphere radius in effective Bohr radii

    The Bohr radius grows with the background permittivity and shrinks with the mass; the result says how
    strong the interaction is beside the kinetic energy.
    """
    return electron_sphere_radius * effective_mass / c.m_e / background_permittivity


@quantity(
    symbol=r"k_\mathrm{F}",
    unit="1/nm",
    formula=r"\left( \frac{6 \pi^2 n}{g} \right)^{1/3}",
    source="ashcroft1976, ch. 2",
    **GAS,
)
def fermi_wavevector(electron_density, degeneracy):
    """Fermi wavevector

    g counts the states of each wavevector: two spins times the number of valleys.
    """
    return np.cbrt(6 * np.pi**2 * electron_density / degeneracy)


@quantity(
    id="fermi_wavevector",
    symbol=r"k_\mathrm{F}",
    unit="1/nm",
    formula=r"\left( \frac{4 \pi n_2}{g} \right)^{1/2}",
    source="ando1982",
    dimensions=(2,),
    **GAS,
)
def fermi_wavevector_of_sheet(sheet_density, degeneracy):
    """Fermi wavevector

    g counts the states of each wavevector: two spins times the number of valleys.
    """
    return np.sqrt(4 * np.pi * sheet_density / degeneracy)


@quantity(
    symbol=r"\lambda_\mathrm{F}",
    unit="nm",
    formula=r"\frac{2 \pi}{k_\mathrm{F}}",
    source="ashcroft1976, ch. 2",
    dimensions=BOTH,
    **GAS,
)
def fermi_wavelength(fermi_wavevector):
    """Fermi wavelength"""
    return 2 * np.pi / fermi_wavevector


@quantity(
    symbol=r"E_\mathrm{F}",
    unit="eV",
    formula=r"\frac{\hbar^2 k_\mathrm{F}^2}{2 m}",
    source="ashcroft1976, ch. 2",
    assumes=FERMI,
    dimensions=BOTH,
    **GAS,
)
def fermi_energy(fermi_wavevector, effective_mass):
    """Fermi energy

    Counted from the bottom of the band.
    """
    return (c.hbar * fermi_wavevector) ** 2 / (2 * effective_mass)


@quantity(
    symbol=r"T_\mathrm{F}",
    unit="K",
    formula=r"\frac{E_\mathrm{F}}{k_\mathrm{B}}",
    source="ashcroft1976, ch. 2",
    assumes=FERMI,
    dimensions=BOTH,
    **GAS,
)
def fermi_temperature(fermi_energy):
    """Fermi temperature"""
    return fermi_energy / c.k


@quantity(
    symbol=r"v_\mathrm{F}",
    unit="m/s",
    formula=r"\left( \frac{2 E_\mathrm{F}}{m_\mathrm{c}} \right)^{1/2}",
    source="ashcroft1976, ch. 2",
    assumes=FERMI,
    dimensions=BOTH,
    **GAS,
)
def fermi_velocity(fermi_energy, conductivity_mass):
    """Fermi velocity

    The root mean square over the Fermi surface; ħk_F/m where conductivity mass and effective mass are equal.
    """
    return np.sqrt(2 * fermi_energy / conductivity_mass)


@quantity(
    symbol=r"g(E_\mathrm{F})",
    unit="1/(eV nm^3)",
    formula=r"\frac{3 n}{2 E_\mathrm{F}}",
    source="ashcroft1976, ch. 2",
    assumes=FLAT + ("independent_electrons",),
    **GAS,
)
def density_of_states(electron_density, fermi_energy):
    """Density of states at the Fermi level, both spins and all valleys"""
    return 3 * electron_density / (2 * fermi_energy)


@quantity(
    id="density_of_states",
    symbol=r"g(E_\mathrm{F})",
    unit="1/(eV nm^2)",
    formula=r"\frac{n_2}{E_\mathrm{F}}",
    source="ando1982",
    assumes=FLAT + ("independent_electrons",),
    dimensions=(2,),
    **GAS,
)
def density_of_states_of_sheet(sheet_density, fermi_energy):
    """Density of states at the Fermi level, both spins and all valleys"""
    return sheet_density / fermi_energy


@quantity(
    symbol=r"g(E_\mathrm{F})/n_\mathrm{at}",
    unit="1/eV",
    formula=r"\frac{g(E_\mathrm{F})}{n_\mathrm{at}}",
    source="ashcroft1976, ch. 2",
    assumes=FLAT + ("independent_electrons",),
    **GAS,
)
def density_of_states_per_atom(density_of_states, atomic_density):
    """Density of states at the Fermi level per atom"""
    return density_of_states / atomic_density


@quantity(
    symbol=r"\langle E \rangle",
    unit="eV",
    formula=r"\frac{3}{5} E_\mathrm{F}",
    source="ashcroft1976, ch. 2",
    assumes=FLAT,
    **GAS,
)
def mean_energy(fermi_energy):
    """Mean kinetic energy of an electron"""
    return 3 * fermi_energy / 5


@quantity(
    id="mean_energy",
    symbol=r"\langle E \rangle",
    unit="eV",
    formula=r"\frac{1}{2} E_\mathrm{F}",
    source="ando1982",
    assumes=FLAT,
    dimensions=(2,),
    **GAS,
)
def mean_energy_of_sheet(fermi_energy):
    """Mean kinetic energy of an electron"""
    return fermi_energy / 2


@quantity(
    symbol="p",
    unit="GPa",
    formula=r"\frac{2}{5} n E_\mathrm{F}",
    source="ashcroft1976, ch. 2",
    assumes=FLAT,
    **GAS,
)
def degeneracy_pressure(electron_density, fermi_energy):
    """Degeneracy pressure"""
    return 2 * electron_density * fermi_energy / 5


@quantity(
    symbol="B",
    unit="GPa",
    formula=r"\frac{2}{3} n E_\mathrm{F}",
    source="ashcroft1976, ch. 2",
    assumes=FLAT + ("independent_electrons",),
    comparison=Comparison(
        measured="bulk_modulus",
        ratio="stiffness ratio",
        above="the solid is stiffer than its electron gas alone: ion cores or d electrons resist compression",
        below="the solid is softer than its electron gas alone: the attraction of electrons and ions takes back "
        "part of the pressure",
    ),
    **GAS,
)
def bulk_modulus(electron_density, fermi_energy):
    """Bulk modulus of the electron gas

    The kinetic part only: no Coulomb energy, no ion cores.
    """
    return 2 * electron_density * fermi_energy / 3


@quantity(
    symbol=r"\varepsilon_\mathrm{x}",
    unit="eV",
    formula=r"-\frac{3}{4 \pi} \frac{e^2}{4 \pi \varepsilon_0 \varepsilon_\mathrm{b}} k_\mathrm{F}",
    source="ashcroft1976, ch. 17",
    assumes=FLAT,
    **GAS,
)
def exchange_energy(fermi_wavevector, background_permittivity):
    """Exchange energy per electron

    What the free-electron model leaves out first: its size beside the mean kinetic energy says how rough
    the model is.
    """
    return -3 / (4 * np.pi) * COULOMB / background_permittivity * fermi_wavevector


@quantity(
    id="exchange_energy",
    symbol=r"\varepsilon_\mathrm{x}",
    unit="eV",
    formula=r"-\frac{4}{3 \pi} \frac{e^2}{4 \pi \varepsilon_0 \varepsilon_\mathrm{b}} k_\mathrm{F}",
    source="giuliani2005, ch. 1",
    assumes=FLAT,
    dimensions=(2,),
    **GAS,
)
def exchange_energy_of_sheet(fermi_wavevector, background_permittivity):
    """Exchange energy per electron

    What the free-electron model leaves out first: its size beside the mean kinetic energy says how rough
    the model is.
    """
    return -4 / (3 * np.pi) * COULOMB / background_permittivity * fermi_wavevector


@step()
def bare_plasma_frequency(electron_density, optical_mass):
    """Plasma frequency without the background's screening."""
    return np.sqrt(electron_density * c.e**2 / (c.epsilon_0 * optical_mass))


@quantity(
    symbol=r"\omega_\mathrm{p}",
    unit="rad/s",
    formula=r"\left( \frac{n e^2}{\varepsilon_0 \varepsilon_\mathrm{b} m_\mathrm{o}} \right)^{1/2}",
    source="ashcroft1976, ch. 1",
    assumes=FLAT,
    **GAS,
)
def plasma_frequency(bare_plasma_frequency, background_permittivity):
    """Plasma frequency, screened by the background"""
    return bare_plasma_frequency / np.sqrt(background_permittivity)


@quantity(
    symbol=r"\hbar\omega_\mathrm{p}",
    unit="eV",
    formula=r"\hbar \omega_\mathrm{p}",
    source="pines1963, ch. 3",
    assumes=FLAT + ("one_band",),
    comparison=Comparison(
        measured="plasma_energy",
        ratio="plasmon ratio",
        above="the loss peak lies higher: transitions between bands below it push it up, or more electrons take "
        "part than the valence counts",
        below="the loss peak lies lower: polarizable ion cores or transitions between bands above it screen the "
        "oscillation",
    ),
    **GAS,
)
def plasma_energy(plasma_frequency):
    """Plasmon energy"""
    return c.hbar * plasma_frequency


@quantity(
    symbol=r"\lambda_\mathrm{p}",
    unit="nm",
    formula=r"\frac{2 \pi c}{\omega_\mathrm{p}}",
    source="ashcroft1976, ch. 1",
    assumes=FLAT,
    **GAS,
)
def plasma_wavelength(plasma_frequency):
    """Wavelength of light at the plasma frequency"""
    return 2 * np.pi * c.c / plasma_frequency


@quantity(
    symbol=r"\hbar\omega_\mathrm{sp}",
    unit="eV",
    formula=r"\frac{\hbar}{\sqrt{\varepsilon_\mathrm{b} + 1}} "
    r"\left( \frac{n e^2}{\varepsilon_0 m_\mathrm{o}} \right)^{1/2}",
    source="ritchie1957",
    assumes=FLAT + ("one_band",),
    **GAS,
)
def surface_plasmon_energy(bare_plasma_frequency, background_permittivity):
    """Surface plasmon energy of a flat surface in vacuum"""
    return c.hbar * bare_plasma_frequency / np.sqrt(background_permittivity + 1)


@quantity(
    symbol=r"\hbar\omega_\mathrm{sph}",
    unit="eV",
    formula=r"\frac{\hbar}{\sqrt{\varepsilon_\mathrm{b} + 2}} "
    r"\left( \frac{n e^2}{\varepsilon_0 m_\mathrm{o}} \right)^{1/2}",
    source="kreibig1995, ch. 2",
    assumes=FLAT + ("one_band",),
    **GAS,
)
def sphere_plasmon_energy(bare_plasma_frequency, background_permittivity):
    """Dipole plasmon energy of a small sphere in vacuum"""
    return c.hbar * bare_plasma_frequency / np.sqrt(background_permittivity + 2)


@quantity(
    symbol=r"\lambda_\mathrm{TF}",
    unit="nm",
    formula=r"\left( \frac{\varepsilon_0 \varepsilon_\mathrm{b}}{e^2 g(E_\mathrm{F})} \right)^{1/2}",
    source="ashcroft1976, ch. 17",
    assumes=FLAT + ("degenerate_gas",),
    **GAS,
)
def thomas_fermi_length(density_of_states, background_permittivity):
    """Thomas–Fermi screening length"""
    return np.sqrt(c.epsilon_0 * background_permittivity / (c.e**2 * density_of_states))


@quantity(
    id="thomas_fermi_length",
    symbol=r"\lambda_\mathrm{TF}",
    unit="nm",
    formula=r"\frac{2 \varepsilon_0 \varepsilon_\mathrm{b}}{e^2 g(E_\mathrm{F})}",
    source="ando1982",
    assumes=FLAT + ("degenerate_gas",),
    dimensions=(2,),
    **GAS,
)
def thomas_fermi_length_of_sheet(density_of_states, background_permittivity):
    """Thomas–Fermi screening length"""
    return 2 * c.epsilon_0 * background_permittivity / (c.e**2 * density_of_states)


@quantity(
    symbol=r"\lambda_\mathrm{L}",
    unit="nm",
    formula=r"\left( \frac{m_\mathrm{o}}{\mu_0 n e^2} \right)^{1/2}",
    source="tinkham1996, ch. 1",
    assumes=FLAT,
    **GAS,
)
def london_depth(electron_density, optical_mass):
    """London penetration depth

    At T = 0, for a clean superconductor in the local limit; for any other material it is c divided by the
    plasma frequency.
    """
    return np.sqrt(optical_mass / (c.mu_0 * electron_density * c.e**2))


@quantity(
    symbol="V_0",
    unit="eV",
    formula=r"E_\mathrm{F} + \phi",
    source="hufner2003, ch. 6",
    assumes=FLAT,
    needs=("electrons_per_cell",),
    **GAS,
)
def inner_potential(fermi_energy, measured_work_function):
    """Inner potential

    Depth of the band bottom under the vacuum level, with the measured work function φ.
    """
    return fermi_energy + measured_work_function


@quantity(
    symbol="F",
    unit="T",
    formula=r"\frac{\hbar k_\mathrm{F}^2}{2 e}",
    source="shoenberg1984, ch. 2",
    assumes=FLAT,
    dimensions=BOTH,
    comparison=Comparison(
        measured="oscillation_frequency",
        ratio="orbit ratio",
        above="the measured orbit is larger than a cut through the free-electron sphere",
        below="the measured orbit is smaller than a cut through the free-electron sphere: zone faces cut it, or "
        "it belongs to another sheet (necks, pockets)",
    ),
    **GAS,
)
def oscillation_frequency(fermi_wavevector):
    """Frequency of quantum oscillations in 1/B

    De Haas–van Alphen and Shubnikov–de Haas, for the largest cut through the sphere.
    """
    return c.hbar * fermi_wavevector**2 / (2 * c.e)


@quantity(
    symbol=r"\omega_\mathrm{c}/B",
    unit="rad/(s T)",
    formula=r"\frac{e}{m_\mathrm{c}}",
    source="ashcroft1976, ch. 1",
    assumes=FLAT,
    dimensions=BOTH,
    **GAS,
)
def cyclotron_frequency_per_tesla(conductivity_mass):
    """Cyclotron frequency in a field of one tesla"""
    return c.e / conductivity_mass


@quantity(
    symbol=r"k_\mathrm{F}/k_\mathrm{zone}",
    unit="1",
    formula=r"\frac{k_\mathrm{F}}{k_\mathrm{zone}}",
    source="ashcroft1976, ch. 9",
    needs=VALENCE,
    **GAS,
)
def fermi_to_zone_ratio(fermi_wavevector, nearest_diffracting_face):
    """Fermi wavevector over the distance of the nearest diffracting face"""
    return fermi_wavevector / nearest_diffracting_face


@quantity(
    symbol=r"Z_\mathrm{contact}",
    unit="1",
    formula=r"\frac{k_\mathrm{zone}^3}{3 \pi^2 n_\mathrm{at}}",
    source="jones1934",
    needs=VALENCE,
    **GAS,
)
def contact_electron_count(nearest_diffracting_face, atomic_density):
    """Electrons per atom at which the sphere touches the nearest diffracting face"""
    return nearest_diffracting_face**3 / (3 * np.pi**2 * atomic_density)


@quantity(
    symbol=r"f_1, f_2, \ldots",
    unit="1",
    formula=r"f_1, f_2, \ldots",
    source="ashcroft1976, ch. 9",
    assumes=FLAT,
    needs=VALENCE,
    form="list",
    carries_uncertainty=False,
    **GAS,
)
def zone_occupation(cell, primitive_basis, fermi_wavevector):
    """Filled parts of the Brillouin zones

    Of zone 1, 2, 3 and so on, up to the last that holds any state; their sum is the number of electron
    pairs in the primitive cell.
    """
    rows = zip(cell[0, :, 0], primitive_basis[0, :, 0], fermi_wavevector[0, :, 0], strict=True)
    filled = [zones.zone_occupation(*row) if np.all(np.isfinite(row[0])) and row[2] > 0 else [] for row in rows]
    width = max(map(len, filled), default=0) or 1
    return np.array([[*fractions, *[np.nan] * (width - len(fractions))] for fractions in filled])[np.newaxis]
