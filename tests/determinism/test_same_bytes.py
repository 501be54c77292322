"""The same records give the same bytes, whatever surrounds the press: each surrounding in a process of its own."""

from __future__ import annotations

import hashlib
import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

import pytest
from support.folders import write_small_handbook
from support.sites import contents, put

PRESS = """\
import sys, os, pathlib
from sheetgen.press import press
press(pathlib.Path(sys.argv[1]), pathlib.Path(sys.argv[2]))
"""
# A style sheet of the drawing library, as some keep one beside their work: it must not reach the figures.
DRAWING_STYLE = "lines.linewidth: 9\nfont.size: 40\naxes.facecolor: red\nsvg.hashsalt: x\nsvg.fonttype: none\n"
BEFORE = {
    "plain": "",
    "umask": "import os; os.umask(0o077)",
    "locale": "import locale; locale.setlocale(locale.LC_ALL, 'C')",
    "file order": (
        "import os, pathlib; walk, scan = pathlib.Path.iterdir, os.scandir\n"
        "pathlib.Path.iterdir = lambda folder: iter(sorted(walk(folder), reverse=True))\n"
        "os.listdir = (lambda old: lambda *where: sorted(old(*where), reverse=True))(os.listdir)"
    ),
    "clock": (
        "import time, datetime; time.time = lambda: 4e9; time.time_ns = lambda: int(4e18)\n"
        "class Later(datetime.datetime):\n"
        "    now = classmethod(lambda cls, tz=None: cls.fromtimestamp(4e9, tz))\n"
        "    utcnow = classmethod(lambda cls: cls(2096, 10, 2)); today = utcnow\n"
        "class Day(datetime.date):\n    today = classmethod(lambda cls: cls(2096, 10, 2))\n"
        "datetime.datetime, datetime.date = Later, Day"
    ),
    "random numbers": "import random, numpy; random.seed(7); numpy.random.seed(7)",
    "stack and print": "import sys, numpy; sys.setrecursionlimit(5000); numpy.set_printoptions(precision=2)",
    "other libraries first": "import matplotlib; matplotlib.rcParams['font.size'] = 40; import pint, sympy",
}
AROUND = {
    "hash seed 0": {"PYTHONHASHSEED": "0"},
    "hash seed 4242": {"PYTHONHASHSEED": "4242"},
    "time zone": {"TZ": "Pacific/Kiritimati"},
    "locale C": {"LC_ALL": "C", "PYTHONUTF8": "0", "PYTHONCOERCECLOCALE": "0"},
    "locale UTF-8": {"LC_ALL": "C.UTF-8"},
    "no locale": {"LANG": "xx_XX.nothing"},
    "home": {"HOME": "/nonexistent", "XDG_CACHE_HOME": "/nonexistent", "XDG_CONFIG_HOME": "/nonexistent"},
    "threads": {"OMP_NUM_THREADS": "7", "OPENBLAS_NUM_THREADS": "7"},
    "optimised": {"PYTHONOPTIMIZE": "1"},
    "a folder of caches elsewhere": {"PYTHONPYCACHEPREFIX": "/nonexistent"},
    "back end of drawings": {"MPLBACKEND": "pdf"},
}


def pressed(ground: Path, code: str = "", python: str = sys.executable, **environment: str) -> dict[str, bytes]:
    """The site of the small handbook, pressed in a process whose surroundings are given."""
    if not (ground / "records").exists():
        write_small_handbook(ground / "records")
    command = [python, "-c", f"{code}\n{PRESS}", "records", "site"]
    run = subprocess.run(command, cwd=ground, env={**os.environ, **environment}, capture_output=True, check=False)
    assert run.returncode == 0, run.stderr.decode()
    return contents(ground / "site")


@pytest.fixture(scope="module")
def usual(tmp_path_factory) -> dict[str, bytes]:
    return pressed(tmp_path_factory.mktemp("usual"))


def differing(one: dict[str, bytes], other: dict[str, bytes]) -> list[str]:
    return [path for path in sorted({*one, *other}) if one.get(path) != other.get(path)]


