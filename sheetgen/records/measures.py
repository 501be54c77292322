"""What each key of a record measures: its kind, its unit, an example of how to write it, and its physical range."""

from __future__ import annotations

from dataclasses import dataclass
from math import inf, radians


@dataclass(frozen=True, slots=True)
class Measure:
    """The kind of a value: `unit` is the coherent SI unit, `low` and `high` (inclusive) the range in it.

    The ranges are wide: they catch a slip of the unit or the exponent, never an unusual material.
    `high_excluded` says that the upper end itself is out of range.
    """

    kind: str
    unit: str
    example: str
    low: float = -inf
    high: float = inf
    high_excluded: bool = False

    @property
    def dimensionless(self) -> bool:
        """Whether a bare number is a complete value."""
        return self.unit == "1"


TEMPERATURE = Measure("a temperature", "K", "293 K", 0, 1e5)
LENGTH = Measure("a length", "m", "3.6149(2) Å", 1e-10, 1e-6)
ANGLE = Measure("an angle", "rad", "57.23(1)°", radians(1), radians(179))
RATIO = Measure("a ratio of lengths", "1", "1.6235(3)", 0.05, 50)
SIZE = Measure("a length", "m", "40(2) nm", 1e-10, 1.0)
MASS = Measure("a mass in electron masses", "1", "0.067", 1e-4, 1e4)
FRACTION = Measure("a fraction", "1", "0.2", 0, 1)

STRUCTURE = {
    "a": LENGTH,
    "b": LENGTH,
    "c": LENGTH,
    "c_over_a": RATIO,
    "alpha": ANGLE,
    "beta": ANGLE,
    "gamma": ANGLE,
}

VALENCE = Measure("a number of electrons per atom", "1", "1", -20, 20)
DENSITIES = {
    3: Measure("a density per volume", "1/m^3", "1.03(2)×10^19 cm^-3", 1e8, 1e32),
    2: Measure("a density per area", "1/m^2", "3.0(1)×10^11 cm^-2", 1e6, 1e22),
}
ELECTRONS = {
    "effective_mass": MASS,
    "conductivity_mass": MASS,
    "optical_mass": MASS,
    "background_permittivity": Measure("a relative permittivity", "1", "10.9", 1, 1e6),
}

RESISTIVITY = Measure("a resistivity", "ohm m", "1.676(5) µΩ cm", 1e-16, 1e6)
MEASURED = {
    "resistivity": RESISTIVITY,
    "sheet_resistance": Measure("a sheet resistance", "ohm", "120(2) Ω/sq", 1e-8, 1e12),
    "residual_resistivity": Measure("a resistivity", "ohm m", "0.002 µΩ cm", 0, 1e6),
    "mass_density": Measure("a mass density", "kg/m^3", "8.96 g/cm³", 1, 1e5),
    "heat_coefficient": Measure("an electronic heat coefficient", "J/(mol K^2)", "0.695(10) mJ/(mol K²)", 1e-9, 100),
    "debye_temperature": Measure("a temperature", "K", "343 K", 1, 1e4),
    "transport_debye_temperature": Measure("a temperature", "K", "320 K", 1, 1e4),
    "hall_coefficient": Measure("a Hall coefficient", "m^3/C", "-5.1×10^-11 m³/C", -1e9, 1e9),
    "bulk_modulus": Measure("a pressure", "Pa", "137 GPa", 1e5, 1e13),
    "plasma_energy": Measure("an energy", "J", "15.0(1) eV", 1e-26, 2e-17),
    "thermal_conductivity": Measure("a thermal conductivity", "W/(m K)", "401 W/(m K)", 1e-6, 1e7),
    "susceptibility": Measure("a volume susceptibility (SI)", "1", "-9.6e-6", -1, 1e6),
    "thermopower": Measure("a thermopower", "V/K", "1.83 µV/K", -1, 1),
    "oscillation_frequency": Measure("a frequency in magnetic field", "T", "59.5 kT", 1e-4, 1e7),
    "work_function": Measure("an energy", "J", "4.65 eV", 1e-20, 2e-18),
    "thermal_expansion": Measure("a thermal expansion", "1/K", "16.5×10^-6 1/K", -1e-2, 1e-2),
    "interband_threshold": Measure("an energy", "J", "2.1 eV", 1e-23, 2e-17),
    "melting_point": Measure("a temperature", "K", "1357.77 K", 0.1, 1e4),
    "critical_temperature": Measure("a temperature", "K", "1.18 K", 1e-6, 1e3),
    "magnetic_ordering_temperature": Measure("a temperature", "K", "1043 K", 1e-6, 1e4),
}
OPTICAL = {
    "photon_energy": Measure("an energy", "J", "1.5 eV", 1e-25, 2e-14),
    "n": Measure("a refractive index", "1", "0.26", 0, 1e5),
    "k": Measure("an extinction coefficient", "1", "5.1", 0, 1e5),
}
SPECIMEN = {
    "thickness": SIZE,
    "diameter": SIZE,
    "edge": SIZE,
    "grain_size": SIZE,
    "specularity": FRACTION,
    "grain_reflection": Measure("a fraction", "1", "0.3", 0, 1, high_excluded=True),
    "resistivity": RESISTIVITY,
}
FORMS = {"film": "thickness", "wire": "diameter", "particle": "diameter", "cube": "edge"}
