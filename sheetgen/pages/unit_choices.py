"""The units in which a reader may have a quantity."""

from __future__ import annotations

from collections.abc import Iterable
from functools import cache

from . import numbers

# Units of one kind, in the order in which they are offered. A unit belongs where it is named, else where its
# dimension fits; an angular frequency and a frequency have the same dimension and are not the same kind.
KINDS = (
    ("eV", "meV", "Ry", "hartree", "J"),
    ("nm", "angstrom", "bohr", "um", "m"),
    ("1/nm", "1/angstrom", "1/bohr", "1/cm", "1/m"),
    ("1/nm^2", "1/cm^2", "1/angstrom^2", "1/bohr^2", "1/m^2"),
    ("1/nm^3", "1/cm^3", "1/angstrom^3", "1/bohr^3", "1/m^3"),
    ("nm^3", "angstrom^3", "bohr^3", "cm^3"),
    ("1/eV", "1/Ry", "1/hartree", "1/J"),
    ("1/(eV nm^3)", "1/(eV angstrom^3)", "1/(Ry bohr^3)", "1/(J m^3)"),
    ("1/(eV nm^2)", "1/(eV angstrom^2)", "1/(J m^2)"),
    ("K", "mK"),
    ("m/s", "km/s", "cm/s"),
    ("fs", "ps", "s"),
    ("rad/s",),
    ("GHz", "MHz", "THz", "Hz"),
    ("GPa", "kbar", "Pa"),
    ("g/cm^3", "kg/m^3"),
    ("uohm cm", "nohm m", "ohm m"),
    ("fohm m^2", "ohm m^2"),
    ("S/m", "MS/m", "S/cm"),
    ("cm^2/(V s)", "m^2/(V s)"),
    ("cm^2/s", "m^2/s"),
    ("mm^3/C", "cm^3/C", "m^3/C"),
    ("W/(m K)", "W/(cm K)"),
    ("uV/K", "nV/K", "V/K"),
    ("mJ/(mol K^2)", "J/(mol K^2)"),
    ("mJ/(mol K)", "J/(mol K)"),
)


def choices(unit: str, preferred: str) -> list[tuple[str, str, float]]:
    """(unit, how it is printed, factor from the unit of the data) of each choice, the preferred one first."""
    offered = dict.fromkeys((preferred, unit, *_kind(unit)))
    scale = numbers.si_factor(unit)
    return [(one, numbers.unit_text(one), scale / numbers.si_factor(one)) for one in offered]


@cache
def _kind(unit: str) -> Iterable[str]:
    from sheetgen.records.units import dimension_matches

    if unit == "1":
        return ()
    named = next((kind for kind in KINDS if unit in kind), None)
    return named or next((kind for kind in KINDS if dimension_matches(kind[0], unit)), ())
