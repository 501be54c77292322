"""Every curve's points are those of the physics, called here directly with the numbers of the record or sheet."""

import numpy as np
import pytest
from figures import sample
from scipy import constants as c

from sheetgen.figures import (
    bands,
    chemical_potential,
    confrontation,
    counting,
    density_of_states,
    film,
    heat,
    optics,
    parabola,
    resistivity,
    zone,
)
from sheetgen.figures.plot import Area, Axis, Curve, Points, Rule
from sheetgen.figures.ranking import opposite_sign
from sheetgen.physics import bloch_grueneisen, crystals, debye, drude, films, occupation, zones
from sheetgen.physics import counting as counts

COPPER, SILICON, WELL = "copper", "silicon-n", "quantum-well"
MASSES = {COPPER: 1.0, SILICON: 0.32, WELL: 0.067}


def layers_of(module, slug, kind, panel=None):
    """Name → layer of one kind, in one or all panels of a figure."""
    panels = module.plot(sample.subject(slug)).panels
    chosen = panels if panel is None else panels[panel : panel + 1]
    return {layer.name: layer for part in chosen for layer in part.layers if isinstance(layer, kind)}


@pytest.mark.parametrize("slug", MASSES)
def test_the_parabola(slug):
    unit = c.e if sample.subject(slug).si("fermi_energy") > 0.2 * c.e else c.e / 1000
    for curve in layers_of(parabola, slug, Curve).values():
        energy = (c.hbar * curve.x * 1e9) ** 2 / (2 * MASSES[slug] * c.m_e)
        assert curve.y * unit == pytest.approx(energy, rel=1e-12, abs=1e-40)


@pytest.mark.parametrize("slug", MASSES)
def test_the_filled_part_of_the_density_of_states_holds_all_electrons(slug):
    subject = sample.subject(slug)
    density = subject.si(subject.density_name)
    area = layers_of(density_of_states, slug, Area)["filled at *T* = 0"]
    unit = c.e if subject.si("fermi_energy") > 0.2 * c.e else c.e / 1000
    held = np.trapezoid(area.upper / density_of_states.UNIT[subject.dimension], area.x * unit)
    assert held == pytest.approx(density, rel=1e-4)
    assert area.x[-1] * unit == pytest.approx(subject.si("fermi_energy"))


@pytest.mark.parametrize(("slug", "temperature"), [(COPPER, "293 K"), (WELL, "4.2 K"), (SILICON, "4.2 K")])
def test_the_warm_electrons_are_as_many_as_the_cold_ones(slug, temperature):
    subject = sample.subject(slug)
    curve = layers_of(density_of_states, slug, Curve)[f"filled at {temperature}"]
    unit = c.e if subject.si("fermi_energy") > 0.2 * c.e else c.e / 1000
    held = np.trapezoid(curve.y / density_of_states.UNIT[subject.dimension], curve.x * unit)
    # The axis ends a few kT above the Fermi level: what lies beyond is less than a thousandth here.
    assert held == pytest.approx(subject.si(subject.density_name), rel=2e-3)


def test_at_absolute_zero_the_edge_is_a_step():
    filled = density_of_states.occupation(np.array([0.5, 1.0, 1.5]), 1.0, 0.0)
    assert filled.tolist() == [1.0, 0.5, 0.0]


def test_the_resistivity_law():
    law = layers_of(resistivity, COPPER, Curve)["Bloch–Grüneisen"]
    expected = bloch_grueneisen.resistivity_from_debye(law.x, 343.0, 2e-11, 1.678e-8, 293.0)
    assert law.y * 1e-8 == pytest.approx(expected, rel=1e-12)


def test_every_measured_resistivity_is_a_point():
    points = layers_of(resistivity, COPPER, Points)
    assert (points["reference"].x.tolist(), points["reference"].y) == ([293.0], pytest.approx([1.678]))
    assert (points["measured"].x.tolist(), points["measured"].y) == ([80.0, 373.0], pytest.approx([0.215, 2.24]))
    assert points["measured"].y_uncertainty == pytest.approx([0.00215, 0.0224])


def copper_permittivity(energy):
    """Drude's permittivity of the sample copper at photon energies in eV."""
    density = 4 / (3.6149e-10) ** 3
    frequency = np.sqrt(density * c.e**2 / (c.epsilon_0 * c.m_e))
    time = c.m_e / (density * c.e**2 * 1.678e-8)
    return drude.permittivity(energy * c.e / c.hbar, frequency, time, 1.0)


def test_reflectance_and_permittivity():
    reflectance, permittivity = (layers_of(optics, COPPER, Curve, panel) for panel in (0, 1))
    model = copper_permittivity(reflectance["Drude"].x)
    expected = drude.normal_reflectance(drude.refractive_index(model))
    assert reflectance["Drude"].y == pytest.approx(expected, rel=1e-11)
    assert permittivity["real part"].y == pytest.approx(model.real, rel=1e-9)
    assert permittivity["imaginary part"].y == pytest.approx(model.imag, rel=1e-9)


