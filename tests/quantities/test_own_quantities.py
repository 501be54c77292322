"""A group's own quantities: from one function to line, page, column and uncertainty; and every mistake in it."""

from __future__ import annotations

import json
import re
import shutil
import warnings
from pathlib import Path

import numpy as np
import pytest
from support.folders import FILES

from sheetgen.cli import run
from sheetgen.faults import FaultsError
from sheetgen.handbook import Handbook, registry_of
from sheetgen.quantities import registry
from sheetgen.quantities.evaluate import evaluate
from sheetgen.quantities.own import load_own, registry_with_own
from sheetgen.quantities.parameters import parameter_tables, quantity_parameters, si_unit
from sheetgen.records import si_factor

DOCUMENT = Path(__file__).parents[2] / "docs" / "own-quantities.md"
HEAD = "import numpy as np\nfrom sheetgen.quantities import Comparison, Declarations\ndeclarations = Declarations()\n"
FIELDS = {
    "symbol": '"M"', "unit": '"1"', "formula": '"x"', "source": '""', "section": '"Transport"',
}  # fmt: skip


def block(language: str, number: int = 0) -> str:
    """A block of code of the document."""
    return re.findall(rf"^```{language}\n(.*?)^```", DOCUMENT.read_text(encoding="utf-8"), re.DOTALL | re.MULTILINE)[
        number
    ]


def declared(body: str = "return fermi_energy", parameters: str = "fermi_energy", name: str = "merit", **fields) -> str:
    """A file that declares one quantity; its decorator is in line 4, its body in line 7."""
    words = ", ".join(f"{key}={value}" for key, value in (FIELDS | fields).items())
    return f'{HEAD}@declarations.quantity({words})\ndef {name}({parameters}):\n    """Merit"""\n    {body}\n'


@pytest.fixture
def folder(tmp_path):
    """Writes a folder of two metals whose imprint names own quantities, and the file itself."""

    def write(text: str, name: str = "quantities.py"):
        path = tmp_path / "records"
        path.mkdir(exist_ok=True)
        for file, content in FILES.items():
            (path / file).write_text(content, encoding="utf-8")
        imprint = FILES["handbook.yaml"] + f"own quantities: {name}\n"
        (path / "handbook.yaml").write_text(imprint, encoding="utf-8")
        (path / "quantities.py").write_text(text, encoding="utf-8")
        return path

    return write


def faults(path: Path) -> list[str]:
    """The faults of a folder, as `proof` lists them, without the way to it."""
    with pytest.raises(FaultsError) as caught:
        Handbook.load(path)
    return [str(fault).replace(f"{path}/", "") for fault in caught.value.faults]


# ---------------------------------------------------------------- the worked example


@pytest.fixture(scope="module")
def interconnects(tmp_path_factory, root):
    """The folder of the document: copper and tungsten of the demonstration, with the example as its own quantities."""
    path = tmp_path_factory.mktemp("documented") / "materials"
    path.mkdir()
    for name in ("copper.yaml", "tungsten.yaml", "gallium-arsenide-quantum-well.yaml", "sources.bib"):
        shutil.copy(root / "materials" / name, path)
    imprint = (root / "materials" / "handbook.yaml").read_text(encoding="utf-8")
    kept = [line for line in imprint.splitlines() if not line.startswith("previous edition")]
    (path / "handbook.yaml").write_text("\n".join(kept) + "\n" + block("yaml"), encoding="utf-8")
    (path / "quantities.py").write_text(block("python"), encoding="utf-8")
    return path


def test_the_example_has_value_uncertainty_and_inputs(interconnects):
    number = Handbook.load(interconnects)["copper"].number("interconnect_merit")
    copper = Handbook.load(interconnects)["copper"]
    product = copper.number("resistivity_path_product")
    assert number.value == pytest.approx(product.value / 1.35777, rel=1e-9)  # copper melts at 1357.77 K
    assert number.relative_uncertainty == pytest.approx(product.relative_uncertainty, rel=1e-6)
    assert number.unit == "fohm m^2/kK"
    assert number.depends_on == ("resistivity_path_product", "measured.melting_point")


