"""The atoms of a structure: listed or implied by the lattice's name, spread over the cell, held against the formula."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping

import numpy as np

from sheetgen.faults import Place, did_you_mean
from sheetgen.records.cells import combined, merged, snapped
from sheetgen.records.elements import elements
from sheetgen.records.lattices import CENTRINGS, Lattice
from sheetgen.records.model import Site
from sheetgen.records.nodes import Listing, Scalar, Table
from sheetgen.records.notation import read_number
from sheetgen.records.unreadable import UnreadableError, shown
from sheetgen.records.values import Reader

# How far apart the counts of formula units may be that two elements of a cell stand for: occupancies are rounded.
CONTENT_TOLERANCE = 0.01

_RATIO = re.compile(r"([+-]?\d{1,3})/([1-9]\d{0,2})")


def listed_basis(atoms: Listing, reader: Reader) -> list[Site]:
    """The atoms as listed; empty where one of them is at fault."""
    sites = [_atom(atom, reader) for atom in atoms.items]
    return [] if None in sites else sites


def implied_basis(lattice: Lattice, composition: Mapping[str, float]) -> list[Site]:
    """The atoms that a lattice's name implies for a formula. Raises UnreadableError where it implies none."""
    if len(lattice.basis) != len(composition):
        kind = "an element" if len(lattice.basis) == 1 else "a compound of two elements"
        raise UnreadableError(
            f"the name says where the atoms are only for {kind}; add 'atoms' with element, position and occupancy"
        )
    return [
        Site(element, tuple(map(float, point)), 1.0)
        for element, points in zip(composition, lattice.basis, strict=True)
        for point in points
    ]


def centred(basis: Iterable[Site], lattice: Lattice) -> tuple[Site, ...]:
    """The basis at every lattice point of the conventional cell."""
    points = np.array(CENTRINGS[lattice.centring])
    return merged(
        [
            Site(atom.element, tuple(position), atom.occupancy)
            for atom in combined(list(basis))
            for position in snapped(np.array(atom.position) + points).tolist()
        ]
    )


def check_content(
    sites: Iterable[Site], formula: str, composition: Mapping[str, float], place: Place, reader: Reader
) -> None:
    """A fault where the cell does not hold the elements of the formula in its ratio."""
    counts: dict[str, float] = {}
    for site in sites:
        counts[site.element] = counts.get(site.element, 0) + site.occupancy
    units = [counts.get(element, 0) / count for element, count in composition.items()]
    if counts.keys() == composition.keys() and max(units) - min(units) <= CONTENT_TOLERANCE * max(units):
        return
    content = " ".join(f"{element}{count:.4g}" for element, count in counts.items())
    reader.fault(
        place,
        f"formula {shown(formula)} disagrees with the content of the cell, {content}; expected the same elements in the"
        " same ratio. Correct the formula, the lattice or the atoms.",
    )


def _atom(table: Table, reader: Reader) -> Site | None:
    element = table.entries["element"].node
    fractions = [_fraction(node, "position", reader) for node in table.entries["position"].node.items]
    occupied = table.node("occupancy")
    occupancy = 1.0 if occupied is None else _fraction(occupied, "occupancy", reader)
    if element.text not in elements():
        guess = did_you_mean(element.text, elements())
        reader.fault(element, f"{shown(element.text)} is no element; expected a symbol such as Ti.{guess}")
        return None
    if None in fractions or occupancy is None:
        return None
    if not 0 < occupancy <= 1:
        reader.fault(occupied, f"occupancy: {shown(occupied.text)} is out of range; expected above 0 and at most 1.")
        return None
    return Site(element.text, tuple(snapped(np.array(fractions)).tolist()), occupancy)


def _fraction(node: Scalar, name: str, reader: Reader) -> float | None:
    """A number such as 0.25, 0.2345(2) or 1/4; its uncertainty is not carried further."""
    if ratio := _RATIO.fullmatch(node.text.strip()):
        return int(ratio[1]) / int(ratio[2])
    try:
        return bare_fraction(node.text)
    except UnreadableError as error:
        reader.unreadable(node, name, error)
        return None


def bare_fraction(text: str) -> float:
    """A pure number between -10 and 10. Raises UnreadableError for anything else."""
    number = read_number(text)
    if number.unit or abs(number.value) > 10:
        raise UnreadableError(f"{shown(text)} is no fraction; expected a number such as 0.25 or 1/4")
    return number.value
