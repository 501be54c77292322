"""The pages as a whole: well-formed, linked, safe, and nothing from outside."""

from __future__ import annotations

import base64
import hashlib
import json
import posixpath
import re
from urllib.parse import unquote, urlsplit

import pytest

from sheetgen.pages import lay_out
from sheetgen.pages.reference import standing_rules
from sheetgen.standing import thresholds


def test_the_pages_that_a_reader_expects_are_there(site, small_handbook):
    expected = {"index.html", "methods.html", "limits.html", "sources.html", "style/handbook.css", "style/table.js"}
    expected |= {f"materials/{slug}.html" for slug in ("copper", "hostile", "well")}
    expected |= {f"quantities/{id}.html" for id in small_handbook.registry.published()}
    assert expected <= set(site)


def test_the_same_handbook_gives_the_same_bytes(site, small_handbook):
    again = dict(lay_out(small_handbook, {}))
    once_more = dict(lay_out(small_handbook, {}))
    assert again == once_more


def test_every_element_is_closed_and_every_id_is_unique(pages):
    for path, page in pages.items():
        assert not page.unbalanced and not page.open, (path, page.unbalanced, page.open)
        assert len(page.anchors) == len(set(page.anchors)), (path, sorted(page.anchors))


def test_one_heading_of_the_first_level_and_no_level_skipped(pages):
    for path, page in pages.items():
        levels = [int(tag[1]) for tag, _ in page.tags if re.fullmatch(r"h[1-6]", tag)]
        assert levels.count(1) == 1 and levels[0] == 1, path
        assert all(after - before <= 1 for before, after in zip(levels, levels[1:], strict=False)), (path, levels)


def references(page) -> list[str]:
    found = [attributes.get(name) for _, attributes in page.tags for name in ("href", "src")]
    return [reference for reference in found if reference]


def test_every_link_leads_to_a_page_and_an_anchor_that_are_there(site, pages):
    broken = []
    for path, page in pages.items():
        for reference in references(page):
            parts = urlsplit(reference)
            if parts.scheme in ("http", "https", "mailto"):
                continue
            target = (
                posixpath.normpath(posixpath.join(posixpath.dirname(path), unquote(parts.path))) if parts.path else path
            )
            there = target in site and (not parts.fragment or unquote(parts.fragment) in pages[target].anchors)
            if not there:
                broken.append((path, reference))
    assert not broken


def test_nothing_is_loaded_from_outside(pages, site):
    for path, page in pages.items():
        for tag, attributes in page.tags:
            loaded = attributes.get("src") or (attributes.get("href") if tag == "link" else None)
            assert not loaded or not urlsplit(loaded).netloc, (path, loaded)
    for address in re.findall(r"url\(([^)]*)\)", site["style/handbook.css"].decode()):
        assert address.strip("\"'").startswith("fonts/")


def test_links_that_leave_the_handbook_are_plain_web_links(pages):
    for path, page in pages.items():
        for reference in references(page):
            assert urlsplit(reference).scheme in ("", "http", "https", "mailto"), (path, reference)


def test_the_policy_is_strict_and_lets_the_running_head_pass(pages):
    for path, page in pages.items():
        policies = [meta["content"] for meta in page.all("meta") if meta.get("http-equiv") == "Content-Security-Policy"]
        assert len(policies) == 1, path
        rules = dict(rule.strip().split(" ", 1) for rule in policies[0].split(";"))
        assert rules["default-src"] == "'none'"
        assert not re.search(r"unsafe|\*|https?:|data:", policies[0])
        styles = [text for text in page.data if text.startswith("@page")]
        for style in styles:
            digest = base64.b64encode(hashlib.sha256(style.encode()).digest()).decode()
            assert f"'sha256-{digest}'" in rules["style-src"]


def test_no_page_carries_inline_code(pages):
    for path, page in pages.items():
        for tag, attributes in page.tags:
            assert "style" not in attributes, (path, tag)
            assert not [name for name in attributes if name.startswith("on")], (path, tag)
            if tag == "script":
                assert attributes.get("src") or attributes.get("type") == "application/ld+json", path