def test_measured_optical_constants():
    measured = layers_of(optics, COPPER, Points, 1)
    n, k = 0.4814, 17.78
    assert measured["real part, measured"].y[0] == pytest.approx(n**2 - k**2)
    assert measured["imaginary part, measured"].y[0] == pytest.approx(2 * n * k)
    assert layers_of(optics, COPPER, Points, 0)["measured"].y[0] == pytest.approx(
        ((1 - n) ** 2 + k**2) / ((1 + n) ** 2 + k**2)
    )


def test_heat_capacities():
    curves = layers_of(heat, COPPER, Curve, 0)
    temperature = curves["electrons"].x
    molar_gas = 3 * c.R * debye.debye_heat_ratio(temperature, 343.0)
    scale = sample.subject(COPPER).si("fermi_temperature")
    electrons = c.R * occupation.heat_capacity_ratio(temperature / scale)
    assert curves["lattice"].y == pytest.approx(molar_gas, rel=1e-12)
    assert curves["electrons"].y == pytest.approx(electrons, rel=1e-9)
    assert curves["sum"].y == pytest.approx(molar_gas + electrons, rel=1e-9)


def test_the_line_from_which_the_heat_coefficient_is_read():
    curves = layers_of(heat, COPPER, Curve, 1)
    start = sample.subject(COPPER).si("heat_coefficient") * 1e3
    assert curves["electrons"].y == pytest.approx(start, rel=1e-6)
    # Debye's T³ law: C/T = γ + (12π⁴/5) R T²/θ³.
    slope = 12 * np.pi**4 / 5 * c.R / 343.0**3 * 1e3
    assert curves["sum"].y == pytest.approx(start + slope * curves["sum"].x, rel=1e-4)
    assert layers_of(heat, COPPER, Points, 1)["*γ* measured"].y.tolist() == [pytest.approx(0.695)]


@pytest.mark.parametrize(
    ("slug", "ratio"), [(COPPER, occupation.chemical_potential_ratio), (WELL, occupation.chemical_potential_ratio_2d)]
)
def test_the_chemical_potential(slug, ratio):
    exact = layers_of(chemical_potential, slug, Curve, 1)["exact"]
    assert exact.y == pytest.approx(ratio(exact.x), rel=1e-12)


def test_the_series_of_the_chemical_potential_ends_where_it_holds():
    series = layers_of(chemical_potential, COPPER, Curve, 1)["Sommerfeld series"]
    assert series.x[-1] == 0.3
    assert series.y == pytest.approx(occupation.chemical_potential_series(series.x), rel=1e-12)


def test_half_of_the_states_at_the_chemical_potential_are_filled():
    curve = layers_of(chemical_potential, COPPER, Curve, 0)["293 K"]
    assert np.interp(0.0, curve.x, curve.y) == pytest.approx(0.5, abs=1e-3)


def brute_force(product, spacing, first):
    """Wavevectors n·spacing with |n|·spacing ≤ product, n_i ≥ first."""
    n = np.arange(first, 30)
    squares = sum(np.meshgrid(n**2, n**2, n**2))
    return int(np.count_nonzero(np.sqrt(squares) * spacing <= product))


@pytest.mark.parametrize("product", [3.0, 7.9, 12.34, 19.0])
def test_the_stairs_of_counted_states(product):
    curves = layers_of(counting, COPPER, Curve, 0)

    def height(name):
        """Height of the stair over a product that is no edge of it."""
        return curves[name].y[np.searchsorted(curves[name].x, product) - 1]

    assert height("hard walls") == brute_force(product, np.pi, 1)
    assert height("periodic") == brute_force(product, 2 * np.pi, -29)


def test_the_deficit_of_small_cubes():
    exact = layers_of(counting, COPPER, Curve, 1)["exact count"]
    product = sample.subject(COPPER).si("fermi_wavevector") * exact.x * 1e-9
    expected = 1 - counts.hard_wall_points(product / np.pi) / (product**3 / (6 * np.pi**2))
    assert exact.y == pytest.approx(expected, rel=1e-9)


def test_film_resistivities():
    curves = layers_of(film, COPPER, Curve, 0)
    thickness = curves["*p* = 0"].x * 1e-9
    path = sample.subject(COPPER).si("mean_free_path")
    for name, specularity, alpha in (
        ("*p* = 0", 0.0, 0.0),
        ("*p* = 0.5", 0.5, 0.0),
        ("*p* = 0, *D* = *d*, *R* = 0.3", 0.0, films.alpha(path, thickness, 0.3)),
        ("as stated for one", 0.10, films.alpha(path, 32e-9, 0.25)),
    ):
        expected = 1.678 * films.film_factor(thickness / path, alpha, specularity)
        assert curves[name].y == pytest.approx(expected, rel=1e-9), name


def test_the_groups_films_are_points():
    points = layers_of(film, COPPER, Points)["specimens"]
    assert points.x == pytest.approx([40, 120])
    assert points.y == pytest.approx([3.5, 2.24])
    assert points.x_uncertainty == pytest.approx([2, 6])


