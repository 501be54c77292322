"""The data files: the keys, units and lists that readers of them rely on."""

import csv
import io
import json
import math

import jsonschema
import numpy as np
import pytest
import yaml

from sheetgen.documents import documents


@pytest.fixture(scope="module")
def files(handbook):
    return dict(documents(handbook, {}))


def numbers(content):
    """Every number in a JSON document."""
    if isinstance(content, dict):
        for value in content.values():
            yield from numbers(value)
    elif isinstance(content, list):
        for value in content:
            yield from numbers(value)
    elif isinstance(content, (int, float)) and not isinstance(content, bool):
        yield content


def test_one_file_for_each_material_and_the_tables(files, handbook):
    expected = {f"data/materials/{sheet.record.slug}.json" for sheet in handbook.sheets}
    expected |= {f"data/{name}" for name in ("handbook.json", "handbook.csv", "handbook.csv-metadata.json")}
    assert set(files) == expected | {"data/record.schema.json"}


def test_every_number_is_finite(files):
    for name, content in files.items():
        if name.endswith(".json"):
            assert all(math.isfinite(number) for number in numbers(json.loads(content))), name


def test_a_material_has_the_keys_of_the_format(files):
    for name, content in files.items():
        if not name.startswith("data/materials/"):
            continue
        material = json.loads(content)
        assert list(material) == [
            "slug", "name", "formula", "edition", "constants", "inputs", "quantities", "held_against",
            "assumptions", "specimens", "figures",
        ]  # fmt: skip
        for value in material["inputs"].values():
            assert {"value", "unit", "sources", "recalled"} <= value.keys()
        for id, stated in material["quantities"].items():
            for entry in stated if isinstance(stated, list) else [stated]:
                assert {"value", "unit", "assumes", "depends_on", "standing"} <= entry.keys(), id
                assert ("standard_uncertainty" in entry) == ("budget" in entry), id
                assert set(entry.get("budget", ())) <= material["inputs"].keys(), id
                assert sum(entry.get("budget", {"": 1}).values()) == pytest.approx(1, rel=1e-9), id
        for entry in material["held_against"]:
            assert {"quantity", "measured", "unit", "standing", "sources"} <= entry.keys()
            assert ("ratio" in entry) == ("model" in entry)
        for entry in material["assumptions"]:
            assert {"id", "indicator", "value", "bound", "standing"} <= entry.keys()
            assert entry["standing"] in {"holds", "strained", "broken"}


def test_lists_start_at_the_reference_and_carry_their_axis(files):
    copper = json.loads(files["data/materials/copper.json"])["quantities"]
    assert [entry["temperature"] for entry in copper["chemical_potential"]][0] == 293.15
    assert copper["relaxation_time"][0]["temperature"] == 293
    assert [entry["edge"] for entry in copper["level_spacing"]] == [1, 2, 5, 10, 20, 50]
    assert [entry["photon_energy"] for entry in copper["normal_reflectance"]] == [0.1, 0.5, 1, 1.96, 3, 6]
    assert "temperature" not in copper["fermi_energy"]


def test_ratios_are_measured_over_model(files):
    for name, content in files.items():
        if name.startswith("data/materials/"):
            for entry in json.loads(content)["held_against"]:
                if "ratio" in entry:
                    assert entry["ratio"] == pytest.approx(entry["measured"] / entry["model"], rel=1e-12)


def test_the_table_agrees_with_the_sheets_and_its_description(files, handbook):
    text = files["data/handbook.csv"].decode()
    rows = {row["slug"]: row for row in csv.DictReader(io.StringIO(text))}
    assert len(rows) == len(handbook.sheets)
    for sheet in handbook.sheets:
        assert float(rows[sheet.record.slug]["fermi_energy"]) == sheet.entries("fermi_energy")[0]["value"]
    copper = handbook["copper"].entries("chemical_potential")[1]
    assert float(rows["copper"][f"chemical_potential@{copper['temperature']:g}"]) == copper["value"]
    assert rows["mercury-liquid"]["cell_volume"] == ""
    described = json.loads(files["data/handbook.csv-metadata.json"])["tableSchema"]["columns"]
    assert [column["titles"] for column in described] == text.splitlines()[0].split(",")
    assert len({column["name"] for column in described}) == len(described)


def test_the_published_schema_is_valid_and_accepts_every_record(files, handbook):
    schema = json.loads(files["data/record.schema.json"])
    jsonschema.Draft202012Validator.check_schema(schema)
    validator = jsonschema.Draft202012Validator(schema)
    for sheet in handbook.sheets:
        record = json.loads(json.dumps(yaml.safe_load(sheet.record.path.read_text()), default=str))
        assert not list(validator.iter_errors(record)), sheet.record.slug


def test_all_materials_stand_in_one_file(files, handbook):
    whole = json.loads(files["data/handbook.json"])
    assert whole["edition"] == handbook.imprint.edition
    assert [material["slug"] for material in whole["materials"]] == [sheet.record.slug for sheet in handbook.sheets]
    assert whole["materials"][0] == json.loads(files[f"data/materials/{whole['materials'][0]['slug']}.json"])


def test_arrays_of_a_sheet_are_in_si(handbook):
    copper = handbook["copper"]
    assert copper.si("fermi_velocity") == pytest.approx(1.57e6, rel=0.01)
    np.testing.assert_allclose(copper.list_si("level_spacing")[:2], [1.77e-20, 2.2e-21], rtol=0.02)
    assert math.isnan(copper.si("no_such_quantity"))
