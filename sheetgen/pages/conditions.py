"""At your conditions: what the script of a sheet needs to follow temperature, size and field.

The page lays out the rows and carries the few parameters of the material, in SI; templates/conditions.js computes the
numbers from them and from the universal tables.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any

from markupsafe import Markup
from scipy import constants as c

from sheetgen.quantities.inputs import reference_resistivity, temperature_of

from . import entries, numbers, words
from .universal import STATED_ERROR

# In the order of the page; the script knows how each follows from the conditions.
TEMPERATURE = (
    "resistivity_from_debye", "conductivity", "relaxation_time", "mean_free_path", "path_wavevector_product",
    "mobility", "diffusion_coefficient", "electron_thermal_conductivity", "thermopower", "skin_depth",
    "chemical_potential", "electron_heat_capacity", "lattice_heat_capacity", "thermal_edge",
)  # fmt: skip
SIZE = ("level_spacing", "hard_wall_deficit")
FILM = ("film_resistivity_surface", "film_resistivity_grain", "film_resistivity")
# Lines that follow the resistivity at the reader's temperature, and those that need a Debye temperature of the lattice.
TRANSPORT = (
    "resistivity_from_debye", "conductivity", "relaxation_time", "mean_free_path", "path_wavevector_product",
    "mobility", "diffusion_coefficient", "electron_thermal_conductivity", "skin_depth",
)  # fmt: skip
# What a line is called where the temperature, edge or thickness is the reader's own.
_TITLES = {"resistivity_from_debye": "Resistivity"}
INDICATORS = (
    "T/T_F", "T/θ", "T/T_c", "k_F·l", "δ/l", "d/λ_F", "d/l", "level spacing/k_BT",
)  # fmt: skip


@dataclass(frozen=True)
class Followed:
    """One number that follows the conditions: how it is called, its unit's size in SI and what it takes for granted."""

    id: str
    symbol: str
    title: str
    unit: Markup
    factor: float
    assumes: tuple[str, ...]


