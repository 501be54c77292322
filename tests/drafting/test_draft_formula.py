"""Drafts from a formula: what is filled in, what is left blank, and that nothing which stands is touched."""

from __future__ import annotations

import re
import string

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from support.folders import write_small_handbook

from sheetgen.drafting import DraftRefusedError, FormulaRefusedError, draft_formula
from sheetgen.drafting.compounds import usual_name, valences
from sheetgen.drafting.elements import usual
from sheetgen.drafting.naming import slug_of
from sheetgen.drafting.record_text import Material, record_text
from sheetgen.drafting.suggestions import read_formula
from sheetgen.faults import FaultsError, MachineError
from sheetgen.records import atomic_weight, composition, read_folder
from sheetgen.records.elements import elements

BLANK = re.compile(r"^# ( *)([a-z/ ]+): (\{value: \?.*\}) +# .*, such as (.+)$", re.MULTILINE)


@pytest.fixture
def folder(tmp_path):
    """An empty folder of records."""
    path = tmp_path / "materials"
    path.mkdir()
    return path


def drafted(folder, formula, name=""):
    """The record that a draft makes, as the program reads it."""
    written = draft_formula(formula, folder, name)
    (record,) = (r for r in read_folder(folder).records if r.path == written.record)
    return written, record


def test_copper_gets_what_follows_from_its_formula(folder):
    written, record = drafted(folder, "Cu")
    text = written.record.read_text(encoding="utf-8")
    assert written.record == folder / "copper.yaml"
    assert (record.name, record.formula, record.review.state) == ("Copper", "Cu", "draft")
    assert record.electrons.valence["Cu"].value == 1
    assert record.electrons.valence["Cu"].recalled
    assert record.electrons.note == "Assumption: one s electron; the full d shell is not counted."
    assert "# Standard atomic weights in g/mol, as CIAAW abridges them: Cu 63.546.\n" in text
    assert re.search(r"^#   lattice: fcc +# recalled: the common one at room temperature$", text, re.MULTILINE)
    assert re.search(r"^#   a: \{value: \? Å, at: \? K, from: \?\} +# a length, such as ", text, re.MULTILINE)


def test_a_draft_states_no_structure_and_no_measurement(folder):
    record = drafted(folder, "Cu")[1]
    assert (record.crystal, record.measured, record.specimens) == (None, {}, ())
    assert set(record.inputs) == {"electrons.valence"}


def test_a_compound_gets_a_valence_for_each_element(folder):
    record = drafted(folder, "TiN")[1]
    assert {e: v.value for e, v in record.electrons.valence.items()} == {"Ti": 4, "N": -3}
    assert all(value.recalled for value in record.electrons.valence.values())


def test_filled_shells_leave_no_valence_and_say_what_to_give(folder):
    written, record = drafted(folder, "GaAs")
    assert record.electrons.valence is None
    assert "count the carriers of doping or defects by their density" in written.assumed
    assert "# electrons:" in written.record.read_text(encoding="utf-8")


def test_an_empty_folder_gets_an_imprint_and_a_full_one_keeps_its_own(folder, tmp_path):
    assert folder / "handbook.yaml" in draft_formula("Cu", folder).written
    full = write_small_handbook(tmp_path / "full")
    before = (full / "handbook.yaml").read_bytes()
    assert draft_formula("Ag", full).written == (full / "silver.yaml",)
    assert (full / "handbook.yaml").read_bytes() == before


@pytest.mark.parametrize("standing", ["copper.yaml", "copper.yml", "Copper.YAML"])
def test_nothing_is_written_over(folder, standing):
    (folder / standing).write_text("mine\n")
    with pytest.raises(DraftRefusedError) as refused:
        draft_formula("Cu", folder)
    assert str(refused.value) == (
        f"{folder / standing} stands already and is left alone. For another record give another name, as in: "
        "--name 'Copper film'"
    )
    assert [(path.name, path.read_text()) for path in folder.iterdir()] == [(standing, "mine\n")]


