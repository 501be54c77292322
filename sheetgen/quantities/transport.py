"""Transport: what a measured resistivity adds; a line marked by resistivity has an entry for each one."""

import numpy as np
from scipy import constants as c

from sheetgen.physics import bloch_grueneisen
from sheetgen.quantities.declaration import Comparison, Declarations

declarations = Declarations()
quantity, step = declarations.quantity, declarations.step
BOTH = (3, 2)
TRANSPORT = {"section": "Transport"}
FLAT = ("flat_potential",)
DRUDE = ("defined_paths", "normal_state", "isotropy")
DEGENERATE_PATHS = FLAT + ("degenerate_gas",) + DRUDE
LORENZ = np.pi**2 * c.k**2 / (3 * c.e**2)
FREQUENCY = 1e9  # Hz, of the skin depth
THERMOPOWER_RATIO = Comparison(
    measured="thermopower",
    ratio="thermopower ratio",
    above="the relaxation time depends on energy, or phonons drag the electrons along",
    below="the relaxation time depends on energy, in the sense that weakens the effect",
    opposite="the relaxation time falls with energy, or the Fermi surface touches zone faces: the sign turns",
)


@step()
def reference_resistivity(measured_resistivity, has_reference_resistivity):
    """The resistivity nearest the reference temperature; it comes first in the list."""
    return np.where(np.isnan(has_reference_resistivity), np.nan, measured_resistivity[..., :1])


@quantity(
    symbol=r"\sigma",
    unit="S/m",
    formula=r"\frac{1}{\rho}",
    source="ashcroft1976, ch. 1",
    assumes=DRUDE,
    listed_by="resistivity",
    **TRANSPORT,
)
def conductivity(measured_resistivity):
    """Conductivity"""
    return 1 / measured_resistivity


@quantity(
    symbol=r"\tau",
    unit="fs",
    formula=r"\frac{m_\mathrm{c}}{n e^2 \rho}",
    source="ashcroft1976, ch. 1",
    assumes=DRUDE,
    listed_by="resistivity",
    **TRANSPORT,
)
def relaxation_time(conductivity_mass, electron_density, measured_resistivity):
    """Relaxation time"""
    return conductivity_mass / (electron_density * c.e**2 * measured_resistivity)


@quantity(
    id="relaxation_time",
    symbol=r"\tau",
    unit="fs",
    formula=r"\frac{m_\mathrm{c}}{n_2 e^2 R_\square}",
    source="ando1982",
    assumes=DRUDE,
    listed_by="resistivity",
    dimensions=(2,),
    **TRANSPORT,
)
def relaxation_time_of_sheet(conductivity_mass, sheet_density, measured_sheet_resistance):
    """Relaxation time"""
    return conductivity_mass / (sheet_density * c.e**2 * measured_sheet_resistance)


@quantity(
    symbol="l",
    unit="nm",
    formula=r"v_\mathrm{F} \tau",
    source="ashcroft1976, ch. 2",
    assumes=DEGENERATE_PATHS,
    listed_by="resistivity",
    dimensions=BOTH,
    **TRANSPORT,
)
def mean_free_path(fermi_velocity, relaxation_time):
    """Mean free path"""
    return fermi_velocity * relaxation_time


@quantity(
    symbol=r"\mu_\mathrm{e}",
    unit="cm^2/(V s)",
    formula=r"\frac{e \tau}{m_\mathrm{c}}",
    source="ashcroft1976, ch. 1",
    assumes=DRUDE,
    listed_by="resistivity",
    dimensions=BOTH,
    **TRANSPORT,
)
def mobility(relaxation_time, conductivity_mass):
    """Mobility"""
    return c.e * relaxation_time / conductivity_mass


@quantity(
    symbol="D",
    unit="cm^2/s",
    formula=r"\frac{v_\mathrm{F}^2 \tau}{3}",
    source="akkermans2007, ch. 1",
    assumes=DEGENERATE_PATHS,
    listed_by="resistivity",
    **TRANSPORT,
)
def diffusion_coefficient(fermi_velocity, relaxation_time):
    """Diffusion coefficient of the electrons"""
    return fermi_velocity**2 * relaxation_time / 3


@quantity(
    id="diffusion_coefficient",
    symbol="D",
    unit="cm^2/s",
    formula=r"\frac{v_\mathrm{F}^2 \tau}{2}",
    source="akkermans2007, ch. 1",
    assumes=DEGENERATE_PATHS,
    listed_by="resistivity",
    dimensions=(2,),
    **TRANSPORT,
)
def diffusion_coefficient_of_sheet(fermi_velocity, relaxation_time):
    """Diffusion coefficient of the electrons"""
    return fermi_velocity**2 * relaxation_time / 2


