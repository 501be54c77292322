"""Heat and magnetism: per mole of formula units where a mole is meant."""

import numpy as np
from scipy import constants as c

from sheetgen.physics import debye, occupation
from sheetgen.quantities.declaration import Comparison, Declarations

declarations = Declarations()
quantity, step = declarations.quantity, declarations.step
HEAT = {"section": "Heat and magnetism"}
FLAT = ("flat_potential",)
DEGENERATE = FLAT + ("degenerate_gas",)
INDEPENDENT = DEGENERATE + ("independent_electrons",)
MAGNETIC = INDEPENDENT + ("magnetic_disorder",)
BOHR_MAGNETON = c.value("Bohr magneton")


@step()
def molar_volume(atomic_density, formula_atoms):
    """Volume of a mole of formula units."""
    return c.N_A * formula_atoms / atomic_density


@quantity(
    symbol=r"\mu",
    unit="eV",
    formula=r"n = \int_0^\infty \frac{g(E)}{e^{(E - \mu)/k_\mathrm{B} T} + 1} \, \mathrm{d}E",
    source="ashcroft1976, ch. 2",
    assumes=FLAT,
    listed_by="temperature",
    **HEAT,
)
def chemical_potential(fermi_energy, fermi_temperature, temperature):
    """Chemical potential

    Exact: the value at which the filled states hold the density n.
    """
    return fermi_energy * occupation.chemical_potential_ratio(temperature / fermi_temperature)


@quantity(
    id="chemical_potential",
    symbol=r"\mu",
    unit="eV",
    formula=r"k_\mathrm{B} T \ln\left( \exp\left( \frac{E_\mathrm{F}}{k_\mathrm{B} T} \right) - 1 \right)",
    source="ando1982",
    assumes=FLAT,
    listed_by="temperature",
    dimensions=(2,),
    **HEAT,
)
def chemical_potential_of_sheet(fermi_energy, fermi_temperature, temperature):
    """Chemical potential"""
    return fermi_energy * occupation.chemical_potential_ratio_2d(temperature / fermi_temperature)


@quantity(
    symbol=r"\mu_\mathrm{series}",
    unit="eV",
    formula=r"E_\mathrm{F} \left( 1 - \frac{\pi^2}{12} \left( \frac{T}{T_\mathrm{F}} \right)^2 "
    r"- \frac{\pi^4}{80} \left( \frac{T}{T_\mathrm{F}} \right)^4 \right)",
    source="ashcroft1976, ch. 2; mcdougall1938",
    assumes=FLAT,
    listed_by="temperature",
    absent="T/T_F is above 0.3, where the series says nothing",
    **HEAT,
)
def chemical_potential_series(fermi_energy, fermi_temperature, temperature):
    """Chemical potential by the Sommerfeld series

    Three terms; absent above T/T_F = 0.3.
    """
    return fermi_energy * occupation.chemical_potential_series(temperature / fermi_temperature)


@quantity(
    symbol=r"C_\mathrm{el}",
    unit="mJ/(mol K)",
    formula=r"n k_\mathrm{B} V_\mathrm{m} \left( \frac{15}{4} \frac{F_{3/2}}{F_{1/2}} "
    r"- \frac{9}{4} \frac{F_{1/2}}{F_{-1/2}} \right)",
    source="mcdougall1938",
    assumes=FLAT + ("normal_state",),
    listed_by="temperature",
    **HEAT,
)
def electron_heat_capacity(electron_density, molar_volume, fermi_temperature, temperature):
    """Heat capacity of the electrons at constant volume

    Exact, with the normalised Fermi–Dirac integrals F at µ/k_BT; V_m is the volume of a mole of formula units.
    """
    return electron_density * c.k * molar_volume * occupation.heat_capacity_ratio(temperature / fermi_temperature)


