"""The paper edition, read back as a reader's program would."""

from __future__ import annotations

import importlib.util
import io
import re
import shutil
import sys
from collections.abc import Iterator
from typing import Any

import pytest

from sheetgen.press import deviations, press

pypdf = pytest.importorskip("pypdf")

SHEETS = {"copper": "Copper", "gallium-arsenide-quantum-well": "GaAs quantum well", "lead": "Lead"}
A4 = (595.28, 841.89)  # points, ISO 216


@pytest.fixture(scope="module")
def pdfs(paper_site) -> dict[str, Any]:
    return {path.stem: pypdf.PdfReader(path) for path in paper_site.rglob("*.pdf")}


@pytest.fixture(scope="module")
def texts(pdfs) -> dict[str, list[str]]:
    return {name: [page.extract_text() for page in pdf.pages] for name, pdf in pdfs.items()}


def test_there_is_one_for_each_sheet_and_one_for_all(paper_site):
    found = {path.relative_to(paper_site).as_posix() for path in paper_site.rglob("*.pdf")}
    assert found == {"handbook.pdf"} | {f"materials/{slug}.pdf" for slug in SHEETS}


@pytest.mark.parametrize("slug", SHEETS)
def test_a_sheet_has_two_to_four_pages_none_of_them_blank(pdfs, texts, slug):
    assert 2 <= len(pdfs[slug].pages) <= 4
    for page, text in zip(pdfs[slug].pages, texts[slug], strict=True):
        assert (float(page.mediabox.width), float(page.mediabox.height)) == pytest.approx(A4, abs=0.1)
        assert len(text) > 150
    total = len(pdfs[slug].pages)
    assert all(re.search(rf"page {number} of {total}\b", text) for number, text in enumerate(texts[slug], 1))


def test_the_first_page_gives_answer_key_numbers_and_cautions(texts):
    first = texts["copper"][0]
    for words in ("Copper", "Key numbers", "7.0315(12)", "The plain answer", "Do not use", "Cautions", "H410"):
        assert words in first
    assert "https://handbook.marrow-point.example/materials/copper.html" in re.sub(r"\s", "", first)


def test_the_last_pages_give_every_number_and_its_source(texts):
    text = re.sub(r"\s+", " ", " ".join(texts["copper"]))
    for words in ("Inputs", "3.6149(3)", "Held against measurement", "F-12, film", "invented for demonstration"):
        assert words in text
    assert "Electrical resistivity of copper, gold, palladium, and silver" in text


def test_running_heads_name_the_material_and_the_handbook(texts):
    for text in texts["lead"][1:]:
        assert "Lead (Pb)" in text and "Free Electrons in Thin Films, edition 2026.2" in text


@pytest.mark.parametrize("name", [*SHEETS, "handbook"])
def test_every_font_is_embedded(pdfs, name):
    fonts = [font for page in pdfs[name].pages for font in fonts_of(page["/Resources"])]
    assert fonts
    for font in fonts:
        described = font["/DescendantFonts"][0]["/FontDescriptor"]
        assert {"/FontFile", "/FontFile2", "/FontFile3"} & set(described), font["/BaseFont"]
        assert "Libertinus" in font["/BaseFont"]


def fonts_of(resources: Any) -> Iterator[Any]:
    for font in (resources.get("/Font") or {}).values():
        yield font.get_object()


@pytest.mark.parametrize("name", [*SHEETS, "handbook"])
def test_a_screen_reader_finds_title_language_and_tags(pdfs, name):
    catalogue = pdfs[name].trailer["/Root"]
    assert catalogue["/Lang"] == "en"
    assert catalogue["/MarkInfo"]["/Marked"]
    assert catalogue["/ViewerPreferences"]["/DisplayDocTitle"]
    assert "Free Electrons in Thin Films" in pdfs[name].metadata.title
    metadata = catalogue["/Metadata"].get_data().decode()
    assert re.search(r"pdfuaid:part(?:>|=\")1", metadata)


def elements(kid: Any) -> Iterator[Any]:
    """Every element of a tree of tags, in reading order."""
    kid = kid.get_object() if hasattr(kid, "get_object") else kid
    if isinstance(kid, list):
        for one in kid:
            yield from elements(one)
    elif isinstance(kid, dict) and "/S" in kid:
        yield kid
        yield from elements(kid.get("/K", []))


