"""Runs the commands: `python -m sheetgen` and the console script `sheetgen`."""

from __future__ import annotations

import signal
import sys


def main() -> None:
    """Run one command and leave with its exit status."""
    sys.unraisablehook = _deliver_again
    if sys.flags.optimize > 1:
        sys.stderr.write("sheetgen: -OO takes away docstrings, which are the titles of the quantities; leave it out\n")
        sys.exit(3)
    try:
        from sheetgen.cli import run

        sys.exit(run(sys.argv[1:]))
    except KeyboardInterrupt:  # stopped before the commands were loaded, or after they were done
        sys.stderr.write("sheetgen: stopped\n")
        sys.exit(130)


def _deliver_again(lost: sys.UnraisableHookArgs) -> None:
    """An interrupt that falls into a callback of the interpreter would be printed and forgotten."""
    if lost.exc_type is KeyboardInterrupt and hasattr(signal, "setitimer"):
        signal.signal(signal.SIGALRM, signal.default_int_handler)
        signal.setitimer(signal.ITIMER_REAL, 0.01)
    else:
        sys.__unraisablehook__(lost)


if __name__ == "__main__":
    main()
