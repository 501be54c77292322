"""A press that is killed, runs into a full disk or publishes elsewhere touches the site alone and leaves it whole."""

from __future__ import annotations

import json
import os
import shutil
import subprocess
import sys
import tempfile
from pathlib import Path

import hostile.killing
import pytest
from support.sites import contents, put
from support.tools import required_tool

from sheetgen.press import deviations

TESTS = Path(__file__).parent.parent
RUN = "import sys; from sheetgen.cli import run; sys.exit(run(sys.argv[1:]))"


def test_real_presses_killed_at_200_points(tmp_path):
    # In memory where there is room: on a disk, seeing the files of 400 presses safe takes minutes.
    memory = Path("/dev/shm")
    with tempfile.TemporaryDirectory(dir=memory if memory.is_dir() else tmp_path) as ground:
        command = [sys.executable, hostile.killing.__file__, ground, "200"]
        run = subprocess.run(command, capture_output=True, text=True, env={"PYTHONPATH": str(TESTS)}, check=False)
    assert run.returncode == 0, run.stderr
    said = json.loads(run.stdout)
    assert said["died"] == 200 and said["old"] > 100 and said["new"] > 0
    assert said["points of a life"] >= 200 and said["files"] > 100


NOTICE = """
import sys
PLACES = {"open": 0, "os.mkdir": 0, "os.rename": 1, "os.remove": 0, "os.rmdir": 0, "os.link": 1, "os.symlink": 1,
          "os.chmod": 0, "os.truncate": 0, "os.chown": 0, "os.utime": 0, "shutil.move": 1, "shutil.rmtree": 0}
def notice(event, details):
    if event in PLACES and (event != "open" or (details[2] or 0) & 3 or str(details[1] or "r")[0] in "wax+"):
        sys.stderr.write(f"changed {event} {details[PLACES[event]]}\\n")
sys.addaudithook(notice)
"""


def test_nothing_beside_the_site_is_changed(small_handbook, tmp_path):
    """Every change that the interpreter makes to a disk is noticed by its own audit."""
    site = tmp_path / "public" / "site"
    for _ in range(2):
        command = [sys.executable, "-B", "-c", NOTICE + RUN, "press", str(small_handbook), "--into", str(site)]
        run = subprocess.run(command, capture_output=True, text=True, check=False, cwd=tmp_path)
        assert run.returncode == 0, run.stderr
        changed = [line.split(" ", 2)[2] for line in run.stderr.splitlines() if line.startswith("changed ")]
        strange = {path for path in changed if not is_of_the_site(path, site)}
        assert strange == set()
    assert sorted(path.name for path in tmp_path.iterdir()) == ["public", "records"]
    assert sorted(path.name for path in site.parent.iterdir()) == ["site"]


def is_of_the_site(path: str, site: Path) -> bool:
    """The site, the press's own folder and lock beside it, and the folder above where that is made.

    The drawing library looks for a folder of its own in the home, and makes it where it is missing.
    """
    own = (str(site), str(site.with_name(".site.press")), str(site.with_name(".site.lock")))
    return path.startswith(own) or path == str(site.parent) or path.endswith(("/matplotlib", os.devnull))


@pytest.fixture
def other_disk(tmp_path):
    """A folder on another file system than that of the records."""
    memory = Path("/dev/shm")
    if not memory.is_dir() or memory.stat().st_dev == tmp_path.stat().st_dev:
        pytest.skip("no second file system is at hand")
    folder = Path(tempfile.mkdtemp(dir=memory))
    yield folder
    shutil.rmtree(folder)


def test_a_site_on_another_file_system(small_handbook, tmp_path, other_disk):
    """Reached by a symbolic link from beside the records, as a web server's folder often is."""
    (other_disk / "site").mkdir()
    link = tmp_path / "site"
    link.symlink_to(other_disk / "site")
    for expected in (0, 1):
        assert pressed(small_handbook, link).returncode == 0
        assert deviations(link) == []
        put(small_handbook, {"sources.bib": (small_handbook / "sources.bib").read_bytes() + b"\n" * (1 - expected)})
    assert link.is_symlink()
    assert os.listdir(other_disk) == ["site"]
    assert sorted(path.name for path in tmp_path.iterdir()) == ["records", "site"]


def test_a_link_inside_the_site_is_never_followed(small_handbook, tmp_path):
    outside = tmp_path / "outside"
    put(outside, {"kept.txt": b"mine", "copper.html": b"mine"})
    site = tmp_path / "site"
    assert pressed(small_handbook, site).returncode == 0
    shutil.rmtree(site / "figures")
    (site / "figures").symlink_to(outside)
    (site / "index.html").unlink()
    (site / "index.html").symlink_to(outside / "kept.txt")
    run = pressed(small_handbook, site)
    assert contents(outside) == {"kept.txt": b"mine", "copper.html": b"mine"}
    assert run.returncode == 2 and "was put there by a person" in run.stderr


def pressed(records: Path, into: Path, before: str = "") -> subprocess.CompletedProcess:
    command = [sys.executable, "-c", before + RUN, "press", str(records), "--into", str(into)]
    return subprocess.run(command, capture_output=True, text=True, check=False)


@pytest.fixture
def small_disk(tmp_path):
    """Mounts file systems of a few megabytes; where that is not allowed, the write layer's test stands for it."""
    mounted = []

    def mount(kilobytes: int) -> Path:
        folder = tmp_path / f"disk-{kilobytes}"
        folder.mkdir()
        command = [required_tool("mount"), "-t", "tmpfs", "-o", f"size={kilobytes}k", "tmpfs", str(folder)]
        if subprocess.run(command, capture_output=True, check=False).returncode:
            pytest.skip("file systems may not be mounted here; test_full_disk_at_any_point stands for it")
        mounted.append(folder)
        return folder

    yield mount
    for folder in mounted:
        subprocess.run(["umount", str(folder)], check=True)


def test_a_full_disk_leaves_the_old_site(small_handbook, small_disk, tmp_path):
    """Disks that bear the old site and ever less of the new one."""
    assert pressed(small_handbook, tmp_path / "measured").returncode == 0
    size = sum(-(-len(data) // 4096) * 4 for data in contents(tmp_path / "measured").values())
    record = small_handbook / "copper.yaml"
    first = record.read_text(encoding="utf-8")
    for spare in (8, 200, 900):
        record.write_text(first, encoding="utf-8")
        disk = small_disk(size + spare)
        assert pressed(small_handbook, disk / "site").returncode == 0
        before = contents(disk / "site")
        record.write_text(first.replace("1.678(9)", "1.700(9)").replace("Copper", "Cuprum"), encoding="utf-8")
        run = pressed(small_handbook, disk / "site")
        assert run.returncode == 3, run.stdout
        assert run.stderr.splitlines()[-1].endswith("(no space left on device). Make room, then press again.")
        assert "Traceback" not in run.stderr
        assert contents(disk / "site") == before
        assert os.listdir(disk) == ["site"]
