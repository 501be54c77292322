"""Every declaration in two systems of units: its value must change as its declared unit says.

The second system measures length, mass, time, current and temperature in other base units. Constants and inputs
are converted to it, each function runs again, and its result, converted back, must be the same.
"""

import importlib.util
import math
from pathlib import Path

import numpy as np
import pint
import pytest
import scipy

from sheetgen import quantities
from sheetgen.physics import drude
from sheetgen.quantities import registry
from sheetgen.records.units import si_factor

BASES = {"[length]": 1.7, "[mass]": 0.6, "[time]": 2.3, "[current]": 0.8, "[temperature]": 1.4, "[substance]": 1.0}
UNITS = pint.UnitRegistry()
CONSTANT_UNITS = {
    "hbar": "J s", "k": "J/K", "e": "C", "m_e": "kg", "epsilon_0": "F/m", "mu_0": "N/A^2", "N_A": "1/mol",
    "R": "J/(mol K)", "c": "m/s", "gram": "kg",
}  # fmt: skip
VALUE_UNITS = {"Bohr radius": "m", "Bohr magneton": "J/T"}
INPUT_UNITS = {
    "valence": "1", "valence_sites": "1", "carrier_density": "1/m^3", "carrier_sheet_density": "1/m^2",
    "charge_sign": "1", "valleys": "1", "temperature": "K", "reference_temperature": "K",
    "resistivity_temperature": "K", "photon_energy": "J", "tabulated_edge": "m", "formula_atoms": "1",
    "background_permittivity": "1", "effective_mass_ratio": "1", "stated_conductivity_mass_ratio": "1",
    "stated_optical_mass_ratio": "1", "has_reference_resistivity": "1", "atoms_in_cell": "1",
    "neighbour_count": "1", "cell_mass": "1/mol", "film_bulk_resistivity": "ohm m", "specimen_thickness": "m",
    "specimen_diameter": "m", "particle_diameter": "m",
    "specimen_edge": "m", "specimen_grain_size": "m", "specimen_specularity": "1",
    "specimen_grain_reflection": "1", "specimen_resistivity": "ohm m", "measured_resistivity": "ohm m",
    "measured_sheet_resistance": "ohm", "measured_residual_resistivity": "ohm m", "measured_debye_temperature": "K",
    "measured_transport_debye_temperature": "K", "measured_work_function": "J",
    "measured_interband_threshold": "J", "measured_critical_temperature": "K",
    "lattice_a": "m", "lattice_b": "m", "lattice_c": "m", "lattice_c_over_a": "1",
    "lattice_alpha": "1", "lattice_beta": "1", "lattice_gamma": "1",
}  # fmt: skip
STEP_UNITS = {
    "effective_mass": "kg", "conductivity_mass": "kg", "optical_mass": "kg", "degeneracy": "1",
    "electrons_per_cell": "1", "bare_plasma_frequency": "1/s", "molar_volume": "m^3/mol",
    "lattice_debye_temperature": "K", "transport_debye_temperature": "K", "reference_resistivity": "ohm m",
    "reference_resistivity_temperature": "K", "reference_relaxation_time": "s", "edge": "m", "volume": "m^3",
    "specimen_size": "m", "bulk_mean_free_path": "m", "bulk_path": "m", "grain_strength": "1",
    "measured_film_ratio": "1", "primitive_cell_volume": "m^3", "cell": "m", "primitive_basis": "1",
    "neighbour_vector": "1", "zone_face_indices": "1", "diffracting_face_indices": "1",
}  # fmt: skip
SCALES = {  # sizes at which the functions have a value: those of a metal
    "temperature": 77.0, "fermi_temperature": 8e4, "resistivity_temperature": 293.0, "edge": 5e-9,
    "fermi_wavevector": 1.36e10, "electron_density": 8.5e28, "sheet_density": 3e15, "fermi_energy": 1.1e-18,
    "density_of_states": 1.1e47, "degeneracy": 2.0, "volume": 1.25e-25, "molar_volume": 7e-6,
    "effective_mass": 9.1e-31, "conductivity_mass": 8e-31, "optical_mass": 9.5e-31, "measured_resistivity": 1.7e-8,
    "reference_resistivity": 1.7e-8, "reference_resistivity_temperature": 293.0, "relaxation_time": 2.5e-14,
    "reference_relaxation_time": 2.5e-14, "lattice_debye_temperature": 343.0, "transport_debye_temperature": 343.0,
    "measured_debye_temperature": 343.0, "measured_residual_resistivity": 1e-10, "bare_plasma_frequency": 1.6e16,
    "plasma_frequency": 1.6e16, "photon_energy": 3e-19, "bulk_path": 4e-8, "specimen_thickness": 2e-8,
    "specimen_grain_size": 3e-8, "specimen_resistivity": 3e-8, "formula_atoms": 1.0, "fermi_velocity": 1.6e6,
    "mean_free_path": 4e-8, "specimen_specularity": 0.3, "specimen_grain_reflection": 0.2, "grain_strength": 0.4,
    "measured_film_ratio": 2.1, "states_hard_wall": 9e3, "states_continuum": 1e4, "level_spacing": 1e-23,
}  # fmt: skip
CELL = np.diag([3e-10, 4e-10, 5e-10])
ARRAYS = {  # what has axes of its own behind the entries: of a primitive orthorhombic cell
    "cell": CELL, "primitive_basis": np.eye(3), "neighbour_vector": np.array([1.0, 0, 0]),
    "zone_face_indices": np.array([0, 0, 1.0]), "diffracting_face_indices": np.array([0, 0, 1.0]),
    "shells": np.array([[3e-10, 2], [4e-10, 2], [5e-10, 4]]),
}  # fmt: skip
# Shells hold a length beside a count; their unit is that of the distance, which the crystal tests hold.
DECLARED = [d for d in registry().all if d.form != "shells"]