def test_the_example_stands_on_sheet_page_table_and_data(interconnects, tmp_path):
    from sheetgen.press import press

    site = tmp_path / "site"
    press(interconnects, site)
    sheet = (site / "materials/copper.html").read_text(encoding="utf-8")
    assert "Figure of merit for interconnects" in sheet
    page = (site / "quantities/interconnect_merit.html").read_text(encoding="utf-8")
    assert "<mfrac>" in page and "our own choice" in page and "fΩ" in page
    data = json.loads((site / "data/materials/copper.json").read_text(encoding="utf-8"))
    assert data["quantities"]["interconnect_merit"]["standard_uncertainty"] > 0
    assert "interconnect_merit,interconnect_merit.u" in (site / "data/handbook.csv").read_text(encoding="utf-8")
    assert "interconnect_merit" in (site / "index.html").read_text(encoding="utf-8")


def test_what_the_document_shows_is_what_is_printed(interconnects, monkeypatch, capsys):
    monkeypatch.chdir(interconnects.parent)
    command, _, output = block("console").partition("\n")
    assert run(command.removeprefix("$ sheetgen ").split()) == 0
    assert capsys.readouterr().out == output


def test_the_mistake_that_the_document_shows_is_told_so(interconnects, monkeypatch, capsys):
    monkeypatch.chdir(interconnects.parent)
    shutil.copytree(interconnects, "faulty", dirs_exist_ok=True)
    wrong = block("python").replace("(resistivity_path_product,", "(resistivity_path,")
    Path("faulty/quantities.py").write_text(wrong.replace("product /", "/"), encoding="utf-8")
    command, _, output = block("console", 1).partition("\n")
    assert run(command.removeprefix("$ sheetgen ").split()) == 1
    assert capsys.readouterr().err == output


def test_the_document_lists_every_parameter():
    """Where this fails: put what parameter_tables(registry()) gives behind the document's last heading."""
    text = DOCUMENT.read_text(encoding="utf-8")
    listed = text.partition("## Names that a function may take\n\n")[2]
    assert listed == parameter_tables(registry())


def test_units_of_parameters_are_si_units_of_their_quantities():
    for parameter in quantity_parameters(registry()):
        for unit in parameter.unit.split(", in two dimensions "):
            assert si_factor(unit) == 1
            assert si_unit(unit) == unit


def test_the_document_names_the_sections():
    from sheetgen.quantities.declaration import SECTIONS

    assert ", ".join(SECTIONS) in " ".join(DOCUMENT.read_text(encoding="utf-8").split())


# ---------------------------------------------------------------- when it is loaded


def test_ours_are_untouched_and_the_file_is_read_anew(folder):
    path = folder(declared())
    first = Handbook.load(path)["copper"].number("merit").value
    (path / "quantities.py").write_text(declared("return 2 * fermi_energy"))
    assert Handbook.load(path)["copper"].number("merit").value == 2 * first
    assert "merit" not in registry()
    assert not list(path.rglob("__pycache__"))


def test_a_file_that_no_imprint_names_is_not_run(folder):
    path = folder("raise SystemExit('it was run')")
    (path / "handbook.yaml").write_text(FILES["handbook.yaml"])
    assert registry_of(Handbook.load(path).imprint) is registry()


@pytest.mark.parametrize("name", ["../quantities.py", "/etc/passwd", "quantities", "sub/quantities.py", "missing.py"])
def test_a_path_out_of_the_folder_is_refused(folder, name):
    path = folder(declared(), name)
    (path.parent / "quantities.py").write_text(declared())
    (found,) = faults(path)
    assert re.match(
        r"handbook\.yaml:\d+:\d+: own quantities: found '.*', no Python file beside handbook\.yaml; ", found
    )


