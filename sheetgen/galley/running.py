"""From the start of a galley to its end: press, serve, watch, and leave nothing behind."""

from __future__ import annotations

import signal
import tempfile
import threading
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path

from sheetgen.galley.server import Server
from sheetgen.galley.watching import watch
from sheetgen.galley.workshop import Progress, Workshop


def run(
    folder: Path, port: int, opened: Callable[[str], None], told: Callable[[str], None], progress: Progress
) -> None:
    """Serve the handbook of a folder on the loopback address until interrupted (KeyboardInterrupt).

    `opened` is called with the address once pages can be had, `told` with every line about a press. Port 0 takes a
    free one. Raises MachineError where the port is taken.
    """
    with tempfile.TemporaryDirectory(prefix="sheetgen-galley-") as desk, _terminated_like_interrupted():
        workshop = Workshop(folder, Path(desk) / "site", told)
        server = Server(port, workshop)
        stop = threading.Event()
        watcher = threading.Thread(target=watch, args=(folder, workshop.press, stop), daemon=True)
        try:
            workshop.press(progress)
            server.start()
            watcher.start()
            opened(server.address)
            stop.wait()
        finally:
            stop.set()
            server.stop()
            if watcher.is_alive():
                watcher.join(timeout=5)


@contextmanager
def _terminated_like_interrupted() -> Iterator[None]:
    """Let SIGTERM end the run as Ctrl-C does, so that the temporary site goes with it."""
    before = signal.signal(signal.SIGTERM, signal.default_int_handler)
    try:
        yield
    finally:
        signal.signal(signal.SIGTERM, before)
