"""Folders: names of files, links, and texts that are none; all in bounded time."""

from __future__ import annotations

import os
import time
import tracemalloc
from pathlib import Path

import pytest

from sheetgen.faults import FaultsError
from sheetgen.records import read_folder

RECORD = "name: X\nformula: Cu\n"
EXPECTED = "expected lower-case letters, digits and hyphens, such as indium-tin-oxide.yaml. Rename it."


def test_records_are_sorted_by_slug_and_other_files_left_alone(read):
    files = {"zinc.yml": RECORD, "b-2.yaml": RECORD, "README.md": "x", "old.yaml~": "{", ".hidden.yaml": "{"}
    folder = read(record=RECORD, files=files)
    assert [record.slug for record in folder.records] == ["b-2", "copper", "zinc"]
    assert str(folder.records[1].path) == "m/copper.yaml"


def test_an_empty_folder_is_only_remarked_on(read):
    folder = read(record=None)
    assert folder.records == ()
    assert [str(remark) for remark in folder.remarks] == [
        "m: remark: the folder holds no record yet; add one such as copper.yaml."
    ]


def test_remarks_of_all_records_come_sorted(read):
    folder = read(record=RECORD, files={"gold.yaml": RECORD})
    assert [str(remark.place) for remark in folder.remarks] == ["m/copper.yaml:1:1", "m/gold.yaml:1:1"]


@pytest.mark.parametrize(
    "files, messages",
    [
        ({"Gold.yaml": RECORD}, [f"m/Gold.yaml: the file name 'Gold.yaml' cannot be an address; {EXPECTED}"]),
        ({"a b.yaml": RECORD}, [f"m/a b.yaml: the file name 'a b.yaml' cannot be an address; {EXPECTED}"]),
        ({"gold.YAML": RECORD}, [f"m/gold.YAML: the file name 'gold.YAML' cannot be an address; {EXPECTED}"]),
        (
            {"g" * 65 + ".yaml": RECORD},
            [f"m/{'g' * 65}.yaml: the file name '{'g' * 59}…' cannot be an address; {EXPECTED}"],
        ),
        (
            {"con.yaml": RECORD},
            ["m/con.yaml: the file name 'con.yaml' is a device on Windows; choose another, such as con-1.yaml."],
        ),
        (
            {"copper.yml": RECORD},
            [
                "m/copper.yml: 'copper.yml' and 'copper.yaml' are one name on many disks and one address; rename one of"
                " them."
            ],
        ),
        (
            {"handbook.yaml": None},
            [
                "m/handbook.yaml: the folder has no imprint; expected the file handbook.yaml. Start one with the line"
                " 'title: Handbook of our materials'."
            ],
        ),
        (
            {"handbook.yaml": None, "Handbook.yml": "title: x\n"},
            [
                "m/handbook.yaml: the folder has no imprint; expected the file handbook.yaml. Rename 'Handbook.yml'"
                " to it."
            ],
        ),
        ({"gold.yaml": ""}, ["m/gold.yaml: the file is empty; expected lines such as 'name: Copper'."]),
        (
            {"gold.yaml": b"name: G\xf6ld\n"},
            ["m/gold.yaml:1:8: the byte 0xf6 is not UTF-8; save the file in the encoding UTF-8."],
        ),
        (
            {"gold.yaml": "name: x\r\nformula: C\u202eu\r\n"},
            ["m/gold.yaml:2:11: the hidden character U+202E stands here; expected visible text. Delete it."],
        ),
        (
            {"gold.yaml": "name: G\x00ld\n"},
            ["m/gold.yaml:1:8: the hidden character U+0000 stands here; expected visible text. Delete it."],
        ),
        (
            {"sources.bib": "@misc{good2000, title={\x1b[31m}}"},
            ["m/sources.bib:1:24: the hidden character U+001B stands here; expected visible text. Delete it."],
        ),
    ],
)
def test_fault_of_a_file(faults, files, messages):
    record = RECORD if "sources.bib" not in files else None
    assert faults(record=record, files=files) == messages


def test_a_byte_order_mark_is_no_fault(faults):
    assert faults(record="\ufeff" + RECORD) == []


def test_there_is_no_such_folder(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    Path("file").touch()
    for name in ("missing", "file"):
        with pytest.raises(FaultsError) as caught:
            read_folder(name)
        assert str(caught.value) == (
            f"{name}: there is no such folder; expected one with handbook.yaml, sources.bib and one YAML file a"
            " material."
        )


def test_links_out_of_the_folder_and_odd_files_are_refused(write):
    folder = write(record=RECORD)
    outside = folder.resolve().parent / "outside.yaml"
    outside.write_text(RECORD, encoding="utf-8")
    (folder / "away.yaml").symlink_to(outside)
    (folder / "nowhere.yaml").symlink_to("missing.yaml")
    (folder / "round.yaml").symlink_to("round.yaml")
    (folder / "inside.yaml").symlink_to("copper.yaml")
    (folder / "folder.yaml").mkdir()
    os.mkfifo(folder / "pipe.yaml")
    with pytest.raises(FaultsError) as caught:
        read_folder(folder)
    link = "a link that leads out of the folder, or nowhere; put the file itself here."
    odd = "not a regular file; expected a file of text."
    assert list(map(str, caught.value.faults)) == [
        f"m/away.yaml: {link}",
        f"m/folder.yaml: {odd}",
        f"m/nowhere.yaml: {link}",
        f"m/pipe.yaml: {odd}",
        f"m/round.yaml: {link}",
    ]


BOMBS = {
    "aliases": "a: &a [x, x]\n"
    + "".join(f"b{n}: &b{n} [*{'a' if n == 0 else f'b{n - 1}'}, *a]\n" for n in range(9000)),
    "nesting": "[" * 500_000,
    "nested keys": "{" * 500_000,
    "block nesting": "".join(" " * n + "a:\n" for n in range(1400)),
    "many keys": "".join(f"key{n}: {n}\n" for n in range(70_000)),
    "many items": "name: x\nformula: Cu\nmeasured:\n  melting point: [" + "1 K, " * 150_000 + "]\n",
    "one long key": "k" * 900_000 + ": 1\n",
    "one long value": "name: " + "n" * 900_000 + "\n",
    "one long number": "name: x\nformula: Cu\nmeasured: {melting point: " + "9" * 900_000 + "}\n",
    "one long formula": "name: x\nformula: " + "C" * 900_000 + "\n",
    "quotes": "name: '" + "''" * 450_000 + "\n",
    "colons": "name" + ": " * 450_000 + "\n",
    "comments": "#\n" * 450_000 + RECORD,
    "tags": "!!python/object/apply:os.system " * 20_000,
    "bytes": b"\xff" * 900_000,
    "too large": "#" * 100_000_000,
}


@pytest.mark.parametrize("bomb", BOMBS)
def test_a_hostile_file_is_a_fault_in_bounded_time_and_memory(write, bomb):
    folder = write(record=BOMBS[bomb])
    tracemalloc.start()
    began = time.perf_counter()
    try:
        read_folder(folder)
    except FaultsError as error:
        assert all(fault.place.file == "m/copper.yaml" for fault in error.faults)
        assert all(len(str(fault)) < 1000 and "\n" not in str(fault) for fault in error.faults)
        assert len(error.faults) <= 50
    else:
        assert bomb == "comments"
    # tracemalloc slows everything down several times; the bound of a second holds without it.
    assert time.perf_counter() - began < 5
    assert tracemalloc.get_traced_memory()[1] < 200e6
    tracemalloc.stop()
