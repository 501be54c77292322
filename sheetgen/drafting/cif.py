"""What a draft takes from a CIF: the crystal as records read it, formula, name, symmetry, sites and publication."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from math import gcd
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import TYPE_CHECKING

from sheetgen.drafting.bibliography import Publication
from sheetgen.drafting.publication import first_text, publication_of, text_of
from sheetgen.faults import Fault, FaultLog, FaultsError, Place
from sheetgen.records import Crystal
from sheetgen.records.cif import MAXIMUM_BYTES, read_cif
from sheetgen.records.files import read_text
from sheetgen.records.nodes import Scalar
from sheetgen.records.symmetry import find_space_group
from sheetgen.records.unreadable import UnreadableError
from sheetgen.records.values import Reader

if TYPE_CHECKING:
    import gemmi

# Names inside a staging folder, which no person sees.
_STAGED = "structure.cif"
_HEADER = re.compile(r"^data_", re.IGNORECASE | re.MULTILINE)
_OPERATIONS = ("_space_group_symop_operation_xyz", "_space_group_symop.operation_xyz", "_symmetry_equiv_pos_as_xyz")
_GROUPS = (
    "_space_group_name_H-M_alt", "_symmetry_space_group_name_H-M", "_space_group_name_Hall",
    "_symmetry_space_group_name_Hall", "_space_group_IT_number", "_symmetry_Int_Tables_number",
)  # fmt: skip
_NAMES = ("_chemical_name_common", "_chemical_name_mineral", "_chemical_name_systematic")
_LONGEST_NAME = 60
# In a formula the elements that take electrons come last, the ones that take them most eagerly at the very end.
_LATE = ("B", "Si", "C", "Sb", "As", "P", "N", "H", "Te", "Se", "S", "I", "Br", "Cl", "O", "F")


@dataclass(frozen=True)
class AtomSite:
    """One atom of the asymmetric unit, its numbers as the CIF writes them; `occupancy` is "" where it is 1."""

    label: str
    element: str
    position: tuple[str, str, str]
    occupancy: str


@dataclass(frozen=True)
class Deposit:
    """What one CIF holds. `space_group` is "" where its operations are those of no known group."""

    text: str
    crystal: Crystal
    formula: str
    name: str
    space_group: str
    sites: tuple[AtomSite, ...]
    publication: Publication


def read_deposit(path: Path) -> Deposit:
    """Everything that a draft takes from a CIF; raises FaultsError with file:line where it cannot be used."""
    log = FaultLog()
    text = read_text(path, path.resolve().parent, log, MAXIMUM_BYTES)
    log.raise_if_any()
    document, block = _block(text or "", path)
    crystal = _crystal(text or "", path)
    content = _content(crystal)
    return Deposit(
        text=text or "",
        crystal=crystal,
        formula=_formula(content),
        name=first_text(block, _NAMES)[:_LONGEST_NAME].strip(),
        space_group=_space_group(block),
        sites=tuple(_sites(block, crystal)),
        publication=publication_of(document, block),
    )


# ---------------------------------------------------------------- the block and its crystal


def _block(text: str, path: Path) -> tuple[gemmi.cif.Document, gemmi.cif.Block]:
    """The document and its one block with a cell."""
    from gemmi import cif

    try:
        document = cif.read_string(text)
    except (ValueError, RuntimeError):
        _crystal(text, path)  # says where and what is wrong with it
        raise
    with_cell = [block for block in document if block.find_value("_cell_length_a")]
    if len(with_cell) == 1:
        return document, with_cell[0]
    header = _HEADER.search(text)
    if not with_cell:
        line = text.count("\n", 0, header.start()) + 1 if header else 1
        found = "no block with a cell" if header else "no data block; a CIF begins with 'data_' and a name"
        raise _fault(path, line, f"{found}. Give the file that holds _cell_length_a and the rest of the structure.")
    item = with_cell[1].find_pair_item("_cell_length_a")
    names = ", ".join(block.name for block in with_cell[:5])
    raise _fault(
        path,
        item.line_number if item else 0,
        f"{len(with_cell)} blocks with a cell ({names}); expected one. Keep the block of this material in a file of "
        "its own.",
    )


def _crystal(text: str, path: Path) -> Crystal:
    """The crystal as a record would read it; its faults are put to the account of the file that a person gave."""
    log = FaultLog()
    with TemporaryDirectory(prefix="sheetgen-") as folder:
        (Path(folder) / _STAGED).write_text(text, encoding="utf-8")
        node = Scalar(_STAGED, True, Place(str(path)))
        crystal = read_cif(node, Reader(log), Path(folder))
    if log.faults or crystal is None:
        raise FaultsError(_moved(fault, path) for fault in log.faults)
    return crystal


def _moved(fault: Fault, path: Path) -> Fault:
    place = fault.place
    return Fault(Place(str(path), place.line or 1, place.column), fault.message)


def _fault(path: Path, line: int, message: str) -> FaultsError:
    return FaultsError([Fault(Place(str(path), line), message)])


# ---------------------------------------------------------------- formula


def _content(crystal: Crystal) -> dict[str, float]:
    """Atoms of each element in the cell, occupancies counted."""
    counts: dict[str, float] = {}
    for site in crystal.sites:
        counts[site.element] = counts.get(site.element, 0) + site.occupancy
    return {element: counts[element] for element in sorted(counts, key=_place_in_formula)}


def _place_in_formula(element: str) -> tuple[int, str]:
    return (_LATE.index(element) + 1 if element in _LATE else 0, element)


def _formula(content: dict[str, float]) -> str:
    """The content of the cell divided by what its counts have in common: TiO2, In1.9Sn0.1O3."""
    fractions = [Fraction(count).limit_denominator(1000) for count in content.values()]
    whole = [fraction.numerator for fraction in fractions if fraction.denominator == 1]
    if len(whole) < len(fractions):
        # Elements that share sites fill them together: then the sum is whole.
        total = sum(content.values())
        whole += [round(total)] if abs(total - round(total)) < 1e-3 else []
    common = gcd(*whole) or 1
    return "".join(element + _count(count / common) for element, count in content.items())


def _count(count: float) -> str:
    text = f"{count:.4f}".rstrip("0").rstrip(".")
    return "" if text == "1" else text


# ---------------------------------------------------------------- symmetry and sites


def _space_group(block: gemmi.cif.Block) -> str:
    """The full symbol of the group, with the setting where a group has several; "" where it is not known."""
    import gemmi
    from gemmi import cif

    listed = next((column for tag in _OPERATIONS if (column := block.find_values(tag))), None)
    try:
        if listed:
            operations = gemmi.GroupOps([gemmi.Op(cif.as_string(raw)) for raw in listed])
            group = gemmi.find_spacegroup_by_ops(operations)
        else:
            hexagonal = text_of(block, "_cell_angle_gamma").startswith("120")
            group = find_space_group(first_text(block, _GROUPS), rhombohedral_axes=not hexagonal)
    except (ValueError, RuntimeError, UnreadableError):
        return ""
    return group.xhm() if group else ""


def _sites(block: gemmi.cif.Block, crystal: Crystal) -> Iterator[AtomSite]:
    elements = {site.element for site in crystal.sites}
    columns = ["label", "?type_symbol", "fract_x", "fract_y", "fract_z", "?occupancy"]
    for row in block.find("_atom_site_", columns):
        symbol = row.str(1) if row.has(1) and row.str(1) not in "?." else row.str(0)
        letters = "".join(re.findall(r"^[A-Za-z]{1,2}", symbol)).capitalize()
        element = letters if letters in elements else letters[:1]
        occupancy = row.str(5) if row.has(5) and row.str(5) not in "?." else ""
        position = (row.str(2), row.str(3), row.str(4))
        yield AtomSite(row.str(0), element, position, "" if _is_one(occupancy) else occupancy)


def _is_one(occupancy: str) -> bool:
    return bool(re.fullmatch(r"\+?1(\.0*)?", occupancy))
