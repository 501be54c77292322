"""Whatever stands in a folder, reading it ends in a handbook or in faults with places, and soon."""

from __future__ import annotations

import re
import time
from pathlib import Path

import pytest
import yaml
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from sheetgen.faults import FaultsError
from sheetgen.records import Folder, Value, read_folder, record_schema
from sheetgen.records.quickly import fits
from sheetgen.records.schema import canonical_schema, validator
from sheetgen.records.spelling import canonical_key

ROOT = Path(__file__).parents[2]
SEEDS = [
    (ROOT / "materials" / f"{slug}.yaml").read_text(encoding="utf-8")
    for slug in ("copper", "titanium-nitride", "bismuth", "indium-tin-oxide", "gallium-arsenide-quantum-well")
]
BIBLIOGRAPHY = (ROOT / "materials" / "sources.bib").read_text(encoding="utf-8")
# The keys alone: every example reads them anew.
SOURCES = "".join(
    f"@misc{{{key}, title={{x}}}}\n" for key in re.findall(r"^@\w+\{([^,]+),", BIBLIOGRAPHY, re.MULTILINE)
)
IMPRINT = (ROOT / "materials" / "handbook.yaml").read_text(encoding="utf-8")
FOLDER_SETTINGS = settings(
    max_examples=120, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture, HealthCheck.too_slow]
)

# Words and marks that mean something to one of the parsers.
SPARKS = st.sampled_from([
    "No", "on", "1:30", "0123", "1e-8", "1e999", "-", "(", ")", "[", "]", "{", "}", ":", ": ", ",", "#", "&a", "*a",
    "!!x", "|", ">", "'", '"', "%", "@", "\t", "\n", "\r", "\x00", "\u202e", "\ufeff", "é", "½", "Å", "µΩ", "/sq", "^9",
    "**", "1/0", "²", "×10^", "±",
    "nan", ".inf", "~", "true", "---", "...", "<<", "?", "0", "9" * 50, "()" * 9, "e", "°C",
])  # fmt: skip
EDITS = st.lists(st.tuples(st.floats(0, 1), st.integers(0, 12), SPARKS | st.text(max_size=6)), min_size=1, max_size=6)


def edited(text: str, edits: list[tuple[float, int, str]]) -> bytes:
    """The text with parts cut out and sparks put in."""
    for where, cut, spark in edits:
        position = int(where * len(text))
        text = text[:position] + spark + text[position + cut :]
    return text.encode("utf-8", "surrogatepass")


def outcome(folder: Path) -> Folder | FaultsError:
    """What reading ends in; anything but these two is an error of ours."""
    began = time.perf_counter()
    try:
        result = read_folder(folder)
    except FaultsError as error:
        result = error
        assert error.faults
        for fault in error.faults:
            assert fault.place.file.startswith("m") and "\n" not in fault.message and len(fault.message) < 2000
    else:
        for record in result.records:
            assert all(isinstance(value, Value) for value in record.inputs.values())
    assert time.perf_counter() - began < 5
    return result


@FOLDER_SETTINGS
@given(seed=st.sampled_from(SEEDS), edits=EDITS)
def test_mutated_records(write, seed, edits):
    outcome(write(record=edited(seed, edits), sources=SOURCES))


@FOLDER_SETTINGS
@given(edits=EDITS)
def test_mutated_bibliographies(write, edits):
    outcome(write(record=None, sources=edited(BIBLIOGRAPHY[:3000], edits)))


CIF_SEED = """\
data_x
_cell_length_a 4.593659(18)
_cell_length_b 4.593659(18)
_cell_length_c 2.958682(8)
_cell_angle_alpha 90
_cell_angle_beta 90
_cell_angle_gamma 90
_space_group_name_H-M_alt 'P 42/m n m'
loop_
_space_group_symop_operation_xyz
x,y,z
-x,-y,z
loop_
_atom_site_label
_atom_site_type_symbol
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
_atom_site_occupancy
Ti1 Ti4+ 0 0 0 1
O1 O2- 0.30479(10) 0.30479(10) 0 1.0
"""


@FOLDER_SETTINGS
@given(edits=EDITS)
def test_mutated_cifs(write, edits):
    record = "name: X\nformula: TiO2\nstructure: {cif: x.cif}\n"
    outcome(write(record=record, files={"x.cif": edited(CIF_SEED, edits)}))


@FOLDER_SETTINGS
@given(edits=EDITS)
def test_mutated_imprints(write, edits):
    outcome(write(record=None, imprint=edited(IMPRINT, edits)))


def keys_of(schema: dict) -> set[str]:
    """Every key that a schema knows, at any depth."""
    parts = [*schema.get("properties", {}).values(), *([schema["items"]] if "items" in schema else [])]
    return set(schema.get("properties", {})).union(*map(keys_of, parts))


KEYS = st.sampled_from([*sorted(keys_of(record_schema())), "Cu", "Ti"])
WORDS = st.sampled_from([
    *("Cu", "TiN", "fcc", "hcp", "rhombohedral", "225", "1/4", "x.cif", "film", "cube", "hole", "H300", "reviewed"),
    *("3.6 Å", "1.7(1) µΩ cm", "293 K", "20 °C", "1e19 cm^-3", "90°", "2026-11-02", "-3", "0", "1", "2"),
])  # fmt: skip
LEAVES = st.none() | st.booleans() | st.integers(-9, 9) | st.floats() | st.text(max_size=9) | WORDS
TREES = st.recursive(LEAVES, lambda t: st.lists(t, max_size=4) | st.dictionaries(KEYS, t, max_size=5), max_leaves=25)


@FOLDER_SETTINGS
@given(tree=st.dictionaries(KEYS, TREES, max_size=6), base=st.booleans())
def test_random_trees(write, tree, base):
    if base:
        tree = {"name": "X", "formula": "Cu"} | tree
    outcome(write(record=yaml.safe_dump(tree, allow_unicode=True)))


@settings(max_examples=200, deadline=None)
@given(tree=st.dictionaries(KEYS.map(canonical_key), TREES, max_size=6), base=st.booleans())
def test_the_quick_look_never_accepts_what_the_library_would_not(tree, base):
    if base:
        tree = {"name": "X", "formula": "Cu"} | tree
    assert validator().is_valid(tree) or not fits(tree, canonical_schema())


SECTIONS = {
    "structure": ["lattice", "space_group", "a", "b", "c", "c_over_a", "alpha", "beta", "gamma", "atoms"],
    "electrons": ["valence", "density", "dimension", "effective_mass", "valleys", "charge"],
    "measured": ["resistivity", "sheet_resistance", "residual_resistivity", "melting_point", "refractive_index"],
}
PLAUSIBLE = WORDS | st.fixed_dictionaries({"value": WORDS}, optional={"at": WORDS, "from": WORDS})


@FOLDER_SETTINGS
@given(data=st.data(), formula=st.sampled_from(["Cu", "TiN", "In2O3"]))
def test_plausible_records(write, data, formula):
    record = {"name": "X", "formula": formula}
    for section, keys in SECTIONS.items():
        chosen = data.draw(
            st.dictionaries(st.sampled_from(keys), PLAUSIBLE | st.lists(PLAUSIBLE, max_size=3), max_size=4)
        )
        record[section] = chosen
    outcome(write(record=yaml.safe_dump(record, allow_unicode=True)))


@pytest.mark.parametrize("seed", SEEDS)
def test_the_seeds_themselves_are_sound(write, seed):
    assert isinstance(outcome(write(record=seed, sources=SOURCES)), Folder)
