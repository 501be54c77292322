"""The page and the feed of changes in a published site."""

from __future__ import annotations

import hashlib
import json
import re
import xml.etree.ElementTree as ElementTree
from pathlib import Path

import pytest
from quantities.small import COPPER, IMPRINT, WELL, handbook_of

from sheetgen.faults import FaultsError
from sheetgen.handbook import Handbook
from sheetgen.pages.changes import Changes
from sheetgen.press import press

ATOM = "{http://www.w3.org/2005/Atom}"
EARLIER = "previous edition: editions/1.json\n"


@pytest.fixture
def folder(tmp_path) -> Path:
    """Records of edition 2, with the data of edition 1 beside them."""
    first = tmp_path / "first"
    handbook_of(first, copper=COPPER, well=WELL)
    press(first, tmp_path / "site-1")
    records = tmp_path / "records"
    new = COPPER.replace("3.6149(3)", "3.62(1)").replace("0.695(10)", "2.10(1)")
    handbook_of(records, IMPRINT.replace('"1"', '"2"'), copper=new, silver=COPPER.replace("Copper", "Sil<b>ver"))
    (records / "editions").mkdir()
    (tmp_path / "site-1" / "data" / "handbook.json").rename(records / "editions" / "1.json")
    return records


def say(folder: Path, *lines: str) -> Path:
    with (folder / "handbook.yaml").open("a", encoding="utf-8") as file:
        file.writelines(lines)
    return folder


def test_the_page_says_what_moved_and_why(folder, tmp_path):
    press(say(folder, EARLIER), tmp_path / "site")
    page = (tmp_path / "site" / "changes.html").read_text(encoding="utf-8")
    text = re.sub(r"\s+", " ", re.sub(r"<[^>]*>", " ", page))
    assert "From edition 1 to edition 2" in text
    assert "lattice constant a: 3.6149(3) Å → 3.62(1) Å" in text.replace("\u202f", " ")
    assert re.search(r"Fermi energy 7\.\d+\(\d+\) eV 7\.\d+\(\d+\) eV −0\.02 \(−0\.28 %, 17 u\) lattice constant a",
                     text.replace("\u202f", " "))  # fmt: skip
    assert "Withdrawn: Quantum well" in text
    assert "adjust → fails , because of heat coefficient" in text
    assert "Sil&lt;b&gt;ver" in page and "<b>ver" not in page


def test_the_manifest_names_the_earlier_edition_among_the_inputs(folder, tmp_path):
    press(say(folder, EARLIER), tmp_path / "site")
    inputs = json.loads((tmp_path / "site" / "manifest.json").read_bytes())["inputs"]
    assert inputs["editions/1.json"] == hashlib.sha256((folder / "editions" / "1.json").read_bytes()).hexdigest()


def test_without_an_earlier_edition_the_page_says_so(small_handbook, tmp_path):
    press(small_handbook, tmp_path / "site")
    page = (tmp_path / "site" / "changes.html").read_text(encoding="utf-8")
    assert "The imprint names no earlier edition" in page
    assert not (tmp_path / "site" / "changes.atom").exists()


def feed_of(folder: Path) -> ElementTree.Element:
    [(name, data)] = Changes(Handbook.load(folder)).feed()
    assert name == "changes.atom"
    return ElementTree.fromstring(data)


def test_the_feed_has_what_the_standard_asks_for(folder):
    """RFC 4287, 4.1.1 and 4.1.2: id, title and updated once in the feed and in each entry, and an author."""
    feed = feed_of(say(folder, EARLIER, "date: 2026-11-02\nbase address: https://two.example/h\n"))
    entries = feed.findall(f"{ATOM}entry")
    for part in (feed, *entries):
        for name in ("id", "title", "updated"):
            assert len(part.findall(f"{ATOM}{name}")) == 1
        assert part.findtext(f"{ATOM}updated") == "2026-11-02T00:00:00Z"
    assert feed.findtext(f"{ATOM}author/{ATOM}name") == "A test group"
    assert [entry.findtext(f"{ATOM}title") for entry in entries] == ["Edition 2", "Copper, edition 2"]
    links = [entry.find(f"{ATOM}link").get("href") for entry in entries]
    assert links == ["https://two.example/h/changes.html", "https://two.example/h/changes.html#copper"]
    ids = [part.findtext(f"{ATOM}id") for part in (feed, *entries)]
    assert len(set(ids)) == len(ids) and all(id.startswith("urn:uuid:") for id in ids)
    assert "Sil<b>ver" in entries[0].findtext(f"{ATOM}summary")


def test_the_feed_is_the_same_each_time_and_never_asks_the_clock(folder, monkeypatch):
    say(folder, EARLIER)
    monkeypatch.delenv("SOURCE_DATE_EPOCH", raising=False)
    assert list(Changes(Handbook.load(folder)).feed()) == []
    monkeypatch.setenv("SOURCE_DATE_EPOCH", "1793577600")
    assert feed_of(folder).findtext(f"{ATOM}updated") == "2026-11-02T00:00:00Z"
    assert list(Changes(Handbook.load(folder)).feed()) == list(Changes(Handbook.load(folder)).feed())
    monkeypatch.setenv("SOURCE_DATE_EPOCH", "yesterday")
    assert list(Changes(Handbook.load(folder)).feed()) == []


def test_an_earlier_edition_that_is_none_stops_the_press(folder, tmp_path):
    (folder / "editions" / "1.json").write_text("{")
    with pytest.raises(FaultsError) as faults:
        press(say(folder, EARLIER), tmp_path / "site")
    [fault] = faults.value.faults
    assert str(fault.place) == f"{folder}/editions/1.json:1:2"
    assert not (tmp_path / "site").exists()
