"""Tools of the system that some tests need."""

from __future__ import annotations

import os
import shutil

import pytest


def required_tool(*names: str) -> str:
    """Path of the first of these programs that is installed.

    Where none is, the test is skipped and says so; in continuous integration (CI=true) it fails, because a
    check that nobody runs checks nothing.
    """
    for name in names:
        if found := shutil.which(name):
            return found
    missing = f"none of {', '.join(names)} is installed"
    if os.environ.get("CI") == "true":
        pytest.fail(f"{missing}; .ci/run installs it")
    pytest.skip(missing)
