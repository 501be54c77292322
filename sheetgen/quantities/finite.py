"""Finite specimens: cubes of a few edges on every sheet, and the group's own films, particles and cubes."""

import numpy as np
from scipy import constants as c

from sheetgen.physics import counting, films
from sheetgen.quantities.declaration import Comparison, Declarations

declarations = Declarations()
quantity, step = declarations.quantity, declarations.step
FLAT = ("flat_potential",)
FINITE = {"section": "Finite specimens"}
CUBES = {"listed_by": "edge", "in_specimens": True, "forms": ("cube",), **FINITE}
COUNTS = {"carries_uncertainty": False, **CUBES}
FILM = {"section": "Specimens", "scope": "specimen", "forms": ("film",), "assumes": FLAT + ("bulk",)}
FILM_PATH = {
    "section": "Specimens",
    "scope": "specimen",
    "forms": ("film",),
    "assumes": FLAT + ("bulk", "degenerate_gas"),
}


# ---------------------------------------------------------------- cubes


@step()
def edge(tabulated_edge):
    """Edges of the cubes that every sheet lists."""
    return tabulated_edge


@step()
def volume(edge):
    """Volume of a cube."""
    return edge**3


@quantity(
    symbol=r"\delta",
    unit="meV",
    formula=r"\frac{2}{V g(E_\mathrm{F})}",
    source="kubo1962",
    assumes=FLAT,
    **{**CUBES, "forms": ("cube", "particle")},
)
def level_spacing(volume, density_of_states):
    """Mean spacing of levels at the Fermi level

    Each level holds two electrons; valleys are not counted as degeneracy. V is the volume of the cube.
    """
    return 2 / (volume * density_of_states)


@quantity(
    symbol=r"L_T",
    unit="nm",
    formula=r"\left( \frac{4 E_\mathrm{F}}{3 n k_\mathrm{B} T} \right)^{1/3}",
    source="kubo1962",
    assumes=FLAT + ("degenerate_gas",),
    listed_by="temperature",
    **FINITE,
)
def thermal_edge(fermi_energy, electron_density, temperature):
    """Edge of the cube whose level spacing equals the thermal energy

    In smaller cubes single levels show.
    """
    return np.cbrt(4 * fermi_energy / (3 * electron_density * c.k * temperature))


@quantity(
    symbol=r"N_\mathrm{hard}",
    unit="1",
    formula=r"g \, \# \left\{ n_i \geq 1 : n_1^2 + n_2^2 + n_3^2 \leq \left( k_\mathrm{F} L / \pi \right)^2 \right\}",
    source="weyl1911",
    assumes=FLAT,
    **COUNTS,
)
def states_hard_wall(degeneracy, fermi_wavevector, edge):
    """States of a cube with hard walls up to the Fermi energy of the bulk

    An exact count, with spin and valleys.
    """
    return degeneracy * counting.hard_wall_points(fermi_wavevector * edge / np.pi)


@quantity(
    symbol=r"N_\mathrm{per}",
    unit="1",
    formula=r"g \, \# \left\{ n_i : n_1^2 + n_2^2 + n_3^2 \leq \left( k_\mathrm{F} L / 2 \pi \right)^2 \right\}",
    source="born1912",
    assumes=FLAT,
    **COUNTS,
)
def states_periodic(degeneracy, fermi_wavevector, edge):
    """States of a cube with periodic boundaries up to the Fermi energy of the bulk

    An exact count, with spin and valleys.
    """
    return degeneracy * counting.periodic_points(fermi_wavevector * edge / (2 * np.pi))


@quantity(
    symbol="N",
    unit="1",
    formula=r"\frac{g V k_\mathrm{F}^3}{6 \pi^2}",
    source="ashcroft1976, ch. 2",
    assumes=FLAT,
    listed_by="edge",
    **FINITE,
)
def states_continuum(degeneracy, volume, fermi_wavevector):
    """States that the bulk has in the volume of the cube"""
    return degeneracy * volume * fermi_wavevector**3 / (6 * np.pi**2)


