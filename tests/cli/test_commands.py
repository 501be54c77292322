"""The commands as a person meets them: in a process of their own, whole messages, exit statuses."""

from __future__ import annotations

import json
import os
import pty
import signal
import subprocess
import sys
from pathlib import Path

import pytest
from support.sites import contents

from sheetgen import __version__
from sheetgen.cli import commands

COMMANDS = tuple(commands.commands)
# A folder of records in which the second line of one is at fault.
MISSPELT = "name: Copper\nformla: Cu\n"


def sheetgen(*words: object, folder: Path | None = None, **settings) -> subprocess.CompletedProcess:
    command = [sys.executable, "-m", "sheetgen", *map(str, words)]
    return subprocess.run(command, cwd=folder, capture_output=True, text=True, check=False, **settings)


def read_until(terminal: int, words: str) -> str:
    """What a process has written to its terminal, up to some words."""
    said = ""
    while words not in said:
        said += os.read(terminal, 4096).decode()
    return said


def ends(run: subprocess.CompletedProcess, status: int, stdout: str = "", stderr: str = "") -> None:
    assert (run.returncode, run.stdout, run.stderr) == (status, stdout, stderr)


@pytest.mark.parametrize("command", COMMANDS)
def test_help_starts_with_an_example_of_the_command(command):
    run = sheetgen(command, "--help")
    assert (run.returncode, run.stderr) == (0, "")
    assert run.stdout.startswith(f"$ sheetgen {command} ")


def test_help_of_all_names_every_command():
    run = sheetgen("--help")
    assert run.stdout.startswith("$ sheetgen press ")
    named = [line.split()[0] for line in run.stdout.splitlines() if line.startswith(COMMANDS)]
    assert named == sorted(COMMANDS)


def test_no_command_shows_the_help_and_fails():
    run = sheetgen()
    assert (run.returncode, run.stdout) == (2, "")
    assert run.stderr == sheetgen("--help").stdout.rstrip("\n") + "\n"


@pytest.mark.parametrize("command", COMMANDS)
def test_readme_shows_every_command(root, command):
    assert f"sheetgen {command}" in (root / "README.md").read_text(encoding="utf-8")


def test_help_is_there_at_once():
    """Below 0.1 s on a quiet machine; here it is held to loading nothing heavy."""
    loaded = "import sys, sheetgen.cli; print([m for m in HEAVY if m in sys.modules])"
    heavy = ["numpy", "scipy", "matplotlib", "jinja2", "pint", "yaml", "pybtex", "gemmi", "jsonschema"]
    run = subprocess.run([sys.executable, "-c", f"HEAVY = {heavy}; {loaded}"], capture_output=True, text=True)
    assert run.stdout == "[]\n"


def test_version_names_the_constants():
    ends(sheetgen("--version"), 0, f"sheetgen {__version__}, constants CODATA 2022\n")


@pytest.mark.parametrize(
    "words, line",
    [
        (["pres"], f"There is no command 'pres'; expected {', '.join(sorted(COMMANDS))}. Did you mean 'press'?"),
        (["press", "--intoo", "x"],
         "No such option '--intoo'. Did you mean '--into'? As in: sheetgen press materials --into site"),
        (["quote", "copper"], "Missing argument 'QUANTITY'. As in: sheetgen quote copper fermi_energy"),
        (["proof", "recordz"], "There is no folder recordz. Did you mean 'records'?"),
        (["proof", "records/copper.yaml"], "records/copper.yaml is a file; expected the folder that holds it."),
        (["quote", "coper", "fermi_energy", "--materials", "records"],
         "The handbook has no material 'coper'. Did you mean 'copper'?"),
        (["quote", "copper", "fermi_energie", "--materials", "records"],
         "The handbook has no quantity 'fermi_energie'. Did you mean 'fermi_energy'?"),
        (["press", "records", "--into", "records"],
         "{folder}/records holds files and no manifest.json of an earlier press, so it may be someone's work. "
         "Choose an empty or a new folder with --into."),
    ],
)  # fmt: skip
def test_wrong_words_end_with_status_2(small_handbook, words, line):
    folder = small_handbook.parent
    before = contents(folder)
    ends(sheetgen(*words, folder=folder), 2, "", f"sheetgen: {line.format(folder=folder)}\n")
    assert contents(folder) == before


