"""A small folder to read, and what reading it says."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from sheetgen.faults import FaultsError
from sheetgen.records import Folder, Record, read_folder

RECORD = """\
name: Copper
formula: Cu
structure:
  lattice: fcc
  a: {value: 3.6149(2) Å, at: 293 K, from: good2000}
electrons:
  valence: 1
measured:
  resistivity:
    - {value: 1.676(5) µΩ cm, at: 293 K, from: good2000}
    - {value: 0.2 µΩ cm, at: 77 K}
"""
IMPRINT = "title: A handbook\n"
SOURCES = """\
@article{good2000,
  author = {Good, Ann},
  title = {Fine numbers},
  journal = {J. Num.},
  year = {2000}
}
"""


@pytest.fixture
def write(tmp_path, monkeypatch) -> Callable[..., Path]:
    """Writes a folder `m` into the working folder; further files by their names."""
    monkeypatch.chdir(tmp_path)

    def write_folder(record: str = RECORD, imprint: str = IMPRINT, sources: str = SOURCES, files=None) -> Path:
        folder = Path("m")
        folder.mkdir(exist_ok=True)
        texts = {"copper.yaml": record, "handbook.yaml": imprint, "sources.bib": sources} | (files or {})
        for name, text in texts.items():
            if text is not None:
                data = text if isinstance(text, bytes) else text.encode("utf-8")
                (folder / name).write_bytes(data)
        return folder

    return write_folder


@pytest.fixture
def read(write) -> Callable[..., Folder]:
    """Writes a folder and reads it."""
    return lambda *texts, **named: read_folder(write(*texts, **named))


@pytest.fixture
def read_record(read) -> Callable[..., Record]:
    """Writes a folder with one record and reads that."""
    return lambda *texts, **named: read(*texts, **named).records[0]


@pytest.fixture
def faults(read) -> Callable[..., list[str]]:
    """Writes a folder and returns its faults as printed, none when it is sound."""

    def faults_of(*texts, **named) -> list[str]:
        try:
            read(*texts, **named)
        except FaultsError as error:
            return list(map(str, error.faults))
        return []

    return faults_of


@pytest.fixture
def edited() -> Callable[[str, str], str]:
    """The sample record with one text replaced, which must stand there."""

    def edit(old: str, new: str) -> str:
        assert RECORD.count(old) >= 1
        return RECORD.replace(old, new, 1)

    return edit
