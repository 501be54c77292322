"""New files beside those that stand, and one more source: all of it or nothing, and nothing written over."""

from __future__ import annotations

import os
from contextlib import ExitStack
from pathlib import Path
from tempfile import NamedTemporaryFile

from sheetgen.drafting.bibliography import FILE_NAME, appended
from sheetgen.faults import MachineError

IMPRINT = "handbook.yaml"
IMPRINT_TEXT = """\
# The imprint: what the handbook is and who answers for it.
title: Handbook of our materials
edition: "1"
# group: ?
# licence: ?          # such as CC-BY-4.0
# contact: ?          # a mail address or a web address
"""


class DraftRefusedError(Exception):
    """There is no room for what was asked for; one line that says why and how to mend it. Nothing was written."""


def write_new(folder: Path, files: dict[Path, str], bibliography: str = "", addition: str = "") -> tuple[Path, ...]:
    """Write new files, an imprint where there is none, and one more source; at any fault take back what is new."""
    texts = dict(files)
    if not _has_imprint(folder):
        texts = {folder / IMPRINT: IMPRINT_TEXT, **texts}
    written: list[Path] = []
    with ExitStack() as undo:
        try:
            for path, text in texts.items():
                _create(path, text, undo)
                written.append(path)
            if addition:
                _append_source(folder / FILE_NAME, bibliography, addition)
                written.append(folder / FILE_NAME)
        except FileExistsError as error:
            raise DraftRefusedError(f"{error.filename} stands already and is left alone.") from error
        except OSError as error:
            raise MachineError(f"cannot write {error.filename or folder}: {error.strerror or error}") from error
        undo.pop_all()
    return tuple(written)


def _has_imprint(folder: Path) -> bool:
    """Whether a folder has an imprint, in whatever spelling."""
    return any(entry.name.lower() in (IMPRINT, "handbook.yml") for entry in folder.iterdir())


def _create(path: Path, text: str, undo: ExitStack) -> None:
    """Write a file that is not there yet; raises FileExistsError for one that is."""
    with path.open("x", encoding="utf-8", newline="\n") as stream:
        undo.callback(path.unlink, missing_ok=True)
        stream.write(text)


def _append_source(path: Path, expected: str, addition: str) -> None:
    """Put a whole new file in the place of sources.bib: at no moment is there half of one."""
    standing = path.read_bytes() if path.exists() else b""
    if standing.decode("utf-8-sig") != expected:
        raise DraftRefusedError(f"{path} has just been changed by someone else. Draft again.")
    target = path.resolve()
    gap = appended(expected, addition)[len(expected) :]
    mode = target.stat().st_mode & 0o777 if target.exists() else 0o666 & ~_umask()
    with NamedTemporaryFile("wb", dir=target.parent, prefix=".sources-", delete=False) as stream:
        temporary = Path(stream.name)
        try:
            stream.write(standing + gap.encode())
            stream.flush()
            os.fsync(stream.fileno())
            temporary.chmod(mode)
            temporary.replace(target)
        except BaseException:
            temporary.unlink(missing_ok=True)
            raise


def _umask() -> int:
    """The mask that new files get, which can only be read by setting it."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
