"""Optics: the permittivity of Drude with the relaxation time of the reference resistivity."""

from scipy import constants as c

from sheetgen.physics import drude
from sheetgen.quantities.declaration import Comparison, Declarations

declarations = Declarations()
quantity, step = declarations.quantity, declarations.step
OPTICS = {"section": "Optics"}
ONE_BAND = ("flat_potential", "one_band", "isotropy")
DEPTH_ENERGY = 1.96  # eV, of a helium–neon laser


@step()
def reference_relaxation_time(conductivity_mass, electron_density, reference_resistivity):
    """Relaxation time of the reference resistivity."""
    return conductivity_mass / (electron_density * c.e**2 * reference_resistivity)


@quantity(
    symbol=r"\hbar\omega_\mathrm{edge}",
    unit="eV",
    formula=r"\hbar \left( \omega_\mathrm{p}^2 - \frac{1}{\tau^2} \right)^{1/2}",
    source="dressel2002, ch. 5",
    assumes=ONE_BAND,
    absent="the damping is so strong (ω_pτ ≤ 1) that the permittivity has no zero",
    **OPTICS,
)
def plasma_edge_energy(plasma_frequency, reference_relaxation_time):
    """Plasma edge: the photon energy at which the real permittivity vanishes

    Below it the metal reflects, above it lets light through.
    """
    return c.hbar * drude.plasma_edge(plasma_frequency, reference_relaxation_time)


@quantity(
    symbol="R",
    unit="1",
    formula=r"\left| \frac{\sqrt{\varepsilon} - 1}{\sqrt{\varepsilon} + 1} \right|^2, \quad "
    r"\varepsilon = \varepsilon_\mathrm{b} - \frac{\omega_0^2}{\omega^2 + \mathrm{i} \omega / \tau}",
    source="dressel2002, ch. 5",
    assumes=ONE_BAND,
    listed_by="photon_energy",
    comparison=Comparison(
        measured="refractive_index",
        ratio="reflectance ratio",
        above="the measured surface reflects more than free electrons with the damping of direct current would",
        below="the measured surface reflects less: transitions between bands, roughness or surface scattering absorb",
    ),
    **OPTICS,
)
def normal_reflectance(photon_energy, bare_plasma_frequency, reference_relaxation_time, background_permittivity):
    """Reflectance at normal incidence

    ω_0 is the plasma frequency without the background's screening.
    """
    permittivity = drude.permittivity(
        photon_energy / c.hbar, bare_plasma_frequency, reference_relaxation_time, background_permittivity
    )
    return drude.normal_reflectance(drude.refractive_index(permittivity))


@quantity(
    symbol=r"\delta_\mathrm{opt}",
    unit="nm",
    formula=r"\frac{c}{2 \omega \kappa}",
    source="dressel2002, ch. 2",
    assumes=ONE_BAND,
    stated_at=DEPTH_ENERGY,
    **OPTICS,
)
def optical_depth(bare_plasma_frequency, reference_relaxation_time, background_permittivity):
    """Depth at which the intensity of light of 1.96 eV has fallen to 1/e

    κ is the imaginary part of the refractive index.
    """
    frequency = DEPTH_ENERGY * c.e / c.hbar
    permittivity = drude.permittivity(
        frequency, bare_plasma_frequency, reference_relaxation_time, background_permittivity
    )
    return drude.intensity_depth(frequency, drude.refractive_index(permittivity))
