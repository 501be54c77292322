"""Every reference of every page leads to a file of the site, and every anchor to a place on its page."""

from __future__ import annotations

import re
from functools import cache
from html.parser import HTMLParser
from pathlib import Path
from urllib.parse import unquote, urlsplit

from support.browsing import pages_of

ABROAD = ("https://", "http://", "mailto:")


class References(HTMLParser):
    """Collects what a page refers to and what can be referred to on it."""

    def __init__(self, text: str):
        super().__init__()
        self.links, self.loads, self.anchors = [], [], set()
        self.feed(text)

    def handle_starttag(self, tag: str, attributes: list) -> None:
        named = dict(attributes)
        if named.get("id"):
            assert named["id"] not in self.anchors, f"id {named['id']} stands twice"
            self.anchors.add(named["id"])
        if tag == "a" and "href" in named:
            self.links.append(named["href"])
        elif "src" in named:
            self.loads.append(named["src"])
        elif tag == "link" and "href" in named and named.get("rel") not in {"canonical", "license"}:
            self.loads.append(named["href"])
        self.loads += [part.split()[0] for part in named.get("srcset", "").split(",") if part.strip()]


@cache
def references(path: Path) -> References:
    return References(path.read_text(encoding="utf-8"))


def leads_nowhere(page: Path, link: str) -> bool:
    parts = urlsplit(link)
    target = (page.parent / unquote(parts.path)).resolve() if parts.path else page
    if not target.is_file():
        return True
    return bool(parts.fragment) and target.suffix == ".html" and (
        unquote(parts.fragment) not in references(target).anchors
    )  # fmt: skip


def test_every_link_leads_somewhere(pressed_site):
    broken = [
        f"{page.relative_to(pressed_site)}: {link}"
        for page in pages_of(pressed_site)
        for link in references(page).links
        if not link.startswith(ABROAD) and leads_nowhere(page, link)
    ]
    assert broken == []


def test_everything_loaded_is_a_file_of_the_site(pressed_site):
    broken = [
        f"{page.relative_to(pressed_site)}: {link}"
        for page in pages_of(pressed_site)
        for link in references(page).loads
        if not link.startswith("data:") and leads_nowhere(page, link)
    ]
    assert broken == []


def test_style_sheets_load_files_of_the_site(pressed_site):
    for style in pressed_site.rglob("*.css"):
        for link in re.findall(r"url\(\s*['\"]?([^'\")]+)", style.read_text(encoding="utf-8")):
            assert link.startswith(("data:", "#")) or not leads_nowhere(style, link), f"{style.name}: {link}"


def test_every_page_is_reached_from_the_first(pressed_site):
    reached, waiting = set(), [pressed_site / "index.html"]
    while waiting:
        page = waiting.pop()
        if page in reached or page.suffix != ".html":
            continue
        reached.add(page)
        links = (urlsplit(link).path for link in references(page).links if not link.startswith(ABROAD))
        waiting += [(page.parent / unquote(path)).resolve() for path in links if path]
    assert set(pages_of(pressed_site.resolve())) - reached - {(pressed_site / "404.html").resolve()} == set()


def test_no_page_or_file_names_a_folder_of_the_machine(pressed_site):
    home = str(Path(__file__).parents[2])
    for path in pressed_site.rglob("*"):
        if path.is_file():
            assert home.encode() not in path.read_bytes(), path.name
