"""Waits for files of a folder to be saved."""

from __future__ import annotations

import threading
from collections.abc import Callable, Iterator
from pathlib import Path

QUIET = 60  # milliseconds without a further change, after which a save counts as complete
PATIENCE = 500  # milliseconds after which a stop is noticed, and a save that the system did not report
_TEMPORARY = (".tmp", ".swp", ".swx", ".bak", "~")


def watch(folder: Path, saved: Callable[[], None], stop: threading.Event) -> None:
    """Call `saved` after every save in the folder, and now and then, until `stop` is set.

    A save before the watch stands, and one on a disk whose system reports none, are found now and then: `saved` has
    to see for itself whether anything changed.
    """
    import watchfiles

    def wanted(_change: object, path: str) -> bool:
        # A hidden or temporary file belongs to an editor, which renames it when the save is done.
        names = Path(path).parts[len(folder.resolve().parts) :]
        return not any(name.startswith(".") for name in names) and not path.endswith(_TEMPORARY)

    def changes(polling: bool) -> Iterator[object]:
        return watchfiles.watch(
            folder.resolve(),
            watch_filter=wanted,
            stop_event=stop,
            step=QUIET,
            rust_timeout=PATIENCE,
            yield_on_timeout=True,
            raise_interrupt=False,
            force_polling=polling,
        )

    try:
        for _ in changes(polling=False):
            saved()
    except OSError:  # the system has no watch left to give: look at the files instead
        for _ in changes(polling=True):
            saved()