def test_a_link_out_of_the_folder_is_refused(folder):
    path = folder(declared())
    (path / "quantities.py").rename(path.parent / "outside.py")
    (path / "quantities.py").symlink_to(path.parent / "outside.py")
    assert "no Python file beside handbook.yaml" in faults(path)[0]


def test_what_the_file_prints_stays_away_from_results(folder, capsys):
    path = folder("print('reading')\n" + declared("print('computing'); return fermi_energy"))
    assert run(["quote", "copper", "merit", "--materials", str(path), "--json"]) == 0
    said = capsys.readouterr()
    assert json.loads(said.out)["quantity"] == "merit"
    assert said.err.startswith("reading\ncomputing\n")


def test_steps_assumptions_lists_and_comparisons_of_ones_own(folder):
    path = folder(
        HEAD
        + '@declarations.step()\ndef half(fermi_energy):\n    """Half"""\n    return fermi_energy / 2\n'
        + '@declarations.assumption(indicator="T/T_h", formula=r"T/T_\\mathrm{h}", source="", strained=1e-4, '
        'broken=1e-3, listed_by="temperature")\ndef coldness(temperature, fermi_temperature):\n'
        '    """Coldness\n\n    It is cold."""\n    return temperature / fermi_temperature\n'
        + declared("return temperature * 0 + half * 1e3", "temperature, half", unit='"meV"', listed_by='"temperature"',
                   assumes='("coldness",)').removeprefix(HEAD)
        + declared("return fermi_energy * 1e29", "fermi_energy", "pressure", unit='"GPa"', comparison='Comparison('
                   'measured="bulk_modulus", ratio="r", above="more", below="less")').removeprefix(HEAD)
    )  # fmt: skip
    copper = (path / "copper.yaml").read_text(encoding="utf-8")
    (path / "copper.yaml").write_text(copper + "  bulk modulus: {value: 137 GPa, from: tables}\n", encoding="utf-8")
    sheet = Handbook.load(path)["copper"]
    assert [number.temperature for number in sheet.numbers("merit")] == [293.15, 4.2, 77]
    assert {number.standing for number in sheet.numbers("merit")} == {"outside", "unchecked"}
    assert any(held.quantity == "pressure" for held in sheet.confrontations)


# ---------------------------------------------------------------- every mistake is one line


