"""What the sheets say of a number is what the textbooks say of it.

A textbook prints a measured value beside the free-electron one; their ratio, graded by the rule of the sheets, must
give the standing that the sheet reaches from its own inputs.
"""

from __future__ import annotations

import pytest
from published.gases import half_unit

from sheetgen.standing import thresholds

TEMPERATURE = {"aluminium": 4, "indium": 4}  # K, of strong-field Hall coefficients

# Kittel, ch. 6, table 2: ratio of measured and free-electron γ, the thermal mass ratio. Read for Li, Ca, Zn, Ag, Cd,
# In, Sn, Cs, Au and Tl; the others from memory.
KITTEL_HEAT = {
    "lithium": 2.18, "sodium": 1.26, "potassium": 1.25, "rubidium": 1.26, "caesium": 1.43, "copper": 1.38,
    "silver": 1.00, "gold": 1.14, "beryllium": 0.34, "magnesium": 1.3, "calcium": 1.9, "barium": 1.4, "zinc": 0.85,
    "cadmium": 0.73, "aluminium": 1.48, "gallium": 0.58, "indium": 1.37, "thallium": 1.14, "tin": 1.26, "lead": 1.97,
}  # fmt: skip
# Ashcroft & Mermin (1976), table 2.3, ratio column, from memory: transition metals and semimetals.
ASHCROFT_HEAT = {"niobium": 20 / 1.6, "iron": 12 / 1.5, "bismuth": 0.2 / 4.3, "antimony": 1.5 / 3.9}
# Ashcroft & Mermin (1976), table 2.2, measured and free-electron bulk modulus (GPa), from memory. Two are left out:
# for potassium the ratio pairs a warm modulus with the density at 5 K, and lies close to the bound of 0.9; for rubidium
# the book has 1.92 GPa measured where Kittel has 3.1 GPa, on the other side of the model.
ASHCROFT_BULK = {
    "lithium": 11.5 / 23.9, "sodium": 6.42 / 9.23, "copper": 134.3 / 63.8, "silver": 99.9 / 34.5,
    "aluminium": 76.0 / 228,
}  # fmt: skip
# Ashcroft & Mermin (1976), table 1.4, −1/R_H ne inverted, from memory.
ASHCROFT_HALL = {
    "copper": 1 / 1.5, "silver": 1 / 1.3, "gold": 1 / 1.5, "lithium": 1 / 0.8, "beryllium": -1 / 0.2,
    "aluminium": -1 / 0.3, "indium": -1 / 0.3,
}  # fmt: skip
# Kittel, ch. 6, table 4 (1e-24 Gaussian), read: helicon waves at 4 K, R_H over that of one electron an atom.
KITTEL_HALL_COLD = {"sodium": -2.619 / -2.603, "potassium": -4.946 / -4.944}

CASES = [
    *(("heat_coefficient", slug, ratio) for slug, ratio in KITTEL_HEAT.items()),
    *(("heat_coefficient", slug, ratio) for slug, ratio in ASHCROFT_HEAT.items()),
    *(("bulk_modulus", slug, ratio) for slug, ratio in ASHCROFT_BULK.items()),
    *(("hall_coefficient", slug, ratio) for slug, ratio in ASHCROFT_HALL.items()),
]


def held(sheet, quantity: str, temperature: float | None = None):
    """The confrontations of a quantity, at one temperature where that is given."""
    found = [one for one in sheet.confrontations if one.quantity == quantity]
    return [one for one in found if temperature is None or one.temperature == temperature]


@pytest.mark.parametrize("quantity, slug, ratio", CASES)
def test_standing_is_that_of_the_textbook(handbook, quantity, slug, ratio):
    (one,) = held(handbook[slug], quantity, TEMPERATURE.get(slug) if quantity == "hall_coefficient" else None)
    assert one.standing == thresholds(handbook.imprint).grade(ratio, 0.0)
    assert (one.ratio > 0) == (ratio > 0)
    assert one.standing == "agrees" or (one.ratio > 1) == (ratio > 1)


@pytest.mark.parametrize("slug", KITTEL_HALL_COLD)
def test_cold_alkali_metals_have_one_electron_an_atom(handbook, slug):
    (one,) = held(handbook[slug], "hall_coefficient", 4)
    assert one.standing == thresholds(handbook.imprint).grade(KITTEL_HALL_COLD[slug], 0.0) == "agrees"


# Kittel, ch. 14, table of volume plasmons: measured and free-electron energy (eV), from memory. Below the plasmon of an
# alkali metal or aluminium lie transitions between bands, so that the sheet makes no claim; the ratio is still there.
@pytest.mark.parametrize(
    "slug, measured, model",
    [("lithium", "7.12", "8.02"), ("sodium", "5.71", "5.95"), ("potassium", "3.72", "4.29"),
     ("magnesium", "10.6", "10.9"), ("aluminium", "15.3", "15.8")],
)  # fmt: skip
def test_plasmon_ratios(handbook, slug, measured, model):
    (one,) = held(handbook[slug], "plasma_energy")
    ratio = float(measured) / float(model)
    rounding = ratio * (half_unit(measured) + half_unit(model))
    assert one.ratio == pytest.approx(ratio, abs=rounding + 2 * one.ratio_uncertainty)


