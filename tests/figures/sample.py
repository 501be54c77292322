"""A small handbook made in memory: six materials that differ in what can be drawn of them, with their sheets.

Records are built by hand; their sheets are derived as those of any handbook.
"""

from __future__ import annotations

from functools import cache
from pathlib import Path
from types import SimpleNamespace

from sheetgen.faults import Place
from sheetgen.figures.subject import Subject
from sheetgen.handbook import derive
from sheetgen.quantities import registry
from sheetgen.records.model import Crystal, Electrons, Imprint, OpticalPoint, Record, Site, Specimen, Value

HERE = Place("sample.yaml", 1, 1)
IMPRINT = Imprint(
    "Sample", "Sample group", "1", "CC-BY-4.0", "en", "", "", 293.15, (293.15, 4.2, 77.0), "A4", {}, {}, None, HERE
)  # fmt: skip
FCC = [(0, 0, 0), (0, 0.5, 0.5), (0.5, 0, 0.5), (0.5, 0.5, 0)]
BASES = {
    "fcc": FCC,
    "bcc": [(0, 0, 0), (0.5, 0.5, 0.5)],
    "diamond": FCC + [tuple(part + 0.25 for part in position) for position in FCC],
}
EV = 1.602176634e-19


def value(si: float, uncertainty: float | None = None, temperature: float | None = None) -> Value:
    """A value given in SI units."""
    return Value(si, uncertainty, "1", si, uncertainty, temperature, ("book",), False, "", f"{si:g}", HERE)


def cubic(lattice: str, a: float, element: str) -> Crystal:
    """A cubic crystal of one element."""
    sites = tuple(Site(element, position, 1.0) for position in BASES[lattice])
    return Crystal(lattice, value(a), None, None, None, 90.0, 90.0, 90.0, sites)


def film(
    name: str, thickness: float, resistivity: float, specularity=None, grain_size=None, reflection=None
) -> Specimen:
    """A film; lengths in m, resistivity in Ω m."""
    given = (value(part) if part is not None else None for part in (grain_size, specularity, reflection))
    return Specimen(
        name, "film", value(thickness, 0.05 * thickness), None, None, *given,
        value(resistivity, 0.03 * resistivity, 293.0), "", True, HERE,
    )  # fmt: skip


def record(
    slug: str, formula: str, composition: dict, crystal, electrons, measured=None, optical=(), specimens=()
) -> Record:
    """A record without what figures do not read."""
    measured = {key: tuple(values) for key, values in (measured or {}).items()}
    return Record(
        slug, slug.replace("-", " ").capitalize(), formula, composition, crystal, electrons, measured, tuple(optical),
        tuple(specimens), (), None, "", Path(f"{slug}.yaml"), HERE, (), {},
    )  # fmt: skip


def metal(slug, formula, lattice, a, valence, debye, resistivities, heat=None, **further) -> Record:
    """An element with a valence; resistivities as {kelvins: µΩ cm}, the heat coefficient in J/(mol K²)."""
    measured = {
        "resistivity": [value(ρ * 1e-8, 0.01 * ρ * 1e-8, t) for t, ρ in resistivities.items()],
        "debye_temperature": [value(debye)],
        **further.pop("measured", {}),
    }
    if heat:
        measured["heat_coefficient"] = [value(heat, 0.02 * heat)]
    electrons = Electrons(valence={formula: value(valence)})
    return record(slug, formula, {formula: 1.0}, cubic(lattice, a, formula), electrons, measured, **further)


def optical(points: dict[float, tuple[float, float]]) -> list[OpticalPoint]:
    """Measured refractive indices as {eV: (n, k)}."""
    return [OpticalPoint(value(energy * EV), value(n), value(k), HERE) for energy, (n, k) in points.items()]


@cache
def records() -> tuple[Record, ...]:
    """A simple metal, one with films, a transition metal, two semiconductors and a two-dimensional gas."""
    return (
        metal("aluminium", "Al", "fcc", 4.0496e-10, 3.0, 428.0, {293.0: 2.65, 80.0: 0.245}, 1.35e-3,
            measured={"hall_coefficient": [value(1.02e-10, 1e-12)], "thermal_conductivity": [value(237.0, 2.0)]}),
        metal(
            "copper", "Cu", "fcc", 3.6149e-10, 1.0, 343.0, {80.0: 0.215, 293.0: 1.678, 373.0: 2.24}, 0.695e-3,
            measured={
                "interband_threshold": [value(2.1 * EV)], "residual_resistivity": [value(2e-11)],
                "hall_coefficient": [value(-5.4e-11, 4e-12, 293.0)], "thermopower": [value(1.84e-6, None, 300.0)],
                "bulk_modulus": [value(1.37e11, 3e9, 300.0)], "oscillation_frequency": [value(58.1e3)],
                "thermal_conductivity": [value(401.0, None, 293.0)],
            },
            optical=optical({0.5: (0.4814, 17.78), 1.5: (0.06248, 5.361), 3: (1.198, 2.158), 6: (1.02, 1.597)}),
            specimens=[
                film("F-12", 40e-9, 3.5e-8, 0.10, 32e-9, 0.25),
                film("F-14", 120e-9, 2.24e-8, 0.20, 95e-9, 0.25),
            ],
        ),
        metal("tungsten", "W", "bcc", 3.1652e-10, 6.0, 400.0, {293.0: 5.28}, 1.01e-3,
            measured={"hall_coefficient": [value(1.18e-10)], "thermal_conductivity": [value(173.0, 40.0)]}),
        record(
            "silicon-n", "Si", {"Si": 1.0}, cubic("diamond", 5.431e-10, "Si"),
            Electrons(
                density=value(1e26, 3e24), effective_mass=value(0.32), conductivity_mass=value(0.26), valleys=6,
                background_permittivity=value(11.7),
            ),
            {"resistivity": [value(7e-6, 1e-7, 293.0)]},
        ),
        record(
            "germanium-p", "Ge", {"Ge": 1.0}, cubic("diamond", 5.658e-10, "Ge"),
            Electrons(density=value(1e25), effective_mass=value(0.29), charge="hole"),
        ),
        record(
            "quantum-well", "GaAs", {"Ga": 1.0, "As": 1.0}, None,
            Electrons(
                density=value(3e15, 1e14), dimension=2, effective_mass=value(0.067), background_permittivity=value(12.9)
            ),
            {"sheet_resistance": [value(20.0, 0.5, 4.2), value(900.0, None, 293.0)]},
        ),
    )  # fmt: skip


@cache
def handbook() -> SimpleNamespace:
    """The handbook with one sheet a record."""
    sheets = tuple(derive(records(), IMPRINT, registry()))
    return SimpleNamespace(imprint=IMPRINT, registry=registry(), sheets=sheets, sources={})


def sheet(slug: str):
    """The sheet of one material."""
    return next(one for one in handbook().sheets if one.record.slug == slug)


def subject(slug: str) -> Subject:
    """One material as figures see it."""
    return Subject(sheet(slug), handbook())
