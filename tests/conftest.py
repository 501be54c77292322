"""What many tests share: the real handbook, loaded once a process, and its site, pressed once a run."""

from __future__ import annotations

import os
from collections.abc import Iterator
from pathlib import Path

import pytest
from filelock import FileLock
from support.browsing import FLAGS
from support.folders import write_small_handbook
from support.tools import required_tool

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


@pytest.fixture(scope="session")
def browser() -> Iterator:
    """A headless Chromium that cannot reach anything outside: one for all tests of a process, which allows no two."""
    chromium = required_tool("chromium", "chromium-browser", "google-chrome")
    from playwright.sync_api import sync_playwright

    with sync_playwright() as playwright:
        running = playwright.chromium.launch(executable_path=chromium, args=FLAGS)
        yield running
        running.close()


@pytest.fixture
def small_handbook(tmp_path) -> Path:
    """A folder of two records, with nothing else but handbook.yaml and sources.bib."""
    return write_small_handbook(tmp_path / "records")