@pytest.fixture(scope="module")
def elsewhere():
    """The quantities' modules, loaded anew while the constants are those of the other system of units."""
    original = scipy.constants
    scipy.constants = OtherConstants()
    try:
        modules = {name: _load(name) for name in ("crystal", "gas", "heat", "transport", "optics", "finite")}
        modules["optics"].drude = _load("drude", Path(drude.__file__).parent)
        modules["optics"].drude.SPEED_OF_LIGHT *= scale("m/s")
        modules["transport"].FREQUENCY *= scale("1/s")
        modules["optics"].DEPTH_ENERGY *= scale("J") / scale("C")  # electronvolts hold a volt
        return modules
    finally:
        scipy.constants = original


@pytest.mark.parametrize("definition", DECLARED, ids=lambda d: f"{d.function.__name__}-{d.scope}")
def test_the_unit_is_that_of_the_formula(definition, elsewhere):
    here = {name: _sample(name) for name in definition.parameters}
    there = {name: value * scale(_unit(name, definition)) for name, value in here.items()}
    twin = getattr(elsewhere[definition.function.__module__.rpartition(".")[2]], definition.function.__name__)
    unit = STEP_UNITS[definition.id] if not definition.published else definition.unit
    expected = definition.function(*here.values()) * scale(unit)
    assert np.all(np.isfinite(expected))
    np.testing.assert_allclose(twin(*there.values()), expected, rtol=1e-8)


def test_every_declared_unit_is_read():
    for definition in registry().all:
        assert si_factor(definition.unit) > 0


class OtherConstants:
    """CODATA's constants in the other system of units; the fine-structure constant is the same in both."""

    def __getattr__(self, name):
        return getattr(_SCIPY, name) * scale(CONSTANT_UNITS[name])

    @staticmethod
    def value(name):
        return _SCIPY.value(name) * scale(VALUE_UNITS[name])


_SCIPY = scipy.constants


def scale(unit: str) -> float:
    """Number of other units in one coherent SI unit of the same dimension."""
    dimension = UNITS.parse_expression(unit).dimensionality if unit != "1" else {}
    return math.prod(BASES[base] ** -power for base, power in dimension.items())


def _sample(name: str) -> np.ndarray:
    # Two entries, since the specimens' lines take the second for their own temperature.
    value = ARRAYS.get(name, SCALES.get(name, 1.3 if "mass" in name else 0.9))
    return np.broadcast_to(value, (1, 1, 2, *np.shape(value)))


def _unit(name: str, definition) -> str:
    if name in INPUT_UNITS:
        return INPUT_UNITS[name]
    if name in STEP_UNITS:
        return STEP_UNITS[name]
    fitting = [d for d in registry().definitions_of(name) if set(d.dimensions) & set(definition.dimensions)]
    return fitting[0].unit


def _load(name: str, folder: Path = Path(quantities.__file__).parent):
    path = folder / f"{name}.py"
    spec = importlib.util.spec_from_file_location(f"in_other_units_{name}", path)
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module