@quantity(
    symbol=r"1 - N_\mathrm{hard}/N",
    unit="1",
    formula=r"1 - \frac{N_\mathrm{hard}}{N}",
    source="weyl1911",
    assumes=FLAT,
    **COUNTS,
)
def hard_wall_deficit(states_hard_wall, states_continuum):
    """Share of the bulk's states that hard walls take away"""
    return 1 - states_hard_wall / states_continuum


@quantity(
    symbol=r"\frac{9 \pi}{4 k_\mathrm{F} L}",
    unit="1",
    formula=r"\frac{9 \pi}{4 k_\mathrm{F} L} \left( 1 - \frac{2}{k_\mathrm{F} L} \right)",
    source="weyl1911; baltes1976",
    assumes=FLAT,
    listed_by="edge",
    absent="k_FL is below 8, where the leading terms say nothing",
    **FINITE,
)
def hard_wall_deficit_leading(fermi_wavevector, edge):
    """Share that hard walls take away, by its two leading terms

    Surface and edge terms of Weyl's law; absent below k_FL = 8.
    """
    product = fermi_wavevector * edge
    return np.where(product < 8, np.nan, 9 * np.pi / (4 * product) * (1 - 2 / product))


@quantity(
    symbol=r"L_{1\,\%}",
    unit="nm",
    formula=r"\frac{\pi \sqrt{51218}}{k_\mathrm{F}}",
    source="weyl1911",
    assumes=FLAT,
    **FINITE,
)
def bulk_edge(fermi_wavevector):
    """Edge beyond which hard walls change the number of states by less than 1 %

    The last crossing of the exact count: the deficit of N_hard stays below 1 % for all larger cubes.
    """
    return np.pi * np.sqrt(counting.last_deficit_crossing()) / fermi_wavevector


# ---------------------------------------------------------------- the group's own specimens


@step(id="edge", scope="specimen")
def edge_of_specimen(specimen_edge):
    """Edge of a cube; other forms have none."""
    return specimen_edge


@step(id="volume", scope="specimen")
def volume_of_specimen(specimen_edge, particle_diameter):
    """Volume of a cube or of a spherical particle."""
    sphere = np.pi / 6 * particle_diameter**3
    return np.where(np.isnan(specimen_edge), sphere, specimen_edge**3)


@step(scope="specimen")
def specimen_size(specimen_thickness, specimen_edge, specimen_diameter):
    """The dimension that decides: thickness, edge or diameter."""
    size = np.where(np.isnan(specimen_thickness), specimen_edge, specimen_thickness)
    return np.where(np.isnan(size), specimen_diameter, size)


@step(scope="specimen")
def bulk_mean_free_path(mean_free_path, has_reference_resistivity):
    """Mean free path of the bulk at the reference resistivity."""
    return np.where(np.isnan(has_reference_resistivity), np.nan, mean_free_path[..., :1])


@step(id="reference_resistivity", scope="specimen")
def reference_resistivity_of_film(film_bulk_resistivity):
    """Resistivities of the bulk: at the reference temperature, and at that of the film's own measurement."""
    return film_bulk_resistivity


@step(scope="specimen")
def bulk_path(fermi_velocity, reference_relaxation_time):
    """Mean free path in the bulk at the resistivities that a film is compared with."""
    return fermi_velocity * reference_relaxation_time


@step(scope="specimen")
def grain_strength(bulk_path, specimen_grain_size, specimen_grain_reflection):
    """Mayadas and Shatzkes' α: how much grain boundaries scatter beside the bulk."""
    return films.alpha(bulk_path, specimen_grain_size, specimen_grain_reflection)


