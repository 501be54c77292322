"""Every shell block of docs/publishing.md is run, in order and in one folder; the commands of its YAML are tried."""

from __future__ import annotations

import os
import re
import shlex
import subprocess
import sys
from pathlib import Path

import pytest
import yaml
from support.folders import write_small_handbook
from support.sites import contents

from sheetgen import __version__

IDENTITY = {f"GIT_{who}_{what}": "a@example.org" for who in ("AUTHOR", "COMMITTER") for what in ("NAME", "EMAIL")}


def environment(folder: Path) -> dict[str, str]:
    """The variables of the page, our command first on the path, and git without anyone's settings."""
    places = {name: str(folder / name.lower()) for name in ("WEB", "SHARE")}
    path = f"{Path(sys.executable).parent}{os.pathsep}{os.environ['PATH']}"
    return os.environ | IDENTITY | places | {"PATH": path, "GIT_CONFIG_GLOBAL": os.devnull, "LC_ALL": "C.UTF-8"}


def run(block: str, folder: Path) -> subprocess.CompletedProcess:
    command = ["bash", "-euo", "pipefail", "-c", block]
    return subprocess.run(command, cwd=folder, env=environment(folder), capture_output=True, text=True, check=False)


@pytest.fixture(scope="module")
def page() -> str:
    return (Path(__file__).parent.parent / "docs" / "publishing.md").read_text(encoding="utf-8")


def blocks(page: str, language: str) -> list[str]:
    return re.findall(rf"^```{language}\n(.*?)^```$", page, re.MULTILINE | re.DOTALL)


@pytest.fixture(scope="module")
def followed(page, tmp_path_factory) -> Path:
    """A folder in which someone followed the page from top to bottom."""
    folder = tmp_path_factory.mktemp("followed")
    write_small_handbook(folder / "materials")
    for block in blocks(page, "sh"):
        done = run(block, folder)
        assert done.returncode == 0, f"{block}\n{done.stdout}\n{done.stderr}"
    return folder


def test_web_server_and_share_get_the_same_site(followed):
    web, share = (contents(followed / place / "handbook") for place in ("web", "share"))
    assert web == share and "index.html" in web


def test_every_link_of_a_page_is_relative(followed):
    for page in (followed / "share" / "handbook").rglob("*.html"):
        for address in re.findall(r'(?:href|src)="([^"#][^"]*)"', page.read_text(encoding="utf-8")):
            if not re.match(r"(https?|mailto):", address):
                assert not address.startswith("/"), f"{page}: {address}"
                assert (page.parent / address.split("#")[0]).resolve().is_file(), f"{page}: {address}"


def test_the_archive_is_the_same_for_anyone_on_any_day(page, followed, tmp_path):
    packing = next(block for block in blocks(page, "sh") if "zipfile -c" in block)
    write_small_handbook(tmp_path / "materials")
    again = run(f"umask 077; export TZ=Asia/Tokyo\n{packing}", tmp_path)
    assert again.returncode == 0, again.stderr
    assert (tmp_path / "handbook.zip").read_bytes() == (followed / "handbook.zip").read_bytes()


def test_the_hook_refuses_a_commit_of_faulty_records(followed):
    record = followed / "materials" / "sodium.yaml"
    before = record.read_text(encoding="utf-8")
    record.write_text("name: Sodium\nformla: Na\n", encoding="utf-8")
    refused = run("git add materials && git commit -q -m Faulty", followed)
    assert refused.returncode == 1
    assert "materials/sodium.yaml:2:1: " in refused.stderr
    record.write_text(before, encoding="utf-8")
    assert run("git add materials && git commit -q -m Mended", followed).returncode == 0


def test_the_second_edition_names_the_first(followed):
    text = (followed / "handbook" / "changes.html").read_text(encoding="utf-8")
    assert "From edition 1 to edition second" in text
    assert "<updated>2026-12-01T00:00:00Z</updated>" in (followed / "handbook" / "changes.atom").read_text()


def commands_in(node: object) -> list[str]:
    """Every command of ours in a document of continuous integration."""
    if isinstance(node, str):
        return [line for line in node.splitlines() if line.startswith("sheetgen ")]
    children = node.values() if isinstance(node, dict) else node if isinstance(node, list) else ()
    return [command for child in children for command in commands_in(child)]


def test_commands_of_continuous_integration_work(page, tmp_path):
    write_small_handbook(tmp_path / "materials")
    documents = [yaml.safe_load(block) for block in blocks(page, "yaml")]
    commands = [command for document in documents for command in commands_in(document)]
    assert len(documents) == 3 and len(set(commands)) == 2
    for command in dict.fromkeys(commands):
        assert run(command, tmp_path).returncode == 0
    assert (tmp_path / "public" / "index.html").is_file() and (tmp_path / "proof.sarif").is_file()


def test_versions_of_the_page_are_this_version(page):
    assert set(re.findall(r"@v([\d.]+)\"|rev: v([\d.]+)", page)) == {(__version__, ""), ("", __version__)}


@pytest.fixture(scope="module")
def hook() -> dict:
    file = Path(__file__).parent.parent / ".pre-commit-hooks.yaml"
    [hook] = yaml.safe_load(file.read_text(encoding="utf-8"))
    return hook


def test_the_hook_is_the_one_that_the_page_names(page, hook):
    configured = yaml.safe_load(blocks(page, "yaml")[2])["repos"][0]["hooks"][0]
    assert configured["id"] == hook["id"]
    assert set(hook) <= {"id", "name", "description", "entry", "language", "files", "pass_filenames", "require_serial"}


@pytest.mark.parametrize("name, concerned", [("copper.yaml", True), ("sources.bib", True), ("notes.md", False)])
def test_the_hook_runs_for_files_of_a_handbook(hook, name, concerned):
    assert bool(re.search(hook["files"], f"materials/{name}")) == concerned


def test_the_hook_runs_as_it_stands(page, hook, tmp_path):
    write_small_handbook(tmp_path / "materials")
    arguments = yaml.safe_load(blocks(page, "yaml")[2])["repos"][0]["hooks"][0]["args"]
    assert run(shlex.join([*shlex.split(hook["entry"]), *arguments]), tmp_path).returncode == 0
    (tmp_path / "materials" / "copper.yaml").write_text("name: Copper\nformla: Cu\n", encoding="utf-8")
    assert run(shlex.join([*shlex.split(hook["entry"]), *arguments]), tmp_path).returncode == 1