# Grüneisen, Annalen der Physik 408, 530 (1933), from memory: the reduced resistivities of gold, copper, aluminium and
# nickel, among others, lie on one curve.
@pytest.mark.parametrize("slug", ["gold", "copper", "aluminium", "nickel"])
def test_resistivities_follow_one_curve(handbook, slug):
    found = held(handbook[slug], "resistivity_from_debye")
    assert {one.standing for one in found} == {"agrees"}
    assert min(one.temperature for one in found) <= 80


# Ashcroft & Mermin (1976), ch. 13, and Kasap (2006), table of Seebeck coefficients (from memory): the thermopower of
# these metals is positive, against the sign of their carriers.
@pytest.mark.parametrize("slug", ["copper", "silver", "gold", "lithium"])
def test_positive_thermopower_fails(handbook, slug):
    (one,) = held(handbook[slug], "thermopower")
    assert one.ratio < 0
    assert one.standing == "fails"


# Hurd, The Hall Effect in Metals and Alloys (1972), from memory: positive at room temperature in weak fields.
@pytest.mark.parametrize("slug", ["beryllium", "zinc", "cadmium", "lead"])
def test_positive_hall_coefficient_fails(handbook, slug):
    (one,) = held(handbook[slug], "hall_coefficient")
    assert one.ratio < 0
    assert one.standing == "fails"


# Ashcroft & Mermin (1976), chs. 2 and 15: half-filled d bands make γ many times that of a free sphere.
@pytest.mark.parametrize(
    "slug", ["iron", "cobalt", "nickel", "niobium", "palladium", "platinum", "chromium", "titanium"]
)
def test_transition_metals_fail(handbook, slug):
    (one,) = held(handbook[slug], "heat_coefficient")
    assert one.ratio > 2
    assert one.standing == "fails"
    assert "heat_coefficient" in {line.quantity for line in handbook[slug].answer.avoid}


# Ashcroft & Mermin (1976), ch. 15, semimetals: bismuth holds about 3e17 carriers of each sign in a cm³, so that its γ
# is a small part of that of five free electrons an atom and its Hall coefficient vastly more.
@pytest.mark.parametrize(
    "slug, quantity", [("bismuth", "heat_coefficient"), ("antimony", "heat_coefficient"),
                       ("bismuth", "hall_coefficient"), ("bismuth", "conduction_susceptibility")]
)  # fmt: skip
def test_semimetals_fail(handbook, slug, quantity):
    (one,) = held(handbook[slug], quantity)
    assert one.standing == "fails"
    assert quantity in {line.quantity for line in handbook[slug].answer.avoid}


# ------------------------------------------------------------------------------------------------ warm dilute gases

DEGENERATE = (
    "thomas_fermi_length", "heat_coefficient", "pauli_susceptibility", "landau_susceptibility",
    "conduction_susceptibility", "resistivity_path_product", "lorenz_number", "mean_free_path", "diffusion_coefficient",
    "path_wavevector_product", "electron_thermal_conductivity", "thermopower", "thermal_edge",
)  # fmt: skip


def standings(sheet, warm) -> set[str]:
    """Standings of all lines that rest on a sharp Fermi edge, at the temperatures that `warm` accepts."""
    reference = 293.15
    return {
        entry["standing"]
        for id in DEGENERATE
        for entry in sheet.entries(id)
        if warm(entry.get("temperature", reference))
    }


def test_warm_silicon_is_outside(handbook):
    # Six valleys share 1e20 electrons/cm³, so that the Fermi energy is below 3k_BT at room temperature.
    silicon = handbook["silicon-n-phosphorus"]
    assert silicon.si("fermi_temperature") < 293.15 / 0.3
    assert standings(silicon, lambda temperature: temperature > 290) == {"outside"}
    assert "outside" not in standings(silicon, lambda temperature: temperature < 100)


def test_warm_quantum_well_is_outside(handbook):
    # Beenakker & van Houten (1991), table I: E_F = 14 meV, that is 162 K, for 4e11 electrons/cm² (from memory).
    well = handbook["gallium-arsenide-quantum-well"]
    assert standings(well, lambda temperature: temperature > 0.3 * 166) == {"outside"}
    assert "outside" not in standings(well, lambda temperature: temperature < 10)


# Kittel, ch. on superconductivity, table 1: critical temperatures 7.19 K (Pb), 9.5 K (Nb), 3.72 K (Sn), from memory.
@pytest.mark.parametrize("slug, below", [("lead", True), ("niobium", True), ("tin", False), ("copper", False)])
def test_superconductor_has_no_normal_numbers_in_helium(handbook, slug, below):
    found = {
        id: entry["standing"]
        for id in ("electron_heat_capacity", "resistivity_from_debye", "thermopower")
        for entry in handbook[slug].entries(id)
        if entry["temperature"] == 4.2
    }
    assert len(found) == 3
    assert {standing == "outside" for standing in found.values()} == {below}
