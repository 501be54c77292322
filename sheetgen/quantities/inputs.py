"""What a record gives to the quantities: every input by name, as SI arrays over materials or specimens."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from math import radians

from scipy import constants

from sheetgen.records import Imprint, Record, Specimen, Value

EDGES = tuple(edge * 1e-9 for edge in (1, 2, 5, 10, 20, 50))
PHOTON_ENERGIES = tuple(energy * constants.e for energy in (0.1, 0.5, 1, 1.96, 3, 6))
NEARBY = 5.0  # kelvins within which two temperatures count as one

Entry = Value | float | None


@dataclass(frozen=True)
class Input:
    """One input: its parameter name, what it is called when it is missing, and where a record keeps it.

    `pick(record, imprint)` (for specimens `pick(record, imprint, specimen)`) gives the entries in order: a Value
    as written, an exact number in SI units, or None where the record has none. An input without a title is one
    that quantities can do without.
    """

    name: str
    title: str
    pick: Callable[..., Sequence[Entry]]
    scope: str = "material"


# ---------------------------------------------------------------- temperatures, resistivities, energies


def temperature_of(value: Value, imprint: Imprint) -> float:
    """Temperature of a measurement in K; one that states none counts as taken at the reference temperature."""
    return imprint.reference_temperature if value.temperature is None else value.temperature


def measured(record: Record, key: str) -> tuple[Value, ...]:
    """The measured values of one key, in record order."""
    return record.measured.get(key, ())


def nearest(values: Sequence[Value], temperature: float, imprint: Imprint) -> Value | None:
    """The value taken nearest to a temperature (K), the first of equals; None where none is within 5 K."""
    within = [v for v in values if abs(temperature_of(v, imprint) - temperature) <= NEARBY]
    return min(within, key=lambda v: abs(temperature_of(v, imprint) - temperature), default=None)


def resistance_key(record: Record) -> str:
    """Key of the record's resistivities: sheet resistances in two dimensions."""
    return "resistivity" if record.electrons.dimension == 3 else "sheet_resistance"


def reference_resistivity(record: Record, imprint: Imprint) -> Value | None:
    """The resistivity (or sheet resistance) that everything which uses "the" resistivity takes."""
    return nearest(measured(record, resistance_key(record)), imprint.reference_temperature, imprint)


def resistivities(record: Record, imprint: Imprint) -> list[Value]:
    """All resistivities: the reference one first, the others in record order."""
    values = list(measured(record, resistance_key(record)))
    reference = reference_resistivity(record, imprint)
    return values if reference is None else [reference, *(v for v in values if v is not reference)]


def temperatures(record: Record, imprint: Imprint) -> list[float]:
    """The temperatures to evaluate at, in K: the tabulated ones, then those of measurements that are held against."""
    stated = [
        temperature_of(v, imprint) for v in resistivities(record, imprint) + list(measured(record, "thermopower"))
    ]
    return list(dict.fromkeys((*imprint.temperatures, *(t for t in stated if t > 0))))


def photon_energies(record: Record, imprint: Imprint) -> list[Entry]:
    """The tabulated photon energies, then those of the measured refractive indices."""
    return [*PHOTON_ENERGIES, *(point.photon_energy for point in record.optical)]


# ---------------------------------------------------------------- how the inputs are picked


def _cell(name: str) -> Callable[..., Sequence[Entry]]:
    return lambda record, imprint: [getattr(record.crystal, name) if record.crystal else None]


def _angle(name: str) -> Callable[..., Sequence[Entry]]:
    def pick(record: Record, imprint: Imprint) -> Sequence[Entry]:
        if record.crystal is None:
            return [None]
        angle = getattr(record.crystal, "alpha" if record.crystal.angles_tied else name)
        return [angle if isinstance(angle, Value) else radians(angle)]

    return pick


def _tensor_components(record: Record, imprint: Imprint) -> Sequence[Entry]:
    """How many numbers a symmetric tensor such as the conductivity has in the crystal: Nye (1957), table 4."""
    crystal = record.crystal
    if crystal is None:
        return [None]
    free_angles = sum(isinstance(angle, Value) for angle in (crystal.alpha, crystal.beta, crystal.gamma))
    if crystal.angles_tied or (crystal.b is None and (crystal.c or crystal.c_over_a)):
        return [2.0]
    if crystal.b is None:
        return [1.0]
    return [{0: 3.0, 1: 4.0}.get(free_angles, 6.0)]


def _valence(record: Record, imprint: Imprint) -> Sequence[Entry]:
    return list((record.electrons.valence or {}).values()) or [None]


def _valence_sites(record: Record, imprint: Imprint) -> Sequence[Entry]:
    if not record.electrons.valence or record.crystal is None:
        return [None]
    sites = record.crystal.sites
    return [sum(s.occupancy for s in sites if s.element == element) for element in record.electrons.valence]


def _density(dimension: int) -> Callable[..., Sequence[Entry]]:
    def pick(record: Record, imprint: Imprint) -> Sequence[Entry]:
        return [record.electrons.density if record.electrons.dimension == dimension else None]

    return pick


def _electrons(name: str, default: float | None) -> Callable[..., Sequence[Entry]]:
    def pick(record: Record, imprint: Imprint) -> Sequence[Entry]:
        stated = getattr(record.electrons, name)
        return [default if stated is None else stated]

    return pick


def _first_measured(key: str) -> Callable[..., Sequence[Entry]]:
    return lambda record, imprint: list(measured(record, key.replace(" ", "_"))[:1]) or [None]


def _title(key: str) -> str:
    return "" if key in DISPENSABLE else f"a measured {key}".replace("debye", "Debye")