def test_press_publishes_and_says_what_it_did(small_handbook):
    folder = small_handbook.parent
    run = sheetgen("press", "records", folder=folder)
    made = len(contents(folder / "site"))
    assert (run.returncode, run.stdout) == (0, f"site: 2 sheets; {made} files written, 0 unchanged, 0 removed.\n")
    again = sheetgen("press", "records", "--into", "site", "--json", folder=folder)
    said = json.loads(again.stdout)
    assert (again.returncode, said["sheets"], said["written"], said["unchanged"]) == (0, 2, [], made)


def test_press_reports_the_files_of_a_person(small_handbook):
    folder = small_handbook.parent
    sheetgen("press", "records", folder=folder)
    (folder / "site" / "CNAME").write_text("two-metals.example")
    run = sheetgen("press", "records", folder=folder)
    assert "site/CNAME: not made by a press; kept\n" in run.stderr


def test_faults_are_listed_and_the_old_site_stands(small_handbook):
    folder = small_handbook.parent
    sheetgen("press", "records", folder=folder)
    before = contents(folder / "site")
    (small_handbook / "copper.yaml").write_text(MISSPELT)
    run = sheetgen("press", "records", folder=folder)
    assert (run.returncode, run.stdout) == (1, "")
    *faults, closing = run.stderr.splitlines()
    assert faults[0].startswith("records/copper.yaml:")
    assert any(fault.startswith("records/copper.yaml:2:1: ") and "'formula'" in fault for fault in faults)
    assert closing == f"{len(faults)} fault{'s' * (len(faults) > 1)}. Nothing was published; site stands as it stood."
    assert contents(folder / "site") == before


@pytest.mark.parametrize("command", [["press"], ["proof"], ["quote", "copper", "fermi_energy", "--materials"]])
def test_faults_as_json_say_where(small_handbook, command):
    (small_handbook / "copper.yaml").write_text(MISSPELT)
    run = sheetgen(*command, "records", "--json", folder=small_handbook.parent)
    faults = json.loads(run.stdout)["faults"]
    assert run.returncode == 1
    assert {"file", "line", "column", "message"} == set(faults[0])
    assert ("records/copper.yaml", 2, 1) in [(fault["file"], fault["line"], fault["column"]) for fault in faults]
    assert run.stderr.count("\n") == len(faults) + 1


def test_proof_publishes_nothing(small_handbook):
    folder = small_handbook.parent
    before = contents(folder)
    run = sheetgen("proof", "records", folder=folder)
    assert run.returncode == 0
    assert run.stdout.startswith("records: 2 records in order, ")
    assert contents(folder) == before


def test_proof_as_json(small_handbook):
    said = json.loads(sheetgen("proof", "records", "--json", folder=small_handbook.parent).stdout)
    assert (said["sheets"], said["faults"]) == (2, [])


def test_proof_of_a_published_site(small_handbook):
    folder = small_handbook.parent
    sheetgen("press", "records", folder=folder)
    ends(sheetgen("proof", "--site", "site", folder=folder), 0, "site: every file is as it was published.\n")
    (folder / "site" / "index.html").write_text("improved")
    (folder / "site" / "sources.html").unlink()
    (folder / "site" / "CNAME").write_text("two-metals.example")
    ends(sheetgen("proof", "--site", "site", folder=folder), 1, "", (
        "site/CNAME: remark: was not made by a press.\n"
        "site/index.html: is not what was published. Press the handbook again.\n"
        "site/sources.html: is missing. Press the handbook again.\n"
        "2 faults.\n"
    ))  # fmt: skip


