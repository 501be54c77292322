"""Structures from a CIF beside the record, by the crystallographic library: cell, symmetry and sites."""

from __future__ import annotations

import re
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np

from sheetgen.faults import Place
from sheetgen.records.cells import snapped
from sheetgen.records.elements import elements
from sheetgen.records.files import read_text
from sheetgen.records.lattices import SHAPES, CellShape
from sheetgen.records.measures import STRUCTURE
from sheetgen.records.model import Crystal, Site, Value
from sheetgen.records.nodes import Scalar
from sheetgen.records.notation import read_number
from sheetgen.records.sites import bare_fraction
from sheetgen.records.structure import ANGLES, build_crystal, check_room
from sheetgen.records.symmetry import cell_shape, expanded, find_space_group, group_lattice_name
from sheetgen.records.unreadable import UnreadableError, sentence, shown
from sheetgen.records.values import Origin, Reader

if TYPE_CHECKING:
    import gemmi

MAXIMUM_BYTES = 4_000_000
MAXIMUM_BLOCKS = 1000
MAXIMUM_OPERATIONS = 192
MAXIMUM_ATOMS = 500

_NAME = re.compile(r"[A-Za-z0-9][A-Za-z0-9._-]{0,79}\.cif", re.IGNORECASE)
_HEAD = re.compile(r"(?:^|\s)data_", re.IGNORECASE)
_CONSTANTS = {
    "a": "_cell_length_a",
    "b": "_cell_length_b",
    "c": "_cell_length_c",
    "alpha": "_cell_angle_alpha",
    "beta": "_cell_angle_beta",
    "gamma": "_cell_angle_gamma",
}
_OPERATIONS = (
    "_space_group_symop_operation_xyz",
    "_space_group_symop.operation_xyz",
    "_symmetry_equiv_pos_as_xyz",
)
_GROUPS = (
    "_space_group_name_H-M_alt",
    "_symmetry_space_group_name_H-M",
    "_space_group_name_Hall",
    "_symmetry_space_group_name_Hall",
    "_space_group_IT_number",
    "_symmetry_Int_Tables_number",
)
_TEMPERATURES = ("_cell_measurement_temperature", "_diffrn_ambient_temperature")
_POSITION = re.compile(r"\w+:(?P<line>\d+)(?::(?P<column>\d+)(?:\(\d+\))?:| in \w+:)?\s*(?P<what>.*)", re.DOTALL)
# Degrees, and a share of the length: what rounding of a printed cell may do to a tie.
_ANGLE_TOLERANCE = 0.01
_LENGTH_TOLERANCE = 1e-4


def read_cif(node: Scalar, reader: Reader, folder: Path) -> Crystal | None:
    """The crystal of a CIF, or None with a fault logged."""
    name = node.text.strip()
    if not _NAME.fullmatch(name):
        expected = "expected a file beside the record, such as copper.cif"
        reader.fault(node, f"cif: {shown(name)} is no name of a CIF; {expected}.")
        return None
    path = folder / name
    if not path.exists() and not path.is_symlink():
        reader.fault(node, f"cif: there is no file {shown(name)} beside the record; put it there, or correct the name.")
        return None
    text = read_text(path, folder, reader.log, MAXIMUM_BYTES)
    return None if text is None else _read(text, path, reader)


def _read(text: str, path: Path, reader: Reader) -> Crystal | None:
    from gemmi import cif

    # The library compares each name with all before it: thousands of blocks would take seconds.
    if (heads := len(_HEAD.findall(text))) > MAXIMUM_BLOCKS:
        message = f"{heads} blocks; expected at most {MAXIMUM_BLOCKS}. Keep the block of this material alone."
        reader.fault(Place(str(path)), message)
        return None
    try:
        document = cif.read_string(text)
    except (ValueError, RuntimeError) as error:
        reader.fault(*_syntax(str(error), path))
        return None
    blocks = [block for block in document if block.find_value("_cell_length_a")]
    if len(blocks) != 1:
        names = ", ".join(block.name for block in blocks[:5])
        found = f"{len(blocks)} blocks ({shown(names)})" if blocks else "no block"
        mend = "Keep the block of this material alone, with its cell."
        reader.fault(Place(str(path)), f"{found} with a cell; expected one. {mend}")
        return None
    try:
        return _Block(blocks[0], path, reader).crystal()
    except UnreadableError as error:
        reader.fault(Place(str(path)), sentence(str(error)))
        return None


def _syntax(message: str, path: Path) -> tuple[Place, str]:
    """Where and what the library found wrong: its messages read `string:line:column: what`, columns from 0."""
    where = _POSITION.match(message)
    place = Place(str(path), int(where["line"]), int(where["column"] or -1) + 1) if where else Place(str(path))
    what = " ".join((where["what"] if where else message).split())
    return place, f"not readable as CIF: {what}. Mend the file, or give lattice and atoms in the record."


