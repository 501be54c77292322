"""Small sites for tests of publishing, and disks that fail on purpose."""

from __future__ import annotations

import errno
import os
import signal
from pathlib import Path

from sheetgen.press.disk import Disk

PERSONAL = {".gitignore": b"*\n", "CNAME": b"handbook.example\n", "materials/notes.txt": b"mine\n"}


def edition(number: int, sheets: int = 50) -> dict[str, bytes]:
    """A site of some sheets: half of them differ from edition to edition, and one is in no other edition."""
    pages = {f"materials/m{sheet:02}.html": f"sheet {sheet}".encode() for sheet in range(0, sheets, 2)}
    pages |= {f"figures/m{sheet:02}/gas.svg": f"{number}".encode() * 900 for sheet in range(1, sheets, 2)}
    return pages | {"index.html": f"edition {number}".encode(), f"only-in-{number}.html": b"once"}


def contents(folder: Path) -> dict[str, bytes]:
    """Every file below the folder."""
    files = sorted(path for path in folder.rglob("*") if path.is_file())
    return {str(path.relative_to(folder)): path.read_bytes() for path in files}


def put(folder: Path, files: dict[str, bytes]) -> None:
    """Write files as a person would."""
    for name, data in files.items():
        (folder / name).parent.mkdir(parents=True, exist_ok=True)
        (folder / name).write_bytes(data)


class DyingDisk(Disk):
    """Kills its process at one point: at a change, or in the middle of writing a file. Counts the points."""

    def __init__(self, point: int, exchanges: bool = True):
        self.point = point
        self.exchanges = exchanges
        self.passed = 0

    def before(self, action: str, path: Path) -> None:
        self._point()

    def write(self, path: Path, data: bytes) -> None:
        super().write(path, data[: len(data) // 2])
        self._point()
        path.write_bytes(data)

    def exchange(self, one: Path, other: Path) -> bool:
        return self.exchanges and super().exchange(one, other)

    def _point(self) -> None:
        self.passed += 1
        if self.passed == self.point:
            os.kill(os.getpid(), signal.SIGKILL)


class FailingDisk(Disk):
    """Refuses every change from one point on, as a full disk does, except to remove and to rename."""

    def __init__(self, point: int, number: int = errno.ENOSPC, exchanges: bool = True):
        self.point = point
        self.number = number
        self.exchanges = exchanges
        self.passed = 0

    def before(self, action: str, path: Path) -> None:
        self.passed += 1
        if self.passed >= self.point and action not in {"remove", "rename", "exchange"}:
            raise OSError(self.number, os.strerror(self.number), str(path))

    def exchange(self, one: Path, other: Path) -> bool:
        return self.exchanges and super().exchange(one, other)
