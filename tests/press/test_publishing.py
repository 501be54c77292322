"""Publishing: what is written, kept, removed and refused."""

from __future__ import annotations

import errno
import os
import shutil
import threading
from pathlib import Path

import pytest
from support.sites import PERSONAL, FailingDisk, contents, edition, put

from sheetgen.faults import MachineError
from sheetgen.press import FolderRefusedError, publish
from sheetgen.press.disk import Disk


class RecordingDisk(Disk):
    """Notes every change."""

    def __init__(self):
        self.changes = []

    def before(self, action: str, path: Path) -> None:
        self.changes.append((action, path.name))


def published(folder: Path) -> dict[str, bytes]:
    files = contents(folder)
    files.pop("manifest.json")
    return files


def test_first_press_makes_the_folder(tmp_path):
    report = publish(edition(1).items(), tmp_path / "new" / "site")
    assert published(tmp_path / "new" / "site") == edition(1)
    assert set(report.written) == {*edition(1), "manifest.json"}
    assert os.listdir(tmp_path / "new") == ["site"]


def test_folder_with_only_a_gitignore_is_filled_and_keeps_it(tmp_path):
    put(tmp_path / "site", {".gitignore": b"*\n"})
    report = publish(edition(1).items(), tmp_path / "site")
    assert published(tmp_path / "site") == edition(1) | {".gitignore": b"*\n"}
    assert report.kept == (".gitignore",)


def test_unchanged_site_costs_no_write(tmp_path):
    site = tmp_path / "site"
    publish(edition(1).items(), site)
    before = {path: path.stat() for path in site.rglob("*")}
    disk = RecordingDisk()
    report = publish(edition(1).items(), site, disk=disk)
    assert disk.changes == []
    assert (report.written, report.removed) == ((), ())
    assert {path: path.stat() for path in site.rglob("*")} == before


def test_only_what_differs_is_written(tmp_path):
    site = tmp_path / "site"
    publish(edition(1).items(), site)
    unchanged = site / "materials" / "m00.html"
    number = unchanged.stat().st_ino
    report = publish(edition(2).items(), site)
    differing = {path for path, data in edition(2).items() if edition(1).get(path) != data}
    assert set(report.written) == differing | {"manifest.json"}
    assert report.removed == ("only-in-1.html",)
    assert published(site) == edition(2)
    assert unchanged.stat().st_ino == number


def test_order_of_the_files_does_not_matter(tmp_path):
    publish(edition(1).items(), tmp_path / "one")
    publish(reversed(edition(1).items()), tmp_path / "two")
    assert contents(tmp_path / "one") == contents(tmp_path / "two")


def test_changed_inputs_alone_renew_the_manifest(tmp_path):
    publish(edition(1).items(), tmp_path, {"copper.yaml": "00"})
    assert publish(edition(1).items(), tmp_path, {"copper.yaml": "01"}).written == ("manifest.json",)


def test_files_of_a_person_are_kept_and_reported(tmp_path):
    site = tmp_path / "site"
    publish(edition(1).items(), site)
    put(site, PERSONAL)
    (site / "drawings").symlink_to(tmp_path)
    report = publish(edition(2).items(), site)
    assert report.kept == tuple(sorted([*PERSONAL, "drawings"]))
    assert (site / "drawings").is_symlink()
    (site / "drawings").unlink()
    assert published(site) == edition(2) | PERSONAL


def test_page_changed_by_hand_is_overwritten_and_reported(tmp_path):
    publish(edition(1).items(), tmp_path)
    put(tmp_path, {"index.html": b"improved"})
    report = publish(edition(1).items(), tmp_path)
    assert report.overwritten == ("index.html",)
    assert published(tmp_path) == edition(1)


def test_page_changed_by_hand_outlives_its_edition(tmp_path):
    publish(edition(1).items(), tmp_path)
    put(tmp_path, {"only-in-1.html": b"improved"})
    assert publish(edition(2).items(), tmp_path).kept == ("only-in-1.html",)
    assert published(tmp_path) == edition(2) | {"only-in-1.html": b"improved"}


@pytest.mark.parametrize(
    "personal, pages, named",
    [
        ("notes.html", "notes.html", "notes.html"),
        ("notes", "notes/first.html", "notes"),
        ("notes/first.html", "notes", "notes/first.html"),
    ],
)
def test_file_of_a_person_is_never_replaced(tmp_path, personal, pages, named):
    site = tmp_path / "site"
    publish(edition(1).items(), site)
    put(site, {personal: b"mine"})
    before = contents(tmp_path)
    with pytest.raises(FolderRefusedError) as refused:
        publish((edition(2) | {pages: b"new"}).items(), site)
    assert str(refused.value) == (
        f"{site / named} was put there by a person, and the handbook now needs that name. "
        "Move it away, then press again."
    )
    assert contents(tmp_path) == before


def test_folder_that_is_not_ours_is_refused(tmp_path):
    put(tmp_path / "work", {"thesis.tex": b"years"})
    with pytest.raises(FolderRefusedError) as refused:
        publish(edition(1).items(), tmp_path / "work")
    assert str(refused.value) == (
        f"{tmp_path / 'work'} holds files and no manifest.json of an earlier press, "
        "so it may be someone's work. Choose an empty or a new folder with --into."
    )
    assert contents(tmp_path) == {"work/thesis.tex": b"years"}


@pytest.mark.parametrize(
    "manifest", [b"", b"[]", b'{"name": "an app"}', b'{"program": "sheetgen"}', b"\xff", b'{"program": 1}']
)
def test_manifest_of_another_program_is_refused(tmp_path, manifest):
    put(tmp_path, {"manifest.json": manifest})
    with pytest.raises(FolderRefusedError, match="is not the manifest of a press"):
        publish(edition(1).items(), tmp_path)
    assert contents(tmp_path) == {"manifest.json": manifest}


