"""Saves are noticed, the doings of editors are not, and a watch ends when it is told to."""

from __future__ import annotations

import threading
import time
from pathlib import Path

import pytest

from sheetgen.galley import watching


@pytest.fixture
def watched(tmp_path, monkeypatch):
    """Start a watch of a folder; give the folder and the event that a save sets. Only real saves count."""
    monkeypatch.setattr(watching, "PATIENCE", 60_000)
    threads: list[tuple[threading.Thread, threading.Event]] = []

    def start(folder: Path = tmp_path) -> threading.Event:
        saved, stop = threading.Event(), threading.Event()
        thread = threading.Thread(target=watching.watch, args=(folder, saved.set, stop), daemon=True)
        thread.start()
        threads.append((thread, stop))
        time.sleep(1)  # the system's own watch has no sign that it stands
        return saved

    yield start
    for thread, stop in threads:
        stop.set()
        (tmp_path / "last.yaml").write_text("wake up")
        thread.join(timeout=10)
        assert not thread.is_alive()


def test_a_save_is_noticed(watched, tmp_path):
    saved = watched()
    (tmp_path / "copper.yaml").write_text("name: Copper")
    assert saved.wait(10)


def test_a_rename_over_a_record_is_noticed(watched, tmp_path):
    (tmp_path / ".copper.yaml.tmp").write_text("name: Copper")
    saved = watched()
    (tmp_path / ".copper.yaml.tmp").rename(tmp_path / "copper.yaml")
    assert saved.wait(10)


def test_temporary_files_are_not(watched, tmp_path):
    saved = watched()
    for name in (".copper.yaml.swp", "copper.yaml~", "copper.yaml.tmp", ".hidden/copper.yaml"):
        (tmp_path / name).parent.mkdir(exist_ok=True)
        (tmp_path / name).write_text("half")
    assert not saved.wait(1.5)


def test_without_watches_of_the_system_files_are_looked_at(watched, tmp_path, monkeypatch):
    import watchfiles

    usual = watchfiles.watch

    def none_left(*paths, force_polling, **settings):
        if not force_polling:
            raise OSError(28, "inotify watch limit reached")
        return usual(*paths, force_polling=True, **settings)

    monkeypatch.setattr(watchfiles, "watch", none_left)
    saved = watched()
    (tmp_path / "copper.yaml").write_text("name: Copper")
    assert saved.wait(10)
