"""Kills presses of a real handbook, each at its own point of their life, and checks what they leave.

Run as `python killing.py FOLDER POINTS`: prints how many presses died and how many left the old site and the new one.
Deriving and drawing are done once; each press then publishes the very files in a process forked for it, since every
change that a press makes to a disk is made there. A program of its own, because it forks.
"""

from __future__ import annotations

import json
import os
import shutil
import sys
from pathlib import Path

from support.folders import write_small_handbook
from support.sites import PERSONAL, DyingDisk, contents, put

from sheetgen.press import publish, road
from sheetgen.press.disk import Disk


def main(ground: Path, points: int) -> None:
    """Try points spread evenly over the life of a press."""
    records = write_small_handbook(ground / "records")
    old_files = laid_out(records, ground)
    record = records / "copper.yaml"
    record.write_text(record.read_text(encoding="utf-8").replace("1.678(9)", "1.700(9)"), encoding="utf-8")
    new_files = laid_out(records, ground)
    standing = ground / "standing"
    publish(old_files.items(), standing)
    put(standing, PERSONAL)
    publish(new_files.items(), shutil.copytree(standing, ground / "complete"))
    old, new = contents(standing), contents(ground / "complete")
    count = Counting()
    publish(new_files.items(), shutil.copytree(standing, ground / "counted"), disk=count)
    outcomes = {"died": 0, "old": 0, "new": 0}
    for number in range(points):
        place = ground / f"try-{number}"
        shutil.copytree(standing, place / "site", copy_function=os.link)
        outcomes["died"] += killed(new_files, place / "site", 1 + number * count.passed // points)
        left = contents(place / "site")
        if left not in (old, new):
            raise SystemExit(f"killed at point {number}: a mix of two editions is left")
        outcomes["old" if left == old else "new"] += 1
        publish(new_files.items(), place / "site", disk=Disk())
        if contents(place / "site") != new or os.listdir(place) != ["site"]:
            raise SystemExit(f"killed at point {number}: the next press does not put everything in order")
        shutil.rmtree(place)
    print(json.dumps(outcomes | {"points of a life": count.passed, "files": len(new_files)}))


class Counting(DyingDisk):
    """Passes every point and counts them."""

    def __init__(self) -> None:
        super().__init__(point=-1)


def laid_out(records: Path, ground: Path) -> dict[str, bytes]:
    """Every file of a real press."""
    road.press(records, ground / "pressed")
    return {path: data for path, data in contents(ground / "pressed").items() if path != "manifest.json"}


def killed(files: dict[str, bytes], site: Path, point: int) -> bool:
    """Publish in a child process that dies at the point; whether it did."""
    child = os.fork()
    if child == 0:
        publish(files.items(), site, disk=DyingDisk(point))
        os._exit(0)
    return os.waitstatus_to_exitcode(os.waitpid(child, 0)[1]) != 0


if __name__ == "__main__":
    main(Path(sys.argv[1]), int(sys.argv[2]))
