"""A handbook full of attacks, pressed and opened in a real browser: nothing runs and nothing is loaded."""

from __future__ import annotations

import json
import re
from pathlib import Path
from xml.etree import ElementTree

import pytest
from hostile.handbooks import SHORT, write_hostile_handbook
from hostile.vectors import VECTORS
from support.browsing import pages_of, watched_page

from sheetgen.pages.notes import notes
from sheetgen.press import press

pytestmark = pytest.mark.xdist_group("hostile-browser")

# Counts whatever a vector could do, before anything of the page runs.
WATCH = """
window.hits = [];
window.hit = () => window.hits.push("hit");
for (const name of ["alert", "confirm", "prompt", "print", "open"]) window[name] = () => window.hits.push(name);
"""
# What no page may hold, whoever wrote its texts.
FOUND = r"""
() => {
  const wrong = [];
  const ours = /^(\.\.\/)*([a-z][\w-]*\/)*[\w-]+\.js$/;
  for (const element of document.querySelectorAll("*")) {
    const name = element.localName;
    if (["iframe", "object", "embed", "base", "frame", "frameset", "applet", "foreignObject", "animate", "set",
         "video", "audio", "source", "marquee", "portal"].includes(name)) wrong.push(name);
    if (name === "script" && element.type !== "application/ld+json" && element.type !== "application/json"
        && !ours.test(element.getAttribute("src") || "")) wrong.push(`script ${element.outerHTML.slice(0, 90)}`);
    if (name === "meta" && element.httpEquiv && element.httpEquiv !== "Content-Security-Policy") wrong.push("meta");
    for (const { name: attribute, value } of element.attributes) {
      const address = value.trim().toLowerCase();
      if (attribute.startsWith("on")) wrong.push(`${name} ${attribute}`);
      if (["href", "src", "xlink:href", "action", "formaction", "data", "srcset", "background", "poster"]
          .includes(attribute)) {
        const scheme = /^[\s\u0000-\u0020]*([a-z][a-z0-9+.-]*):/.exec(address);
        const allowed = attribute === "href" ? ["https", "http", "mailto"] : [];
        if (name === "link" && attribute === "href" && scheme && scheme[1] !== "https") wrong.push(`link ${value}`);
        if (scheme && !allowed.includes(scheme[1])) wrong.push(`${name} ${attribute}=${value}`);
        if (address.startsWith("//") || address.startsWith("\\")) wrong.push(`${name} ${attribute}=${value}`);
      }
    }
  }
  return wrong;
}
"""

OWN_LINK = re.compile(r"#[\w-]+|(?:\.\./)*[\w/-]+\.html(?:#[\w-]+)?")
KNOWN_TAGS = "p a em strong code pre ul ol li abbr b i h3 h4 h5 h6 br table thead tbody th tr td blockquote"
UNKNOWN = re.compile(rf"<(?!/?(?:{KNOWN_TAGS.replace(' ', '|')})\b)[a-z!?]")


@pytest.fixture(scope="module")
def site(tmp_path_factory) -> Path:
    """The handbook of vectors, published."""
    ground = tmp_path_factory.mktemp("vectors")
    into = ground / "site"
    press(write_hostile_handbook(ground / "records"), into)
    return into


def opened(page, path: Path) -> list[str]:
    """What a page did and holds that it must not, after a reader has been all over it."""
    page.goto(path.as_uri())
    page.evaluate("() => { for (const e of document.querySelectorAll('a, button, summary')) e.dispatchEvent(new "
                  "MouseEvent('mouseover', {bubbles: true})); }")  # fmt: skip
    return page.evaluate(FOUND) + page.evaluate("() => window.hits")


@pytest.mark.parametrize("bypass_csp", [True, False], ids=["escaping alone", "with the policy"])
def test_no_vector_runs_on_any_page(browser, site, bypass_csp):
    dialogs = []
    # Every page once without the policy, which must have nothing to do; with it, a share of all kinds.
    pages = pages_of(site)[:: 1 if bypass_csp else 5]
    with watched_page(browser, bypass_csp=bypass_csp) as (page, troubles):
        page.add_init_script(WATCH)
        page.on("dialog", lambda dialog: (dialogs.append(dialog.message), dialog.dismiss()))
        for path in pages:
            assert opened(page, path) == [], path.name
            assert troubles == [], path.name
    assert dialogs == [] and len(pages) >= 5


