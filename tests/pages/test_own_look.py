"""A group's own colours, logo, pages and templates: used where the imprint names them, refused where they do harm."""

from __future__ import annotations

import re

import pytest

from sheetgen.faults import FaultsError
from sheetgen.handbook import Handbook
from sheetgen.pages import lay_out
from sheetgen.records.look import contrast, readable

IMPRINT = "title: Handbook of one\nedition: '1'\n"
COPPER = "name: Copper\nformula: Cu\nstructure: {lattice: fcc, a: 3.6149 Å}\nelectrons: {valence: 1}\n"
LOGO = (
    '<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 10 10" onload="alert(1)"><script>alert(2)</script>'
    '<style>@import "https://evil.example/x.css";</style><a href="https://evil.example"><circle r="1"/></a>'
    '<rect width="10" height="10" fill="url(https://evil.example/p)" stroke="url(#edge)"/>'
    '<circle r="4" fill="#0b5a4a"/></svg>'
)


@pytest.fixture
def folder(tmp_path):
    (tmp_path / "copper.yaml").write_text(COPPER, encoding="utf-8")
    (tmp_path / "logo.svg").write_text(LOGO, encoding="utf-8")
    for name in ("pages", "templates"):
        (tmp_path / name).mkdir()
    (tmp_path / "pages" / "clean-room.md").write_text(
        "# Clean room\n\nWear a *hood*. <script>alert(1)</script>\n\n## Doors\n\nShut them.\n", encoding="utf-8"
    )
    (tmp_path / "templates" / "about.html").write_text(
        '{% extends "original/about.html" %}\n'
        '{% block main %}<p class="lead">Ask first.</p>{{ super() }}{% endblock %}\n',
        encoding="utf-8",
    )
    return tmp_path


def site_of(folder, imprint: str) -> dict[str, bytes]:
    (folder / "handbook.yaml").write_text(IMPRINT + imprint, encoding="utf-8")
    return dict(lay_out(Handbook.load(folder), {}))


def faults_of(folder, imprint: str) -> list[str]:
    with pytest.raises(FaultsError) as caught:
        site_of(folder, imprint)
    return [str(fault).replace(f"{folder}/", "") for fault in caught.value.faults]


# --- by consent only


def test_nothing_is_used_that_the_imprint_does_not_name(folder):
    site = site_of(folder, "")
    assert not [path for path in site if path.startswith("pages/") or "logo" in path]
    assert b"Ask first" not in site["about.html"] and b'class="logo"' not in site["index.html"]
    assert b"media screen and (prefers-color-scheme" not in site["style/handbook.css"]


# --- colours


def test_colours_follow_the_style_sheet_and_leave_paper_alone(folder):
    css = site_of(folder, "look: {colours: {link: '#0B5A4A'}, colors in the dark: {tab: '#7fd1bd'}}\n")
    text = css["style/handbook.css"].decode()
    assert "@media screen and (prefers-color-scheme: light) { :root { --link: #0b5a4a } }" in text
    assert "@media screen and (prefers-color-scheme: dark) { :root { --tab: #7fd1bd } }" in text
    assert text.rindex("@media print") < text.rindex("prefers-color-scheme: light")


def test_grounds_of_the_colours_are_those_of_the_style_sheet(folder):
    text = site_of(folder, "")["style/handbook.css"].decode()
    assert "--paper: #fff;" in text and "--tint: #f1f3f4;" in text and "--on-tab: #fff;" in text
    assert "--paper: #14171a;" in text and "--tint: #1d2125;" in text and "--on-tab: #14171a;" in text


# Contrast of black on white and of #767676 on white: WCAG 2.2, definition of contrast ratio, and technique G18.
def test_contrast_is_that_of_wcag():
    assert contrast("#000000", "#ffffff") == pytest.approx(21)
    assert contrast("#767676", "#ffffff") == pytest.approx(4.54, abs=0.005)


def test_colour_without_contrast_is_a_fault_that_names_one_with_it(folder):
    [fault] = faults_of(folder, "look: {colours: {link: '#7fd1bd'}}\n")
    assert fault.startswith("handbook.yaml:3:")
    found = re.search(
        r"link '#7fd1bd' has a contrast of (\S+) against #f1f3f4; expected at least 4.5. Write '(\S+)'", fault
    )
    assert found and float(found[1]) == pytest.approx(contrast("#7fd1bd", "#f1f3f4"), abs=0.05)
    assert contrast(found[2], "#f1f3f4") >= 4.5
    assert site_of(folder, f"look: {{colours: {{link: '{found[2]}'}}}}\n")


def test_dark_ground_asks_for_a_lighter_shade():
    assert contrast(readable("#0b5a4a", ("#14171a",)), "#14171a") >= 4.5


