"""Each printed formula, read by SymPy and evaluated, against the function that stands under it."""

import re
import warnings

import numpy as np
import pytest
from scipy import constants as c

from sheetgen.quantities import registry

# Printed symbols that are no quantity of their own.
CONSTANTS = {
    r"\hbar": c.hbar,
    r"k_\mathrm{B}": c.k,
    r"m_\mathrm{e}": c.m_e,
    r"\mu_\mathrm{B}": c.value("Bohr magneton"),
    r"\mu_0": c.mu_0,
    r"\varepsilon_0": c.epsilon_0,
    r"a_0": c.value("Bohr radius"),
    "e": c.e,
    "c": c.c,
    "f": 1e9,
    r"\pi": np.pi,
}
# Printed symbol → name of the parameter, for what is printed by another symbol than its own declaration's.
PARAMETERS = {
    r"\varepsilon_\mathrm{b}": "background_permittivity",
    r"m_\mathrm{o}": "optical_mass",
    r"m_\mathrm{c}": "conductivity_mass",
    r"V_\mathrm{m}": "molar_volume",
    r"V_\mathrm{p}": "primitive_cell_volume",
    r"\phi": "measured_work_function",
    r"R_\square": "measured_sheet_resistance",
    r"\rho": "measured_resistivity",
    r"\alpha": "grain_strength",
    r"\rho_0": "reference_resistivity",
    "s": "charge_sign",
    "m": "effective_mass",
    "g": "degeneracy",
    "T": "temperature",
    "L": "edge",
    "V": "volume",
}
# Steps through which a formula reads what it prints.
STEPS = {
    "bare_plasma_frequency": ("electron_density", "optical_mass"),
    "reference_relaxation_time": ("conductivity_mass", "electron_density", "reference_resistivity"),
}
LOCAL = {
    "electron_thermal_conductivity": {"T": "resistivity_temperature", "L": "lorenz_number"},
    "plasma_edge_energy": {r"\tau": "reference_relaxation_time"},
}
# What does not fit into one closed expression, each with the test that stands for it.
ELSEWHERE = {
    "atoms_per_cell": "tests/quantities/test_crystal.py",
    "cell_volume": "tests/quantities/test_crystal.py",
    "mass_density": "tests/published/test_lattice_and_density.py",
    "nearest_neighbour_distance": "tests/quantities/test_crystal.py",
    "coordination_number": "tests/quantities/test_crystal.py",
    "neighbour_shells": "tests/quantities/test_crystal.py",
    "nearest_zone_face": "tests/quantities/test_crystal.py",
    "nearest_diffracting_face": "tests/quantities/test_crystal.py",
    "electron_density": "tests/published/test_free_electron_tables.py",
    "sheet_density": "tests/quantities/test_two_dimensions.py",
    "zone_occupation": "tests/published/test_zones_published.py",
    "chemical_potential": "tests/physics/test_occupation.py",
    "electron_heat_capacity": "tests/physics/test_occupation.py",
    "lattice_heat_capacity": "tests/physics/test_debye.py",
    "heat_crossover_temperature": "tests/physics/test_debye.py",
    "resistivity_from_debye": "tests/physics/test_bloch_grueneisen.py",
    "normal_reflectance": "tests/physics/test_drude.py",
    "optical_depth": "tests/physics/test_drude.py",
    "states_hard_wall": "tests/physics/test_counting.py",
    "states_periodic": "tests/physics/test_counting.py",
    "hard_wall_deficit": "tests/physics/test_counting.py",
    "film_subbands": "tests/physics/test_films.py",
    "film_fermi_energy": "tests/physics/test_films.py",
    "film_fermi_energy_neutral": "tests/physics/test_films.py",
    "film_resistivity_surface": "tests/physics/test_films.py",
    "film_resistivity": "tests/physics/test_films.py",
    "explaining_specularity": "tests/physics/test_films.py",
    "explaining_grain_reflection": "tests/physics/test_films.py",
}
RANDOM = np.random.default_rng(20261201)
DEFINITIONS = [d for d in registry().all if d.published]
CLOSED = [d for d in DEFINITIONS if d.id not in ELSEWHERE or d.function.__name__ == "chemical_potential_of_sheet"]


