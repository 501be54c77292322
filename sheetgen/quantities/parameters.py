"""What the function of a quantity may take as a parameter: every name, what it is, and its SI unit."""

from __future__ import annotations

from collections.abc import Iterator
from typing import NamedTuple

from sheetgen.quantities.registry import Registry
from sheetgen.records.measures import MEASURED
from sheetgen.records.units import dimension_matches, si_factor

# The coherent SI unit of each kind of quantity, in the form that people write.
_COHERENT = (
    "1", "m", "m^3", "kg/m^3", "1/m", "1/m^2", "1/m^3", "s", "1/s", "1/(s T)", "K", "1/K", "J", "1/J", "1/(J m^3)",
    "1/(J m^2)", "Pa", "T", "1/T", "m/s", "m^2/s", "m^2/(V s)", "m^3/C", "m^2/C", "S/m", "ohm", "ohm m", "ohm m^2",
    "V/K", "V^2/K^2", "W/(m K)", "J/(mol K)", "J/(mol K^2)",
)  # fmt: skip
_PREFIX = "measured_"


class Parameter(NamedTuple):
    """A name that a function may take, what stands behind it, and the SI unit in which it comes."""

    name: str
    meaning: str
    unit: str


def si_unit(unit: str) -> str:
    """The coherent SI unit of the kind that a unit measures. Raises KeyError for a kind that no quantity has."""
    for coherent in _COHERENT:
        if dimension_matches(coherent, unit) and abs(si_factor(coherent) - 1) < 1e-12:
            return coherent
    raise KeyError(unit)


def quantity_parameters(registry: Registry) -> Iterator[Parameter]:
    """The published quantities of a material, in the order of the sheet."""
    for id, definition in registry.published().items():
        units = dict.fromkeys(si_unit(d.unit) for d in registry.definitions_of(id) if d.scope == "material")
        yield Parameter(id, definition.title, ", in two dimensions ".join(units))


def measured_parameters(registry: Registry) -> Iterator[Parameter]:
    """The measurements of a record."""
    for key, measure in MEASURED.items():
        if f"{_PREFIX}{key}" in registry.inputs:
            yield Parameter(f"{_PREFIX}{key}", f"the record's `{key.replace('_', ' ')}`", measure.unit)


def step_parameters(registry: Registry) -> Iterator[Parameter]:
    """The steps on the way to quantities of a material, which no sheet shows."""
    for definition in registry.all:
        if not definition.published and definition.scope == "material":
            yield Parameter(definition.id, definition.title, "")


def parameter_tables(registry: Registry) -> str:
    """All of them as the Markdown that the documentation holds."""
    head = "| parameter | what it is | SI unit |\n|---|---|---|\n"
    rows = "".join(f"| `{p.name}` | {p.meaning} | {p.unit} |\n" for p in quantity_parameters(registry))
    measured = "".join(f"| `{p.name}` | {p.meaning} | {p.unit} |\n" for p in measured_parameters(registry))
    steps = "".join(f"| `{p.name}` | {p.meaning} |\n" for p in step_parameters(registry))
    others = sorted(name for name in registry.inputs if not name.startswith(_PREFIX))
    return (
        f"### Quantities of the sheet\n\n{head}{rows}\n### Measurements\n\n{head}{measured}\n"
        f"### Steps that no sheet shows\n\n| parameter | what it is |\n|---|---|\n{steps}\n"
        f"### Everything else of a record\n\nAll in SI units: {', '.join(f'`{name}`' for name in others)}.\n"
    )