class _Block:
    """One data block with a cell. Every method raises UnreadableError for what it cannot read."""

    def __init__(self, block: gemmi.cif.Block, path: Path, reader: Reader):
        self.block, self.path, self.reader = block, path, reader

    def crystal(self) -> Crystal | None:
        """The crystal, or None where the reader has logged a constant as faulty."""
        shape, name, operations = self._symmetry()
        constants = {key: self._constant(key, tag) for key, tag in _CONSTANTS.items()}
        if None in constants.values():
            return None
        self._check_ties(constants, shape)
        free = {key: constants[key] for key in constants if key in shape.read}
        crystal = build_crystal(name, shape, free, expanded(self._atoms(), operations))
        check_room(crystal)
        return crystal

    def _text(self, tag: str) -> str:
        """The value of a tag without quotes, empty where it is absent, unknown or inapplicable."""
        from gemmi import cif

        raw = self.block.find_value(tag)
        return "" if raw in (None, "?", ".") else cif.as_string(raw).strip()

    def _constant(self, key: str, tag: str) -> Value | None:
        written = self._text(tag)
        if not written:
            raise UnreadableError(f"'{tag}' has no value; expected all lengths and angles of the cell")
        item = self.block.find_pair_item(tag)
        place = Place(str(self.path), item.line_number if item else 0)
        node = Scalar(written + ("°" if key in ANGLES else " Å"), True, place)
        origin = Origin(self._temperature(), note=f"from {self.path.name}")
        return self.reader.value(node, STRUCTURE[key], tag, origin)

    def _temperature(self) -> float | None:
        """The temperature of the measurement in K; an odd one is as good as none."""
        written = next((text for tag in _TEMPERATURES if (text := self._text(tag))), "")
        try:
            kelvins = read_number(written).value
        except UnreadableError:
            return None
        return kelvins if 0 < kelvins < 1e4 else None

    def _symmetry(self) -> tuple[CellShape, str, list[gemmi.Op]]:
        """Cell shape, lattice name and operations: those listed first, else those of the space group."""
        import gemmi

        listed = next((column for tag in _OPERATIONS if (column := self.block.find_values(tag))), None)
        if listed:
            if len(listed) > MAXIMUM_OPERATIONS:
                raise UnreadableError(f"{len(listed)} symmetry operations; expected at most {MAXIMUM_OPERATIONS}")
            operations = [_operation(raw) for raw in listed]
            group = gemmi.find_spacegroup_by_ops(gemmi.GroupOps(operations))
        else:
            group = self._group()
            operations = list(group.operations())
        if group is None:
            return SHAPES["triclinic"], "triclinic", operations
        return cell_shape(group), group_lattice_name(group), operations

    def _group(self) -> gemmi.SpaceGroup:
        written = next((text for tag in _GROUPS if (text := self._text(tag))), None)
        if written is None:
            raise UnreadableError(
                "no symmetry is stated; expected a space group or its operations. Add the one or the other"
            )
        # A rhombohedral group is on rhombohedral axes where the cell does not have the 120° of hexagonal ones.
        return find_space_group(written, rhombohedral_axes=not self._text("_cell_angle_gamma").startswith("120"))

    def _check_ties(self, constants: dict[str, Value], shape: CellShape) -> None:
        """The cell must not contradict its own symmetry."""
        fixed = {key: angle for key, angle in zip(ANGLES, shape.angles, strict=True) if angle is not None}
        for key, angle in fixed.items():
            if abs(constants[key].value - angle) > _ANGLE_TOLERANCE:
                found = f"{_CONSTANTS[key]} is {constants[key].text}"
                raise UnreadableError(f"{found}, but the symmetry fixes {angle:g}°; correct one of them")
        for key in ("b", "c"):
            equal = abs(constants[key].si / constants["a"].si - 1) <= _LENGTH_TOLERANCE
            if key not in shape.read and not equal:
                found = f"{_CONSTANTS[key]} is {constants[key].text}"
                raise UnreadableError(f"{found}, but the symmetry makes it equal to a; correct one of them")

    def _atoms(self) -> list[Site]:
        table = self.block.find("_atom_site_", ["label", "?type_symbol", "fract_x", "fract_y", "fract_z", "?occupancy"])
        if not 0 < len(table) <= MAXIMUM_ATOMS:
            raise UnreadableError(
                f"{len(table)} atom sites with fractional coordinates; expected 1 to {MAXIMUM_ATOMS}."
                " Give the loop of _atom_site_fract_x, y and z"
            )
        return [_atom(row) for row in table]


def _operation(raw: str) -> gemmi.Op:
    import gemmi
    from gemmi import cif

    text = cif.as_string(raw)
    try:
        return gemmi.Op(text)
    except (RuntimeError, ValueError):
        raise UnreadableError(f"{shown(text)} is no symmetry operation; expected such as '-x, y+1/2, -z'") from None


def _atom(row: gemmi.cif.Table.Row) -> Site:
    label = row.str(0)
    where = f"the atom site {shown(label)}"
    symbol = row.str(1) if row.has(1) and row.str(1) not in "?." else label
    element = _element(symbol)
    if element is None:
        raise UnreadableError(f"{where} names no element; expected a type symbol such as Ti")
    if any(row.str(index) in "?." for index in (2, 3, 4)):
        raise UnreadableError(f"{where} has no position; expected three fractions of the cell edges")
    try:
        fractions = [bare_fraction(row.str(index)) for index in (2, 3, 4)]
        occupancy = bare_fraction(row.str(5)) if row.has(5) and row.str(5) not in "?." else 1.0
    except UnreadableError as error:
        raise UnreadableError(f"{where}: {error}") from None
    if not 0 < occupancy <= 1:
        raise UnreadableError(f"{where} has the occupancy {occupancy:g}; expected above 0 and at most 1")
    return Site(element, tuple(snapped(np.array(fractions)).tolist()), occupancy)


def _element(symbol: str) -> str | None:
    """The element at the beginning of `Ti4+`, `TI` or `Cu1`."""
    letters = re.match(r"[A-Za-z]{1,2}", symbol)
    candidates = (letters[0].capitalize(), letters[0][0].upper()) if letters else ()
    return next((candidate for candidate in candidates if candidate in elements()), None)
