"""What a draft leaves open: every key with the unit expected and an example, commented out.

Units and examples are those that the reader of records itself knows.
"""

from __future__ import annotations

from sheetgen.drafting.writing import blank
from sheetgen.records.lattices import LATTICES, SHAPES
from sheetgen.records.measures import DENSITIES, ELECTRONS, MEASURED, STRUCTURE, Measure
from sheetgen.records.notation import read_number
from sheetgen.records.spelling import written_key

# Taken at a temperature that is part of what they say.
_WITHOUT_TEMPERATURE = (
    "melting_point", "critical_temperature", "magnetic_ordering_temperature", "debye_temperature",
    "transport_debye_temperature", "residual_resistivity",
)  # fmt: skip
_OF_A_SHEET = "sheet_resistance"


def value_blank(key: str, measure: Measure, indent: int, at: bool = True) -> str:
    """The blank of one value: `# a: {value: ? Å, at: ? K, from: ?}  # a length, such as 3.6149(2) Å`."""
    unit = read_number(measure.example).unit
    temperature = ", at: ? K" if at else ""
    line = f"{written_key(key)}: {{value: {f'? {unit}'.strip()}{temperature}, from: ?}}"
    return blank(line, f"{measure.kind}, such as {measure.example}", indent)


def structure_blanks(lattice: str) -> list[str]:
    """The structure, for a lattice that is common or, where it is "", for one to be found."""
    known = LATTICES.get(lattice)
    lines = [blank("structure:")]
    if known:
        lines.append(blank(f"lattice: {lattice}", "recalled: the common one at room temperature", 2))
        keys = [group[0] for group in SHAPES[known.system].groups]
    else:
        lines.append(blank("lattice: ?", f"one of {', '.join(list(LATTICES)[:8])} …; or 'space group' with 'atoms'", 2))
        keys = ["a"]
    return [*lines, *(value_blank(key, STRUCTURE[key], 2) for key in keys)]


def density_blanks() -> list[str]:
    """Electrons counted by a measured density, or else by a valence that someone knows."""
    return [
        blank("electrons:", "either density or valence"),
        blank("valence: ?", "electrons per atom, such as 1; of a compound such as {Ti: 4, N: -3}", 2),
        value_blank("density", DENSITIES[3], 2),
        blank("charge: electron", "or hole", 2),
        *mass_blanks(),
    ]


def mass_blanks() -> list[str]:
    """What the electrons have beside their number; left out, each is 1."""
    return [value_blank(key, ELECTRONS[key], 2) for key in ("effective_mass", "background_permittivity")]


def measured_blanks() -> list[str]:
    """Every measurement that the model can be held against or that it uses."""
    lines = [blank("measured:")]
    for key, measure in MEASURED.items():
        if key != _OF_A_SHEET:
            lines.append(value_blank(key, measure, 2, at=key not in _WITHOUT_TEMPERATURE))
    optical = "- {photon energy: ? eV, n: ?, k: ?, from: ?}"
    return [*lines, blank("refractive index:", "one line for each photon energy", 2), blank(optical, "", 4)]


def specimen_blanks() -> list[str]:
    """The group's own films, wires, particles and cubes."""
    film = "form: film, thickness: ? nm, grain size: ? nm, specularity: ?, grain reflection: ?"
    return [
        blank("specimens:", "your own films, wires, particles, cubes"),
        blank(f"- {{name: ?, {film},", "", 2),
        blank("resistivity: {value: ? µΩ cm, at: ? K}}", "", 5),
    ]