@pytest.mark.parametrize("name", [*SHEETS, "handbook"])
def test_every_picture_says_what_it_shows(pdfs, name):
    root = pdfs[name].trailer["/Root"]["/StructTreeRoot"]
    pictures = [element for element in elements(root["/K"]) if element["/S"] == "/Figure"]
    assert len(pictures) > 3
    assert all(picture.get("/Alt") for picture in pictures)


@pytest.mark.parametrize("name", [*SHEETS, "handbook"])
def test_every_mark_on_a_page_is_tagged_once(pdfs, name):
    """What a page marks is in the tree, under the same number, and the number leads back to the same element."""
    pdf = pdfs[name]
    root = pdf.trailer["/Root"]["/StructTreeRoot"]
    numbers = root["/ParentTree"]["/Nums"]
    parents = {int(numbers[place]): numbers[place + 1].get_object() for place in range(0, len(numbers), 2)}
    assert len(parents) == len(numbers) // 2
    seen = []
    for page in pdf.pages:
        marked = {int(found) for found in re.findall(rb"/MCID (\d+)", page.get_contents().get_data())}
        listed = parents[int(page["/StructParents"])]
        assert marked == set(range(len(listed)))
        seen.append(int(page["/StructParents"]))
        for annotation in page.get("/Annots", []):
            seen.append(int(annotation.get_object()["/StructParent"]))
    assert sorted(seen) == sorted(parents)


def test_cells_of_different_sheets_never_share_a_name(pdfs):
    root = pdfs["handbook"].trailer["/Root"]["/StructTreeRoot"]
    names = [element["/ID"] for element in elements(root["/K"]) if "/ID" in element]
    assert len(names) > 300
    assert len(set(names)) == len(names)


def outline(pdf: Any) -> list[str]:
    return [one.title for one in pdf.outline if not isinstance(one, list)]


def test_the_outline_leads_to_every_part(pdfs):
    parts = ["Methods", "Assumptions and their bounds", "What the standings mean", "Sources", "Index of quantities"]
    titles = outline(pdfs["handbook"])
    assert titles[1:] == ["Contents", "Copper", "GaAs quantum well", "Lead", *parts] or titles[-5:] == parts
    below = next(one for one in pdfs["handbook"].outline if isinstance(one, list))
    assert [one.title for one in below][:3] == ["Key numbers", "The plain answer", "Cautions"]
    assert outline(pdfs["copper"])[0] == "Copper"


def test_the_contents_name_the_page_that_the_viewer_shows(pdfs, texts):
    """Sheets count from 1 behind a front in Roman figures; each link leads to the page that it names."""
    book = pdfs["handbook"]
    front = book.page_labels.index("1")
    assert book.page_labels[:front] == ["i", "ii"]
    contents = texts["handbook"][1]
    assert re.search(r"Copper.* 1\n", contents)
    assert texts["handbook"][front].find("Copper") >= 0
    links = [one.get_object() for one in book.pages[1]["/Annots"]]
    assert all("/A" not in link for link in links)
    targets = {book.get_page_number(link["/Dest"][0].get_object()) for link in links}
    starts = [front, front + len(pdfs["copper"].pages)]
    starts.append(starts[-1] + len(pdfs["gallium-arsenide-quantum-well"].pages))
    assert set(starts) <= targets


def test_every_page_of_the_handbook_is_numbered(texts, pdfs):
    front = pdfs["handbook"].page_labels.index("1")
    total = len(texts["handbook"]) - front
    for number, text in enumerate(texts["handbook"][front:], 1):
        assert f"page {number} of {total}" in text


def test_the_index_names_the_page_where_a_quantity_is_defined(texts, pdfs):
    front = pdfs["handbook"].page_labels.index("1")
    index = " ".join(texts["handbook"][-2:])
    page = int(re.search(r"Fermi velocity\s*v\s*F?[\s.]*?(\d+)\s", index)[1])
    assert "Fermi velocity" in texts["handbook"][front + page - 1]


def test_the_same_records_give_the_same_bytes(paper_site, paper_records, tmp_path):
    press(paper_records, tmp_path / "again", paper=True)
    for path in paper_site.rglob("*.pdf"):
        assert path.read_bytes() == (tmp_path / "again" / path.relative_to(paper_site)).read_bytes(), path.name
    assert deviations(tmp_path / "again") == []


def test_nothing_tells_when_and_where_it_was_made(pdfs):
    for pdf in pdfs.values():
        assert not pdf.metadata.get("/ModDate")
        assert str(pdf.metadata.get("/CreationDate", "")) == ""