UNIT = "quantities.py:4: merit(): "
MISTAKES = {
    "syntax": ("def f(:\n    pass\n", "quantities.py:1:7: not readable as Python: invalid syntax."),
    "not raw": (declared(formula='"\\squared"'), "quantities.py:4:54: not readable as Python: invalid escape sequence "
                "'\\s'. Write LaTeX as a raw string, r\"…\"."),
    "exception": ("x = 1\n1 / 0\n", "quantities.py:2: reading the file fails here with ZeroDivisionError: "
                  "division by zero. Mend this line."),
    "exit": ("import sys\nsys.exit(3)\n", "quantities.py:2: the file ends the program; take the call of exit() out."),
    "library": ("import nosuchlibrary\n", "quantities.py:1: there is no library 'nosuchlibrary'; install it where "
                "sheetgen runs, or do without it."),
    "no declarations": ("x = 1\n", "quantities.py:1: the file makes no 'declarations'; begin the file with: from "
                        "sheetgen.quantities import Declarations; declarations = Declarations()."),
    "another name": (declared().replace("declarations", "mine").replace("import Comparison, Declarations", "import *"),
                     "quantities.py:1: the file makes no 'declarations'; rename 'mine' to it."),
    "empty": (HEAD, "quantities.py:1: 'declarations' declares no quantity; declare one with @declarations.quantity(…), "
              "or take 'own quantities' out of handbook.yaml."),
    "unknown field": (declared(unti='"1"'), "quantities.py:4: a quantity has no 'unti'; expected one of id, scope, "
                      "dimensions, symbol, unit, formula, source, section, assumes, listed_by, "),
    "missing field": (declared().replace(', section="Transport"', ""),
                      "quantities.py:4: a quantity is declared without 'section'; add what is missing."),
    "unit": (declared(unit='"ohmm"'), UNIT + "unit: 'ohmm' is no unit known here. Did you mean 'ohm'?"),
    "unit that is no text": (declared(unit="1"), UNIT + "unit=1 is no text; put it in quotes."),
    "parameter": (declared(parameters="fermi_energi", body="return fermi_energi"),
                  "quantities.py:4: merit() takes 'fermi_energi', but no quantity or input has that name; rename it. "
                  "Did you mean 'fermi_energy'?"),
    "assumption": (declared(assumes='("flat_potental",)'), "quantities.py:4: merit() assumes 'flat_potental', which is "
                   "not declared. Did you mean 'flat_potential'?"),
    "no comma": (declared(assumes='("flat_potential")'), UNIT + "assumes='flat_potential'; expected texts in brackets, "
                 "each followed by a comma, such as (\"flat_potential\",)."),
    "dimensions": (declared(dimensions="3"), UNIT + "dimensions=3; expected (3,), (2,) or (3, 2)."),
    "section": (declared(section='"Merits"'), "quantities.py:4: merit() has section='Merits'; expected one of Crystal, "
                "Electron gas at T = 0, Heat and magnetism, Transport, Optics, Finite specimens, Specimens"),
    "id": (declared(id='"../../index"'), UNIT + "'../../index' cannot be an id and an address; expected lower-case "
           "letters, digits and underscores."),
    "taken": (declared(name="reference_temperature"), "quantities.py:4: reference_temperature() has the name of an "
              "input; give it another name"),
    "lost command": (declared(formula='"\\frac{a}{b}"'), UNIT + "formula holds the control character '\\x0c', once a "
                     "LaTeX command; write it as a raw string, r\"…\"."),
    "unknown command": (declared(formula='r"\\fraction{a}{b}"'), UNIT + "formula '\\\\fraction{a}{b}' uses \\fraction, "
                        "which is not set here; write it in other commands."),
    "braces": (declared(formula='r"\\frac{a"'), UNIT + "formula '\\\\frac{a' opens and closes different "
               "numbers of braces; close each that is open."),
    "half a fraction": (declared(formula='r"\\frac{a}"'), UNIT + "formula '\\\\frac{a}' "),
    "list without axis": (declared(listed_by='"temperature"'), "quantities.py:4: merit() is listed by temperature and "
                          "reads nothing that changes along it; take temperature as a parameter, or leave listed_by "
                          "out."),
    "comparison": (declared(comparison='Comparison("bulk_modulu", "r", "a", "b")'), UNIT + "it is held against "
                   "'bulk_modulu', which is no key under 'measured' of a record. Did you mean 'bulk_modulus'?"),
    "raises": (declared("return fermi_energy / (1 // 0)"), "quantities.py:7: merit() cannot be evaluated: "
               "ZeroDivisionError: integer division or modulo by zero; mend this line; the arguments are arrays of the "
               "shape (draws, materials, entries)."),
    "if": (declared("return fermi_energy if fermi_energy > 0 else 0"), "quantities.py:7: merit() cannot be evaluated: "
           "ValueError: The truth value of an array with more than one element is ambiguous. Use a.any() or a.all(); "
           "take np.where(condition, …, …) instead of if, for a whole array at once."),
    "math": (declared("import math; return math.sqrt(fermi_energy)"), "quantities.py:7: merit() cannot be evaluated: "
             "TypeError: only 0-dimensional arrays can be converted to Python scalars; take NumPy's function, such as "
             "np.sqrt, instead of one of math."),
    "in place": (declared("fermi_energy *= 2; return fermi_energy"), "quantities.py:7: merit() cannot be evaluated: "
                 "ValueError: output array is read-only; make a new array instead of changing the one that was given."),
    "shape": (declared("return 1.0"), "quantities.py:4: merit() cannot be evaluated: it returned the shape (), "
              "expected (draws, 2, entries); keep to NumPy operations on whole arrays, which keep their shape."),
    "sum": (declared("return fermi_energy.sum(axis=1)"), "quantities.py:4: merit() cannot be evaluated: it returned "
            "the shape (1, 1), expected (draws, 2, entries); keep to NumPy operations on whole arrays, which keep "
            "their shape."),
    "nothing": (declared("pass"), "quantities.py:4: merit() cannot be evaluated: it returned the shape (), expected "
                "(draws, 2, entries); keep to NumPy operations on whole arrays, which keep their shape."),
    "text": (declared("return 'high'"), "quantities.py:4: merit() cannot be evaluated: ValueError: could not convert "
             "string to float: 'high'; mend this line; the arguments are arrays of the shape (draws, materials, "
             "entries)."),
    "complex": (declared("return fermi_energy * 1j"), "quantities.py:4: merit() cannot be evaluated: TypeError: it "
                "gives complex numbers, and a sheet states real ones; mend this line; the arguments are arrays of the "
                "shape (draws, materials, entries)."),
    "exit in function": (declared("raise SystemExit"), "quantities.py:4: merit() cannot be evaluated: RuntimeError: it "
                         "ends the program; mend this line; the arguments are arrays of the shape (draws, materials, "
                         "entries)."),
    "ring": (declared("return other", "other") + declared("return merit", "merit", "other").removeprefix(HEAD),
             "quantities.py:4: quantities need each other in a ring: "),
    "hidden": (declared() + "# \u202e\n", "quantities.py:8:3: the hidden character U+202E stands here; expected "
               "visible text. Delete it."),
}  # fmt: skip


