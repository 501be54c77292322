"""What many tests share: the real handbook, loaded once a process, and its site, pressed once a run."""

from __future__ import annotations

import os
from pathlib import Path

import pytest
from filelock import FileLock
from support.folders import write_small_handbook

ROOT = Path(__file__).parent.parent


@pytest.fixture(scope="session")
def root() -> Path:
    """The checkout."""
    return ROOT


@pytest.fixture(scope="session")
def handbook():
    """The handbook of materials/, derived but not laid out."""
    from sheetgen.handbook import Handbook

    return Handbook.load(ROOT / "materials")


@pytest.fixture(scope="session")
def pressed_site(tmp_path_factory) -> Path:
    """The published handbook of materials/. All workers of a test run share it: look, do not touch."""
    from sheetgen.press import press

    base = tmp_path_factory.getbasetemp()
    shared = base.parent if "PYTEST_XDIST_WORKER" in os.environ else base
    site = shared / "pressed" / "site"
    with FileLock(shared / "pressed.lock"):
        if not site.exists():
            press(ROOT / "materials", site)
    return site


@pytest.fixture
def small_handbook(tmp_path) -> Path:
    """A folder of two records, with nothing else but handbook.yaml and sources.bib."""
    return write_small_handbook(tmp_path / "records")
