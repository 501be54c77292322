"""Whatever strangers send, proof ends with faults and their places, in a second and 200 megabytes."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import hostile.reading
import pytest
from filelock import FileLock
from hostile.bombs import BOMBS, FILES, HARMLESS, NAMES, YAML

TESTS = Path(__file__).parent.parent
SECONDS = 1.0
MEGABYTES = 200
# A machine of continuous integration may be several times slower than a desk; the memory is the same everywhere.
SLOWER = float(os.environ.get("SHEETGEN_SLOWER", "3"))

pytestmark = pytest.mark.xdist_group("hostile")


def lay(folder: Path, files: dict) -> Path:
    """Write the files of a bomb beside a sound imprint."""
    folder.mkdir()
    for name, content in {"handbook.yaml": "title: T\n", **files}.items():
        path = folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        if isinstance(content, Path):
            path.symlink_to(content)
        elif isinstance(content, int):
            with path.open("wb") as stream:
                stream.truncate(content)
        else:
            path.write_bytes(content if isinstance(content, bytes) else content.encode("utf-8"))
    return folder


@pytest.fixture(scope="module")
def outcomes(tmp_path_factory) -> dict[str, dict]:
    """What reading each bomb came to, by its name; measured once for all workers of a test run."""
    base = tmp_path_factory.getbasetemp()
    shared = base.parent if "PYTEST_XDIST_WORKER" in os.environ else base
    kept = shared / "bombs.json"
    with FileLock(shared / "bombs.lock"):
        if not kept.exists():
            kept.write_text(json.dumps(measured(tmp_path_factory.mktemp("bombs"))))
    return json.loads(kept.read_text())


def measured(ground: Path) -> dict[str, dict]:
    """Read each bomb in a process of its own."""
    folders = [lay(ground / str(number), files) for number, (files, _) in enumerate(BOMBS.values())]
    command = [sys.executable, hostile.reading.__file__, *folders]
    run = subprocess.run(command, capture_output=True, text=True, check=False, cwd=ground)
    assert run.returncode == 0, run.stderr
    assert not (ground / "ran").exists()
    found = [json.loads(line) for line in run.stdout.splitlines()]
    for outcome, folder in zip(found, folders, strict=True):
        outcome["faults"] = [fault.removeprefix(f"{folder}/") for fault in outcome.get("faults", [])]
    return dict(zip(BOMBS, found, strict=True))


@pytest.mark.parametrize("bomb", BOMBS)
def test_a_bomb_is_a_fault_with_its_place(outcomes, bomb):
    outcome, expected = outcomes[bomb], BOMBS[bomb][1]
    assert "error" not in outcome and "died" not in outcome, outcome
    if bomb in HARMLESS:
        assert outcome["faults"] == []
        return
    assert any(fault.startswith(expected) for fault in outcome["faults"]), outcome["faults"][:5]
    assert len(outcome["faults"]) <= 200
    assert all(len(fault) < 1500 for fault in outcome["faults"])


@pytest.mark.parametrize("bomb", BOMBS)
def test_a_bomb_takes_a_second_and_200_megabytes_at_most(outcomes, bomb):
    assert outcomes[bomb]["seconds"] <= SECONDS * SLOWER
    assert outcomes[bomb]["megabytes"] <= MEGABYTES


WHOLE = [*NAMES, "aliases that explode", "escapes of a terminal", "not UTF-8", "a key of a megabyte"]


@pytest.mark.parametrize("bomb", WHOLE)
def test_proof_itself_ends_with_a_list_of_faults(tmp_path, bomb):
    lay(tmp_path / "records", {**FILES, **NAMES, **YAML}[bomb][0])
    command = [sys.executable, "-m", "sheetgen", "proof", "records", "--json"]
    run = subprocess.run(command, cwd=tmp_path, capture_output=True, check=False)
    assert run.returncode == (0 if bomb in HARMLESS else 1), run.stderr
    assert b"Traceback" not in run.stderr and b"\x1b" not in run.stderr
    assert len(json.loads(run.stdout)["faults"]) == run.stderr.count(b"\n") - 1 or bomb in HARMLESS