@pytest.mark.parametrize(
    "imprint, said",
    [
        ("look: {colour: red}\n", "unknown key 'colour'; expected one of logo, colours, colours in the dark."),
        ("look: {colours: {ink: '#000000'}}\n", "unknown colour 'ink'; expected one of link, tab."),
        ("look: {colours: {link: blue}}\n", "expected six hexadecimal digits in quotes, such as '#0d3f6b'."),
        ("look: {logo: ../secret.svg}\n", "expected the name of a picture beside handbook.yaml"),
        ("look: {logo: none.svg}\n", "expected the name of a picture beside handbook.yaml"),
        ("templates: ..\n", "no folder beside handbook.yaml; expected the name of a folder such as templates."),
        ("pages: nowhere\n", "no folder beside handbook.yaml; expected the name of a folder such as pages."),
    ],
)
def test_what_cannot_be_used_is_a_fault_of_the_imprint(folder, imprint, said):
    [fault] = faults_of(folder, imprint)
    assert fault.startswith("handbook.yaml:3:") and said in fault


# --- logo


def test_logo_is_freed_of_all_but_the_picture(folder):
    site = site_of(folder, "look: {logo: logo.svg}\n")
    logo = site["style/logo.svg"].decode()
    assert '<circle r="4" fill="#0b5a4a"' in logo and 'stroke="url(#edge)"' in logo
    assert not re.search(r"script|style|evil|onload|href", logo)
    assert b'src="style/logo.svg"' in site["index.html"] and b'src="../style/logo.svg"' in site["materials/copper.html"]


def test_logo_with_entities_is_refused(folder):
    (folder / "logo.svg").write_text('<!DOCTYPE svg [<!ENTITY a "aaaa">]><svg xmlns="x">&a;</svg>', encoding="utf-8")
    assert faults_of(folder, "look: {logo: logo.svg}\n") == [
        "logo.svg:1:1: it declares a document type, which may hide entities. Save it anew as plain SVG."
    ]


def test_logo_that_is_no_picture_is_refused(folder):
    (folder / "logo.svg").write_text("<svg", encoding="utf-8")
    (folder / "logo.png").write_bytes(b"GIF89a")
    assert faults_of(folder, "look: {logo: logo.svg}\n")[0].startswith("logo.svg:1:")
    assert "logo.png is no PNG" in faults_of(folder, "look: {logo: logo.png}\n")[0]


# --- pages


def test_own_page_is_set_safe_and_linked_from_every_page(folder):
    site = site_of(folder, "pages: pages\n")
    page = site["pages/clean-room.html"].decode()
    assert '<h1 lang="en">Clean room</h1>' in page and "<em>hood</em>" in page and "<h2>Doors</h2>" in page
    assert "alert(1)" not in page
    assert 'href="pages/clean-room.html"' in site["index.html"].decode()
    assert 'href="../pages/clean-room.html"' in site["materials/copper.html"].decode()


@pytest.mark.parametrize(
    "name, text, fault",
    [
        ("Clean Room.md", "# A\n", "pages/Clean Room.md:1:1: the file name 'Clean Room.md' cannot be an address;"),
        (
            "a.md",
            "no title\n",
            "pages/a.md:1:1: a page begins with its title; expected a first line such as '# Safety'.",
        ),
    ],
)
def test_page_at_fault_says_where(folder, name, text, fault):
    (folder / "pages" / name).write_text(text, encoding="utf-8")
    assert faults_of(folder, "pages: pages\n")[0].startswith(fault)


# --- templates


def test_own_template_stands_before_ours_and_can_extend_it(folder):
    site = site_of(folder, "templates: templates\n")
    assert b"Ask first." in site["about.html"] and b"How to read a sheet" in site["about.html"]


def test_own_script_stands_before_ours(folder):
    (folder / "templates" / "figures.js").write_text('"use strict";\n', encoding="utf-8")
    assert site_of(folder, "templates: templates\n")["style/figures.js"] == b'"use strict";\n'


def test_undefined_name_in_an_own_template_is_an_error_with_its_line(folder):
    (folder / "templates" / "about.html").write_text(
        '{% extends "original/about.html" %}\n{% block main %}\n{{ grup }}\n{% endblock %}\n', encoding="utf-8"
    )
    assert faults_of(folder, "templates: templates\n") == [
        "templates/about.html:3: 'grup' is undefined; expected a name that the page is given. "
        "Correct the name in the template."
    ]


def test_own_template_that_is_no_template_is_an_error_with_its_line(folder):
    (folder / "templates" / "about.html").write_text("one\n{% if %}\n", encoding="utf-8")
    [fault] = faults_of(folder, "templates: templates\n")
    assert fault.startswith("templates/about.html:2: ")
