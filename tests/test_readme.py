"""What the README shows is what the commands print."""

from __future__ import annotations

import re
import shlex
import subprocess
import sys

import pytest

from sheetgen.cli import run

SHOWN = re.compile(r"^\$ (sheetgen .+)\n((?:(?!\$ |```).*\n)*)", re.MULTILINE)


def shown(root) -> dict[str, str]:
    """Each command of the README and the output that stands under it."""
    return dict(SHOWN.findall((root / "README.md").read_text(encoding="utf-8")))


def test_readme_shows_commands(root):
    assert len(shown(root)) >= 3


def test_quotes_of_the_readme_are_real(root, monkeypatch, capsys):
    monkeypatch.chdir(root)
    quotes = {command: output for command, output in shown(root).items() if command.startswith("sheetgen quote")}
    assert quotes
    for command, output in quotes.items():
        assert run(shlex.split(command)[1:]) == 0
        assert capsys.readouterr().out == output


@pytest.mark.parametrize("command", ["press", "proof"])
def test_reports_of_the_readme_are_real(root, pressed_site, command):
    """The site goes elsewhere here, and the counts of files may grow: everything else is as shown."""
    (line, output), = ((line, output) for line, output in shown(root).items() if line.startswith(f"sheetgen {command}"))
    words = [sys.executable, "-m", *shlex.split(line.replace("--into site", f"--into {pressed_site}"))]
    said = subprocess.run(words, cwd=root, capture_output=True, text=True, check=True).stdout
    assert _shape(said.replace(str(pressed_site), "site")) == _shape(output)


def _shape(report: str) -> str:
    """The report with its counts of files and remarks left out."""
    return re.sub(r"\d+ (file written|unchanged|removed|remark)s?", r"N \1", report.replace("files", "file"))
