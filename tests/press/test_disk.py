"""The write layer on real file systems."""

from __future__ import annotations

import os
import resource
import signal
import subprocess
import sys
from pathlib import Path
from tempfile import TemporaryDirectory

import pytest
from support.sites import contents, edition

from sheetgen.faults import MachineError
from sheetgen.press import publish
from sheetgen.press.disk import Disk

TESTS = Path(__file__).parent.parent


def test_exchange_swaps_two_folders(tmp_path):
    (tmp_path / "one").mkdir()
    (tmp_path / "two").mkdir()
    (tmp_path / "one" / "a").write_bytes(b"1")
    if Disk().exchange(tmp_path / "one", tmp_path / "two"):
        assert contents(tmp_path) == {"two/a": b"1"}
    else:
        assert contents(tmp_path) == {"one/a": b"1"}


def test_exchange_with_nothing_names_the_place(tmp_path):
    with pytest.raises(MachineError, match="two: no such file or directory"):
        Disk().exchange(tmp_path / "one", tmp_path / "two")


def test_link_copies_where_hard_links_are_refused(tmp_path, monkeypatch):
    def refuse(*_names, **_settings):
        raise PermissionError(1, "Operation not permitted")

    (tmp_path / "old").write_bytes(b"1")
    monkeypatch.setattr(os, "link", refuse)
    Disk().link(tmp_path / "old", tmp_path / "folder" / "new")
    assert contents(tmp_path) == {"old": b"1", "folder/new": b"1"}


def test_remove_does_not_follow_a_symbolic_link(tmp_path):
    (tmp_path / "outside").mkdir()
    (tmp_path / "outside" / "precious").write_bytes(b"1")
    (tmp_path / "ours").mkdir()
    (tmp_path / "ours" / "link").symlink_to(tmp_path / "outside")
    Disk().remove(tmp_path / "ours")
    assert contents(tmp_path) == {"outside/precious": b"1"}


def test_settle_one_by_one_where_the_system_cannot_at_once(tmp_path, monkeypatch):
    monkeypatch.setattr("sheetgen.press.disk._c_library", lambda: None)
    assert publish(edition(1).items(), tmp_path / "site").written
    assert publish(edition(2).items(), tmp_path / "site").removed == ("only-in-1.html",)


def test_write_that_the_system_refuses(tmp_path):
    """A limit on the size of files is the one full disk that every system lets a test have."""
    publish(edition(1).items(), tmp_path / "site")
    before = contents(tmp_path)
    signal.signal(signal.SIGXFSZ, signal.SIG_IGN)
    soft, hard = resource.getrlimit(resource.RLIMIT_FSIZE)
    resource.setrlimit(resource.RLIMIT_FSIZE, (10_000, hard))
    try:
        with pytest.raises(MachineError, match="large.html: file too large"):
            publish([("large.html", b"x" * 20_000)], tmp_path / "site")
    finally:
        resource.setrlimit(resource.RLIMIT_FSIZE, (soft, hard))
    assert contents(tmp_path) == before


AS_NOBODY = """
import os, sys
from pathlib import Path
from sheetgen.faults import MachineError
from sheetgen.press import publish
from support.sites import edition
if os.getuid() == 0:
    os.setuid(65534)  # permissions do not bind the superuser
try:
    publish(edition(2).items(), Path("site"))
except MachineError as error:
    print(error)
"""


def test_folder_that_may_not_be_written():
    with TemporaryDirectory() as name:
        place = Path(name).resolve()
        publish(edition(1).items(), place / "site")
        before = contents(place)
        place.chmod(0o555)
        environment = {"PYTHONPATH": f"{TESTS}{os.pathsep}{TESTS.parent}"}
        command = [sys.executable, "-c", AS_NOBODY]
        run = subprocess.run(command, cwd=place, env=environment, capture_output=True, text=True, check=False)
        assert run.stderr == ""
        assert run.stdout == (
            f"{place / '.site.lock'}: permission denied. Ask for access to it, or choose another folder.\n"
        )
        assert contents(place) == before
        place.chmod(0o755)
