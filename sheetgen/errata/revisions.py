"""Records as they stood at a git revision, without touching the work tree."""

from __future__ import annotations

import io
import subprocess
import tarfile
import tempfile
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path, PurePosixPath

from sheetgen.faults import MachineError

PATIENCE = 60  # seconds for one call of git


class EditionError(Exception):
    """The word names no edition: one line that says what was looked for."""


@contextmanager
def records_at(revision: str, folder: Path) -> Iterator[Path]:
    """A temporary copy of the folder of records as it stood at a revision; it has the folder's own name.

    Raises EditionError for what is no revision of it, MachineError where git is missing or fails.
    """
    if not folder.is_dir():
        raise EditionError(f"'{revision}' is no file and no folder, and there is no folder {folder} to look for it in.")
    top, tree = _tree(revision, folder)
    archive = _git(top, "archive", "--format=tar", tree, reason=f"cannot read the records at '{revision}'")
    with tempfile.TemporaryDirectory(prefix="sheetgen-") as temporary:
        copy = Path(temporary) / folder.resolve().name
        copy.mkdir()
        _unpack(archive, copy, revision)
        yield copy


def _unpack(archive: bytes, folder: Path, revision: str) -> None:
    """Write the files of the archive; git names no file outside, but a link may lead anywhere.

    By hand: the filters of tarfile came with Python 3.11.4, and Debian 12 has 3.11.2.
    """
    with tarfile.open(fileobj=io.BytesIO(archive)) as files:
        for member in files:
            path = folder / member.name
            if member.isdir():
                path.mkdir(parents=True, exist_ok=True)
            elif member.issym():
                if not (path.parent / member.linkname).resolve().is_relative_to(folder.resolve()):
                    message = f"'{revision}' holds a link that leads out of the folder of records: {member.name}"
                    raise EditionError(message)
                path.symlink_to(member.linkname)
            elif content := files.extractfile(member):
                path.write_bytes(content.read())


def _unpack(archive: bytes, copy: Path, revision: str) -> None:
    """Write the files of an archive below a folder; a link inside it becomes what it leads to."""
    with tarfile.open(fileobj=io.BytesIO(archive)) as files:
        for member in files:
            if member.isdir():
                continue
            parts = PurePosixPath(member.name).parts
            try:
                content = None if ".." in parts or parts[0] == "/" else files.extractfile(member)
            except KeyError:
                content = None
            if content is None:
                raise EditionError(f"'{revision}' holds {member.name}, which leads out of the folder of records.")
            path = copy.joinpath(*parts)
            path.parent.mkdir(parents=True, exist_ok=True)
            path.write_bytes(content.read())


def _tree(revision: str, folder: Path) -> tuple[Path, str]:
    """The top of the repository, and the name of the folder's tree at the revision."""
    try:
        top = Path(_git(folder, "rev-parse", "--show-toplevel").decode().rstrip("\n"))
    except _GitError:
        message = f"'{revision}' is no file and no folder, and {folder} lies in no git repository to look for it in."
        raise EditionError(message) from None
    try:
        commit = _git(folder, "rev-parse", "--verify", "--quiet", "--end-of-options", f"{revision}^{{commit}}")
    except _GitError:
        message = f"'{revision}' is no file, no folder and no revision of {folder}; `git log` names the revisions."
        raise EditionError(message) from None
    inside = folder.resolve().relative_to(top.resolve()).as_posix()
    name = f"{commit.decode().strip()}:{'' if inside == '.' else inside}"
    try:
        return top, _git(top, "rev-parse", "--verify", "--quiet", "--end-of-options", name).decode().strip()
    except _GitError:
        raise EditionError(f"There was no folder {folder} at '{revision}'.") from None


class _GitError(Exception):
    """git ended with an error; its own words."""


def _git(folder: Path, *words: str, reason: str = "") -> bytes:
    """What one call of git prints. Raises _GitError, or with a `reason` MachineError, where git refuses."""
    try:
        run = subprocess.run(["git", "-C", str(folder), *words], capture_output=True, timeout=PATIENCE, check=False)
    except FileNotFoundError:
        raise MachineError("git is not installed, and only git can show an earlier revision; install it") from None
    except subprocess.TimeoutExpired:
        raise MachineError(f"git did not answer within {PATIENCE} seconds") from None
    if run.returncode == 0:
        return run.stdout
    said = run.stderr.decode(errors="replace").strip().splitlines()
    if reason:
        raise MachineError(f"{reason}: {said[-1] if said else 'git failed'}")
    raise _GitError(said[-1] if said else "")
