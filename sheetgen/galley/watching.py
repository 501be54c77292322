"""Waits for files of a folder to be saved."""

from __future__ import annotations

import threading
from collections.abc import Callable
from pathlib import Path

QUIET = 60  # milliseconds without a further change, after which a save counts as complete
PATIENCE = 500  # milliseconds after which a stop is noticed
_TEMPORARY = (".tmp", ".swp", ".swx", ".bak", "~")


def watch(folder: Path, saved: Callable[[], None], stop: threading.Event) -> None:
    """Call `saved` after every save in the folder until `stop` is set."""
    import watchfiles

    def wanted(_change: object, path: str) -> bool:
        # A hidden or temporary file belongs to an editor, which renames it when the save is done.
        names = Path(path).parts[len(folder.resolve().parts) :]
        return not any(name.startswith(".") for name in names) and not path.endswith(_TEMPORARY)

    changes = watchfiles.watch(
        folder.resolve(),
        watch_filter=wanted,
        stop_event=stop,
        step=QUIET,
        rust_timeout=PATIENCE,
        raise_interrupt=False,
    )
    for _ in changes:
        saved()
