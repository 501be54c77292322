"""One record: its shape checked against the schema, its values read, its parts held against each other."""

from __future__ import annotations

from datetime import date
from pathlib import Path

from sheetgen.faults import FaultLog, Place
from sheetgen.records.electrons import read_electrons
from sheetgen.records.formulas import composition as composition_of
from sheetgen.records.markdown import check_notes
from sheetgen.records.measured import check_residual, measured_inputs, optical_inputs, read_measured, read_optical
from sheetgen.records.model import Caution, Crystal, Electrons, Record, Review, Value
from sheetgen.records.nodes import Listing, Scalar, Table
from sheetgen.records.shape import has_record_shape, prune
from sheetgen.records.sites import check_content
from sheetgen.records.specimens import read_specimens, specimen_inputs
from sheetgen.records.structure import read_structure
from sheetgen.records.trees import read_tree
from sheetgen.records.unreadable import UnreadableError, sentence, shown
from sheetgen.records.values import Reader, text_of


def read_record(path: Path, text: str, reader: Reader, folder: Path, reference: float) -> Record | None:
    """The record that a text holds, or None with its faults logged; `reference` is the imprint's temperature in K."""
    log = FaultLog()
    own = Reader(log, reader.sources)
    root = read_tree(text, str(path), log)
    record = None
    if root is not None:
        if has_record_shape(root, log):
            record = _record(root, path, own, folder, reference)
        else:
            _read_what_is_left(root, path, own, folder, reference)
    reader.log.entries += log.entries
    return record if not log.faults else None


def _read_what_is_left(root: Table, path: Path, reader: Reader, folder: Path, reference: float) -> None:
    """Log the further faults of a misshapen record, in sections that what had to be taken out cannot have upset."""
    upset = prune(root)
    if upset is None:
        return
    if not upset & {"formula", "structure", "electrons"}:
        _record(root, path, reader, folder, reference)
        return
    if "electrons" not in upset:
        electrons = root.node("electrons")
        flat = isinstance(electrons, Table) and text_of(electrons.node("dimension")) == "2"
        table = root.node("measured") or Table({}, root.place)
        read_measured(table, 2 if flat else 3, reader)
        read_optical(table, reader)
    read_specimens(root.node("specimens") or Listing([], root.place), None, reader)


def _record(root: Table, path: Path, reader: Reader, folder: Path, reference: float) -> Record | None:
    formula = root.entries["formula"].node
    try:
        composition = composition_of(formula.text.strip())
    except UnreadableError as error:
        reader.fault(formula, sentence(str(error)))
        return None
    crystal, constants = _structure(root, formula, composition, reader, folder)
    electrons, electron_values = _electrons(root, composition, reader)
    measured_table = root.node("measured") or Table({}, root.place)
    measured = read_measured(measured_table, electrons.dimension, reader)
    check_residual(measured, reference, reader)
    optical = read_optical(measured_table, reader)
    specimens = read_specimens(root.node("specimens") or Listing([], root.place), crystal, reader)
    check_notes(root.node("notes"), reader)
    inputs = {f"structure.{key}": value for key, value in constants.items()}
    inputs |= {f"electrons.{key}": value for key, value in electron_values.items()}
    inputs |= measured_inputs(measured, reference) | optical_inputs(optical) | specimen_inputs(specimens)
    return Record(
        slug=path.stem,
        name=text_of(root.node("name")),
        formula=formula.text.strip(),
        composition=composition,
        crystal=crystal,
        electrons=electrons,
        measured=measured,
        optical=optical,
        specimens=specimens,
        cautions=_cautions(root.node("cautions")),
        review=_review(root.node("review"), reader),
        notes=text_of(root.node("notes")),
        path=path,
        place=Place(str(path), 1, 1),
        remarks=tuple(reader.log.remarks),
        inputs=inputs,
    )


def _structure(
    root: Table, formula: Scalar, composition: dict[str, float], reader: Reader, folder: Path
) -> tuple[Crystal | None, dict[str, Value]]:
    table = root.node("structure")
    if table is None:
        return None, {}
    crystal, constants = read_structure(table, composition, reader, folder)
    if crystal:
        check_content(crystal.sites, formula.text.strip(), composition, formula.place, reader)
    return crystal, constants


def _electrons(root: Table, composition: dict[str, float], reader: Reader) -> tuple[Electrons, dict[str, Value]]:
    table = root.node("electrons")
    if table is None:
        reader.remark(
            root,
            "the record has no electrons; nothing about the electron gas can be derived. Add valence or density.",
        )
        return Electrons(), {}
    if "valence" in table.entries and "structure" not in root.entries:
        reader.remark(
            table.entries["valence"].key.place,
            "a valence gives no electron density without a structure; add one, or give 'density'.",
        )
    return read_electrons(table, composition, reader)


def _cautions(listing: Listing | None) -> tuple[Caution, ...]:
    return tuple(_caution(item) for item in listing.items) if listing else ()


def _caution(node: Scalar | Table) -> Caution:
    if isinstance(node, Scalar):
        return Caution(text_of(node))
    hazard = node.node("hazard")
    codes = hazard.items if isinstance(hazard, Listing) else [hazard] if hazard else []
    return Caution(text_of(node.node("text")), tuple("+".join(code.text.replace("+", " ").split()) for code in codes))


def _review(table: Table | None, reader: Reader) -> Review | None:
    if table is None:
        return None
    day = table.node("date")
    if day is not None:
        try:
            date.fromisoformat(day.text.strip())
        except ValueError:
            reader.fault(day, f"date: {shown(day.text)} is no date; expected the form 2026-11-02.")
    return Review(text_of(table.node("state")), text_of(table.node("by")), text_of(day))
