"""A handbook's folder: the imprint, the bibliography and every record, with all faults of all files in one run."""

from __future__ import annotations

import re
from pathlib import Path

from sheetgen.faults import FaultLog, FaultsError, MachineError, Place
from sheetgen.records import imprint as imprints
from sheetgen.records.files import read_text
from sheetgen.records.model import Folder, Imprint, Record, Source
from sheetgen.records.record import read_record
from sheetgen.records.sources import MAXIMUM_BYTES as MAXIMUM_BIB_BYTES
from sheetgen.records.sources import read_sources
from sheetgen.records.trees import read_tree
from sheetgen.records.unreadable import shown
from sheetgen.records.values import Reader

SOURCES_NAME = "sources.bib"
SUFFIXES = (".yaml", ".yml")

_SLUG = re.compile(r"[a-z0-9]+(?:-[a-z0-9]+)*")
_LONGEST_SLUG = 64
# Names that are devices on Windows, where a checkout or a site may also live.
_DEVICES = {
    "con",
    "prn",
    "aux",
    "nul",
    *(f"{port}{number}" for port in ("com", "lpt") for number in range(10)),
}


def read_folder(path: Path | str) -> Folder:
    """Everything that the folder of a handbook says.

    Raises FaultsError with all faults of all files, sorted by place, and MachineError where a file cannot be read.
    """
    folder = Path(path)
    log = FaultLog()
    names = _file_names(folder)
    imprint = _imprint(folder, names, log)
    sources = _sources(folder, names, log)
    reader = Reader(log, sources)
    slugs = _slugs(folder, names, log)
    records = [_record(folder / name, folder, reader, imprint.reference_temperature) for name in slugs]
    if not slugs:
        log.remark(Place(str(folder)), "the folder holds no record yet; add one such as copper.yaml.")
    log.raise_if_any()
    return Folder(
        path=folder,
        imprint=imprint,
        sources=sources,
        records=tuple(sorted((record for record in records if record), key=lambda record: record.slug)),
        remarks=tuple(log.remarks),
    )


def _file_names(folder: Path) -> list[str]:
    """The names of the folder's files, sorted; hidden files belong to editors and tools."""
    try:
        return sorted(entry.name for entry in folder.iterdir() if not entry.name.startswith("."))
    except (FileNotFoundError, NotADirectoryError):
        message = "there is no such folder; expected one with handbook.yaml, sources.bib and one YAML file a material."
        log = FaultLog()
        log.fault(Place(str(folder)), message)
        raise FaultsError(log.faults) from None
    except OSError as error:
        raise MachineError(f"cannot read the folder {folder}: {error.strerror or error}") from error


def _imprint(folder: Path, names: list[str], log: FaultLog) -> Imprint:
    path = folder / imprints.FILE_NAME
    if imprints.FILE_NAME not in names:
        near = next((name for name in names if name.lower() in ("handbook.yaml", "handbook.yml")), None)
        mend = f"Rename '{near}' to it." if near else "Start one with the line 'title: Handbook of our materials'."
        log.fault(Place(str(path)), f"the folder has no imprint; expected the file handbook.yaml. {mend}")
        return imprints.default_imprint(path)
    text = read_text(path, folder, log)
    root = read_tree(text, str(path), log, "title: Handbook of our materials") if text is not None else None
    return imprints.read_imprint(root, path, Reader(log)) if root else imprints.default_imprint(path)


def _sources(folder: Path, names: list[str], log: FaultLog) -> dict[str, Source]:
    if SOURCES_NAME not in names:
        return {}
    path = folder / SOURCES_NAME
    text = read_text(path, folder, log, MAXIMUM_BIB_BYTES)
    return read_sources(text, path, log) if text is not None else {}


def _slugs(folder: Path, names: list[str], log: FaultLog) -> list[str]:
    """The names of the record files whose slug is fit for an address."""
    fit: dict[str, str] = {}
    for name in names:
        if not name.lower().endswith(SUFFIXES) or name.lower() in ("handbook.yaml", "handbook.yml"):
            continue
        legible = "".join(sign if sign.isprintable() else "\ufffd" for sign in name)
        place = Place(str(folder / legible))
        stem, suffix = name.rsplit(".", 1)
        quoted = shown(legible)
        if other := fit.get(stem.lower()):
            log.fault(
                place, f"{quoted} and {shown(other)} are one name on many disks and one address; rename one of them."
            )
        elif not _SLUG.fullmatch(stem) or len(stem) > _LONGEST_SLUG or suffix != suffix.lower():
            expected = "expected lower-case letters, digits and hyphens, such as indium-tin-oxide.yaml"
            log.fault(place, f"the file name {quoted} cannot be an address; {expected}. Rename it.")
        elif stem in _DEVICES:
            log.fault(place, f"the file name {quoted} is a device on Windows; choose another, such as {stem}-1.yaml.")
        if legible == name:
            fit.setdefault(stem.lower(), name)
    return list(fit.values())


def _record(path: Path, folder: Path, reader: Reader, reference: float) -> Record | None:
    text = read_text(path, folder, reader.log)
    return read_record(path, text, reader, folder, reference) if text is not None else None