def test_hostile_text_is_shown_and_never_obeyed(pages, site):
    page = pages["materials/hostile.html"]
    assert "<script>alert(1)</script>" in page.text
    harmful = re.compile(r"<script>|<img src=x|<iframe|<style>body")
    for path, content in site.items():
        assert not (path.endswith(".html") and harmful.search(content.decode())), path
    assert not [tag for tag, _ in page.tags if tag in ("iframe", "svg", "object", "embed", "base", "form")]


def test_a_hostile_name_cannot_leave_the_running_head(site):
    style = re.search(r"<style>(.*?)</style>", site["materials/hostile.html"].decode())[1]
    assert re.fullmatch(r'@page\{@top-right\{content:"[A-Za-z0-9\\ ]*"\}\}', style)


def test_metadata_is_a_dataset_with_its_variables(pages):
    for path in ("index.html", "materials/copper.html", "materials/hostile.html"):
        text = next(text for text in pages[path].data if text.lstrip().startswith("{"))
        dataset = json.loads(text)
        assert (dataset["@context"], dataset["@type"]) == ("https://schema.org", "Dataset")
        assert {variable["propertyID"] for variable in dataset["variableMeasured"]} >= {
            "fermi_energy",
            "fermi_velocity",
        }
        assert "<" not in text


def test_the_paper_of_the_imprint_is_the_paper_of_the_style(site):
    assert "size: letter;" in site["style/handbook.css"].decode()


@pytest.mark.parametrize(
    "path", ["materials/copper.html", "quantities/fermi_energy.html", "methods.html", "index.html"]
)
def test_every_formula_carries_its_reading(pages, path):
    formulas = pages[path].all("math")
    assert formulas and all(attributes.get("alttext") for attributes in formulas)


def test_the_cells_of_each_row_fill_the_columns(site):
    for path, content in site.items():
        if not path.endswith(".html"):
            continue
        for table in re.findall(r"<table.*?</table>", content.decode(), re.DOTALL):
            widths = set()
            for row in re.findall(r"<tr.*?</tr>", table, re.DOTALL):
                spans = re.findall(r"<t[hd]\b[^>]*?(?:colspan=\"(\d+)\")?[^>]*>", row)
                cells = re.findall(r"<t[hd]\b([^>]*)>", row)
                spans = [int(found[1]) if (found := re.search(r'colspan="(\d+)"', cell)) else 1 for cell in cells]
                widths.add(sum(spans))
            assert len(widths) == 1, (path, widths, table[:200])


def test_the_methods_state_the_rule_of_each_standing_in_the_order_of_trial(pages, small_handbook):
    text = pages["methods.html"].text
    order = ["outside", "unchecked", "agrees", "undecided", "adjust", "fails"]
    places = [text.index(f"{word} {rule}") for word, rule in standing_rules(thresholds(small_handbook.imprint))]
    assert [word for word, _ in standing_rules(thresholds(small_handbook.imprint))] == order
    assert places == sorted(places)
    assert "within 0.1 of 1" in text and "between 0.5 and 2" in text


def test_the_limits_page_sorts_materials_by_the_plain_answer(site, small_handbook):
    page = site["limits.html"].decode()
    row = re.search(r'<tr><th scope="row"><a href="quantities/heat_coefficient.html">.*?</tr>', page, re.DOTALL)[0]
    cells = re.findall(r"<td.*?>(.*?)</td>", row, re.DOTALL)
    line = next(line for line in small_handbook["copper"].answer.scale if line.quantity == "heat_coefficient")
    assert "Copper" in cells[1] and f"{line.factor:.2f}" in cells[1]
    assert "Copper" not in cells[0] + cells[2]


def test_a_ranking_goes_from_the_largest_to_the_smallest(site, small_handbook):
    page = site["quantities/fermi_energy.html"].decode()
    order = re.findall(r'<th scope="row"><a href="\.\./materials/([^"]+)\.html">', page)
    values = {sheet.record.slug: sheet.si("fermi_energy") for sheet in small_handbook.sheets}
    assert order == sorted(values, key=values.get, reverse=True)