def test_file_in_place_of_the_folder_is_refused(tmp_path):
    put(tmp_path, {"site": b"a file"})
    with pytest.raises(FolderRefusedError, match="is a file; a site needs a folder"):
        publish(edition(1).items(), tmp_path / "site")


def test_root_of_a_disk_is_refused():
    with pytest.raises(FolderRefusedError, match="is the root of a disk and cannot be swapped"):
        publish(edition(1).items(), Path("/"))


@pytest.mark.parametrize("path", ["/etc/motd", "../x", "a/../b", "", "a//b", "./a", "a\0b", "manifest.json"])
def test_path_out_of_the_site_is_an_error_of_the_program(tmp_path, path):
    with pytest.raises(ValueError, match="of the site are named|a site cannot hold"):
        publish([(path, b"")], tmp_path / "site")
    assert contents(tmp_path) == {}


def test_two_files_of_one_name_are_an_error_of_the_program(tmp_path):
    with pytest.raises(ValueError, match="two files of the site are named 'a'"):
        publish([("a", b"1"), ("a", b"2")], tmp_path)


def test_symbolic_link_to_the_site_is_followed(tmp_path):
    (tmp_path / "real").mkdir()
    (tmp_path / "site").symlink_to(tmp_path / "real")
    publish(edition(1).items(), tmp_path / "site")
    publish(edition(2).items(), tmp_path / "site")
    assert (tmp_path / "site").is_symlink()
    assert published(tmp_path / "real") == edition(2)


def test_permissions_of_the_folder_stay(tmp_path):
    site = tmp_path / "site"
    publish(edition(1).items(), site)
    site.chmod(0o750)
    publish(edition(2).items(), site)
    assert site.stat().st_mode & 0o777 == 0o750


def test_faults_found_while_laying_out_leave_the_old_site(tmp_path):
    publish(edition(1).items(), tmp_path / "site")
    before = contents(tmp_path)

    def files():
        yield from edition(2).items()
        raise LookupError("a page that cannot be laid out")

    with pytest.raises(LookupError):
        publish(files(), tmp_path / "site")
    assert contents(tmp_path) == before


@pytest.mark.parametrize("exchanges", [True, False])
def test_full_disk_at_any_point_leaves_one_whole_site(tmp_path, exchanges):
    first, second = tmp_path / "first", tmp_path / "second"
    publish(edition(1, 8).items(), first)
    put(first, PERSONAL)
    shutil.copytree(first, second)
    publish(edition(2, 8).items(), second)
    old, new = contents(first), contents(second)
    point, full = 0, True
    while full:
        point += 1
        place = tmp_path / f"try-{point}"
        shutil.copytree(first, place / "site")
        disk = FailingDisk(point, exchanges=exchanges)
        try:
            publish(edition(2, 8).items(), place / "site", disk=disk)
            full = disk.passed >= point
            assert contents(place / "site") == new
        except MachineError as error:
            assert "the disk is full (no space left on device). Make room, then press again." in str(error)
            assert contents(place / "site") in (old, new)
        assert os.listdir(place) == ["site"]
        shutil.rmtree(place)
    assert point > 20


@pytest.mark.parametrize(
    "number, line",
    [
        (errno.EROFS, "the disk is mounted read-only. Choose another folder with --into."),
        (errno.EACCES, "permission denied. Ask for access to it, or choose another folder."),
        (errno.EIO, "input/output error."),
    ],
)
def test_refusal_of_the_machine_is_one_line(tmp_path, number, line):
    publish(edition(1).items(), tmp_path / "site")
    with pytest.raises(MachineError) as refused:
        publish(edition(2).items(), tmp_path / "site", disk=FailingDisk(3, number))
    assert str(refused.value).endswith(line)
    assert published(tmp_path / "site") == edition(1)


def test_second_press_waits_for_the_first_and_says_so(tmp_path):
    site, first_writes, second_waits = tmp_path / "site", threading.Event(), threading.Event()

    def slowly():
        yield from edition(1).items()
        first_writes.set()
        assert second_waits.wait(20)
        assert not site.exists()

    first = threading.Thread(target=publish, args=(slowly(), site))
    first.start()
    assert first_writes.wait(20)
    publish(edition(2).items(), site, waiting=second_waits.set)
    first.join(20)
    assert published(site) == edition(2)
    assert os.listdir(tmp_path) == ["site"]


def test_many_presses_at_once_end_with_one_whole_site(tmp_path):
    site, refusals = tmp_path / "site", []

    def press(number):
        try:
            publish(edition(number).items(), site)
        except BaseException as error:
            refusals.append(error)
            raise

    presses = [threading.Thread(target=press, args=(number,)) for number in range(8)]
    for thread in presses:
        thread.start()
    for thread in presses:
        thread.join(60)
    assert refusals == []
    assert published(site) in [edition(number) for number in range(8)]
    assert os.listdir(tmp_path) == ["site"]


def test_file_saved_into_the_old_site_at_the_last_moment_is_rescued(tmp_path):
    site = tmp_path / "site"
    publish(edition(1).items(), site)

    class LateDisk(Disk):
        def exchange(self, one, other):
            put(site, {"materials/late.txt": b"saved just now"})
            return super().exchange(one, other)

    publish(edition(2).items(), site, disk=LateDisk())
    assert published(site) == edition(2) | {"materials/late.txt": b"saved just now"}
