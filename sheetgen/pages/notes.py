"""Notes: what people wrote in Markdown, made safe to stand on a page."""

from __future__ import annotations

import re
from functools import cache

from markupsafe import Markup

_TAGS = frozenset(
    """p br hr em strong b i code pre blockquote ul ol li dl dt dd a sup sub table thead tbody tr th td
    h2 h3 h4 h5 h6 abbr del ins small""".split()  # noqa: SIM905, a list of words reads better as words
)
_ATTRIBUTES = {"a": {"href", "title"}, "abbr": {"title"}, "ol": {"start"}}
# No slash at the start: such a link leads to another host, or to the root of a disk.
_LINK = re.compile(r"(?:https?://|mailto:)[^\s<>\"]+|(?!/)[\w./%-]*(?:#[\w./%:-]+)?")
_EMPTY_LINK = re.compile(r"<a(?: rel=\"[^\"]*\")?>(.*?)</a>", re.DOTALL)


@cache
def _markdown():
    from markdown import Markdown

    return Markdown(extensions=["tables", "sane_lists", "def_list", "abbr"], output_format="html")


def notes(text: str, below: int = 2) -> Markup:
    """HTML of a note in Markdown, safe whatever it says; its headings begin one level under the heading above it.

    No script, style, picture or frame passes, and links lead to http, https, mailto or within the handbook only.
    """
    import nh3

    converter = _markdown()
    html = converter.reset().convert(text)
    safe = nh3.clean(
        _lowered(html, below),
        tags=set(_TAGS),
        attributes=_ATTRIBUTES,
        attribute_filter=_within_reach,
        url_schemes={"http", "https", "mailto"},
        link_rel="noopener noreferrer",
    )
    return Markup(_EMPTY_LINK.sub(r"\1", safe))


def _within_reach(tag: str, attribute: str, value: str) -> str | None:
    """Drop links that are neither to the web, nor to a person, nor to a page or place of the handbook."""
    return None if attribute == "href" and not _LINK.fullmatch(value) else value


def _lowered(html: str, below: int) -> str:
    """Headings moved so that the highest one used comes right after the heading above; none skips a level."""
    used = sorted({int(level) for level in re.findall(r"<h([1-6])[\s>]", html)})
    new_level = {level: min(below + 1 + rank, 6) for rank, level in enumerate(used)}
    return re.sub(r"<(/?)h([1-6])(?=[\s>])", lambda found: f"<{found[1]}h{new_level.get(int(found[2]), 6)}", html)