def test_the_fermi_energy_of_films():
    hard = layers_of(film, COPPER, Curve, 1)["hard walls"]
    density = 4 / (3.6149e-10) ** 3
    wavevector = films.film_fermi_wavevector(density, hard.x * 1e-9, 2.0)
    assert hard.y == pytest.approx((wavevector / np.cbrt(3 * np.pi**2 * density)) ** 2, rel=1e-9)


def test_bands_start_at_the_bottom_and_follow_the_empty_lattice():
    subject = sample.subject("aluminium")
    path, energies = bands.path_and_bands(subject, 15.0)
    cell, primitive = bands.lattice_of(subject)
    basis = crystals.reciprocal_basis(primitive @ cell)
    expected = zones.empty_lattice_bands(path.points, basis, c.m_e, energies.shape[1])
    assert energies * c.e == pytest.approx(expected, rel=1e-12)
    curves = layers_of(bands, "aluminium", Curve)
    assert curves["band 1"].y[0] == 0.0
    drawn = np.concatenate([curve.y[np.isfinite(curve.y)] for curve in curves.values()])
    assert np.isin(drawn, energies).all()


def test_bands_meet_the_fermi_level_where_the_reduced_wavevector_has_its_length():
    subject = sample.subject("aluminium")
    points = layers_of(bands, "aluminium", Points)["k = k_F"]
    path, _ = bands.path_and_bands(subject, 15.0)
    cell, primitive = bands.lattice_of(subject)
    basis = crystals.reciprocal_basis(primitive @ cell)
    steps = np.stack(np.meshgrid(*[np.arange(-3, 4)] * 3), axis=-1).reshape(-1, 3) @ basis
    for place in points.x * 1e9:
        here = np.array([np.interp(place, path.distances, path.points[:, axis]) for axis in range(3)])
        lengths = np.linalg.norm(here + steps, axis=1)
        assert np.abs(lengths / subject.si("fermi_wavevector") - 1).min() < 2e-4


@pytest.mark.parametrize("slug", ["copper", "aluminium", "tungsten"])
def test_sections_of_the_zone_touch_its_faces_and_the_sphere_has_its_radius(slug):
    subject = sample.subject(slug)
    body = zones.zone_polyhedron(*bands.lattice_of(subject))
    for panel in (1, 3):
        curves = layers_of(zone, slug, Curve, panel)
        sphere, outline = curves["Fermi sphere"], curves["first zone"]
        assert np.hypot(sphere.x, sphere.y) * 1e9 == pytest.approx(subject.si("fermi_wavevector"))
        assert np.hypot(outline.x, outline.y).min() * 1e9 >= body.distances.min() * (1 - 1e-9)
        assert np.hypot(outline.x, outline.y).max() * 1e9 <= np.linalg.norm(body.vertices, axis=1).max() * (1 + 1e-9)


def test_a_section_of_the_face_centred_zone_is_an_octagon():
    outline = layers_of(zone, "copper", Curve, 1)["first zone"]
    corners = np.unique(np.round(np.column_stack((outline.x, outline.y)), 6), axis=0)
    # In the plane k_z = 0 the faces are {100} and the edges between {111}: |k_x|, |k_y| ≤ 2π/a, |k_x| + |k_y| ≤ 3π/a.
    unit = 2 * np.pi / 0.36149
    assert np.abs(corners).max(axis=1) == pytest.approx(np.full(8, unit), abs=1e-4)
    assert np.abs(corners).sum(axis=1) == pytest.approx(np.full(8, 1.5 * unit), abs=1e-4)


def test_clipping_a_square_by_its_diagonal_leaves_a_triangle():
    square = np.array([(0.0, 0.0), (1, 0), (1, 1), (0, 1)])
    triangle = zone.clipped(square, [(1.0, 1.0, 1.0)])
    assert {tuple(corner) for corner in triangle.tolist()} == {(0.0, 0.0), (1.0, 0.0), (0.0, 1.0)}
    assert len(zone.clipped(square, [(1.0, 0.0, -1.0)])) == 0


def test_every_ratio_is_a_marker_with_its_standing():
    sheet = sample.sheet("copper")
    markers = layers_of(confrontation, "copper", Points)
    drawn = sorted((round(x, 9), name) for name, layer in markers.items() for x in layer.x)
    stated = sorted((round(abs(one.ratio), 9), one.standing) for one in sheet.confrontations if one.ratio)
    assert drawn == stated


def test_a_ratio_of_opposite_sign_says_so_beside_its_marker_and_in_the_table():
    names = [name for layer in layers_of(confrontation, "copper", Points).values() for name in layer.names]
    assert "thermopower ratio: fails, opposite sign" in names
    axis = Axis("", 0.1, 10.0, "log")
    assert opposite_sign([3.0], axis, 0.5).anchor == "start"
    assert opposite_sign([0.3, 2.0], axis, 0.5).anchor == "end"


def test_the_fermi_level_is_the_sheets():
    for module in (parabola, bands):
        level = layers_of(module, "copper", Rule)["Fermi level"]
        assert level.y * c.e == pytest.approx(sample.subject("copper").si("fermi_energy"))
