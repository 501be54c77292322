"""The program as someone gets it who has no checkout: a wheel, installed, and records of their own."""

from __future__ import annotations

import subprocess
import sys
import venv
import zipfile
from pathlib import Path

import pytest
from support.sites import contents


@pytest.fixture(scope="module")
def wheel(root, tmp_path_factory) -> Path:
    folder = tmp_path_factory.mktemp("wheel")
    command = [sys.executable, "-m", "pip", "wheel", "--quiet", "--no-deps", "--no-build-isolation", "--no-index"]
    subprocess.run([*command, "--wheel-dir", folder, root], check=True, capture_output=True)
    (built,) = folder.glob("*.whl")
    return built


def test_wheel_holds_the_program_its_templates_and_its_data(root, wheel):
    inside = set(zipfile.ZipFile(wheel).namelist())
    source = {path.relative_to(root) for path in (root / "sheetgen").rglob("*") if path.is_file()}
    wanted = {path.as_posix() for path in source if "__pycache__" not in path.parts}
    templates = {path.relative_to(root) for path in (root / "templates").rglob("*") if path.is_file()}
    wanted |= {f"sheetgen/{path.as_posix()}" for path in templates}
    assert {name for name in inside if ".dist-info/" not in name} == wanted


def test_installed_program_presses_a_folder_elsewhere(wheel, small_handbook, tmp_path):
    """In an environment of its own, which borrows the libraries of this one but not the checkout."""
    home = tmp_path / "environment"
    venv.create(home, with_pip=False)
    python = home / "bin" / "python"
    (packages,) = (home / "lib").glob("python*/site-packages")
    install = [sys.executable, "-m", "pip", "--python", python, "install", "--quiet", "--no-deps", "--no-index", wheel]
    subprocess.run(install, check=True, capture_output=True)
    (packages / "libraries.pth").write_text(_libraries_without_the_checkout(tmp_path) + "\n", encoding="utf-8")
    press = [home / "bin" / "sheetgen", "press", small_handbook.name, "--into", "out"]
    run = subprocess.run(press, cwd=small_handbook.parent, capture_output=True, text=True, check=False)
    assert run.returncode == 0, run.stderr
    assert run.stdout.startswith("out: 2 sheets; ")
    assert "materials/copper.html" in contents(small_handbook.parent / "out")
    place = subprocess.run(
        [python, "-I", "-c", "import sheetgen; print(sheetgen.__file__)"], capture_output=True, text=True, check=True
    )
    assert Path(place.stdout.strip()).is_relative_to(packages.resolve())


def _libraries_without_the_checkout(tmp_path: Path) -> str:
    """A folder of links to every installed library; path files, which lead to the checkout, stay behind."""
    import numpy

    libraries = tmp_path / "libraries"
    libraries.mkdir()
    for entry in Path(numpy.__file__).parent.parent.iterdir():
        if entry.suffix != ".pth" and not entry.name.startswith("sheetgen"):
            (libraries / entry.name).symlink_to(entry)
    return str(libraries)
