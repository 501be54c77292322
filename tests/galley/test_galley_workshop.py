"""What a press of the galley touches, keeps and tells."""

from __future__ import annotations

import pytest
from support.folders import FILES

from sheetgen.galley.workshop import Workshop


@pytest.fixture
def pressed(workshop) -> Workshop:
    workshop.press()
    return workshop


def save(workshop: Workshop, name: str, text: str) -> None:
    (workshop.folder / name).write_text(text, encoding="utf-8")


def test_the_first_press_publishes_everything(pressed):
    news = pressed.news
    assert (news.number, news.faults) == (1, ())
    assert {"index.html", "materials/copper.html", "data/handbook.json"} <= news.published
    assert news.since(0) == sorted(news.published)
    assert news.since(1) == []


def test_nothing_changed_is_no_news(pressed):
    pressed.press()
    save(pressed, "copper.yaml", FILES["copper.yaml"])
    pressed.press()
    save(pressed, "copper.yaml", "# a remark that no page shows\n" + FILES["copper.yaml"])
    pressed.press()
    assert pressed.news.number == 1


def test_a_save_redraws_only_what_it_touches(pressed, monkeypatch):
    import sheetgen.figures

    drawn, draw_all = [], sheetgen.figures.draw_all
    monkeypatch.setattr(
        "sheetgen.figures.draw_all", lambda sheet, book: drawn.append(sheet.record.slug) or draw_all(sheet, book)
    )
    save(pressed, "copper.yaml", FILES["copper.yaml"].replace("3.6149(3)", "3.62(1)"))
    pressed.press()
    changed = pressed.news.since(1)
    assert drawn == ["copper"]
    assert "materials/copper.html" in changed and "data/handbook.json" in changed
    assert "materials/sodium.html" not in changed
    assert not any(path.startswith("figures/sodium/") for path in changed)


def test_another_imprint_redraws_everything(pressed, monkeypatch):
    drawn = []
    monkeypatch.setattr("sheetgen.figures.draw_all", lambda sheet, handbook: drawn.append(sheet.record.slug) or [])
    save(pressed, "handbook.yaml", FILES["handbook.yaml"] + "temperatures: [20 K, 293.15 K]\n")
    pressed.press()
    assert drawn == ["copper", "sodium"]


def test_faults_are_news_and_the_last_good_site_stands(pressed):
    page = pressed.site / "materials" / "copper.html"
    before = page.read_bytes()
    save(pressed, "copper.yaml", "name: Copper\nformla: Cu\n")
    pressed.press()
    news = pressed.news
    assert news.number == 2 and news.since(1) == []
    assert f"{pressed.folder}/copper.yaml:2:1" in [str(fault.place) for fault in news.faults]
    assert page.read_bytes() == before and "materials/copper.html" in news.published
    save(pressed, "copper.yaml", FILES["copper.yaml"])
    pressed.press()
    assert (pressed.news.number, pressed.news.faults, pressed.news.since(2)) == (3, (), [])


def test_a_first_press_that_fails_leaves_a_galley_that_waits(workshop):
    save(workshop, "copper.yaml", "name: [\n")
    workshop.press()
    assert workshop.news.faults and not workshop.news.published
    save(workshop, "copper.yaml", FILES["copper.yaml"])
    workshop.press()
    assert not workshop.news.faults and "materials/copper.html" in workshop.news.published


def test_a_folder_that_vanishes_is_a_fault(pressed):
    pressed.folder.rename(pressed.folder.with_name("elsewhere"))
    pressed.press()
    assert [str(fault) for fault in pressed.news.faults] == [f"{pressed.folder}: no such file or directory"]


def test_what_was_told(workshop):
    lines = []
    workshop.told = lines.append
    workshop.press()
    save(workshop, "copper.yaml", "name: Copper\nformla: Cu\n")
    workshop.press()
    assert lines[0] == f"{len(workshop.news.published)} files of the site changed"
    assert any(line.startswith(f"{workshop.folder}/copper.yaml:2:1: ") for line in lines[1:])


def test_an_error_of_the_program_is_shown_and_survived(pressed, monkeypatch):
    with monkeypatch.context() as broken:
        broken.setattr("sheetgen.handbook.read_folder", lambda path: {}["missing"])
        save(pressed, "copper.yaml", FILES["copper.yaml"].replace("3.6149(3)", "3.62(1)"))
        pressed.press()
    assert "the program itself is at fault (KeyError: 'missing')" in pressed.news.faults[0].message
    save(pressed, "copper.yaml", FILES["copper.yaml"].replace("3.6149(3)", "3.63(1)"))
    pressed.press()
    assert pressed.news.faults == ()
