"""Drafts: the first text of a record, written beside those that stand and over none of them."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from pathlib import Path
from tempfile import TemporaryDirectory

from sheetgen.drafting.bibliography import FILE_NAME, Cited, check_addition, cite, read_bibliography
from sheetgen.drafting.cif import Deposit, read_deposit
from sheetgen.drafting.compounds import usual_name
from sheetgen.drafting.naming import slug_of, taken
from sheetgen.drafting.placing import IMPRINT, DraftRefusedError, write_new
from sheetgen.drafting.record_text import Material, record_text
from sheetgen.drafting.structure_text import cif_structure, explicit_structure
from sheetgen.drafting.suggestions import read_formula
from sheetgen.faults import FaultsError
from sheetgen.records import Crystal, Record, read_folder
from sheetgen.records.files import HIDDEN
from sheetgen.records.schema import NAME_PATTERN

LONGEST_NAME = 200
_STAGED_IMPRINT = "title: Staging\n"


@dataclass(frozen=True)
class Drafted:
    """What a draft wrote. `cif` and `source` are None for a draft from a formula, or where the CIF names none."""

    record: Path
    name: str
    formula: str
    assumed: str
    written: tuple[Path, ...]
    cif: Path | None = None
    source: Cited | None = None

    def as_json(self) -> dict[str, object]:
        """The same for a program."""
        return {
            "record": str(self.record),
            "name": self.name,
            "formula": self.formula,
            "assumed": self.assumed,
            "written": [str(path) for path in self.written],
            "cif": None if self.cif is None else str(self.cif),
            "source": None if self.source is None else self.source.key,
        }

    def lines(self) -> list[str]:
        """The same for a person."""
        found = [f"{self.record}: draft of {self.name} ({self.formula})."]
        found += [f"  also      {path}" for path in self.written if path != self.record]
        if self.source is not None:
            found.append(f"  cites     {self.source.key}{'' if self.source.addition else ', which stands already'}")
        if self.assumed:
            found.append(f"  assumed   {self.assumed}")
        return [*found, f"  next      fill in the blanks, then: sheetgen proof {self.record.parent}"]


def draft_formula(formula: str, folder: Path, name: str = "") -> Drafted:
    """Start a record from a formula.

    Raises FormulaRefusedError for what is no formula, DraftRefusedError where a file of that name stands already,
    and MachineError where it cannot be written.
    """
    written, composition = read_formula(formula)
    material = Material(name or usual_name(written, composition), written, composition)
    record = _room(folder, material)
    return _drafted(record, material, write_new(folder, {record: record_text(material)}))


def draft_cif(path: Path, folder: Path, name: str = "") -> Drafted:
    """Start a record from a CIF; the file is copied beside the record, its publication joins sources.bib.

    Raises FaultsError with file:line where the CIF or sources.bib cannot be used, and as `draft_formula` does.
    """
    deposit = read_deposit(path)
    formula, composition = read_formula(deposit.formula)
    title = name or deposit.name or usual_name(formula, composition)
    material = Material(title, formula, composition, origin=f"Cell and sites are those of {path.name}.")
    record = _room(folder, material)
    copy = _copy_of(path, deposit, folder, record)
    bibliography, sources = read_bibliography(folder)
    source = cite(deposit.publication, sources, record.stem) if deposit.publication else None
    if source and source.addition:
        check_addition(folder, bibliography, source)
    text = _proven(material, deposit, copy, source)
    files = {copy: deposit.text, record: text} if not copy.exists() else {record: text}
    addition = source.addition if source else ""
    done = write_new(folder, files, bibliography, addition)
    return replace(_drafted(record, material, done), cif=copy, source=source)


def _drafted(record: Path, material: Material, written: tuple[Path, ...]) -> Drafted:
    found = material.valences
    counts = ", ".join(f"{element} {count}" for element, count in found.electrons.items())
    assumed = f"valence {counts}: {found.reason}" if counts else f"no valence: {found.reason}"
    return Drafted(record, material.name, material.formula, assumed, written)


def _room(folder: Path, material: Material) -> Path:
    """The path of the new record, where there is room for it."""
    visible = not HIDDEN.search(material.name) and re.search(NAME_PATTERN, material.name)
    if not visible or len(material.name.strip()) > LONGEST_NAME:
        raise DraftRefusedError(f"--name is no name; expected up to {LONGEST_NAME} visible characters, such as Copper.")
    slug = slug_of(material.name) or slug_of(material.formula)
    if not slug:
        raise DraftRefusedError(f"No file name follows from '{material.name}'. Choose one with --name.")
    if standing := taken(folder, slug):
        raise DraftRefusedError(
            f"{standing} stands already and is left alone. For another record give another name, as in: "
            f"--name '{material.name} film'"
        )
    return folder / f"{slug}.yaml"


def _copy_of(path: Path, deposit: Deposit, folder: Path, record: Path) -> Path:
    """Where the CIF stands beside the record: the file itself, one with the same content, or a new copy."""
    if path.resolve().parent == folder.resolve():
        return path
    copy = record.with_suffix(".cif")
    if copy.exists() and copy.read_text(encoding="utf-8", errors="replace") != deposit.text:
        raise DraftRefusedError(f"{copy} stands already and holds something else. Give the record another --name.")
    return copy


# ---------------------------------------------------------------- proof before anything is written


def _proven(material: Material, deposit: Deposit, copy: Path, source: Cited | None) -> str:
    """The text of a record that reads as the same crystal: sites spelt out, else a reference to the CIF."""
    key = source.key if source else ""
    for structure in (explicit_structure(deposit, copy.name, key), cif_structure(deposit, copy.name, key)):
        text = record_text(replace(material, structure=structure))
        try:
            read = _read_staged(text, deposit, copy.name, source)
        except FaultsError:
            continue
        if read.crystal is not None and _same_crystal(read.crystal, deposit.crystal):
            return text
    # The file's own faults were reported when it was read; what is left is a name that no record may refer to.
    raise DraftRefusedError(
        f"{copy.name} cannot be named in a record. Rename it to letters, digits and hyphens with the ending .cif."
    )


def _read_staged(text: str, deposit: Deposit, cif_name: str, source: Cited | None) -> Record:
    """The record as the program reads it, in a folder that holds nothing else."""
    with TemporaryDirectory(prefix="sheetgen-") as name:
        folder = Path(name)
        (folder / IMPRINT).write_text(_STAGED_IMPRINT, encoding="utf-8")
        bibliography = source.addition or f"@misc{{{source.key}, title = {{Cited}}}}\n" if source else ""
        (folder / FILE_NAME).write_text(bibliography, encoding="utf-8")
        (folder / cif_name).write_text(deposit.text, encoding="utf-8")
        (folder / "staged.yaml").write_text(text, encoding="utf-8")
        return read_folder(folder).records[0]


def _same_crystal(one: Crystal, other: Crystal) -> bool:
    return _signature(one) == _signature(other)


def _signature(crystal: Crystal) -> tuple[object, ...]:
    """Cell, ties and sites of a crystal, rounded to what no reading changes."""
    keys = ("a", "b", "c", "c_over_a", "alpha", "beta", "gamma")
    constants = [getattr(value, "si", value) for value in (getattr(crystal, key) for key in keys)]
    sites = sorted((s.element, *(round(x, 6) % 1 for x in s.position), round(s.occupancy, 6)) for s in crystal.sites)
    return ([None if c is None else float(f"{c:.10g}") for c in constants], crystal.angles_tied, sites)