class Conditions:
    """The section of one sheet."""

    def __init__(self, sheet: Any, handbook: Any, definitions: dict[str, Any]):
        self.sheet, self.handbook, self.definitions = sheet, handbook, definitions
        self.record, self.imprint = sheet.record, handbook.imprint
        self.films = handbook.registry.published("specimen")
        self.parameters = self._parameters()
        groups = {
            "Temperature and field": [*self._followed(TEMPERATURE), *self._field()],
            "A cube of that edge": self._followed(SIZE),
            "A film of that thickness": self._film(),
        }
        self.groups = {title: rows for title, rows in groups.items() if rows}

    def context(self) -> dict[str, Any]:
        """The names that the section's template uses."""
        return {
            "groups": self.groups,
            "indicators": self._indicators(),
            "parameters": self.parameters,
            "reference_temperature": self.imprint.reference_temperature,
            "specimens": list(self._specimens()),
            "error": numbers.printed(100 * STATED_ERROR).html,
            "fixed_transport": "reference" in self.parameters and "transport_debye" not in self.parameters,
            "film": self.record.electrons.dimension == 3 and "reference" in self.parameters,
        }

    def _parameters(self) -> dict[str, Any]:
        """The material in SI, absent parts left out."""
        sheet, si = self.sheet, self.sheet.si
        heat_debye = sheet.input_si("debye_temperature")
        transport_debye = sheet.input_si("transport_debye_temperature")
        found = {
            "dimension": self.record.electrons.dimension,
            "degeneracy": 2 * self.record.electrons.valleys,
            "sign": 1 if self.record.electrons.charge == "hole" else -1,
            "boltzmann": c.k,
            "charge": c.e,
            "magnetic_constant": c.mu_0,
            "gas_constant": c.R,
            "lorenz": si("lorenz_number"),
            "fermi_energy": si("fermi_energy"),
            "fermi_temperature": si("fermi_temperature"),
            "fermi_wavevector": si("fermi_wavevector"),
            "fermi_velocity": si("fermi_velocity"),
            "density": si("electron_density"),
            "density_of_states": si("density_of_states"),
            "charge_over_mass": si("cyclotron_frequency_per_tesla"),
            "heat_coefficient": si("heat_coefficient"),
            "atoms": float(sum(self.record.composition.values())),
            "debye": heat_debye,
            "transport_debye": heat_debye if math.isnan(transport_debye) else transport_debye,
            "critical": sheet.input_si("critical_temperature"),
        }
        found |= self._resistivity()
        return {name: value for name, value in found.items() if value == value}

    def _resistivity(self) -> dict[str, float]:
        """The resistivity (in two dimensions the sheet resistance) that everything scales from."""
        value = reference_resistivity(self.record, self.imprint)
        time = self.sheet.si("relaxation_time")
        if value is None or math.isnan(time):
            return {}
        residual = self.sheet.input_si("residual_resistivity")
        return {
            "reference": value.si,
            "reference_temperature": temperature_of(value, self.imprint),
            "residual": 0.0 if math.isnan(residual) else residual,
            "time_resistivity": time * value.si,  # m/ne², the same at every temperature
        }

    def _followed(self, ids: tuple[str, ...]) -> list[Followed]:
        known = [id for id in ids if id in self.definitions and self.sheet.entries(id)]
        scaled = "reference" in self.parameters
        return [self._row(self.definitions[id]) for id in known if scaled or id not in TRANSPORT]

    def _field(self) -> list[Followed]:
        """The angle turned between collisions, in the reader's field."""
        if "reference" not in self.parameters or "cyclotron_angle_per_tesla" not in self.definitions:
            return []
        assumes = self.definitions["cyclotron_angle_per_tesla"].assumes
        title = "Angle turned between collisions in that field, in radians"
        return [Followed("cyclotron_angle", r"\omega_\mathrm{c}\tau", title, Markup(""), 1.0, assumes)]

    def _film(self) -> list[Followed]:
        if self.record.electrons.dimension != 3 or "reference" not in self.parameters:
            return []
        return [self._row(self.films[id]) for id in FILM if id in self.films]

    def _row(self, definition: Any) -> Followed:
        unit = entries.Preference(self.imprint.units).of(definition.id, definition.unit)
        shown, factor = numbers.unit(unit), numbers.si_factor(unit)
        title = _TITLES.get(definition.id, definition.title)
        return Followed(definition.id, definition.symbol, title, shown, factor, definition.assumes)

    # --- assumptions

    def _indicators(self) -> list[dict[str, Any]]:
        """The assumptions that the conditions move, with their bounds."""
        found = []
        for assumption in self.handbook.registry.assumptions:
            if assumption.indicator in INDICATORS and self._can_follow(assumption.indicator):
                strained, broken = assumption.bounds(self.imprint.thresholds)
                bounds = {"strained": strained, "broken": broken, "below": assumption.below}
                found.append({"assumption": assumption, "bounds": bounds | {"until": assumption.strained_until}})
        return found

    def _can_follow(self, indicator: str) -> bool:
        needed = {"T/θ": "transport_debye", "T/T_c": "critical", "k_F·l": "reference", "δ/l": "reference",
                  "d/l": "reference", "level spacing/k_BT": "density_of_states"}  # fmt: skip
        solid = self.record.electrons.dimension == 3
        if indicator in ("δ/l", "d/l", "d/λ_F", "T/θ") and not solid:
            return False
        return needed.get(indicator, "fermi_temperature") in self.parameters

    def embedded(self) -> dict[str, Any]:
        """What the page hands to the script: parameters, bounds, and the standing of what no condition moves."""
        moved = [found["assumption"].indicator for found in self._indicators()]
        still: dict[str, str] = {}
        for check in self.sheet.checks:
            if check.listed_by is None and check.indicator not in moved:
                still[check.id] = max(still.get(check.id, "holds"), check.standing, key=words.CONDITIONS.index)
        return {
            "parameters": self.parameters,
            "rows": {row.id: [row.factor, row.assumes] for rows in self.groups.values() for row in rows},
            "bounds": {
                found["assumption"].indicator: [found["assumption"].id, found["bounds"]] for found in self._indicators()
            },
            "still": still,
            "titles": {one.id: words.lower_first(one.title) for one in self.handbook.registry.assumptions},
        }

    # --- specimens

    def _specimens(self):
        """Conditions that the record's own films and cubes stand for: a name, and the settings as JSON."""
        for specimen in self.record.specimens:
            size = specimen.thickness or specimen.edge
            if specimen.form not in ("film", "cube") or size is None:
                continue
            given = {
                "size": size.si * 1e9,
                "specularity": specimen.specularity.si if specimen.specularity else None,
                "grain-size": specimen.grain_size.si * 1e9 if specimen.grain_size else None,
                "grain-reflection": specimen.grain_reflection.si if specimen.grain_reflection else None,
                "temperature": specimen.resistivity.temperature if specimen.resistivity else None,
            }
            yield specimen.name, {key: float(f"{value:.6g}") for key, value in given.items() if value is not None}
