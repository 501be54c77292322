"""An edition of a handbook: its data, and its records where they are at hand."""

from __future__ import annotations

import json
from collections.abc import Mapping
from dataclasses import dataclass, replace
from functools import cached_property
from pathlib import Path
from typing import Any

from sheetgen.documents import handbook_data
from sheetgen.errata.forms import is_handbook
from sheetgen.errata.revisions import EditionError, records_at
from sheetgen.faults import Fault, FaultsError, MachineError, Place
from sheetgen.handbook import Handbook
from sheetgen.records import Imprint, Record
from sheetgen.records.assembly import rebuilt
from sheetgen.records.imprint import FILE_NAME, default_imprint
from sheetgen.records.unreadable import UnreadableError

DATA = Path("data") / "handbook.json"
MAXIMUM_BYTES = 200_000_000
# What data can do that have the form of a handbook's and do not fit together.
UNFIT = (LookupError, TypeError, ValueError, AttributeError, ArithmeticError, UnreadableError, FaultsError)


@dataclass(frozen=True)
class Edition:
    """The data of an edition (the content of its handbook.json) and, where it was derived here, its handbook."""

    name: str
    data: Mapping[str, Any]
    handbook: Handbook | None = None

    @property
    def edition(self) -> str:
        """What the imprint calls this edition."""
        return str(self.data.get("edition", ""))

    @cached_property
    def materials(self) -> dict[str, Mapping[str, Any]]:
        """Slug → data of a material."""
        return {material["slug"]: material for material in self.data["materials"]}

    @cached_property
    def imprint(self) -> Imprint:
        """The conditions that the numbers were derived under; what older data do not say is as usual."""
        if self.handbook is not None:
            return self.handbook.imprint
        usual, stated = default_imprint(Path(FILE_NAME)), self.data.get("conditions", {})
        thresholds = {key: tuple(b) if isinstance(b, list) else b for key, b in stated.get("thresholds", {}).items()}
        return replace(
            usual,
            edition=self.edition,
            reference_temperature=stated.get("reference_temperature", usual.reference_temperature),
            temperatures=tuple(stated.get("temperatures", usual.temperatures)),
            thresholds=thresholds or usual.thresholds,
        )

    def record(self, slug: str) -> Record | None:
        """The record of a material, as read or as put together from its data; None where the data do not suffice."""
        if self.handbook is not None:
            return self.handbook[slug].record
        skeleton = self.data.get("assemblies", {}).get(slug)
        if skeleton is None:
            return None
        try:
            return rebuilt(self.materials[slug], skeleton)
        except UNFIT:
            return None  # data of another version of the program, or not of this program at all


def edition_of(handbook: Handbook) -> Edition:
    """The edition that a derived handbook would publish."""
    materials = [sheet.data for sheet in handbook.sheets]
    return Edition(handbook.imprint.edition, handbook_data(handbook, materials), handbook)


def open_edition(word: str, materials: Path) -> Edition:
    """The edition that a word names: a handbook.json, a site, a folder of records, or a git revision of `materials`.

    What exists under that name comes before a revision. Raises EditionError for a word that names none,
    FaultsError for records or data at fault, MachineError for a machine that refuses to read.
    """
    path = Path(word)
    if path.is_dir():
        if (path / DATA).is_file():
            return read_edition(path / DATA, word)
        if (path / FILE_NAME).is_file():
            return replace(edition_of(Handbook.load(path)), name=word)
        raise EditionError(f"The folder {word} holds neither {DATA.as_posix()} nor {FILE_NAME}; expected one of them.")
    if path.exists():
        return read_edition(path, word)
    if path.suffix == ".json":
        raise EditionError(f"There is no file {word}.")
    with records_at(word, materials) as folder:
        return replace(edition_of(Handbook.load(folder)), name=word)


def read_edition(path: Path, name: str) -> Edition:
    """The edition in a data file. Raises FaultsError, saying where, for a file that is no such thing."""
    try:
        size = path.stat().st_size
        text = path.read_bytes() if size <= MAXIMUM_BYTES else b""
    except OSError as error:
        raise MachineError(f"cannot read {path}: {(error.strerror or str(error)).lower()}") from error
    if size > MAXIMUM_BYTES:
        raise _fault(path, f"larger than {MAXIMUM_BYTES} bytes; expected the data of a handbook.")
    try:
        data = json.loads(text.decode("utf-8"))
    except json.JSONDecodeError as error:
        raise _fault(path, f"no JSON ({error.msg.lower()}); publish it again.", error.lineno, error.colno) from error
    except (UnicodeDecodeError, RecursionError) as error:
        raise _fault(path, "no JSON in UTF-8; publish it again.") from error
    if not is_handbook(data):
        raise _fault(path, "JSON, but not the data of a handbook; expected data/handbook.json of a site.")
    return Edition(name, data)


def _fault(path: Path, message: str, line: int = 0, column: int = 0) -> FaultsError:
    return FaultsError([Fault(Place(str(path), line, column), message)])
