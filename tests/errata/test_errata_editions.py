"""Editions by every name that they go by, and data files that are none."""

from __future__ import annotations

import json
from pathlib import Path

import pytest
from quantities.small import COPPER, handbook_of

from sheetgen.errata import EditionError, edition_of, errata, open_edition
from sheetgen.faults import FaultsError
from sheetgen.press import press


@pytest.fixture
def folder(tmp_path) -> Path:
    handbook_of(tmp_path / "records", copper=COPPER)
    return tmp_path / "records"


def test_records_site_and_data_file_are_one_edition(folder, tmp_path):
    press(folder, tmp_path / "site")
    names = (folder, tmp_path / "site", tmp_path / "site" / "data" / "handbook.json")
    editions = [open_edition(str(name), folder) for name in names]
    assert [edition.name for edition in editions] == [str(name) for name in names]
    assert [edition.handbook is not None for edition in editions] == [True, False, False]
    assert errata(editions[0], editions[1]).count == errata(editions[2], editions[0]).count == 0


def test_a_record_is_put_together_from_data(handbook):
    """Every record of the handbook, from its data alone: the same inputs, the same form, the same numbers."""
    from sheetgen.errata import Edition
    from sheetgen.handbook import derive

    data = json.loads(json.dumps(edition_of(handbook).data))
    again = Edition("data", data)
    records = [again.record(slug) for slug in again.materials]
    sheets = derive(records, again.imprint, handbook.registry)
    for sheet, published in zip(sheets, again.materials.values(), strict=True):
        assert json.loads(json.dumps(sheet.data["quantities"])) == published["quantities"]
        assert json.loads(json.dumps(sheet.data["specimens"])) == published["specimens"]


@pytest.mark.parametrize(
    "word, line",
    [
        ("nothing.json", "There is no file nothing.json."),
        ("empty", "The folder empty holds neither data/handbook.json nor handbook.yaml; expected one of them."),
        ("nothing", "'nothing' is no file and no folder, and records lies in no git repository to look for it in."),
    ],
)
def test_words_that_name_no_edition(folder, tmp_path, monkeypatch, word, line):
    monkeypatch.chdir(tmp_path)
    (tmp_path / "empty").mkdir()
    with pytest.raises(EditionError) as refused:
        open_edition(word, Path("records"))
    assert str(refused.value) == line


MATERIAL = {"slug": "a", "name": "A", "formula": "Cu", "inputs": {}, "quantities": {}}


@pytest.mark.parametrize(
    "content, place, said",
    [
        (b"", ":1:1", "no JSON"),
        (b'{"materials": [}', ":1:16", "no JSON"),
        (b"\xff\xfe", "", "no JSON in UTF-8"),
        (b"[" * 100_000, "", "no JSON in UTF-8"),
        (b"[]", "", "not the data of a handbook"),
        (b'{"materials": {}}', "", "not the data of a handbook"),
        (b'{"materials": [1]}', "", "not the data of a handbook"),
        (json.dumps({"materials": [MATERIAL | {"inputs": {"structure.a": 3}}]}).encode(), "", "not the data"),
        (json.dumps({"materials": [MATERIAL | {"quantities": {"x": {"value": "y"}}}]}).encode(), "", "not the data"),
        (json.dumps({"materials": [MATERIAL | {"quantities": {"x": {"value": [None], "unit": "1"}}}]}).encode(), "",
         "not the data"),
        (json.dumps({"materials": [MATERIAL | {"specimens": [{}]}]}).encode(), "", "not the data"),
        (json.dumps({"materials": [MATERIAL | {"assumptions": ["x"]}]}).encode(), "", "not the data"),
        (json.dumps({"materials": [MATERIAL], "assemblies": []}).encode(), "", "not the data"),
        (b'{"materials": [], "x": NaN}', "", ""),
    ],
)  # fmt: skip
def test_files_that_are_no_data_of_a_handbook(tmp_path, content, place, said):
    path = tmp_path / "handbook.json"
    path.write_bytes(content)
    if not said:
        assert open_edition(str(path), tmp_path).materials == {}
        return
    with pytest.raises(FaultsError) as faults:
        open_edition(str(path), tmp_path)
    [fault] = faults.value.faults
    assert str(fault.place) == f"{path}{place}"
    assert said in fault.message


@pytest.mark.parametrize("skeleton", [1, {}, {"crystal": {"sites": 3}}, {"crystal": None, "electrons": {"no": 1}}])
def test_an_assembly_that_does_not_fit_is_done_without(edition, data_alone, skeleton):
    broken = data_alone(edition("1"))
    broken.data["assemblies"]["copper"] = skeleton
    assert broken.record("copper") is None
    found = errata(broken, edition("2", copper=COPPER.replace("3.6149(3)", "3.62(1)")))
    assert {moved.how for moved in found.materials[0].moved} == {"inferred"}