def test_proof_of_a_folder_that_was_never_published(small_handbook):
    run = sheetgen("proof", "--site", "records", folder=small_handbook.parent)
    assert (run.returncode, run.stdout) == (2, "")
    assert run.stderr.startswith("sheetgen: records holds files and no manifest.json")


def test_quote_as_json_is_the_entry_of_the_data_file(small_handbook):
    folder = small_handbook.parent
    sheetgen("press", "records", folder=folder)
    data = json.loads((folder / "site" / "data" / "materials" / "copper.json").read_text(encoding="utf-8"))
    run = sheetgen("quote", "Cu", "Fermi energy", "--materials", "records", "--json", folder=folder)
    quoted = json.loads(run.stdout)
    assert (quoted["material"], quoted["quantity"]) == ("copper", "fermi_energy")
    assert quoted["entries"] == [data["quantities"]["fermi_energy"]]


def test_quantity_that_lacks_an_input_ends_with_status_1(small_handbook):
    run = sheetgen("quote", "sodium", "mobility", "--materials", "records", folder=small_handbook.parent)
    assert (run.returncode, run.stdout) == (1, "")
    assert run.stderr.startswith("sheetgen: Sodium has no mobility: ")


def test_machine_that_refuses_ends_with_status_3(small_handbook):
    run = sheetgen("press", small_handbook, "--into", "/proc/site", folder=small_handbook.parent)
    assert (run.returncode, run.stdout) == (3, "")
    assert run.stderr.splitlines()[-1].startswith("sheetgen: /proc/.site.lock: ")
    assert "Traceback" not in run.stderr


def test_error_of_the_program_is_one_line_unless_asked(small_handbook):
    broken = (
        "import sys, sheetgen.handbook as h, sheetgen.cli\n"
        "h.Handbook.load = lambda folder: {}['missing']\n"
        "sys.exit(sheetgen.cli.run(sys.argv[1:]))\n"
    )
    command = [sys.executable, "-c", broken, "proof", str(small_handbook)]
    run = subprocess.run(command, capture_output=True, text=True, check=False)
    ends(run, 3, "", "sheetgen: the program itself is at fault (KeyError at <string>:2: 'missing'). "
         "Add --traceback to see how it came about, and report it.\n")  # fmt: skip
    run = subprocess.run([*command, "--traceback"], capture_output=True, text=True, check=False)
    assert run.stderr.startswith("Traceback")


def test_interrupt_ends_with_status_130(small_handbook):
    command = [sys.executable, "-m", "sheetgen", "press", str(small_handbook), "--into", "site"]
    leader, follower = pty.openpty()
    process = subprocess.Popen(command, cwd=small_handbook.parent, stderr=follower)
    os.close(follower)
    said = read_until(leader, "reading records")
    process.send_signal(signal.SIGINT)
    said = read_until(leader, "stands")
    assert process.wait(30) == 130
    assert "sheetgen: stopped; what was published before still stands" in said
    assert "Traceback" not in said
    os.close(leader)


def test_reader_that_has_seen_enough_is_no_error(small_handbook):
    command = f"{sys.executable} -m sheetgen quote copper fermi_energy --materials {small_handbook} | true"
    run = subprocess.run(["bash", "-c", f"{command}; exit ${{PIPESTATUS[0]}}"], capture_output=True, text=True)
    ends(run, 0)


def test_progress_only_on_a_terminal(small_handbook):
    leader, follower = pty.openpty()
    command = [sys.executable, "-m", "sheetgen", "press", str(small_handbook), "--into", "site"]
    subprocess.run(command, cwd=small_handbook.parent, stdout=subprocess.DEVNULL, stderr=follower, check=True)
    os.close(follower)
    shown = read_until(leader, "laying out pages")
    os.close(leader)
    assert "drawing figures 2 of 2" in shown
    run = sheetgen("press", small_handbook, "--into", "elsewhere", folder=small_handbook.parent)
    assert "drawing" not in run.stderr
