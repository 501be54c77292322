"""Lays out the handbook: every page, its style, script and fonts, as paths and bytes."""

from __future__ import annotations

import base64
import hashlib
from collections.abc import Iterator, Mapping, Sequence
from functools import cache
from pathlib import Path
from typing import Any

from . import about, changes, citations, front, own_look, quantity, reference, universal, words
from .environment import Press, template_folder
from .finding import finding
from .gallery import Gallery
from .sheet import SheetPage

# 'self' has no certain meaning for a page opened from a disk; `file:` says it there, and grants nothing on a server,
# whose pages no browser lets near the disk.
POLICY = (
    "default-src 'none'; style-src 'self' file:{hash}; img-src 'self' file:; font-src 'self' file:; "
    "script-src 'self' file:; base-uri 'none'; form-action 'none'"
)
PAPERS = {"a4": "A4", "letter": "letter"}


def lay_out(
    handbook: Any, figures: Mapping[str, Sequence[Any]], *, paper: bool = False
) -> Iterator[tuple[str, bytes]]:
    """Yield (relative path, content) for every page and all that pages load.

    Raises FaultsError, naming template:line, where a template cannot be rendered.
    """
    layout, gallery = _Layout(handbook, paper), Gallery(handbook)
    yield from layout.assets()
    yield "index.html", layout.page("index.html", "", **front.context(handbook))
    for sheet in handbook.sheets:
        yield from layout.sheet(sheet, figures.get(sheet.record.slug, ()))
    for id in dict.fromkeys([*handbook.registry.published(), *handbook.registry.published("specimen")]):
        yield f"quantities/{id}.html", layout.page(
            "quantity.html", "../", plot=gallery.ranking(id), **quantity.context(id, handbook)
        )
    yield "methods.html", layout.page("methods.html", "", **reference.methods(handbook))
    yield "limits.html", layout.page("limits.html", "", **reference.limits(handbook))
    yield "sources.html", layout.page("sources.html", "", **reference.sources(handbook))
    since = changes.Changes(handbook)
    yield changes.PAGE, layout.page("changes.html", "", **since.context())
    yield from since.feed()
    yield "about.html", layout.page("about.html", "", **about.about(handbook))
    yield "review.html", layout.page("review.html", "", **about.review(handbook))
    yield from own_look.pages(handbook, layout.page)
    yield from finding(handbook, figures, gallery, layout.page)


@cache
def _press(own: Path | None) -> Press:
    """The compiled templates, once a process; those of a group's own folder come first."""
    return Press([own] if own else [])


class _Layout:
    """One run: the compiled templates and what every page shares."""

    def __init__(self, handbook: Any, paper: bool):
        self.handbook = handbook
        imprint = handbook.imprint
        self.press = _press(imprint.templates)
        self.known_sources = citations.all_sources(handbook)
        self.shared = {
            "imprint": imprint,
            "language": words.language(imprint.language),
            "paper": PAPERS.get(imprint.paper.casefold(), "A4"),
            "has_pdf": paper,
            "logo": imprint.look.logo[0] if imprint.look.logo else None,
            "own_pages": imprint.pages,
        }

    def assets(self) -> Iterator[tuple[str, bytes]]:
        """Style sheet (for the imprint's paper), icon, script and fonts."""
        look = self.handbook.imprint.look
        yield "style/handbook.css", self.press.render("style.css", **self.shared) + own_look.colours(look)
        for name, path in sorted(self._files().items()):
            yield f"style/{name}", path.read_bytes()
        if look.logo:
            yield f"style/{look.logo[0]}", look.logo[1]
        yield "style/universal.js", universal.tables()
        for font in sorted((template_folder() / "fonts").iterdir()):
            if font.suffix == ".woff2" or font.name == "OFL.txt":
                yield f"style/fonts/{font.name}", font.read_bytes()

    def _files(self) -> dict[str, Path]:
        """Name → file of every script and style sheet that stands as it is, and the icon; a group's own come first."""
        found: dict[str, Path] = {}
        for folder in filter(None, (template_folder(), self.handbook.imprint.templates)):
            for path in folder.iterdir():
                if path.name == "icon.svg" or (path.suffix in (".js", ".css") and path.name != "style.css"):
                    found[path.name] = path
        return found

    def sheet(self, sheet: Any, figures: Sequence[Any]) -> Iterator[tuple[str, bytes]]:
        """The sheet of one material, and the numbers that its script copies and follows."""
        found = SheetPage(sheet, self.handbook, figures)
        path = f"materials/{sheet.record.slug}"
        yield f"{path}.html", self.page("sheet.html", "../", **found.context())
        yield f"{path}.js", found.script()

    def page(self, template: str, root: str, running_head: str = "", **context: Any) -> bytes:
        """One page; `root` leads from it to the top of the site. Its running head on paper is a CSS string."""
        known = self.known_sources
        head_style = f'@page{{@top-right{{content:"{running_head}"}}}}' if running_head else ""
        return self.press.render(
            template,
            root=root,
            head_style=head_style,
            policy=policy(head_style),
            with_links=lambda text: citations.linked(text, known, root),
            **self.shared,
            **context,
        )


def policy(style: str = "") -> str:
    """The content security policy of a page; its one inline style, if it has one, passes by its hash."""
    digest = base64.b64encode(hashlib.sha256(style.encode()).digest()).decode()
    return POLICY.format(hash=f" 'sha256-{digest}'" if style else "")
