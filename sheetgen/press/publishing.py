"""Publishing a site: staged whole beside the one that stands, then swapped with it in one step."""

from __future__ import annotations

import os
from collections.abc import Callable, Iterable, Mapping
from contextlib import suppress
from dataclasses import dataclass
from pathlib import Path, PurePosixPath

from sheetgen.faults import MachineError
from sheetgen.press import manifest as manifests
from sheetgen.press.disk import Disk, explain
from sheetgen.press.lock import alone
from sheetgen.press.manifest import FolderRefusedError, Manifest, digest, paths_in


@dataclass(frozen=True)
class Report:
    """What a publication did: paths below the site, sorted."""

    written: tuple[str, ...]
    unchanged: tuple[str, ...]
    removed: tuple[str, ...]
    kept: tuple[str, ...]  # files that a person put there
    overwritten: tuple[str, ...]  # published files that a person had changed by hand


def publish(
    files: Iterable[tuple[str, bytes]],
    into: Path,
    inputs: Mapping[str, str] | None = None,
    *,
    disk: Disk | None = None,
    waiting: Callable[[], None] = lambda: None,
) -> Report:
    """Make the folder `into` hold exactly these files, and those that a person put there.

    However it ends, the folder holds the whole old site or the whole new one. `files` are pairs of a path
    below the site and its bytes; `inputs` are the fingerprints of what they were made from; `waiting` is
    called once when another press has to finish first.

    Raises FolderRefusedError for a folder that is not ours to replace, MachineError for a failing machine.
    """
    disk = disk or Disk()
    try:
        site = _place_of(Path(into))
        disk.make_folder(site.parent)
        with alone(site.with_name(f".{site.name}.lock"), waiting):
            return _Publication(site, disk).run(files, inputs or {})
    except OSError as refusal:
        raise MachineError(explain(refusal, Path(refusal.filename or into))) from refusal


def _place_of(into: Path) -> Path:
    site = into.resolve()
    if site.exists() and not site.is_dir():
        raise FolderRefusedError(f"{into} is a file; a site needs a folder. Choose another with --into.")
    if site.is_mount():
        raise FolderRefusedError(
            f"{into} is the root of a disk and cannot be swapped in one step. Choose a folder on it."
        )
    return site


class _Publication:
    """One run of `publish`. The folders beside the site are its journal: they tell how far a press came.

    staging: being filled or being removed, worth nothing. complete: a whole site, before the swap the new one
    and after it the old one. retired: the old site, where the system cannot swap two folders in one step.
    """

    def __init__(self, site: Path, disk: Disk):
        self.site = site
        self.disk = disk
        self.desk = site.with_name(f".{site.name}.press")
        self.staging = self.desk / "staging"
        self.complete = self.desk / "complete"
        self.retired = self.desk / "retired"

    def run(self, files: Iterable[tuple[str, bytes]], inputs: Mapping[str, str]) -> Report:
        self._recover()
        old = manifests.standing_manifest(self.site)
        try:
            report = self._stage(files, inputs, old)
            if report.written or report.removed:
                self._assemble(report)
                self._swap()
        finally:
            with suppress(MachineError):  # what stays beside the site harms nothing; the next press clears it
                self._recover()
        return report

    def _recover(self) -> None:
        """Leave one whole site and nothing beside it, wherever this press or an earlier one stopped."""
        if not self.site.exists():
            for whole in (self.complete, self.retired):
                if whole.is_dir():
                    self.disk.rename(whole, self.site)
                    break
        self._clear(self.staging, self.retired, self.complete)

    def _stage(self, files: Iterable[tuple[str, bytes]], inputs: Mapping[str, str], old: Manifest) -> Report:
        """Write what differs from the standing site into the staging folder: nothing, where nothing does."""
        published: dict[str, str] = {}
        written, unchanged, overwritten = [], [], []

        def stage(path: str, data: bytes) -> None:
            standing = _bytes_of(self.site / path)
            if standing == data:
                unchanged.append(path)
                return
            if standing is not None and old.files.get(path, digest(standing)) != digest(standing):
                overwritten.append(path)
            self.disk.write(self.staging / path, data)
            written.append(path)

        for path, data in files:
            _check_path(path, published)
            published[path] = digest(data)
            stage(path, data)
        stage(manifests.NAME, Manifest(published, inputs).to_bytes())
        found = set(paths_in(self.site)) - {manifests.NAME}
        kept = {path for path in found - set(published) if not self._ours(path, old)}
        self._refuse_collisions(found & set(published) - set(old.files), kept, set(published))
        removed = found - set(published) - kept
        return Report(*(tuple(sorted(paths)) for paths in (written, unchanged, removed, kept, overwritten)))

    def _ours(self, path: str, old: Manifest) -> bool:
        """Whether an earlier press made this file and nobody has changed it since."""
        standing = _bytes_of(self.site / path)
        return standing is not None and old.files.get(path) == digest(standing)

    def _refuse_collisions(self, taken: set[str], kept: set[str], published: set[str]) -> None:
        """A page must not replace a file of a person, nor need a folder where such a file stands."""
        in_the_way = {path for path in kept if _folders_of(path) & published}
        needed = {folder for path in published for folder in _folders_of(path)}
        if clashes := sorted(taken | (kept & needed) | in_the_way):
            raise FolderRefusedError(
                f"{self.site / clashes[0]} was put there by a person, and the handbook now needs that name. "
                "Move it away, then press again."
            )

    def _assemble(self, report: Report) -> None:
        """Complete the staged files with those that stay as they are, and see them safe on the disk."""
        self.disk.make_folder(self.staging)
        for path in (*report.unchanged, *report.kept):
            self.disk.link(self.site / path, self.staging / path)
        if self.site.exists():
            self.disk.copy_mode(self.site, self.staging)
        self.disk.settle(self.staging, [self.staging / path for path in report.written])
        self.disk.rename(self.staging, self.complete)

    def _swap(self) -> None:
        if not self.site.exists():
            self.disk.rename(self.complete, self.site)
        elif not self.disk.exchange(self.complete, self.site):
            self.disk.rename(self.site, self.retired)
            self.disk.rename(self.complete, self.site)
        self.disk.settle_names(self.site.parent)

    def _clear(self, *folders: Path) -> None:
        """Remove folders of ours; what a person saved there at the last moment moves to the site."""
        for folder in filter(Path.is_dir, folders):
            if folder != self.staging:
                self._rescue(folder)
                self.disk.rename(folder, self.staging)  # a half removed site must not pass for a whole one
            self.disk.remove(self.staging)
        if self.desk.is_dir() and not any(self.desk.iterdir()):
            self.disk.remove(self.desk)

    def _rescue(self, folder: Path) -> None:
        made = {*manifests.standing_manifest(folder).files, manifests.NAME}
        for path in paths_in(folder):
            if path not in made and not os.path.lexists(self.site / path):
                self.disk.link(folder / path, self.site / path)


def _folders_of(path: str) -> set[str]:
    return {str(folder) for folder in PurePosixPath(path).parents}


def _check_path(path: str, published: Mapping[str, str]) -> None:
    """Paths come from code, not from records: a bad one is an error of the program."""
    parts = path.split("/")
    if not path or "\0" in path or "\\" in path or any(part in {"", ".", ".."} for part in parts):
        raise ValueError(f"a site cannot hold a file named {path!r}")
    if path in published or path == manifests.NAME:
        raise ValueError(f"two files of the site are named {path!r}")


def _bytes_of(path: Path) -> bytes | None:
    """The content of a regular file; None for anything else, a symbolic link included."""
    return path.read_bytes() if path.is_file() and not path.is_symlink() else None