@quantity(
    symbol=r"k_\mathrm{F} l",
    unit="1",
    formula=r"k_\mathrm{F} l",
    source="ioffe1960",
    assumes=DEGENERATE_PATHS,
    listed_by="resistivity",
    dimensions=BOTH,
    **TRANSPORT,
)
def path_wavevector_product(fermi_wavevector, mean_free_path):
    """Fermi wavevector times mean free path

    Well above 1 an electron keeps its wavevector between collisions; near 1 the picture of paths ends.
    """
    return fermi_wavevector * mean_free_path


@quantity(
    symbol=r"\rho l",
    unit="fohm m^2",
    formula=r"\frac{v_\mathrm{F} m_\mathrm{c}}{n e^2}",
    source="gall2016",
    assumes=FLAT + ("degenerate_gas",),
    **TRANSPORT,
)
def resistivity_path_product(fermi_velocity, conductivity_mass, electron_density):
    """Resistivity times mean free path

    Independent of purity and temperature: the smaller, the less a thin conductor suffers.
    """
    return fermi_velocity * conductivity_mass / (electron_density * c.e**2)


@quantity(
    symbol=r"R_\mathrm{H}",
    unit="m^3/C",
    formula=r"\frac{s}{n e}",
    source="ashcroft1976, ch. 1",
    comparison=Comparison(
        measured="hall_coefficient",
        ratio="Hall ratio",
        above="the Hall effect sees fewer carriers than the valence counts: parts of the Fermi surface cancel",
        below="the Hall effect sees more carriers than the valence counts, or carriers of both signs",
        opposite="the Hall effect sees carriers of the other sign: the Fermi surface curves the other way where it "
        "counts",
    ),
    **TRANSPORT,
)
def hall_coefficient(charge_sign, electron_density):
    """Hall coefficient

    s is −1 for electrons and +1 for holes.
    """
    return charge_sign / (electron_density * c.e)


@quantity(
    symbol=r"R_\mathrm{H,2}",
    unit="m^2/C",
    formula=r"\frac{s}{n_2 e}",
    source="ando1982",
    dimensions=(2,),
    **TRANSPORT,
)
def sheet_hall_coefficient(charge_sign, sheet_density):
    """Hall coefficient of a sheet

    s is −1 for electrons and +1 for holes.
    """
    return charge_sign / (sheet_density * c.e)


@quantity(
    symbol=r"\omega_\mathrm{c}\tau/B",
    unit="1/T",
    formula=r"\frac{e \tau}{m_\mathrm{c}}",
    source="ashcroft1976, ch. 1",
    assumes=DRUDE,
    listed_by="resistivity",
    dimensions=BOTH,
    **TRANSPORT,
)
def cyclotron_angle_per_tesla(relaxation_time, conductivity_mass):
    """Angle turned between collisions in a field of one tesla, in radians"""
    return c.e * relaxation_time / conductivity_mass


@quantity(
    symbol="L",
    unit="W ohm/K^2",
    formula=r"\frac{\pi^2 k_\mathrm{B}^2}{3 e^2}",
    source="sommerfeld1928",
    assumes=FLAT + ("degenerate_gas", "elastic_scattering"),
    dimensions=BOTH,
    **TRANSPORT,
)
def lorenz_number(degeneracy):
    """Lorenz number

    The same for every degenerate gas whose electrons scatter elastically.
    """
    return np.full_like(degeneracy, LORENZ)


@quantity(
    symbol=r"\kappa_\mathrm{el}",
    unit="W/(m K)",
    formula=r"\frac{L T}{\rho}",
    source="ashcroft1976, ch. 2",
    assumes=FLAT + ("degenerate_gas", "elastic_scattering") + DRUDE,
    listed_by="resistivity",
    comparison=Comparison(
        measured="thermal_conductivity",
        ratio="Lorenz ratio",
        above="more heat is carried than the electrons' share: the lattice conducts too",
        below="less heat is carried than the resistivity lets expect: collisions with phonons lose energy as well "
        "as direction",
    ),
    **TRANSPORT,
)
def electron_thermal_conductivity(lorenz_number, resistivity_temperature, measured_resistivity):
    """Thermal conductivity of the electrons"""
    return lorenz_number * resistivity_temperature / measured_resistivity


