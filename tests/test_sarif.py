"""SARIF logs against the standard, as a model generated from its schema, and against what hosts need of them."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path

import pytest
from pydantic_sarif.model import StaticAnalysisResultsFormatSarifVersion210JsonSchema as Standard

from sheetgen.faults import Fault, Place
from sheetgen.sarif import sarif_log

FAULTS = [
    Fault(Place("materials/copper.yaml", 2, 1), "unknown key 'formla' µΩ"),
    Fault(Place("materials/a b#ä.yaml", 3), "no column"),
    Fault(Place("materials"), "no line", "remark"),
    Fault(Place("/elsewhere/handbook.yaml", 1, 1), "outside"),
]


def results(faults, root="/work/group") -> list[dict]:
    log = sarif_log(faults, Path(root))
    Standard.model_validate(json.loads(json.dumps(log)))
    return log["runs"][0]["results"]


def test_the_model_is_strict():
    """A word that the standard does not know, or a level that is none, is refused: the other tests can fail."""
    log = sarif_log(FAULTS, Path("/work/group"))
    for spoilt in ({"levell": "error"}, {"level": "bad"}, {"message": {}, "locations": 3}):
        broken = json.loads(json.dumps(log))
        broken["runs"][0]["results"][0] |= spoilt
        with pytest.raises(ValueError):
            Standard.model_validate(broken)


def test_places_are_named_as_a_host_needs_them():
    found = {one["message"]["text"]: one["locations"][0]["physicalLocation"] for one in results(FAULTS)}
    assert found == {
        "unknown key 'formla' µΩ": {
            "artifactLocation": {"uri": "materials/copper.yaml"},
            "region": {"startLine": 2, "startColumn": 1},
        },
        "no column": {"artifactLocation": {"uri": "materials/a%20b%23%C3%A4.yaml"}, "region": {"startLine": 3}},
        "no line": {"artifactLocation": {"uri": "materials"}},
        "outside": {
            "artifactLocation": {"uri": "file:///elsewhere/handbook.yaml"},
            "region": {"startLine": 1, "startColumn": 1},
        },
    }


def test_levels_and_rules():
    rules = sarif_log(FAULTS, Path("/"))["runs"][0]["tool"]["driver"]["rules"]
    for one in results(FAULTS):
        assert rules[one["ruleIndex"]]["id"] == one["ruleId"]
        assert one["level"] == {"fault": "error", "remark": "note"}[one["ruleId"]]


def test_a_complaint_keeps_its_fingerprint_when_lines_move():
    here, moved = (Fault(Place("a.yaml", line, 3), f"0.{line} is above 1") for line in (2, 40))
    other = Fault(Place("b.yaml", 2, 3), "0.2 is above 1")
    prints = [results([fault])[0]["partialFingerprints"]["sheetgen/v1"] for fault in (here, moved, other)]
    assert prints[0] == prints[1] != prints[2]


def test_nothing_found_is_a_log_without_results():
    assert results([]) == []


def proof(folder: Path, *words: str) -> subprocess.CompletedProcess:
    command = [sys.executable, "-m", "sheetgen", "proof", *words]
    return subprocess.run(command, cwd=folder, capture_output=True, text=True, check=False)


def test_proof_writes_what_it_found(small_handbook):
    folder = small_handbook.parent
    assert proof(folder, "records", "--sarif", "good.sarif").returncode == 0
    (small_handbook / "copper.yaml").write_text("name: Copper\nformla: Cu\n", encoding="utf-8")
    assert proof(folder, "records", "--sarif", "bad.sarif").returncode == 1
    for name in ("good.sarif", "bad.sarif"):
        Standard.model_validate_json((folder / name).read_bytes())
    said = json.loads((folder / "bad.sarif").read_text(encoding="utf-8"))["runs"][0]["results"]
    places = [one["locations"][0]["physicalLocation"] for one in said]
    assert {"artifactLocation": {"uri": "records/copper.yaml"}, "region": {"startLine": 2, "startColumn": 1}} in places


def test_a_file_that_cannot_be_written_is_an_error_of_the_machine(small_handbook):
    run = proof(small_handbook.parent, "records", "--sarif", "no/such/folder.sarif")
    assert (run.returncode, run.stdout) == (3, "")
    assert run.stderr.splitlines()[-1] == "sheetgen: no/such/folder.sarif: no such file or directory"
