"""Runs the commands: `python -m sheetgen` and the console script `sheetgen`."""

from __future__ import annotations

import sys

from sheetgen.cli import run


def main() -> None:
    """Run one command and leave with its exit status."""
    sys.exit(run(sys.argv[1:]))


if __name__ == "__main__":
    main()
