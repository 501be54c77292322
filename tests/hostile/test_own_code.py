"""Code of a folder runs by consent alone: where the imprint names it, and never for strangers' records."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path

import pytest

CODE = """\
from pathlib import Path
Path("ran").touch()
from sheetgen.quantities import Declarations
declarations = Declarations()

@declarations.quantity(symbol="x", unit="1", formula="2 r_s", source="ours", section="Electron gas at T = 0")
def twice(electron_sphere_radius):
    \"\"\"Twice the radius.\"\"\"
    return 2 * electron_sphere_radius
"""
TRAPS = ("quantities.py", "conftest.py", "sitecustomize.py", "numpy.py", "yaml.py", "sheetgen.py", "jinja2.py")


@pytest.fixture
def strangers(small_handbook: Path) -> Path:
    """A folder with code under every name that something might load, and templates, none of them named."""
    for name in TRAPS:
        (small_handbook / name).write_text('open("ran", "w")\n')
    for folder in (small_handbook / "templates", small_handbook.parent / "templates"):
        folder.mkdir()
        for page in ("base.html", "sheet.html", "index.html"):
            (folder / page).write_text("{{ ''.__class__.__mro__ }} not ours")
    return small_handbook


def sheetgen(folder: Path, *words: str) -> subprocess.CompletedProcess:
    """The installed command, which unlike `python -m` looks for no module in the working folder."""
    command = Path(sys.executable).with_name("sheetgen")
    return subprocess.run([command, *words], cwd=folder, capture_output=True, text=True, check=False)


@pytest.mark.parametrize("words", [["proof", "."], ["proof", ".", "--untrusted"], ["press", ".", "--into", "../site"]])
def test_code_that_nobody_named_is_not_run(strangers, words):
    run = sheetgen(strangers, *words)
    assert run.returncode == 0, run.stderr
    assert not (strangers / "ran").exists()
    for page in (strangers.parent / "site").rglob("*.html"):
        assert "not ours" not in page.read_text(encoding="utf-8")


def named(folder: Path, code: str = CODE) -> Path:
    (folder / "quantities.py").write_text(code)
    with (folder / "handbook.yaml").open("a") as imprint:
        imprint.write("own quantities: quantities.py\nthresholds: {agrees: 0.2}\n")
    return folder


def test_code_that_the_imprint_names_is_run(strangers):
    run = sheetgen(named(strangers), "proof", ".")
    assert run.returncode == 0, run.stderr
    assert (strangers / "ran").exists()


def test_untrusted_records_are_read_without_their_code(strangers):
    run = sheetgen(named(strangers), "proof", ".", "--untrusted", "--json")
    said = json.loads(run.stdout)
    assert (run.returncode, said["sheets"], said["faults"]) == (0, 2, [])
    assert not (strangers / "ran").exists()
    assert {
        "file": "quantities.py",
        "message": "own quantities are not trusted here: the file is not run, and what it declares is not derived.",
    } in [{key: remark[key] for key in ("file", "message")} for remark in said["remarks"]]


def test_untrusted_code_that_cannot_even_be_read_is_no_fault(strangers):
    run = sheetgen(named(strangers, "def broken(:"), "proof", ".", "--untrusted")
    assert run.returncode == 0, run.stderr
    assert sheetgen(strangers, "proof", ".").returncode == 1


def test_untrusted_records_are_held_to_everything_else(strangers):
    record = named(strangers) / "copper.yaml"
    record.write_text(record.read_text(encoding="utf-8").replace("lattice: fcc", "lattice: fccc"), encoding="utf-8")
    run = sheetgen(strangers, "proof", ".", "--untrusted")
    assert run.returncode == 1
    assert "copper.yaml:4:12: " in run.stderr


def test_untrusted_templates_are_not_even_kept(strangers):
    from sheetgen.handbook import Handbook

    with (strangers / "handbook.yaml").open("a") as imprint:
        imprint.write("templates: templates\n")
    assert Handbook.load(strangers).imprint.templates == strangers / "templates"
    assert Handbook.load_untrusted(strangers).imprint.templates is None


def test_bounds_of_own_assumptions_are_left_out_with_them(strangers):
    imprint = named(strangers) / "handbook.yaml"
    text = imprint.read_text(encoding="utf-8")
    imprint.write_text(text.replace("{agrees: 0.2}", "{agrees: 0.2, ours_alone: [1, 2]}"), encoding="utf-8")
    assert sheetgen(strangers, "proof", ".", "--untrusted").returncode == 0
    assert sheetgen(strangers, "proof", ".").returncode == 1