def _specimen(name: str, *forms: str) -> Callable[..., Sequence[Entry]]:
    def pick(record: Record, imprint: Imprint, specimen: Specimen) -> Sequence[Entry]:
        return [getattr(specimen, name) if specimen.form in forms else None]

    return pick


def _film_bulk_resistivity(record: Record, imprint: Imprint, specimen: Specimen) -> Sequence[Entry]:
    # The published lines take the reference resistivity; the comparison with the specimen's own measurement
    # takes the one at its temperature.
    reference = reference_resistivity(record, imprint)
    if specimen.form != "film" or specimen.resistivity is None:
        return [reference if specimen.form == "film" else None, None]
    at = temperature_of(specimen.resistivity, imprint)
    return [reference, nearest(measured(record, resistance_key(record)), at, imprint)]


MEASURED_SCALARS = (
    "residual resistivity", "mass density", "heat coefficient", "debye temperature", "transport debye temperature",
    "hall coefficient", "bulk modulus", "plasma energy", "thermal conductivity", "susceptibility", "thermopower",
    "oscillation frequency", "work function", "thermal expansion", "interband threshold", "melting point",
    "critical temperature", "magnetic ordering temperature",
)  # fmt: skip
DISPENSABLE = ("residual resistivity", "transport debye temperature")
FILM, CUBE, ROUND = ("film",), ("cube",), ("particle", "wire")

INPUTS: tuple[Input, ...] = (
    Input("tensor_components", "", _tensor_components),
    Input("lattice_a", "a crystal structure", _cell("a")),
    Input("lattice_b", "", _cell("b")),
    Input("lattice_c", "", _cell("c")),
    Input("lattice_c_over_a", "", _cell("c_over_a")),
    Input("lattice_alpha", "a crystal structure", _angle("alpha")),
    Input("lattice_beta", "a crystal structure", _angle("beta")),
    Input("lattice_gamma", "a crystal structure", _angle("gamma")),
    Input("valence", "a valence (the carrier density is given instead)", _valence),
    Input("valence_sites", "a valence (the carrier density is given instead)", _valence_sites),
    Input("carrier_density", "a carrier density", _density(3)),
    Input("carrier_sheet_density", "a carrier density per area", _density(2)),
    Input("effective_mass_ratio", "an effective mass", _electrons("effective_mass", 1.0)),
    Input("stated_conductivity_mass_ratio", "", _electrons("conductivity_mass", None)),
    Input("stated_optical_mass_ratio", "", _electrons("optical_mass", None)),
    Input("background_permittivity", "a background permittivity", _electrons("background_permittivity", 1.0)),
    Input("valleys", "the number of valleys", lambda record, imprint: [float(record.electrons.valleys)]),
    Input(
        "single_valley",
        "one valley only (with several there is no single sphere to compare)",
        lambda record, imprint: [1.0 if record.electrons.valleys == 1 else None],
    ),
    Input(
        "charge_sign",
        "the sign of the carriers",
        lambda record, imprint: [1.0 if record.electrons.charge == "hole" else -1.0],
    ),
    Input(
        "measured_resistivity",
        "a resistivity",
        lambda record, imprint: (record.electrons.dimension == 3 and resistivities(record, imprint)) or [None],
    ),
    Input(
        "measured_sheet_resistance",
        "a sheet resistance",
        lambda record, imprint: (record.electrons.dimension == 2 and resistivities(record, imprint)) or [None],
    ),
    Input(
        "resistivity_temperature",
        "a resistivity",
        lambda record, imprint: [temperature_of(v, imprint) for v in resistivities(record, imprint)] or [None],
    ),
    Input(
        "has_reference_resistivity",
        "a resistivity within 5 K of the reference temperature",
        lambda record, imprint: [None if reference_resistivity(record, imprint) is None else 1.0],
    ),
    Input("reference_temperature", "a temperature", lambda record, imprint: [imprint.reference_temperature]),
    Input("temperature", "a temperature", temperatures),
    Input("photon_energy", "a photon energy", photon_energies),
    Input("tabulated_edge", "an edge", lambda record, imprint: EDGES),
    Input(
        "formula_atoms",
        "a formula",
        lambda record, imprint: [float(sum(record.composition.values())) or None],
    ),
    Input(
        "single_element",
        "a single element (equal spheres)",
        lambda record, imprint: [1.0 if len(record.composition) == 1 else None],
    ),
    *(Input(f"measured_{key.replace(' ', '_')}", _title(key), _first_measured(key)) for key in MEASURED_SCALARS),
    Input("specimen_thickness", "a thickness", _specimen("thickness", *FILM), "specimen"),
    Input("specimen_diameter", "a diameter", _specimen("diameter", *ROUND), "specimen"),
    Input("particle_diameter", "a diameter", _specimen("diameter", "particle"), "specimen"),
    Input("specimen_edge", "an edge", _specimen("edge", *CUBE), "specimen"),
    Input("specimen_grain_size", "a grain size", _specimen("grain_size", *FILM), "specimen"),
    Input("specimen_specularity", "a specularity", _specimen("specularity", *FILM), "specimen"),
    Input("specimen_grain_reflection", "a grain reflection", _specimen("grain_reflection", *FILM), "specimen"),
    Input("specimen_resistivity", "a measured resistivity", _specimen("resistivity", *FILM), "specimen"),
    Input(
        "film_bulk_resistivity",
        "a resistivity of the bulk within 5 K of the reference temperature",
        _film_bulk_resistivity,
        "specimen",
    ),
)  # fmt: skip