@pytest.mark.parametrize("mistake", MISTAKES)
def test_a_mistake_is_one_line_with_its_place(folder, mistake):
    text, message = MISTAKES[mistake]
    found = faults(folder(text))
    assert (
        found[0].startswith(message) if mistake in ("half a fraction", "ring", "unknown field") else found == [message]
    )


def test_an_unknown_field_gets_a_guess(folder):
    assert faults(folder(declared(unti='"1"')))[0].endswith(" Did you mean 'unit'?")


def test_a_name_of_ours_is_taken(folder):
    (found,) = faults(
        folder(declared(name="fermi_energy", parameters="fermi_wavevector", body="return fermi_wavevector"))
    )
    assert found.startswith("quantities.py:4: fermi_energy() is declared in 3 dimensions already at ")


def test_several_mistakes_are_told_at_once(folder):
    text = declared(unit='"ohmm"') + declared(name="other", dimensions="2").removeprefix(HEAD)
    assert len(faults(folder(text))) == 2


@pytest.mark.parametrize("mistake", ["syntax", "exception", "if"])
def test_the_command_ends_with_status_1_and_no_traceback(folder, mistake, capsys):
    assert run(["proof", str(folder(MISTAKES[mistake][0]))]) == 1
    said = capsys.readouterr()
    assert said.out == ""
    assert "Traceback" not in said.err


def test_infinities_and_warnings_are_absent_numbers(folder):
    path = folder(declared("return np.log(fermi_energy * 0) + np.nanmean(fermi_energy * np.nan)"))
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        sheet = Handbook.load(path)["copper"]
    assert sheet.numbers("merit") == ()


def test_functions_get_arrays_that_they_cannot_change(folder):
    path = folder(declared("return fermi_energy + 0")) / "quantities.py"
    (definition,) = load_own(path).definitions
    given = np.ones((1, 2, 1))
    definition.function(given)
    assert given.flags.writeable
    plan = registry_with_own(path).plans["material", 3]
    assert evaluate(plan, {"fermi_energy": given}, only={"merit"})["merit"].tolist() == given.tolist()
