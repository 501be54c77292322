"""The document on adding a material, followed word by word from an empty folder; and the command's statuses."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest

from sheetgen.cli import run

DOCUMENT = Path(__file__).parents[2] / "docs" / "adding-a-material.md"


def blocks(language: str) -> list[str]:
    """Every block of code of the document in one language."""
    text = DOCUMENT.read_text(encoding="utf-8")
    return re.findall(rf"^```{language}\n(.*?)^```", text, re.DOTALL | re.MULTILINE)


def shown() -> list[tuple[list[str], str]]:
    """Each command of the document, its words and what stands under it."""
    found = re.findall(r"^\$ sheetgen (.+)\n((?:(?!\$ ).*\n)*)", "".join(blocks("console")), re.MULTILINE)
    return [(command.split(), output) for command, output in found]


def counted(report: str) -> str:
    """A report without the number of files, which grows with the pages."""
    return re.sub(r"\d+ files written", "N files written", report)


@pytest.fixture
def here(tmp_path, monkeypatch) -> Path:
    """An empty folder of records in the folder where commands are typed."""
    (tmp_path / "materials").mkdir()
    monkeypatch.chdir(tmp_path)
    return tmp_path


def test_the_document_holds_word_by_word(here, capsys):
    for words, output in shown():
        status = run(words)
        said = capsys.readouterr()
        assert counted(said.out + said.err) == counted(output)
        assert status == (1 if "--strict" in words else 0)
        if words[0] == "draft":
            (here / "materials/silver.yaml").write_text(blocks("yaml")[0], encoding="utf-8")
            (here / "materials/sources.bib").write_text(blocks("bibtex")[0], encoding="utf-8")
    assert (here / "site/index.html").is_file()


def test_a_reviewed_record_passes_a_strict_proof(here, capsys):
    record, review = blocks("yaml")
    (here / "materials/handbook.yaml").write_text("title: Silver\n", encoding="utf-8")
    text = record.replace("review: {state: draft}\n", review)
    (here / "materials/silver.yaml").write_text(text, encoding="utf-8")
    (here / "materials/sources.bib").write_text(blocks("bibtex")[0], encoding="utf-8")
    assert run(["proof", "--strict"]) == 0
    assert capsys.readouterr().out == "materials: 1 record in order, 0 remarks.\n"


def test_the_sheet_of_a_draft_says_that_it_is_one(here):
    run(["draft", "Ag"])
    assert run(["press"]) == 0
    assert "Draft: nobody has reviewed this record yet." in (here / "site/materials/silver.html").read_text()


# ---------------------------------------------------------------- the command


@pytest.mark.parametrize(
    "words, status, line",
    [
        (["copper"], 2, "Formula 'copper' has an unexpected 'c'; expected element symbols, counts and brackets, such "
         "as GaAs or Al0.3Ga0.7As. Did you mean 'Cu' (copper)?"),
        ([], 2, "Give either a formula, as in: sheetgen draft Cu, or a CIF, as in: --cif quartz.cif"),
        (["Cu", "--cif", "x.cif"], 2,
         "Give either a formula, as in: sheetgen draft Cu, or a CIF, as in: --cif quartz.cif"),
        (["--cif", "coper.cif"], 2, "There is no file coper.cif. Did you mean 'copper.cif'?"),
        (["--cif", "materials"], 2, "There is no file materials."),
        (["Cu", "--materials", "material"], 2, "There is no folder material. Did you mean 'materials'?"),
        (["Cu", "--name", "  "], 2, "--name is no name; expected up to 200 visible characters, such as Copper."),
    ],
)  # fmt: skip
def test_wrong_words_end_with_status_2(here, capsys, words, status, line):
    (here / "copper.cif").write_text("data_x\n")
    assert run(["draft", *words]) == status
    said = capsys.readouterr()
    assert (said.out, said.err) == ("", f"sheetgen: {line}\n")
    assert not list((here / "materials").iterdir())


def test_a_taken_name_ends_with_status_2(here, capsys):
    assert run(["draft", "Ag"]) == 0
    before = (here / "materials/silver.yaml").read_bytes()
    assert run(["draft", "Ag"]) == 2
    assert capsys.readouterr().err == (
        "sheetgen: materials/silver.yaml stands already and is left alone. For another record give another name, "
        "as in: --name 'Silver film'\n"
    )
    assert (here / "materials/silver.yaml").read_bytes() == before


def test_a_faulty_cif_ends_with_status_1_and_its_faults_as_json(here, capsys):
    (here / "bad.cif").write_text("data_x\n_cell_volume 1\n")
    assert run(["draft", "--cif", "bad.cif", "--json"]) == 1
    said = capsys.readouterr()
    assert said.err.endswith("1 fault. Nothing was written.\n")
    (fault,) = json.loads(said.out)["faults"]
    assert (fault["file"], fault["line"]) == ("bad.cif", 1)


def test_a_draft_as_json_says_what_was_written(here, capsys):
    assert run(["draft", "TiN", "--json"]) == 0
    assert json.loads(capsys.readouterr().out) == {
        "record": "materials/titanium-nitride.yaml",
        "name": "Titanium nitride",
        "formula": "TiN",
        "assumed": "valence Ti 4, N -3: Ti gives 4, N takes 3 to fill its shell; 1 per formula unit is left",
        "written": ["materials/handbook.yaml", "materials/titanium-nitride.yaml"],
        "cif": None,
        "source": None,
    }
