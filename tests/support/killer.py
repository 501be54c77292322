"""Kills publishing processes one after another, each at its own point, and checks what they leave.

Run as `python killer.py FOLDER exchange|rename`: prints the number of points tried. It is a program of its
own because it forks, which a process with threads (a test runner) must not.
"""

from __future__ import annotations

import os
import shutil
import sys
from pathlib import Path

from support.sites import PERSONAL, DyingDisk, contents, edition, put

from sheetgen.press import publish
from sheetgen.press.disk import Disk


def main(workplace: Path, exchanges: bool) -> None:
    """Try every point until a process lives through its whole publication."""
    old = workplace / "old"
    publish(edition(1).items(), old)
    put(old, PERSONAL)
    publish(edition(2).items(), shutil.copytree(old, workplace / "new"))
    wholes = contents(old), contents(workplace / "new")
    point, dead, seen = 0, True, set()
    while dead:
        point += 1
        place = workplace / f"try-{point}"
        shutil.copytree(old, place / "site")
        dead = killed_at(place / "site", point, exchanges)
        seen.add(check(place, wholes, point, exchanges))
        shutil.rmtree(place)
    if not {"old", "new"} <= seen:
        raise SystemExit(f"a press that dies leaves now the old and now the new site; seen: {sorted(seen)}")
    print(point)


def killed_at(site: Path, point: int, exchanges: bool) -> bool:
    """Publish in a child process that dies at the point; whether it did."""
    child = os.fork()
    if child == 0:
        publish(edition(2).items(), site, disk=DyingDisk(point, exchanges))
        os._exit(0)
    return os.waitstatus_to_exitcode(os.waitpid(child, 0)[1]) != 0


def check(place: Path, wholes: tuple[dict, dict], point: int, exchanges: bool) -> str:
    """Stop where the site is a mix, or where the next press does not put everything in order."""
    site, (old, new) = place / "site", wholes
    # Without an exchange in one step there is one moment without a site; the next press ends it.
    left = contents(site) if site.exists() or exchanges else None
    if left is not None and left not in wholes:
        raise SystemExit(f"killed at point {point}: the site is a mix of two editions")
    publish(edition(2).items(), site, disk=Disk())
    if contents(site) != new:
        raise SystemExit(f"killed at point {point}: the next press does not complete the site")
    if os.listdir(place) != ["site"]:
        raise SystemExit(f"killed at point {point}: the next press leaves {os.listdir(place)}")
    return "none" if left is None else "old" if left == old else "new"


if __name__ == "__main__":
    main(Path(sys.argv[1]), sys.argv[2] == "exchange")
