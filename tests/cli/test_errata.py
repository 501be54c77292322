"""`sheetgen errata` as a person meets it."""

from __future__ import annotations

import json
import subprocess
import sys

import pytest
from support.folders import FILES, write_small_handbook


def sheetgen(*words: object, folder) -> subprocess.CompletedProcess:
    command = [sys.executable, "-m", "sheetgen", *map(str, words)]
    return subprocess.run(command, cwd=folder, capture_output=True, text=True, check=False)


@pytest.fixture
def editions(tmp_path):
    """A folder with the editions `old` and `new`; copper's lattice constant differs, and sodium has gone."""
    write_small_handbook(tmp_path / "old")
    write_small_handbook(tmp_path / "new")
    (tmp_path / "new" / "sodium.yaml").unlink()
    (tmp_path / "new" / "handbook.yaml").write_text(FILES["handbook.yaml"].replace('"1"', '"2"'), encoding="utf-8")
    copper = FILES["copper.yaml"].replace("3.6149(3)", "3.6155(3)")
    (tmp_path / "new" / "copper.yaml").write_text(copper, encoding="utf-8")
    return tmp_path


def test_errata_on_a_terminal(editions):
    run = sheetgen("errata", "old", "new", folder=editions)
    assert (run.returncode, run.stderr) == (0, "")
    lines = run.stdout.replace("\u202f", " ").splitlines()
    assert lines[:5] == [
        "Two Metals: edition 1 → 2",
        "  withdrawn  Sodium (sodium)",
        "",
        "Copper (copper)",
        "  input      structure.a: 3.6149(3) Å → 3.6155(3) Å",
    ]
    # 2 × 0.0006 Å / 3.6149 Å, in parts and in u(E_F)/E_F = 2 × 0.0003 Å / 3.6149 Å
    assert any(line.startswith("  number     fermi_energy: 7.0") and line.endswith(
        " (−0.033 %, 2 u); because of structure.a") for line in lines)  # fmt: skip
    assert lines[-1].endswith(" by more than the uncertainty of edition 1.")


def test_errata_as_json(editions):
    run = sheetgen("errata", "old", "new", "--json", folder=editions)
    said = json.loads(run.stdout)
    assert (said["old"], said["new"], said["withdrawn_materials"]) == ("1", "2", {"sodium": "Sodium"})
    [copper] = said["materials"]
    moved = {number["quantity"]: number for number in copper["numbers"]}["fermi_energy"]
    assert moved["because"] == [
        {"cause": "structure.a", "change": pytest.approx(moved["change"]), "share": pytest.approx(1)}
    ]
    assert (moved["how"], moved["beyond"]) == ("derived", "uncertainty")


def test_errata_of_what_is_no_edition(editions):
    run = sheetgen("errata", "old", "newer.json", folder=editions)
    assert (run.returncode, run.stdout, run.stderr) == (2, "", "sheetgen: There is no file newer.json.\n")


def test_errata_of_faulty_records(editions):
    (editions / "new" / "copper.yaml").write_text("name: Copper\nformla: Cu\n")
    run = sheetgen("errata", "old", "new", folder=editions)
    assert (run.returncode, run.stdout) == (1, "")
    assert "new/copper.yaml:2:1: " in run.stderr and "Traceback" not in run.stderr
