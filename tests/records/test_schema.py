"""The published schema: valid 2020-12, needs no network, takes every spelling, and judges shapes as the reader does."""

from __future__ import annotations

import copy
import json
from pathlib import Path

import pytest
import yaml
from jsonschema import Draft202012Validator

from sheetgen.records import record_schema

ROOT = Path(__file__).parents[2]
RECORDS = sorted(path for path in (ROOT / "materials").glob("*.yaml") if path.name != "handbook.yaml")
CASES = yaml.safe_load(Path(__file__).with_name("faults.yaml").read_text(encoding="utf-8"))
CORE = yaml.SafeLoader.yaml_implicit_resolvers


class CoreLoader(yaml.SafeLoader):
    """YAML as editors check it: dates stay texts, and 1e-8 is a number."""

    yaml_implicit_resolvers = {
        first: [(tag, pattern) for tag, pattern in resolvers if not tag.endswith("timestamp")]
        for first, resolvers in CORE.items()
    }


def load(text: str) -> object:
    return yaml.load(text, Loader=CoreLoader)


@pytest.fixture(scope="module")
def accepts():
    return Draft202012Validator(record_schema()).is_valid


def test_schema_is_valid_and_is_json():
    schema = record_schema()
    Draft202012Validator.check_schema(schema)
    assert schema["$schema"] == "https://json-schema.org/draft/2020-12/schema"
    assert json.loads(json.dumps(schema)) == schema


def test_schema_refers_to_nothing_outside_itself():
    assert "$ref" not in json.dumps(record_schema())
    assert record_schema()["$id"].startswith("urn:")


def test_each_call_gives_its_own_copy():
    record_schema()["properties"].clear()
    assert record_schema()["properties"]


@pytest.mark.parametrize("path", RECORDS, ids=lambda path: path.stem)
def test_schema_accepts_the_records_of_the_handbook(accepts, path):
    assert accepts(load(path.read_text(encoding="utf-8")))


@pytest.mark.parametrize("number", range(len(CASES["shape"])))
def test_schema_rejects_what_the_reader_rejects_for_its_shape(accepts, edited, number):
    case = CASES["shape"][number]
    judged_by_value = "is no date" in case["says"][0]
    assert accepts(load(edited(case["replace"], case["by"]))) == judged_by_value


SPELLINGS = {
    "heat coefficient": ["heat_coefficient"],
    "transport debye temperature": ["transport_debye temperature", "transport_debye_temperature"],
    "grain size": ["grain_size"],
    "c/a": ["c_over_a", "c over a"],
    "space group": ["space_group"],
    "photon energy": ["photon_energy"],
    "base-centred-monoclinic": ["base-centered-monoclinic", "base centred monoclinic", "base centered monoclinic"],
}
SPELT = """
name: X
formula: Cu
structure: {lattice: base-centred-monoclinic, space group: 12, a: 1 Å, c/a: 1.6}
measured:
  heat coefficient: 1 J
  transport debye temperature: 1 K
  refractive index: [{photon energy: 1 eV, n: 1, k: 1}]
specimens: [{name: a, form: film, grain size: 3 nm}]
"""


@pytest.mark.parametrize("usual, other", [(usual, other) for usual, others in SPELLINGS.items() for other in others])
def test_schema_takes_every_spelling(accepts, usual, other):
    assert accepts(load(SPELT))
    assert accepts(load(SPELT.replace(usual, other)))
    assert not accepts(load(SPELT.replace(usual, other + "x")))


def test_a_required_key_may_be_spelt_either_way_but_not_left_out(accepts):
    point = {"photon_energy": "1 eV", "n": 1, "k": 1}
    record = {"name": "X", "formula": "Cu", "measured": {"refractive index": [point]}}
    assert accepts(record)
    without = copy.deepcopy(record)
    del without["measured"]["refractive index"][0]["photon_energy"]
    assert not accepts(without)


def test_every_part_says_what_it_expects():
    def parts(schema):
        yield schema
        for part in schema.get("properties", {}).values():
            yield from parts(part)
        for keyword in ("items",):
            if keyword in schema:
                yield from parts(schema[keyword])

    assert all(part.get("description") for part in parts(record_schema()))
