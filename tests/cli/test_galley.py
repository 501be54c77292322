"""`sheetgen galley` in a process of its own, from its first line to Ctrl-C."""

from __future__ import annotations

import os
import signal
import socket
import subprocess
import sys
import time
import urllib.error
import urllib.request
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

import pytest
from support.folders import FILES

pytestmark = pytest.mark.xdist_group("galley")
OPENER = urllib.request.build_opener(urllib.request.ProxyHandler({}))


@contextmanager
def galley(folder: Path, desk: Path) -> Iterator[tuple[subprocess.Popen, str]]:
    """A running galley and its address."""
    desk.mkdir()
    command = [sys.executable, "-m", "sheetgen", "galley", str(folder), "--port", "0"]
    process = subprocess.Popen(
        command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True, env=os.environ | {"TMPDIR": str(desk)}
    )
    try:
        yield process, process.stdout.readline().strip()
    finally:
        if process.poll() is None:
            process.kill()
        process.communicate()


def fetch(address: str) -> str:
    try:
        return OPENER.open(address, timeout=20).read().decode()
    except urllib.error.HTTPError as error:
        return error.read().decode()


def wait_for(words: str, address: str, seconds: float = 60) -> str:
    deadline = time.monotonic() + seconds
    while words not in (page := fetch(address)):
        assert time.monotonic() < deadline, f"{words!r} never came"
        time.sleep(0.2)
    return page


def test_from_start_to_end(small_handbook, tmp_path):
    record = small_handbook / "copper.yaml"
    with galley(small_handbook, tmp_path / "desk") as (process, address):
        page = f"{address}materials/copper.html"
        assert address.startswith("http://127.0.0.1:")
        assert "3.6149(3)" in fetch(page)
        record.write_text(FILES["copper.yaml"].replace("3.6149(3)", "3.7777(3)"), encoding="utf-8")
        wait_for("3.7777(3)", page)
        record.write_text("name: Copper\nformla: Cu\n", encoding="utf-8")
        assert "3.7777(3)" in wait_for(f"<code>{record}:2:1</code>", page)
        # As editors do: a new file beside it, renamed over it.
        (small_handbook / ".copper.yaml.swp").write_text(FILES["copper.yaml"], encoding="utf-8")
        (small_handbook / ".copper.yaml.swp").rename(record)
        wait_for("3.6149(3)", page)
        process.send_signal(signal.SIGINT)
        said = process.communicate(timeout=30)[1]
    assert process.returncode == 130
    assert f"{record}:2:1: " in said and "Traceback" not in said
    assert list((tmp_path / "desk").iterdir()) == []


def test_terminated_it_clears_up_as_well(small_handbook, tmp_path):
    with galley(small_handbook, tmp_path / "desk") as (process, address):
        assert address
        process.terminate()
        said = process.communicate(timeout=30)[1]
    assert (process.returncode, "Traceback" in said) == (130, False)
    assert list((tmp_path / "desk").iterdir()) == []


def test_a_port_in_use_is_an_error_of_the_machine(small_handbook):
    with socket.create_server(("127.0.0.1", 0)) as taken:
        port = taken.getsockname()[1]
        command = [sys.executable, "-m", "sheetgen", "galley", str(small_handbook), "--port", str(port)]
        run = subprocess.run(command, capture_output=True, text=True, check=False, timeout=60)
    line = f"sheetgen: port {port} is in use; choose another with --port, or 0 for a free one\n"
    assert (run.returncode, run.stdout, run.stderr) == (3, "", line)


@pytest.mark.parametrize("port", ["70000", "-1", "http"])
def test_a_port_that_is_none(small_handbook, port):
    command = [sys.executable, "-m", "sheetgen", "galley", str(small_handbook), "--port", port]
    run = subprocess.run(command, capture_output=True, text=True, check=False, timeout=60)
    assert (run.returncode, run.stdout) == (2, "")
    assert run.stderr.count("\n") == 1 and "--port" in run.stderr