def test_nothing_around_the_process_matters(tmp_path, usual):
    """Everything at once; each alone, which takes minutes, with SHEETGEN_EACH=1."""
    around = {name: value for variables in AROUND.values() for name, value in variables.items()}
    assert differing(usual, pressed(tmp_path, "\n".join(BEFORE.values()), **around)) == []


if "SHEETGEN_EACH" in os.environ:  # each surrounding alone takes minutes; the test above tries all at once

    @pytest.mark.parametrize("before", BEFORE)
    def test_what_ran_before_does_not_matter(tmp_path, usual, before):
        assert differing(usual, pressed(tmp_path, BEFORE[before])) == []

    @pytest.mark.parametrize("around", AROUND)
    def test_what_surrounds_the_process_does_not_matter(tmp_path, usual, around):
        assert differing(usual, pressed(tmp_path, **AROUND[around])) == []


def test_files_beside_the_work_and_their_age_do_not_matter(tmp_path, usual):
    for path in write_small_handbook(tmp_path / "records").iterdir():
        os.utime(path, (0, 0))
        path.chmod(0o400)
    (tmp_path / "matplotlibrc").write_text(DRAWING_STYLE)
    home = tmp_path / "home" / ".config" / "matplotlib"
    home.mkdir(parents=True)
    (home / "matplotlibrc").write_text(DRAWING_STYLE)
    given = {"HOME": str(tmp_path / "home"), "MATPLOTLIBRC": str(tmp_path / "matplotlibrc")}
    assert differing(usual, pressed(tmp_path, **given)) == []


def test_the_date_of_the_source_dates_the_feed_and_nothing_else(tmp_path, usual):
    """SOURCE_DATE_EPOCH, by the specification of reproducible-builds.org, where the imprint gives no date."""
    dated = pressed(tmp_path, SOURCE_DATE_EPOCH="1000000000")
    assert set(differing(usual, dated)) <= {"changes.atom", "changes.html", "manifest.json"}
    assert b"2001-09-09" in dated["changes.atom"]
    assert differing(dated, pressed(tmp_path, SOURCE_DATE_EPOCH="1000000000")) == []


def test_a_site_that_grew_is_the_same_as_one_pressed_at_once(tmp_path, usual):
    records = write_small_handbook(tmp_path / "records")
    shutil.move(records / "sodium.yaml", tmp_path / "sodium.yaml")
    pressed(tmp_path)
    shutil.move(tmp_path / "sodium.yaml", records / "sodium.yaml")
    assert differing(usual, pressed(tmp_path)) == []


if "SHEETGEN_PYTHONS" in os.environ:  # a folder of environments `3.12`, `3.13` …, each with sheetgen installed

    @pytest.mark.parametrize("version", ["3.12", "3.13"])
    def test_other_versions_of_python_give_the_same_bytes(tmp_path, usual, version):
        python = Path(os.environ["SHEETGEN_PYTHONS"]) / version / "bin" / "python"
        assert differing(usual, pressed(tmp_path, python=str(python))) == []


def test_the_manifest_holds_the_hash_of_every_file_and_every_input(tmp_path, usual):
    files = dict(usual)
    manifest = json.loads(files.pop("manifest.json"))
    hashed = lambda found: {path: hashlib.sha256(data).hexdigest() for path, data in found.items()}  # noqa: E731
    assert manifest["files"] == hashed(files)
    assert manifest["inputs"] == hashed(contents(write_small_handbook(tmp_path / "records")))


def test_proof_of_a_site_sees_a_single_bit(tmp_path, usual):
    files = usual
    put(tmp_path / "site", files)
    proof = [sys.executable, "-m", "sheetgen", "proof", "--site", "site"]
    for path in sorted(files)[:: max(len(files) // 3, 1)]:
        if path == "manifest.json":
            continue
        target = tmp_path / "site" / path
        target.write_bytes(bytes([files[path][0] ^ 1]) + files[path][1:])
        run = subprocess.run(proof, cwd=tmp_path, capture_output=True, text=True, check=False)
        assert (run.returncode, f"site/{path}: is not what was published" in run.stderr) == (1, True)
        target.write_bytes(files[path])
    run = subprocess.run(proof, cwd=tmp_path, capture_output=True, text=True, check=False)
    assert run.returncode == 0, run.stderr