def test_a_record_is_not_named_like_the_imprint(folder):
    (folder / "handbook.yaml").write_text("title: Mine\n")
    with pytest.raises(DraftRefusedError, match="stands already"):
        draft_formula("Cu", folder, "Handbook")


@pytest.mark.parametrize("name", [" ", "a\nb\x00", "\u202ereversed", "x" * 201])
def test_a_name_that_is_none_is_refused(folder, name):
    with pytest.raises(DraftRefusedError) as refused:
        draft_formula("Cu", folder, name)
    assert str(refused.value) == "--name is no name; expected up to 200 visible characters, such as Copper."
    assert not list(folder.iterdir())


def test_a_folder_that_may_not_be_written_is_the_machines_fault(folder, monkeypatch):
    """As root nothing is forbidden, so the system call itself says no."""

    def refuse(self, *words, **settings):
        raise PermissionError(13, "Permission denied", str(self))

    monkeypatch.setattr("pathlib.Path.open", refuse)
    with pytest.raises(MachineError, match=r"cannot write .*handbook\.yaml: Permission denied"):
        draft_formula("Cu", folder)


def test_a_failure_takes_back_what_was_new(folder, monkeypatch):
    def full(path, text, undo):
        if path.name != "handbook.yaml":
            raise OSError(28, "No space left on device", str(path))
        return original(path, text, undo)

    from sheetgen.drafting import placing

    original = placing._create
    monkeypatch.setattr(placing, "_create", full)
    with pytest.raises(MachineError, match="No space left"):
        draft_formula("Cu", folder)
    assert not list(folder.iterdir())


@pytest.mark.parametrize(
    "word, guess",
    [
        ("copper", " Did you mean 'Cu' (copper)?"),
        ("alluminium", " Did you mean 'Al' (aluminium)?"),
        ("cu", " Did you mean 'Cu'?"),
        ("gaas", " Did you mean 'GaAs'?"),
        ("tin", " Did you mean 'Sn' (tin) or 'TiN'?"),
        ("tio2", " Did you mean 'TiO2'?"),
        ("xylophone", ""),
    ],
)
def test_what_is_no_formula_gets_a_guess(word, guess):
    with pytest.raises(FormulaRefusedError) as refused:
        read_formula(word)
    first = word[0]
    assert str(refused.value) == (
        f"Formula '{word}' has an unexpected '{first}'; expected element symbols, counts and brackets, such as GaAs "
        f"or Al0.3Ga0.7As.{guess}"
    )


def test_an_unknown_element_is_named():
    with pytest.raises(FormulaRefusedError, match=r"^Formula 'Xx' names 'Xx', which is no element; expected symbols"):
        read_formula("Xx")


# ---------------------------------------------------------------- whatever the formula, the draft is in order


@pytest.fixture(scope="module")
def shared(tmp_path_factory):
    """A folder in which one record at a time is tried."""
    path = tmp_path_factory.mktemp("tried")
    (path / "handbook.yaml").write_text("title: Tried\n")
    return path


def in_order(shared, text):
    (shared / "tried.yaml").write_text(text, encoding="utf-8")
    (record,) = read_folder(shared).records
    return record


@pytest.mark.parametrize("element", elements())
def test_the_draft_of_every_element_is_in_order(shared, element):
    record = in_order(shared, record_text(Material(usual()[element].name, element, {element: 1.0})))
    assert record.formula == element
    assert record.cautions[-1].text.startswith("This list starts from a small table")


SYMBOLS = st.sampled_from(list(elements()))
COUNTS = st.one_of(st.just(""), st.integers(1, 99).map(str), st.floats(0.01, 9).map(lambda x: f"{x:.2f}"))
FORMULAS = st.lists(st.tuples(SYMBOLS, COUNTS).map("".join), min_size=1, max_size=5).map("".join)


@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(formula=FORMULAS, name=st.text(string.printable.strip() + "äβ日 ", min_size=1, max_size=30))
def test_the_draft_of_any_formula_under_any_name_is_in_order(shared, formula, name):
    name = name.strip().lstrip("=+@-").strip() or "x"  # what else a name begins with, the command refuses
    record = in_order(shared, record_text(Material(name, formula, composition(formula))))
    assert (record.name, record.formula) == (name, formula)
    if record.electrons.valence:
        assert sum(record.electrons.valence[e].value * n for e, n in record.composition.items()) > 0


