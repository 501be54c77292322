"""Editions that only git remembers."""

from __future__ import annotations

import os
import subprocess
from pathlib import Path

import pytest
from quantities.small import COPPER, IMPRINT, handbook_of
from support.sites import contents

from sheetgen.errata import EditionError, errata, open_edition
from sheetgen.faults import MachineError

IDENTITY = {f"GIT_{who}_{what}": "a@example.org" for who in ("AUTHOR", "COMMITTER") for what in ("NAME", "EMAIL")}
IDENTITY |= {"GIT_CONFIG_GLOBAL": os.devnull, "GIT_CONFIG_SYSTEM": os.devnull}


def git(folder: Path, *words: str) -> None:
    subprocess.run(["git", "-C", str(folder), *words], check=True, capture_output=True, env=os.environ | IDENTITY)


@pytest.fixture
def repository(tmp_path) -> Path:
    """Two committed editions, and a work tree that is ahead of both."""
    top = tmp_path / "repository"
    top.mkdir()
    git(top, "init", "-q", "-b", "main")
    git(top, "commit", "-q", "--allow-empty", "-m", "Begin")
    for name, cell in (("1", "3.6149(3)"), ("2", "3.6200(3)")):
        handbook_of(top / "records", IMPRINT.replace('"1"', f'"{name}"'), copper=COPPER.replace("3.6149(3)", cell))
        git(top, "add", ".")
        git(top, "commit", "-q", "-m", f"Edition {name}")
        git(top, "tag", f"edition-{name}")
    handbook_of(top / "records", IMPRINT.replace('"1"', '"3"'), copper=COPPER.replace("3.6149(3)", "3.7000(3)"))
    return top


def test_revisions_are_compared_and_the_work_tree_is_left_alone(repository):
    before = contents(repository)
    found = errata(*(open_edition(name, repository / "records") for name in ("edition-1", "edition-2")))
    assert (found.old, found.new, found.materials[0].slug) == ("1", "2", "copper")
    [change] = found.materials[0].inputs
    assert (change.old["value"], change.new["value"]) == (3.6149, 3.62)
    assert {moved.how for moved in found.materials[0].moved} == {"derived"}
    assert contents(repository) == before


def test_a_revision_against_the_work_tree(repository):
    records = repository / "records"
    found = errata(open_edition("HEAD~1", records), open_edition(str(records), records))
    assert (found.old, found.new, found.materials[0].inputs[0].new["value"]) == ("1", "3", 3.7)


def test_a_folder_at_the_top_of_its_repository(tmp_path):
    handbook_of(tmp_path / "top", copper=COPPER)
    git(tmp_path / "top", "init", "-q", "-b", "main")
    git(tmp_path / "top", "add", ".")
    git(tmp_path / "top", "commit", "-q", "-m", "All")
    assert list(open_edition("HEAD", tmp_path / "top").materials) == ["copper"]


@pytest.mark.parametrize(
    "word, line",
    [
        ("edition-9", "'edition-9' is no file, no folder and no revision of records; `git log` names the revisions."),
        ("--all", "'--all' is no file, no folder and no revision of records; `git log` names the revisions."),
        ("HEAD~2", "There was no folder records at 'HEAD~2'."),
    ],
)
def test_words_that_are_no_revision(repository, monkeypatch, word, line):
    monkeypatch.chdir(repository)
    with pytest.raises(EditionError) as refused:
        open_edition(word, Path("records"))
    assert str(refused.value) == line


@pytest.mark.parametrize("target", ["/etc/passwd", "../../outside.yaml", "nowhere.yaml"])
def test_a_link_that_leads_out_is_refused(repository, target):
    (repository / "records" / "silver.yaml").symlink_to(target)
    git(repository, "add", ".")
    git(repository, "commit", "-q", "-m", "Link")
    with pytest.raises(EditionError) as refused:
        open_edition("HEAD", repository / "records")
    assert str(refused.value) == "'HEAD' holds silver.yaml, which leads out of the folder of records."


def test_a_link_inside_the_folder_is_what_it_leads_to(repository):
    (repository / "records" / "silver.yaml").symlink_to("copper.yaml")
    git(repository, "add", ".")
    git(repository, "commit", "-q", "-m", "Link")
    assert list(open_edition("HEAD", repository / "records").materials) == ["copper", "silver"]


def test_without_git(repository, monkeypatch):
    monkeypatch.setenv("PATH", str(repository))
    with pytest.raises(MachineError) as refused:
        open_edition("edition-1", repository / "records")
    assert str(refused.value) == "git is not installed, and only git can show an earlier revision; install it"
