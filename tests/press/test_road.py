"""The whole road, from records to a published site."""

from __future__ import annotations

import hashlib
import json
import os
import shutil
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest
from support.sites import contents

from sheetgen.press import deviations, press

SOME = ("aluminium", "copper", "gallium-arsenide-n", "gallium-arsenide-quantum-well", "lead", "sodium")
PRESS = "import sys; from sheetgen.press import press; press(__import__('pathlib').Path(sys.argv[1]), sys.argv[2])"


@pytest.fixture(scope="module")
def some_records(root, tmp_path_factory) -> Path:
    """A handbook of a few real records of every kind."""
    folder = tmp_path_factory.mktemp("handbook") / "materials"
    folder.mkdir()
    for path in (root / "materials").iterdir():
        if path.name == "sources.bib" or path.stem in {*SOME, "handbook"}:
            shutil.copy(path, folder)
    return folder


def pressed(folder: Path | str, into: Path, workplace: Path, **environment: str) -> dict[str, bytes]:
    """Press in a process of its own and return the site."""
    command = [sys.executable, "-c", PRESS, str(folder), str(into)]
    subprocess.run(command, cwd=workplace, env={**os.environ, **environment}, check=True, capture_output=True)
    return contents(into)


def test_same_records_give_the_same_bytes(some_records, tmp_path):
    """Whatever the working folder, hash seed, time zone, locale, clock, or age of the files."""
    one = pressed(some_records, tmp_path / "one", tmp_path, PYTHONHASHSEED="1", TZ="UTC", LC_ALL="C.UTF-8")
    elsewhere = tmp_path / "elsewhere"
    shutil.copytree(some_records, elsewhere / "records")
    for path in sorted((elsewhere / "records").iterdir(), reverse=True):
        os.utime(path, (0, 0))
    surroundings = {"PYTHONHASHSEED": "77", "TZ": "Pacific/Kiritimati", "LC_ALL": "C", "PYTHONUTF8": "0"}
    two = pressed("records", tmp_path / "two", elsewhere, **surroundings)
    assert sorted(one) == sorted(two)
    assert [path for path in one if one[path] != two[path]] == []


def test_pressing_again_changes_nothing(some_records, tmp_path):
    press(some_records, tmp_path / "site")
    report = press(some_records, tmp_path / "site").report
    assert (report.written, report.removed) == ((), ())


def test_manifest_lists_every_file_and_every_input(some_records, tmp_path):
    press(some_records, tmp_path / "site")
    files = contents(tmp_path / "site")
    manifest = json.loads(files.pop("manifest.json"))
    assert manifest["files"] == {path: hashlib.sha256(data).hexdigest() for path, data in files.items()}
    inputs = contents(some_records)
    assert manifest["inputs"] == {path: hashlib.sha256(data).hexdigest() for path, data in inputs.items()}


def test_every_page_and_file_of_the_contract_is_there(some_records, tmp_path):
    press(some_records, tmp_path / "site")
    files = contents(tmp_path / "site")
    general = {"index.html", "methods.html", "sources.html", "data/handbook.json", "data/handbook.csv"}
    assert general | {"data/record.schema.json", "manifest.json"} <= set(files)
    for slug in SOME:
        assert {f"materials/{slug}.html", f"data/materials/{slug}.json"} <= set(files)
        for figure in json.loads(files[f"data/materials/{slug}.json"])["figures"]:
            assert {figure["svg"], figure["csv"]} <= set(files)


def test_progress_names_its_steps(small_handbook, tmp_path):
    steps = []
    press(small_handbook, tmp_path / "site", lambda step, done, total: steps.append((step, done, total)))
    assert steps[0] == ("reading records", 0, 0)
    assert ("drawing figures", 2, 2) in steps
    assert steps[-1][0] == "laying out pages"


FORBID = """
import sys
def forbid(event, details):
    if event.startswith("socket.") or event == "urllib.Request":
        raise RuntimeError(f"a press asked for the network: {event} {details}")
sys.addaudithook(forbid)
"""


def test_press_asks_for_no_network(small_handbook, tmp_path):
    command = [sys.executable, "-c", FORBID + PRESS, str(small_handbook), str(tmp_path / "site")]
    run = subprocess.run(command, capture_output=True, text=True, check=False)
    assert run.stderr == ""
    assert (tmp_path / "site" / "index.html").is_file()


def test_sockets_are_really_forbidden():
    command = [sys.executable, "-c", FORBID + "import socket; socket.socket()"]
    run = subprocess.run(command, capture_output=True, text=True, check=False)
    assert "a press asked for the network: socket.__new__" in run.stderr


def test_real_press_killed_at_any_time_leaves_the_old_site_or_the_new(small_handbook, tmp_path):
    """Killed from outside, at moments spread over its whole life from the start of Python to its end."""
    site = tmp_path / "site"
    press(small_handbook, site)
    old = contents(site)
    record = small_handbook / "copper.yaml"
    record.write_text(record.read_text(encoding="utf-8").replace("1.678(9)", "1.700(9)"), encoding="utf-8")
    command = [sys.executable, "-c", PRESS, str(small_handbook), str(tmp_path / "measured")]
    started = time.monotonic()
    subprocess.run(command, check=True, capture_output=True)
    life, new = time.monotonic() - started, contents(tmp_path / "measured")
    for moment in range(12):
        process = subprocess.Popen([*command[:-1], str(site)], stderr=subprocess.PIPE)
        time.sleep(life * (0.45 + 0.05 * moment))
        process.send_signal(signal.SIGKILL)
        process.communicate()
        assert deviations(site) == []
        assert contents(site) in (old, new)
    press(small_handbook, site)
    assert contents(site) == new
    assert sorted(path.name for path in tmp_path.iterdir()) == ["measured", "records", "site"]


def test_manifest_lists_what_the_imprint_names_besides_records(small_handbook, tmp_path):
    (small_handbook / "pages").mkdir()
    (small_handbook / "pages" / "clean-room.md").write_text("# Clean room\n\nWear a coat.\n")
    (small_handbook / "templates").mkdir()
    (small_handbook / "templates" / "about.html").write_text('{% extends "original/about.html" %}')
    imprint = small_handbook / "handbook.yaml"
    imprint.write_text(imprint.read_text() + "pages: pages\ntemplates: templates\n")
    press(small_handbook, tmp_path / "site")
    listed = json.loads((tmp_path / "site" / "manifest.json").read_text())["inputs"]
    assert {"pages/clean-room.md", "templates/about.html"} <= listed.keys()