@pytest.mark.parametrize("definition", CLOSED, ids=lambda d: d.function.__name__)
def test_the_printed_formula_gives_the_value(definition):
    parameters, symbols = _values(definition)
    printed = _evaluate(definition.formula, symbols)
    computed = definition.function(*(np.full((1, 1, 1), parameters[name]) for name in definition.parameters))
    assert float(np.squeeze(computed)) == pytest.approx(printed, rel=1e-9)


def test_what_is_tested_elsewhere_is_tested_there(root):
    for id, file in ELSEWHERE.items():
        assert id in registry() or id in registry().published("specimen"), f"{id} is no longer a quantity"
        assert (root / file).is_file(), f"{file} stands for {id}"


def _values(definition) -> tuple[dict[str, float], dict[str, float]]:
    """A random value for each parameter, and for each printed symbol."""
    symbol_of = {d.id: d.symbol for d in DEFINITIONS if set(d.dimensions) & set(definition.dimensions)}
    names = set(definition.parameters) | {part for name in definition.parameters for part in STEPS.get(name, ())}
    values = {name: float(RANDOM.uniform(0.5, 2)) for name in sorted(names)} | _special(definition)
    if "bare_plasma_frequency" in values:
        squared = values["electron_density"] * c.e**2 / (c.epsilon_0 * values["optical_mass"])
        values["bare_plasma_frequency"] = squared**0.5
    symbols = dict(CONSTANTS)
    for symbol, name in (PARAMETERS | LOCAL.get(definition.id, {})).items():
        if name in values:
            symbols[symbol] = values[name]
    for name, value in values.items():
        if name in symbol_of:
            symbols[symbol_of[name]] = value
    return values, symbols


def _special(definition) -> dict[str, float]:
    """Values for which a formula has a meaning, where any would not do."""
    if definition.id == "chemical_potential_series":
        return {"temperature": 0.2, "fermi_temperature": 1.3}
    if definition.id == "chemical_potential":
        energy = float(RANDOM.uniform(0.5, 2)) * c.e
        return {"fermi_energy": energy, "fermi_temperature": energy / c.k, "temperature": 3e3}
    if definition.id == "hard_wall_deficit_leading":
        return {"fermi_wavevector": 1.3e10, "edge": 7e-9}
    if definition.id == "plasma_edge_energy":
        return {"plasma_frequency": 1.3e16, "reference_relaxation_time": 1.1e-14}
    return {}


def _evaluate(formula: str, symbols: dict[str, float]) -> float:
    from sympy.parsing.latex import parse_latex

    numbered = {symbol: f"x_{{{index}}}" for index, symbol in enumerate(symbols)}
    text = _substitute(formula.replace(r"\,", " "), numbered)
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")  # the parser's own deprecations are not our concern
        expression = parse_latex(text)
    given = {f"x_{{{index}}}": value for index, value in enumerate(symbols.values())}
    unknown = {str(s) for s in expression.free_symbols} - set(given)
    assert not unknown, f"{formula} prints {unknown} that no parameter stands for: {text}"
    return float(expression.evalf(30, subs=given))


def _substitute(formula: str, numbered: dict[str, str]) -> str:
    """Replace each known symbol by a numbered one, the longest first, without breaking a command's name."""
    longest_first = sorted(numbered, key=len, reverse=True)
    alternatives = "|".join(
        re.escape(symbol) + (r"(?![a-zA-Z])" if symbol[-1].isalpha() else "") for symbol in longest_first
    )
    pattern = re.compile(rf"({alternatives})|(\\[a-zA-Z]+)|(.)")
    text = "".join(f" {numbered[m[1]]} " if m[1] else m[0] for m in pattern.finditer(formula))
    # A symbol before a bracket is a factor here, never the name of a function.
    return re.sub(r"(x_\{\d+\})\s*\\left\(", r"\1 \\cdot \\left(", text)
