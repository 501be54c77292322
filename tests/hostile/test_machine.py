"""What the machine refuses ends with one clear line and exit status 3, and an interrupt with 130: never a traceback."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import time

import pytest
from support.sites import contents
from support.tools import required_tool

RUN = "import sys; from sheetgen.cli import run; sys.exit(run(sys.argv[1:]))"


def sheetgen(*words: object, before: str = "", **settings) -> subprocess.CompletedProcess:
    command = [sys.executable, "-c", f"{before}\n{RUN}", *map(str, words)]
    return subprocess.run(command, capture_output=True, text=True, check=False, **settings)


def one_line(run: subprocess.CompletedProcess, status: int = 3) -> str:
    """The line on stderr; anything more is a fault of ours."""
    assert run.returncode == status, run.stderr
    assert run.stdout == ""
    lines = run.stderr.splitlines()
    assert len(lines) == 1 and lines[0].startswith("sheetgen: "), run.stderr
    return lines[0]


MISSING = """
import sys
class Missing:
    def find_spec(self, name, path=None, target=None):
        if name.partition(".")[0] == "{0}":
            raise ModuleNotFoundError(f"No module named {{name!r}}", name=name)
sys.meta_path.insert(0, Missing())
"""


@pytest.mark.parametrize("library", ["numpy", "yaml", "scipy", "matplotlib", "jinja2", "markdown", "nh3"])
def test_a_missing_library_is_named(small_handbook, tmp_path, library):
    with (small_handbook / "copper.yaml").open("a") as record:
        record.write("notes: Some *notes*.\n")
    run = sheetgen("press", small_handbook, "--into", tmp_path / "site", before=MISSING.format(library))
    assert f"the library '{library}' is not installed" in one_line(run)
    assert not (tmp_path / "site").exists()


NO_FONTS = """
import os, pathlib, sys
sys.addaudithook(lambda event, details: refuse(details[0]) if event == "open" else None)
def refuse(path):
    if str(path).endswith((".ttf", ".otf", ".afm", ".woff2")):
        raise FileNotFoundError(2, "No such file or directory", str(path))
"""


def test_missing_fonts_are_told(small_handbook, tmp_path):
    run = sheetgen("press", small_handbook, "--into", tmp_path / "site", before=NO_FONTS)
    assert "no such file or directory" in one_line(run)
    assert not (tmp_path / "site").exists()


@pytest.mark.parametrize(
    "failure, words",
    [
        ("OSError(28, 'No space left on device', '/x')", "no space left on device"),
        ("PermissionError(13, 'Permission denied', '/x')", "permission denied"),
        ("OSError(24, 'Too many open files', '/x')", "too many open files"),
        ("MemoryError()", "the memory of this machine does not suffice"),
        ("RecursionError('deep')", "the program itself is at fault"),
    ],
)
def test_a_failure_in_the_midst_is_one_line(small_handbook, tmp_path, failure, words):
    before = f"import sheetgen.pages as p\ndef fail(*_, **__):\n    raise {failure}\n    yield\np.lay_out = fail"
    run = sheetgen("press", small_handbook, "--into", tmp_path / "site", before=before)
    assert words in one_line(run)
    assert not (tmp_path / "site").exists()
    shown = sheetgen("press", small_handbook, "--into", tmp_path / "site", "--traceback", before=before)
    assert (shown.returncode, shown.stderr.startswith("Traceback")) == (3, True)


def bound_by_rights(*words: object) -> subprocess.CompletedProcess:
    """The command as a person runs it whom the rights of files bind; root lays down its power over them."""
    command = [sys.executable, "-c", RUN, *map(str, words)]
    if os.geteuid() == 0:
        command = [required_tool("setpriv"), "--bounding-set", "-dac_override,-dac_read_search", "--", *command]
    return subprocess.run(command, capture_output=True, text=True, check=False)


def test_a_folder_that_may_not_be_written(small_handbook, tmp_path):
    ground = tmp_path / "theirs"
    ground.mkdir(mode=0o555)
    run = bound_by_rights("press", small_handbook, "--into", ground / "site")
    assert "permission denied. Ask for access to it, or choose another folder." in one_line(run)
    assert contents(ground) == {}


def test_a_site_that_may_not_be_written_stands(small_handbook, tmp_path):
    site = tmp_path / "site"
    assert sheetgen("press", small_handbook, "--into", site).returncode == 0
    before = contents(tmp_path)
    (small_handbook / "sodium.yaml").unlink()
    before.pop("records/sodium.yaml")
    tmp_path.chmod(0o555)
    try:
        assert "permission denied" in one_line(bound_by_rights("press", small_handbook, "--into", site))
    finally:
        tmp_path.chmod(0o755)
    assert contents(tmp_path) == before


def test_a_record_that_may_not_be_read(small_handbook):
    (small_handbook / "copper.yaml").chmod(0o000)
    assert "copper.yaml: permission denied" in one_line(bound_by_rights("proof", small_handbook)).lower()


def test_a_python_without_docstrings_is_refused(small_handbook):
    command = [sys.executable, "-OO", "-m", "sheetgen", "proof", str(small_handbook)]
    assert "-OO" in one_line(subprocess.run(command, capture_output=True, text=True, check=False))


LOSE = """
import signal, sys, weakref
import sheetgen.cli as cli
from sheetgen.__main__ import main
class Thing: pass
standing = cli._standing
def interrupted(folder):
    thing = Thing()
    watch = weakref.ref(thing, lambda _: signal.raise_signal(signal.SIGINT))
    del thing
    return standing(folder)
cli._standing = interrupted
main()
"""


def test_an_interrupt_that_falls_into_a_callback_is_not_lost(small_handbook):
    """Python prints and forgets what is raised in a callback of the interpreter itself."""
    command = [sys.executable, "-c", LOSE, "press", str(small_handbook), "--into", str(small_handbook / "site")]
    run = subprocess.run(command, capture_output=True, text=True, check=False)
    assert (run.returncode, run.stderr.strip()) == (130, "sheetgen: stopped; what was published before still stands")


# The worker of a test run may ignore interrupts, and its children with it.
HEARING = """
import signal
signal.signal(signal.SIGINT, signal.default_int_handler)
from sheetgen.__main__ import main
main()
"""


def test_interrupts_at_any_moment_end_with_status_130(small_handbook, tmp_path):
    """From the first import to the last file: whatever stood stays whole, and one line says so."""
    site = tmp_path / "site"
    command = [sys.executable, "-c", HEARING, "press", str(small_handbook), "--into", str(site)]
    began = time.monotonic()
    subprocess.run(command, check=True, capture_output=True)
    life, before = time.monotonic() - began, contents(site)
    record = small_handbook / "copper.yaml"
    record.write_text(record.read_text(encoding="utf-8").replace("1.678(9)", "1.700(9)"), encoding="utf-8")
    statuses = []
    for moment in range(7):
        process = subprocess.Popen(command, stderr=subprocess.PIPE, stdout=subprocess.PIPE, text=True)
        time.sleep(life * (0.05 + 0.13 * moment))
        process.send_signal(signal.SIGINT)
        said = process.communicate(timeout=60)[1]
        statuses.append(process.returncode)
        if process.returncode == 0:
            assert said == ""
            break
        if "sheetgen" not in said:
            continue  # Python itself had not come up yet, and no line of ours had run
        assert "Traceback" not in said, said
        assert process.returncode == 130, said
        assert said.strip().startswith("sheetgen: stopped") and said.strip().count("\n") == 0, said
        assert contents(site) == before
    assert 130 in statuses
