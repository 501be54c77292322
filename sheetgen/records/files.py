"""Files of a handbook's folder as text: regular, inside the folder, bounded, UTF-8, without hidden characters."""

from __future__ import annotations

import re
import stat
from bisect import bisect
from pathlib import Path

from sheetgen.faults import FaultLog, MachineError, Place

MAXIMUM_BYTES = 1_000_000

# C0 and C1 controls, direction marks and overrides, invisible characters, and the line ends that only YAML knows.
HIDDEN = re.compile(
    "[\x00-\x08\x0b\x0c\x0e-\x1f\x7f-\x9f\u061c\u200b-\u200f\u2028-\u202e\u2060-\u2069\ufeff\ufffe\uffff]"
)
_LINE_END = re.compile(r"\r\n?|\n")


def read_text(path: Path, folder: Path, log: FaultLog, limit: int = MAXIMUM_BYTES) -> str | None:
    """The text of a file of the folder, or None with a fault logged.

    Nothing but a regular file is opened, and no more than `limit` bytes are read.
    Raises MachineError where the machine refuses to read it.
    """
    place = Place(str(path))
    try:
        if path.is_symlink() and not _inside(path, folder):
            log.fault(place, "a link that leads out of the folder, or nowhere; put the file itself here.")
            return None
        if not stat.S_ISREG(path.stat().st_mode):
            log.fault(place, "not a regular file; expected a file of text.")
            return None
        with path.open("rb") as stream:
            data = stream.read(limit + 1)
    except OSError as error:
        raise MachineError(f"cannot read {path}: {error.strerror or error}") from error
    if len(data) > limit:
        log.fault(place, f"larger than {limit} bytes; a file of this kind needs less. Split it or cut it down.")
        return None
    return _decoded(data, place, log)


def _inside(path: Path, folder: Path) -> bool:
    try:
        return path.resolve(strict=True).is_relative_to(folder.resolve())
    except (OSError, RuntimeError):
        return False


def _decoded(data: bytes, place: Place, log: FaultLog) -> str | None:
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        before = data[: error.start].decode("utf-8-sig", errors="replace")
        found = f"the byte 0x{data[error.start]:02x} is not UTF-8"
        log.fault(Lines(before, place.file).place(len(before)), f"{found}; save the file in the encoding UTF-8.")
        return None
    if hidden := HIDDEN.search(text):
        log.fault(
            Lines(text, place.file).place(hidden.start()),
            f"the hidden character U+{ord(hidden[0]):04X} stands here; expected visible text. Delete it.",
        )
        return None
    return text


class Lines:
    """Where positions in a text are, in lines and columns from 1."""

    def __init__(self, text: str, file: str):
        self.file = file
        self.starts = [0, *(end.end() for end in _LINE_END.finditer(text))]

    def place(self, position: int) -> Place:
        """The place of a position counted in characters from 0."""
        line = bisect(self.starts, position)
        return Place(self.file, line, position - self.starts[line - 1] + 1)
