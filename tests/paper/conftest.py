"""A small handbook of real records on paper, set once; without WeasyPrint these tests are skipped and say why."""

from __future__ import annotations

import os
import shutil
from pathlib import Path

import pytest

from sheetgen.faults import MachineError

SOME = ("copper", "gallium-arsenide-quantum-well", "lead")


@pytest.fixture(scope="session")
def paper_machine() -> None:
    """A machine that can make the paper edition; in continuous integration every machine must be one."""
    from sheetgen.paper import require

    try:
        require()
    except MachineError as missing:
        if os.environ.get("CI") == "true":
            pytest.fail(f"{missing}; .ci/run installs it")
        pytest.skip(str(missing))


@pytest.fixture(scope="session")
def paper_records(root, tmp_path_factory) -> Path:
    """A folder with the imprint, the sources and a few records: the longest, the shortest, and one between."""
    folder = tmp_path_factory.mktemp("paper") / "materials"
    folder.mkdir()
    for path in (root / "materials").iterdir():
        if path.name == "sources.bib" or path.stem in {*SOME, "handbook"}:
            shutil.copy(path, folder)
    return folder


@pytest.fixture(scope="session")
def paper_site(paper_machine, paper_records, tmp_path_factory) -> Path:
    """Its site with the paper edition. Look, do not touch."""
    from sheetgen.press import press

    site = tmp_path_factory.mktemp("paper-site") / "site"
    press(paper_records, site, paper=True)
    return site
