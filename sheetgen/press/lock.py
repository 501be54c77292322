"""One press at a time for one site."""

from __future__ import annotations

import fcntl
import os
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path

from sheetgen.faults import MachineError
from sheetgen.press.disk import explain


@contextmanager
def alone(path: Path, waiting: Callable[[], None]) -> Iterator[None]:
    """Hold the lock file for the length of the block; call `waiting` once where another press holds it.

    The system lets go of the lock when its holder dies, however it dies: a file left behind means nothing.
    """
    handle = _take(path, waiting)
    try:
        yield
    finally:
        # Removed while it is still held: who waits for this file sees its name gone, and starts again.
        path.unlink(missing_ok=True)
        os.close(handle)


def _take(path: Path, waiting: Callable[[], None]) -> int:
    told = False
    while True:
        handle = _open(path)
        try:
            fcntl.flock(handle, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except BlockingIOError:
            if not told:
                waiting()
                told = True
            fcntl.flock(handle, fcntl.LOCK_EX)
        except OSError as refusal:
            os.close(handle)
            raise MachineError(explain(refusal, path)) from refusal
        if _still_named(handle, path):
            return handle
        os.close(handle)


def _open(path: Path) -> int:
    try:
        return os.open(path, os.O_RDWR | os.O_CREAT | os.O_NOFOLLOW | os.O_CLOEXEC, 0o666)
    except OSError as refusal:
        raise MachineError(explain(refusal, path)) from refusal


def _still_named(handle: int, path: Path) -> bool:
    try:
        return os.path.samestat(os.fstat(handle), os.stat(path))
    except FileNotFoundError:
        return False
