"""Reads hostile folders, each in a process of its own that is forked from this one, and measures what it takes.

Run as `python reading.py FOLDER…`: for each, one line of JSON with the faults, processor seconds and megabytes.
It is a program of its own because it forks, which a process with threads (a test runner) must not.
"""

from __future__ import annotations

import json
import os
import resource
import sys
import tempfile
from pathlib import Path

import gemmi  # noqa: F401, what the readers load lazily is loaded before anything is measured
import jsonschema  # noqa: F401
import numpy  # noqa: F401
import pint  # noqa: F401
import pybtex.database.input.bibtex  # noqa: F401

from sheetgen.faults import FaultsError
from sheetgen.records import read_folder, si_factor

SECONDS, BYTES = 20, 4_000_000_000


def main(folders: list[str]) -> None:
    """Measure each folder and print the result."""
    si_factor("stone")  # the units library asks its own tables at the first unusual unit
    for folder in folders:
        print(json.dumps(measured(Path(folder))), flush=True)


def measured(folder: Path) -> dict:
    """What a forked process says of the folder; {"died": signal} where it reached a limit."""
    with tempfile.TemporaryFile("w+") as said:
        child = os.fork()
        if child == 0:
            read(folder, said)
        _, status, used = os.wait4(child, 0)
        said.seek(0)
        result = json.load(said) if status == 0 else {"died": status}
    return result | {"seconds": used.ru_utime + used.ru_stime, "megabytes": used.ru_maxrss / 1000}


def read(folder: Path, said) -> None:
    """Read the folder under limits, write the outcome and end the process."""
    resource.setrlimit(resource.RLIMIT_CPU, (SECONDS, SECONDS))
    resource.setrlimit(resource.RLIMIT_AS, (BYTES, BYTES))
    resource.setrlimit(resource.RLIMIT_CORE, (0, 0))
    try:
        read_folder(folder)
        outcome = {"faults": []}
    except FaultsError as error:
        outcome = {"faults": [str(fault) for fault in error.faults]}
    except BaseException as error:
        outcome = {"error": repr(error)[:300]}
    json.dump(outcome, said)
    said.flush()
    os._exit(0)


if __name__ == "__main__":
    main(sys.argv[1:])