@quantity(
    symbol="j_\\mathrm{max}",
    unit="1",
    formula=r"n d = \frac{g}{4 \pi} \sum_{j=1}^{j_\mathrm{max}} \left( k^2 - \left( \frac{\pi j}{d} \right)^2 \right)",
    source="schulte1976",
    carries_uncertainty=False,
    **FILM,
)
def film_subbands(electron_density, specimen_thickness, degeneracy):
    """Occupied subbands of the film

    Hard walls at the stated thickness d, density n of the bulk.
    """
    return films.film_subbands(electron_density, specimen_thickness, degeneracy)


@quantity(
    symbol=r"E_\mathrm{F,film}",
    unit="eV",
    formula=r"\frac{\hbar^2 k^2}{2 m}, \quad "
    r"n d = \frac{g}{4 \pi} \sum_j \left( k^2 - \left( \frac{\pi j}{d} \right)^2 \right)",
    source="schulte1976",
    kinked=True,
    **FILM,
)
def film_fermi_energy(electron_density, specimen_thickness, degeneracy, effective_mass):
    """Fermi energy of the film at the density of the bulk

    Hard walls at the stated thickness d. Subbands open within the uncertainty of d, so what it adds is half the
    difference of the values at d ± u(d) and not a slope.
    """
    wavevector = films.film_fermi_wavevector(electron_density, specimen_thickness, degeneracy)
    return (c.hbar * wavevector) ** 2 / (2 * effective_mass)


@quantity(
    symbol=r"E_\mathrm{F,film}/E_\mathrm{F}",
    unit="1",
    formula=r"\frac{E_\mathrm{F,film}}{E_\mathrm{F}}",
    source="schulte1976",
    kinked=True,
    **FILM,
)
def film_fermi_energy_ratio(film_fermi_energy, fermi_energy):
    """Fermi energy of the film over that of the bulk"""
    return film_fermi_energy / fermi_energy


@quantity(
    symbol=r"E_\mathrm{F,neutral}",
    unit="eV",
    formula=r"\frac{\hbar^2 k^2}{2 m}, \quad n d = \frac{g}{4 \pi} \sum_j \left( k^2 - "
    r"\left( \frac{\pi j}{d'} \right)^2 \right), \quad d' = d + \frac{3 \pi}{4 k_\mathrm{F}}",
    source="schulte1976; bardeen1936",
    kinked=True,
    **FILM,
)
def film_fermi_energy_neutral(electron_density, specimen_thickness, degeneracy, effective_mass, fermi_wavevector):
    """Fermi energy of the film with neutral surfaces

    The same electrons between walls moved out by 3π/8k_F on each side, which leaves no charge at the surface.
    """
    wider = specimen_thickness + 3 * np.pi / (4 * fermi_wavevector)
    density = electron_density * specimen_thickness / wider
    wavevector = films.film_fermi_wavevector(density, wider, degeneracy)
    return (c.hbar * wavevector) ** 2 / (2 * effective_mass)


@quantity(
    symbol=r"\rho_\mathrm{surface}",
    unit="uohm cm",
    formula=r"\rho_0 \left( 1 - \frac{3 (1 - p)}{2 \kappa} \int_1^\infty \left( \frac{1}{t^3} - \frac{1}{t^5} \right) "
    r"\frac{1 - e^{-\kappa t}}{1 - p e^{-\kappa t}} \, \mathrm{d}t \right)^{-1}",
    source="fuchs1938; sondheimer1952",
    **FILM_PATH,
)
def film_resistivity_surface(reference_resistivity, bulk_path, specimen_thickness, specimen_specularity):
    """Resistivity of the film by surface scattering alone

    κ is the thickness over the mean free path, p the specularity, ρ_0 the resistivity of the bulk.
    """
    return reference_resistivity * films.surface_factor(specimen_thickness / bulk_path, specimen_specularity)


@quantity(
    symbol=r"\rho_\mathrm{grain}",
    unit="uohm cm",
    formula=r"\rho_0 \left( 1 - \frac{3}{2} \alpha + 3 \alpha^2 - 3 \alpha^3 \ln\left( 1 + \frac{1}{\alpha} \right) "
    r"\right)^{-1}",
    source="mayadas1970",
    **FILM_PATH,
)
def film_resistivity_grain(reference_resistivity, grain_strength):
    """Resistivity of the film by grain boundaries alone

    α = (l/D) R/(1 − R) with grain size D and grain reflection R.
    """
    return reference_resistivity * films.grain_factor(grain_strength)