def test_a_sheet_on_screen_leads_to_its_pdf_where_there_is_one(paper_site, pressed_site):
    assert 'href="copper.pdf"' in (paper_site / "materials" / "copper.html").read_text(encoding="utf-8")
    assert "copper.pdf" not in (pressed_site / "materials" / "copper.html").read_text(encoding="utf-8")


def test_letter_is_set_as_well(paper_machine, paper_records, handbook):
    from dataclasses import replace

    from sheetgen.figures import draw_all
    from sheetgen.pages.environment import template_folder
    from sheetgen.paper import sheets
    from sheetgen.paper.typesetting import Typesetter

    class Letter:
        imprint = replace(handbook.imprint, paper="letter", base_address="")

        def __getattr__(self, name):
            return getattr(handbook, name)

    book = Letter()
    sheet = next(sheet for sheet in handbook.sheets if sheet.record.slug == "lead")
    setter = Typesetter(sheets.style(book), f"{(template_folder() / 'fonts').as_uri()}/")
    figures, level = draw_all(sheet, handbook), sheets.LEVELS[0]
    while not (printed := setter.set(sheets.manuscript(sheet, book, figures, level))).pdf:
        level = sheets.tighter(level, printed.excess)
    pages = pypdf.PdfReader(io.BytesIO(printed.pdf)).pages
    assert 2 <= len(pages) <= 4
    assert (float(pages[0].mediabox.width), float(pages[0].mediabox.height)) == pytest.approx((612, 792), abs=0.1)
    assert "https://" not in pages[0].extract_text()


@pytest.mark.parametrize("library", ["weasyprint", "pikepdf", "segno"])
def test_a_missing_library_is_said_and_nothing_is_published(library, small_handbook, tmp_path, monkeypatch, capsys):
    from sheetgen.cli import run

    monkeypatch.setitem(sys.modules, library, None)
    assert run(["press", str(small_handbook), "--pdf", "--into", str(tmp_path / "site")]) == 3
    said = capsys.readouterr().err
    assert said == (
        f"sheetgen: the paper edition needs the library '{library}': pip install 'sheetgen[pdf]'\n"
    )
    assert not (tmp_path / "site").exists()


def test_a_missing_library_of_the_system_is_said(small_handbook, tmp_path, monkeypatch, capsys):
    """WeasyPrint loads, and does not find Pango: it then raises OSError from its own import."""
    from sheetgen.cli import run

    class Finder:
        def find_spec(self, name, _path=None, _target=None):
            return importlib.util.spec_from_loader(name, self) if name == "weasyprint" else None

        def create_module(self, _spec):
            return None

        def exec_module(self, _module):
            raise OSError("cannot load library 'libpango-1.0-0'\nand more")

    monkeypatch.delitem(sys.modules, "weasyprint", raising=False)
    for name in ("pikepdf", "segno"):
        monkeypatch.setitem(sys.modules, name, sys)
    monkeypatch.setattr(sys, "meta_path", [Finder(), *sys.meta_path])
    assert run(["press", str(small_handbook), "--pdf", "--into", str(tmp_path / "site")]) == 3
    said = capsys.readouterr().err
    assert said.startswith("sheetgen: the paper edition needs a library of the system (cannot load library")
    assert "apt install libpango-1.0-0" in said and said.count("\n") == 1
    assert not (tmp_path / "site").exists()


def test_a_group_sets_its_own_title_page(paper_machine, paper_records, tmp_path):
    folder = tmp_path / "records"
    shutil.copytree(paper_records, folder)
    for slug in ("copper", "lead"):
        (folder / f"{slug}.yaml").unlink()
    (folder / "templates" / "paper").mkdir(parents=True)
    (folder / "templates" / "paper" / "front.html").write_text(
        '{% extends "original/paper/front.html" %}{% block main %}<p>Not for loan.</p>{{ super() }}{% endblock %}'
    )
    (folder / "logo.svg").write_text(
        '<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 2 1"><rect width="2" height="1"/></svg>'
    )
    with (folder / "handbook.yaml").open("a") as imprint:
        imprint.write("templates: templates\nlook: {logo: logo.svg}\n")
    press(folder, tmp_path / "site", paper=True)
    book = pypdf.PdfReader(tmp_path / "site" / "handbook.pdf")
    assert "Not for loan." in book.pages[0].extract_text()
    root = book.trailer["/Root"]["/StructTreeRoot"]
    assert "Logo of Marrow Point Thin-Film Group" in [element.get("/Alt") for element in elements(root["/K"])]
