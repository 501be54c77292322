"""The files around the program agree with it."""

from __future__ import annotations

import re
import tomllib
from importlib.metadata import version

import pytest
import yaml

from sheetgen import __version__
from sheetgen.sheet import CONSTANTS


@pytest.fixture(scope="module")
def project(root):
    return tomllib.loads((root / "pyproject.toml").read_text(encoding="utf-8"))["project"]


def _named(requirements: list[str]) -> set[str]:
    return {re.match(r"[\w-]+", requirement)[0].lower() for requirement in requirements}


def test_every_requirement_has_an_exact_version(root, project):
    lines = (root / "constraints.txt").read_text(encoding="utf-8").splitlines()
    exact = dict(line.split("==") for line in lines if not line.startswith("#"))
    names = {name.lower() for name in exact}
    required = _named(project["dependencies"]).union(*map(_named, project["optional-dependencies"].values()))
    assert required - {"sheetgen"} <= names


def test_tests_run_with_the_versions_that_are_written_down(root, project):
    lines = (root / "constraints.txt").read_text(encoding="utf-8").splitlines()
    exact = {name.lower(): number for name, number in (line.split("==") for line in lines if "==" in line)}
    installed = {name: version(name) for name in _named(project["dependencies"])}
    assert installed == {name: exact[name] for name in installed}


def test_every_library_that_is_imported_is_required(root, project):
    provided = {"yaml": "pyyaml"}
    imports = re.compile(r"^\s*(?:from|import) (\w+)", re.MULTILINE)
    names = {
        name
        for module in (root / "sheetgen").rglob("*.py")
        for name in imports.findall(_without_strings(module.read_text(encoding="utf-8")))
    }
    import sys

    foreign = names - set(sys.stdlib_module_names) - {"sheetgen"}
    # MarkupSafe is the part of Jinja2 that escapes text.
    required = _named(project["dependencies"]) | _named(project["optional-dependencies"]["pdf"]) | {"markupsafe"}
    assert {provided.get(name, name).lower() for name in foreign} <= required


def _without_strings(text: str) -> str:
    return re.sub(r'""".*?"""', "", text, flags=re.DOTALL)


def test_citation_names_this_version(root):
    citation = yaml.safe_load((root / "CITATION.cff").read_text(encoding="utf-8"))
    assert (citation["version"], citation["license"]) == (__version__, "MIT")


def test_constants_are_those_of_scipy():
    from scipy.constants import physical_constants

    # CODATA 2022, Rev. Mod. Phys. 97, 025002 (2025), table XXXI: the electron mass
    value, unit, uncertainty = physical_constants["electron mass"]
    assert (CONSTANTS, value, unit, uncertainty) == ("CODATA 2022", 9.1093837139e-31, "kg", 2.8e-40)


def test_readme_is_short(root):
    assert (root / "README.md").read_text(encoding="utf-8").count("\n") <= 100


def test_documents_name_files_that_exist(root):
    for document in ("README.md", "DEVELOPERS.md"):
        text = (root / document).read_text(encoding="utf-8")
        for name in re.findall(r"`((?:[\w.-]+/)+[\w.-]*|[A-Z]+\.md|Makefile|constraints\.txt)`", text):
            assert name.startswith(("site/", ".venv/", ".site.")) or (root / name).exists(), f"{document}: {name}"
        for target in re.findall(r"\]\(([^)#:]+)\)", text):
            assert (root / target).exists(), f"{document}: {target}"


def test_targets_of_the_makefile_are_documented(root):
    text = (root / "Makefile").read_text(encoding="utf-8")
    targets = re.search(r"^\.PHONY: (.*)$", text, re.MULTILINE)[1].split()
    assert targets == re.findall(r"^([\w-]+):.*## ", text, re.MULTILINE)