@quantity(
    symbol=r"\rho_\mathrm{film}",
    unit="uohm cm",
    formula=r"\rho_0 \left( \frac{1}{G(\alpha)} - \frac{6 (1 - p)}{\pi \kappa} \int_0^{\pi/2} \mathrm{d}\varphi "
    r"\int_1^\infty \mathrm{d}t \, \frac{\cos^2 \varphi}{H^2} \left( \frac{1}{t^3} - \frac{1}{t^5} \right) "
    r"\frac{1 - e^{-\kappa t H}}{1 - p e^{-\kappa t H}} \right)^{-1}",
    source="mayadas1970",
    comparison=Comparison(
        measured="film_resistivity",
        ratio="film ratio",
        above="more scattering than the stated surfaces and grains give: roughness, impurities or a smaller grain",
        below="less scattering than the stated surfaces and grains give: smoother surfaces or clearer boundaries",
    ),
    **FILM_PATH,
)
def film_resistivity(reference_resistivity, bulk_path, specimen_thickness, specimen_specularity, grain_strength):
    """Resistivity of the film

    Surfaces and grain boundaries together, G = ρ_grain/ρ_0 and H = 1 + α/(cos φ √(1 − 1/t²)); where a record
    states only one of the two, that part alone.
    """
    return reference_resistivity * _film_factor(bulk_path, specimen_thickness, specimen_specularity, grain_strength)


@quantity(
    symbol=r"p_\mathrm{expl}",
    unit="1",
    formula=r"p: \quad \rho_\mathrm{film}(p, R) = \rho_\mathrm{measured}",
    source="mayadas1970",
    absent="no specularity between 0 and 1 gives the measured resistivity with the stated grain reflection",
    drawn=False,
    **FILM_PATH,
)
def explaining_specularity(measured_film_ratio, bulk_path, specimen_thickness, grain_strength):
    """Specularity that explains the measured resistivity

    With the stated grain size and grain reflection; without them, surfaces alone.
    """
    alpha = np.where(np.isnan(grain_strength), 0.0, grain_strength)
    return films.explaining_specularity(measured_film_ratio, specimen_thickness / bulk_path, alpha)[..., 1:]


@quantity(
    symbol=r"R_\mathrm{expl}",
    unit="1",
    formula=r"R: \quad \rho_\mathrm{film}(p, R) = \rho_\mathrm{measured}",
    source="mayadas1970",
    absent="no grain reflection from 0 to below 1 gives the measured resistivity with the stated specularity",
    drawn=False,
    **FILM_PATH,
)
def explaining_grain_reflection(
    measured_film_ratio, bulk_path, specimen_thickness, specimen_grain_size, specimen_specularity
):
    """Grain reflection that explains the measured resistivity

    With the stated specularity and grain size.
    """
    return films.explaining_grain_reflection(
        measured_film_ratio,
        specimen_thickness / bulk_path,
        bulk_path / specimen_grain_size,
        specimen_specularity,
    )[..., 1:]


@step(scope="specimen")
def measured_film_ratio(specimen_resistivity, reference_resistivity):
    """The film's measured resistivity over that of the bulk at the same temperature."""
    return specimen_resistivity / reference_resistivity


def _film_factor(path, thickness, specularity, alpha):
    """ρ/ρ_0 of whichever parts are stated; NaN where neither is."""
    kappa = thickness / path
    no_grains = np.isnan(alpha) | (alpha == 0)
    both = films.film_factor(kappa, alpha, specularity)
    # One part alone has an integral of its own, which holds for any thickness.
    surface, grain = films.surface_factor(kappa, specularity), films.grain_factor(alpha)
    return np.where(no_grains, surface, np.where(np.isnan(specularity), grain, both))