@quantity(
    symbol=r"\gamma",
    unit="mJ/(mol K^2)",
    formula=r"\frac{\pi^2 k_\mathrm{B}^2}{3} g(E_\mathrm{F}) V_\mathrm{m}",
    source="ashcroft1976, ch. 2",
    assumes=INDEPENDENT,
    comparison=Comparison(
        measured="heat_coefficient",
        ratio="thermal mass ratio",
        above="electrons at the Fermi level are heavier than free ones: lattice vibrations, other electrons or a "
        "narrow band slow them",
        below="fewer states at the Fermi level than free electrons would have: zone faces open gaps there",
    ),
    **HEAT,
)
def heat_coefficient(density_of_states, molar_volume):
    """Coefficient of the electronic heat capacity

    C_el = γT well below the Fermi temperature; V_m is the volume of a mole of formula units.
    """
    return np.pi**2 * c.k**2 / 3 * density_of_states * molar_volume


@step(dimensions=(3,))
def lattice_debye_temperature(measured_debye_temperature):
    """Debye temperature of the heat capacity."""
    return measured_debye_temperature


@quantity(
    symbol=r"C_\mathrm{ph}",
    unit="J/(mol K)",
    formula=r"9 r R \left( \frac{T}{\theta} \right)^3 "
    r"\int_0^{\theta/T} \frac{x^4 e^x}{\left( e^x - 1 \right)^2} \, \mathrm{d}x",
    source="debye1912",
    listed_by="temperature",
    **HEAT,
)
def lattice_heat_capacity(lattice_debye_temperature, formula_atoms, temperature):
    """Heat capacity of the lattice at constant volume

    Debye's model, r atoms in the formula unit.
    """
    return 3 * formula_atoms * c.R * debye.debye_heat_ratio(temperature, lattice_debye_temperature)


@quantity(
    symbol=r"T_\times",
    unit="K",
    formula=r"C_\mathrm{el}(T_\times) = C_\mathrm{ph}(T_\times)",
    source="ashcroft1976, ch. 23",
    assumes=FLAT,
    absent="the two heat capacities do not cross",
    **HEAT,
)
def heat_crossover_temperature(
    electron_density, molar_volume, fermi_temperature, lattice_debye_temperature, formula_atoms
):
    """Temperature at which electrons and lattice hold equal heat capacities

    The lowest above zero: below it the electrons dominate.
    """
    electrons = electron_density * molar_volume / c.N_A
    return debye.heat_crossover(fermi_temperature, lattice_debye_temperature, electrons, formula_atoms)


@quantity(
    symbol=r"\chi_\mathrm{P}",
    unit="1",
    formula=r"\mu_0 \mu_\mathrm{B}^2 g(E_\mathrm{F})",
    source="ashcroft1976, ch. 31",
    assumes=MAGNETIC,
    **HEAT,
)
def pauli_susceptibility(density_of_states):
    """Pauli susceptibility of the spins

    Per volume, SI, at T = 0.
    """
    return c.mu_0 * BOHR_MAGNETON**2 * density_of_states


@quantity(
    symbol=r"\chi_\mathrm{L}",
    unit="1",
    formula=r"-\frac{\chi_\mathrm{P}}{3} \left( \frac{m_\mathrm{e}}{m} \right)^2",
    source="ashcroft1976, ch. 31",
    assumes=MAGNETIC,
    **HEAT,
)
def landau_susceptibility(pauli_susceptibility, effective_mass):
    """Landau susceptibility of the orbits

    Per volume, SI.
    """
    return -pauli_susceptibility / 3 * (c.m_e / effective_mass) ** 2


@quantity(
    symbol=r"\chi",
    unit="1",
    formula=r"\chi_\mathrm{P} + \chi_\mathrm{L}",
    source="ashcroft1976, ch. 31",
    assumes=MAGNETIC,
    comparison=Comparison(
        measured="susceptibility",
        ratio="susceptibility ratio",
        above="exchange strengthens the response of the spins, or d electrons add theirs; the measured value "
        "includes the ion cores",
        below="the ion cores, which the measured value includes, take part of the response away",
        opposite="the ion cores, which the measured value includes, outweigh the conduction electrons",
    ),
    **HEAT,
)
def conduction_susceptibility(pauli_susceptibility, landau_susceptibility):
    """Susceptibility of the conduction electrons

    Per volume, SI: spins and orbits together, without the ion cores.
    """
    return pauli_susceptibility + landau_susceptibility
