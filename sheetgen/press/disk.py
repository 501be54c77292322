"""The write layer: every change that a press makes to a disk passes through here, and nowhere else."""

from __future__ import annotations

import ctypes
import errno
import os
import shutil
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from functools import cache
from pathlib import Path

from sheetgen.faults import MachineError

_THIS_FOLDER = -100  # AT_FDCWD of <fcntl.h>
_EXCHANGE = 2  # RENAME_EXCHANGE of <linux/fs.h>
_NO_EXCHANGE = {errno.ENOSYS, errno.EINVAL, errno.ENOTSUP}
_NO_LINK = {errno.EXDEV, errno.EPERM, errno.EMLINK, errno.ENOTSUP, errno.ENOSYS}


class Disk:
    """Changes files and folders; whatever the machine refuses is a MachineError that says so in one line."""

    def before(self, action: str, path: Path) -> None:
        """Called before each change. A test overrides it to fill the disk or to die at this very point."""

    def make_folder(self, path: Path) -> None:
        """Make the folder and those above it, unless they stand already."""
        if not path.is_dir():
            with self._changing("make", path):
                path.mkdir(parents=True, exist_ok=True)

    def write(self, path: Path, data: bytes) -> None:
        """Write a new file; its folder is made where it is missing."""
        self.make_folder(path.parent)
        with self._changing("write", path):
            path.write_bytes(data)

    def link(self, old: Path, new: Path) -> None:
        """Give a file a second name, or copy it where the file system has no hard links."""
        self.make_folder(new.parent)
        with self._changing("link", new):
            try:
                os.link(old, new, follow_symlinks=False)
            except OSError as refusal:
                if refusal.errno not in _NO_LINK:
                    raise
                shutil.copy2(old, new, follow_symlinks=False)

    def rename(self, old: Path, new: Path) -> None:
        """Rename a file or a folder; neither name may lie on another file system."""
        with self._changing("rename", new):
            old.rename(new)

    def exchange(self, one: Path, other: Path) -> bool:
        """Swap two folders in one step; False, and nothing done, where the system has no such step."""
        with self._changing("exchange", other):
            swap = getattr(_c_library(), "renameat2", None)
            if swap is None:
                return False
            if swap(_THIS_FOLDER, os.fsencode(one), _THIS_FOLDER, os.fsencode(other), _EXCHANGE) == 0:
                return True
            if (number := ctypes.get_errno()) in _NO_EXCHANGE:
                return False
            raise OSError(number, os.strerror(number), str(other))

    def copy_mode(self, old: Path, new: Path) -> None:
        """Give the new folder the permissions of the old one."""
        with self._changing("permit", new):
            shutil.copymode(old, new)

    def settle(self, folder: Path, paths: list[Path]) -> None:
        """Return only when the files of the folder are on the disk, and not just in memory."""
        with self._changing("settle", folder):
            if not _settle_file_system(folder):
                for path in [*paths, folder]:
                    _settle(path)

    def settle_names(self, folder: Path) -> None:
        """Return only when the names in the folder are on the disk."""
        with self._changing("settle", folder):
            _settle(folder)

    def remove(self, path: Path) -> None:
        """Remove a folder with all that is in it, from the leaves up; a symbolic link is not followed."""
        for entry in sorted(path.iterdir()) if path.is_dir() and not path.is_symlink() else ():
            self.remove(entry)
        with self._changing("remove", path):
            path.rmdir() if path.is_dir() and not path.is_symlink() else path.unlink(missing_ok=True)

    @contextmanager
    def _changing(self, action: str, path: Path) -> Iterator[None]:
        try:
            self.before(action, path)
            yield
        except OSError as refusal:
            raise MachineError(explain(refusal, path)) from refusal


def explain(refusal: OSError, path: Path) -> str:
    """One line for a person: what the machine refused, and what would help."""
    if refusal.errno in {errno.ENOSPC, errno.EDQUOT}:
        return f"{path}: the disk is full ({_reason(refusal)}). Make room, then press again."
    if refusal.errno == errno.EROFS:
        return f"{path}: the disk is mounted read-only. Choose another folder with --into."
    if refusal.errno in {errno.EACCES, errno.EPERM}:
        return f"{path}: {_reason(refusal)}. Ask for access to it, or choose another folder."
    return f"{path}: {_reason(refusal)}."


def _reason(refusal: OSError) -> str:
    return (refusal.strerror or str(refusal)).lower()


def _settle(path: Path) -> None:
    handle = os.open(path, os.O_RDONLY)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)


def _settle_file_system(folder: Path) -> bool:
    """One call for all files instead of one for each, where the system has it."""
    settle = getattr(_c_library(), "syncfs", None)
    if settle is None:
        return False
    handle = os.open(folder, os.O_RDONLY)
    try:
        if settle(handle):
            number = ctypes.get_errno()
            raise OSError(number, os.strerror(number), str(folder))
    finally:
        os.close(handle)
    return True


@cache
def _c_library() -> ctypes.CDLL | None:
    return ctypes.CDLL(None, use_errno=True) if sys.platform == "linux" else None