def test_the_watch_sees_what_runs(browser, tmp_path):
    page_of_vectors = tmp_path / "page.html"
    page_of_vectors.write_text("<script>hit()</script><img src=x onerror=hit()><a href=javascript:hit()>x</a>")
    with watched_page(browser) as (page, troubles):
        page.add_init_script(WATCH)
        found = opened(page, page_of_vectors)
    assert found.count("hit") >= 1 and "img onerror" in found and "a href=javascript:hit()" in found
    assert troubles


def test_the_policy_refuses_what_an_escape_would_have_missed(browser, site, tmp_path):
    """The policy is the second wall: script, handlers and addresses that run are refused even where they stand."""
    page_text = (site / "index.html").read_text(encoding="utf-8")
    attacks = "".join(vector for vector in VECTORS if "<" in vector and "<!--" not in vector and "CDATA" not in vector)
    broken = site / "attacked.html"
    broken.write_text(page_text.replace("<main", "<script>hit()</script><img src=x onerror=hit()><main", 1)
                      .replace("</main>", attacks.replace("</", "<\\/") + "</main>"), encoding="utf-8")  # fmt: skip
    try:
        with watched_page(browser) as (page, troubles):
            page.add_init_script(WATCH)
            page.goto(broken.as_uri())
            page.evaluate("() => document.querySelectorAll('[href^=javascript]').forEach(link => link.click())")
            assert page.evaluate("() => window.hits") == []
            assert [trouble for trouble in troubles if trouble.startswith("outside: ")] == []
            assert any("Content Security Policy" in trouble for trouble in troubles)
    finally:
        broken.unlink()


def test_figures_hold_no_script(site):
    pictures = list(site.rglob("*.svg"))
    assert len(pictures) > 100
    for path in pictures:
        for element in ElementTree.parse(path).iter():
            name = element.tag.rpartition("}")[2]
            assert name not in {"script", "foreignObject", "animate", "set", "image", "iframe"}, path
            for attribute, value in element.attrib.items():
                plain = attribute.rpartition("}")[2]
                assert not plain.startswith("on"), path
                assert plain != "href" or OWN_LINK.fullmatch(value), path
                assert "url(" not in value or re.fullmatch(r"url\(#[\w-]+\)", value), path
        style = "".join(e.text or "" for e in ElementTree.parse(path).iter() if e.tag.endswith("}style"))
        assert "@import" not in style and "//" not in style.replace("http://www.w3.org", "")


def test_figures_open_in_the_browser_alone(browser, site):
    with watched_page(browser) as (page, troubles):
        page.add_init_script(WATCH)
        for path in sorted((site / "figures").rglob("*.svg"))[::25]:
            page.goto(path.as_uri())
            assert page.evaluate("() => window.hits") == [], path
        assert troubles == []


def test_metadata_hold_the_very_texts(site):
    """JSON-LD survives as data: what a vector says is a name, and no end of the script element."""
    names = set()
    for path in (site / "materials").glob("m*.html"):
        text = path.read_text(encoding="utf-8")
        found = re.findall(r'<script type="application/ld\+json">(.*?)</script>', text, re.DOTALL)
        assert len(found) == 1
        names.add(json.loads(found[0])["name"])
    assert any("<script>hit()</script>" in name for name in names)


def test_tables_hold_no_formula_of_a_spreadsheet(site):
    for path in site.rglob("*.csv"):
        for line in path.read_text(encoding="utf-8").splitlines():
            for cell in re.split(r',(?=(?:[^"]*"[^"]*")*[^"]*$)', line):
                bare = cell.strip('"')
                assert not bare.startswith(("=", "@", "\t")), (path, cell)
                assert not re.match(r"[+-][^\d.]", bare), (path, cell)


@pytest.mark.parametrize("vector", VECTORS)
def test_notes_keep_the_words_and_drop_the_attack(vector):
    html = str(notes(vector))
    assert not UNKNOWN.search(html)
    for tag in re.findall(r"<[a-z][^>]*>", html):
        assert not re.search(r"\son\w+\s*=|style\s*=|\ssrc\s*=", re.sub(r'"[^"]*"', '""', tag)), tag
        assert not re.search(r'href="\s*(?:javascript|data|vbscript|//)', tag), tag


def test_every_class_of_attack_reaches_the_pages(site):
    """The vectors stand on the pages, as words: a test of pages without them would show nothing."""
    text = "".join(path.read_text(encoding="utf-8") for path in (site / "materials").glob("m*.html"))
    missing = [vector for vector in SHORT if vector[:12].replace("&", "&amp;").replace("<", "&lt;")
               .replace(">", "&gt;").replace('"', "&#34;").replace("'", "&#39;") not in text]  # fmt: skip
    assert missing == []