@quantity(
    symbol="S",
    unit="uV/K",
    formula=r"s \frac{\pi^2}{2} \frac{k_\mathrm{B}}{e} \frac{T}{T_\mathrm{F}}",
    source="ashcroft1976, ch. 2",
    assumes=FLAT + ("degenerate_gas", "elastic_scattering", "normal_state", "isotropy"),
    listed_by="temperature",
    comparison=THERMOPOWER_RATIO,
    **TRANSPORT,
)
def thermopower(charge_sign, temperature, fermi_temperature):
    """Thermopower of diffusion

    For a relaxation time independent of energy; s is −1 for electrons and +1 for holes.
    """
    return charge_sign * np.pi**2 / 2 * c.k / c.e * temperature / fermi_temperature


@quantity(
    id="thermopower",
    symbol="S",
    unit="uV/K",
    formula=r"s \frac{\pi^2}{3} \frac{k_\mathrm{B}}{e} \frac{T}{T_\mathrm{F}}",
    source="ashcroft1976, ch. 13",
    assumes=FLAT + ("degenerate_gas", "elastic_scattering", "normal_state", "isotropy"),
    listed_by="temperature",
    comparison=THERMOPOWER_RATIO,
    dimensions=(2,),
    **TRANSPORT,
)
def thermopower_of_sheet(charge_sign, temperature, fermi_temperature):
    """Thermopower of diffusion

    For a relaxation time independent of energy; s is −1 for electrons and +1 for holes.
    """
    return charge_sign * np.pi**2 / 3 * c.k / c.e * temperature / fermi_temperature


@quantity(
    symbol=r"\delta",
    unit="um",
    formula=r"\left( \frac{\rho}{\pi \mu_0 f} \right)^{1/2}",
    source="jackson1999, ch. 5",
    assumes=("classical_skin_effect",) + DRUDE,
    listed_by="resistivity",
    **TRANSPORT,
)
def skin_depth(measured_resistivity):
    """Skin depth at 1 GHz"""
    return np.sqrt(measured_resistivity / (np.pi * c.mu_0 * FREQUENCY))


@quantity(
    symbol=r"f_\mathrm{a}",
    unit="GHz",
    formula=r"\frac{\rho}{\pi \mu_0 l^2}",
    source="pippard1947",
    assumes=DEGENERATE_PATHS,
    listed_by="resistivity",
    **TRANSPORT,
)
def anomalous_skin_frequency(measured_resistivity, mean_free_path):
    """Frequency at which the skin depth equals the mean free path

    Above it the classical skin depth no longer holds.
    """
    return measured_resistivity / (np.pi * c.mu_0 * mean_free_path**2)


@step()
def transport_debye_temperature(measured_transport_debye_temperature, measured_debye_temperature):
    """Debye temperature of the resistivity; the heat capacity's where a record gives no other."""
    stated = measured_transport_debye_temperature
    return np.where(np.isnan(stated), measured_debye_temperature, stated)


@quantity(
    symbol=r"\rho(T)",
    unit="uohm cm",
    formula=r"\rho_\mathrm{res} + A \left( \frac{T}{\theta} \right)^5 "
    r"\int_0^{\theta/T} \frac{x^5}{\left( e^x - 1 \right) \left( 1 - e^{-x} \right)} \, \mathrm{d}x",
    source="grueneisen1933",
    assumes=("normal_state", "isotropy"),
    listed_by="temperature",
    comparison=Comparison(
        measured="resistivity",
        ratio="resistivity ratio",
        above="the resistivity lies above the curve that phonons of one Debye spectrum draw through the reference "
        "point",
        below="the resistivity lies below the curve that phonons of one Debye spectrum draw through the reference "
        "point",
    ),
    **TRANSPORT,
)
def resistivity_from_debye(
    temperature,
    transport_debye_temperature,
    measured_residual_resistivity,
    reference_resistivity,
    reference_resistivity_temperature,
):
    """Resistivity at other temperatures

    The Bloch–Grüneisen law; A makes it pass through the reference resistivity.
    """
    residual = np.where(np.isnan(measured_residual_resistivity), 0.0, measured_residual_resistivity)
    return bloch_grueneisen.resistivity_from_debye(
        temperature,
        transport_debye_temperature,
        residual,
        reference_resistivity,
        reference_resistivity_temperature,
    )


@step(dimensions=BOTH)
def reference_resistivity_temperature(resistivity_temperature, has_reference_resistivity):
    """Temperature of the reference resistivity."""
    return np.where(np.isnan(has_reference_resistivity), np.nan, resistivity_temperature[..., :1])