@settings(max_examples=200, deadline=None)
@given(st.text(max_size=40))
def test_any_text_is_a_formula_or_is_refused_in_one_line(text):
    try:
        formula, counts = read_formula(text)
    except FormulaRefusedError as refused:
        assert "\n" not in str(refused)
        assert str(refused).endswith((".", "?", "it"))
    else:
        assert composition(formula) == counts


@given(st.text(max_size=80))
def test_any_name_gives_a_slug_that_the_reader_takes(name):
    assert re.fullmatch(r"(?:[a-z0-9]+(?:-[a-z0-9]+)*)?", slug_of(name))
    assert len(slug_of(name)) <= 66


def test_every_blank_holds_the_example_that_stands_behind_it(shared):
    """The units and examples of the blanks are such as the reader takes: each is filled in, one at a time."""
    text = record_text(Material("Gallium arsenide", "GaAs", composition("GaAs")))
    found = list(BLANK.finditer(text))
    assert len(found) > 20
    for blank in found:
        indent, key, example = len(blank[1]), blank[2], blank[4]
        parent = re.findall(r"^# (\w+):", text[: blank.start()], re.MULTILINE)[-1]
        extra = "  lattice: zincblende\n" if parent == "structure" else ""
        extra += "  density: 1e18 1/cm^3\n" if parent == "electrons" and key != "density" else ""
        extra += "  resistivity: 1 ohm m\n" if key == "residual resistivity" else ""
        record = in_order(shared, f"name: x\nformula: GaAs\n{parent}:\n{extra}{' ' * indent}{key}: {example!r}\n")
        assert record.inputs, key


@pytest.mark.parametrize("blank", ["# structure:", "# measured:", "# specimens:", "# electrons:"])
def test_a_blank_that_is_only_uncommented_is_a_fault_and_no_number(shared, blank):
    text = record_text(Material("GaAs", "GaAs", composition("GaAs")))
    block = text[text.index(blank) :].split("\n\n")[0]
    opened = text.replace(block, "\n".join(line.removeprefix("# ") for line in block.splitlines()))
    with pytest.raises(FaultsError):
        in_order(shared, opened)


# ---------------------------------------------------------------- the table of elements


def test_the_table_names_every_element_once():
    table = usual()
    assert list(table) == list(elements())
    assert len({element.name for element in table.values()}) == 118


def test_usual_values_are_those_of_the_reviewed_records(handbook):
    """Where the demonstration has an element, someone has thought about its valence and its lattice."""
    compared = 0
    for sheet in handbook.sheets:
        record = sheet.record
        if len(record.composition) == 1 and record.electrons.valence and record.crystal:
            (element,) = record.composition
            compared += 1
            assert float(usual()[element].valence) == record.electrons.valence[element].value
            assert usual()[element].lattice in ("", record.crystal.lattice)
    assert compared > 30


def test_valences_of_titanium_nitride_are_those_of_the_reviewed_record(handbook):
    reviewed = handbook["titanium-nitride"].record.electrons.valence
    assert valences({"Ti": 1, "N": 1}).electrons == {e: f"{v.value:g}" for e, v in reviewed.items()}


@pytest.mark.parametrize(
    "formula, name",
    [("Cu", "Copper"), ("GaAs", "Gallium arsenide"), ("TiO2", "Titanium dioxide"), ("In2O3", "In2O3"),
     ("CuZn", "CuZn"), ("Cu2", "Cu2"), ("NO", "NO")],
)  # fmt: skip
def test_a_name_is_given_where_the_formula_settles_it(formula, name):
    assert usual_name(formula, composition(formula)) == name


def test_every_atomic_weight_in_a_draft_is_that_of_the_reader():
    text = record_text(Material("x", "TiTcN", composition("TiTcN")))
    assert f"Ti {atomic_weight('Ti'):g}, N {atomic_weight('N'):g}." in text
    assert "No standard atomic weight exists for Tc: the sheet will state no mass density." in text
