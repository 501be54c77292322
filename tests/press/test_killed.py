"""A press that is killed at any point leaves one whole site, and the next press recovers without help."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest
import support.killer

TESTS = Path(__file__).parent.parent


@pytest.mark.parametrize("way", ["exchange", "rename"])
def test_killed_at_every_point(tmp_path, way):
    killer = [sys.executable, support.killer.__file__, tmp_path, way]
    run = subprocess.run(killer, capture_output=True, text=True, env={"PYTHONPATH": str(TESTS)}, check=False)
    assert run.returncode == 0, run.stderr
    assert int(run.stdout) >= 200  # points of the life of one publication
