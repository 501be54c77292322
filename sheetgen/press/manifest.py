"""The list of what a press made, and from what: it tells our files from those that a person put there."""

from __future__ import annotations

import hashlib
import json
import os
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from pathlib import Path

from sheetgen import __version__
from sheetgen.faults import Fault, FaultLog, Place

NAME = "manifest.json"
INPUT_SUFFIXES = {".bib", ".cif", ".py", ".yaml", ".yml"}


class FolderRefusedError(Exception):
    """The folder holds something that a press must not replace: one line that says what to do."""


@dataclass(frozen=True)
class Manifest:
    """SHA-256, in hexadecimal, of each published file and of each file that it was made from."""

    files: Mapping[str, str] = field(default_factory=dict)
    inputs: Mapping[str, str] = field(default_factory=dict)

    def to_bytes(self) -> bytes:
        """The published form; equal manifests give equal bytes."""
        content = {
            "program": "sheetgen",
            "version": __version__,
            "files": dict(sorted(self.files.items())),
            "inputs": dict(sorted(self.inputs.items())),
        }
        return (json.dumps(content, indent=1, ensure_ascii=False) + "\n").encode()


def digest(data: bytes) -> str:
    """SHA-256 of the data in hexadecimal."""
    return hashlib.sha256(data).hexdigest()


def _digest_of_file(path: Path) -> str:
    """The digest of a file of any size, of which the memory need hold no more than a piece."""
    with path.open("rb") as stream:
        return hashlib.file_digest(stream, "sha256").hexdigest()


def fingerprints(folder: Path) -> dict[str, str]:
    """SHA-256 of every file of the folder that a handbook may be made from, by name."""
    return {
        path.name: _digest_of_file(path)
        for path in sorted(folder.iterdir())
        if path.suffix in INPUT_SUFFIXES and not path.name.startswith(".") and path.is_file()
        if path.name.isprintable()  # any other name is a fault of a record's, and no text to write down
    }


def standing_manifest(site: Path) -> Manifest:
    """What the last press published in this folder; empty for a folder that a first press may fill.

    Raises FolderRefusedError for a folder that holds files and no manifest of ours.
    """
    path = site / NAME
    if not path.is_file():
        if set(paths_in(site)) <= {".gitignore"}:
            return Manifest()
        raise FolderRefusedError(
            f"{site} holds files and no {NAME} of an earlier press, so it may be someone's work. "
            "Choose an empty or a new folder with --into."
        )
    try:
        content = json.loads(path.read_bytes())
        if content["program"] == "sheetgen":
            return Manifest(dict(content["files"]), dict(content["inputs"]))
    except (ValueError, KeyError, TypeError):
        pass  # told below, as for a manifest of some other program
    raise FolderRefusedError(
        f"{path} is not the manifest of a press, so {site} may be someone's work. "
        "Move the folder away, or choose another with --into."
    )


def deviations(site: Path) -> list[Fault]:
    """Where a published folder is not what its manifest says; a file that a person put there is a remark.

    Raises FolderRefusedError for a folder without a manifest of ours.
    """
    manifest, log = standing_manifest(site), FaultLog()
    found = set(paths_in(site)) - {NAME}
    for path in sorted(found | set(manifest.files)):
        place = Place(str(site / path))
        if path not in found:
            log.fault(place, "is missing. Press the handbook again.")
        elif path not in manifest.files:
            log.remark(place, "was not made by a press.")
        elif digest((site / path).read_bytes()) != manifest.files[path]:
            log.fault(place, "is not what was published. Press the handbook again.")
    return list(log)


def paths_in(folder: Path) -> Iterator[str]:
    """Every file below the folder, relative to it and with slashes; a symbolic link counts as a file."""
    if not folder.is_dir():
        return
    for entry in sorted(os.scandir(folder), key=lambda found: found.name):
        if entry.is_dir(follow_symlinks=False):
            yield from (f"{entry.name}/{path}" for path in paths_in(Path(entry.path)))
        else:
            yield entry.name
