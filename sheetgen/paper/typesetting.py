"""From HTML and figures to a PDF: WeasyPrint with our fonts, loaded once, and no way to the network."""

from __future__ import annotations

import contextlib
import gc
import hashlib
import logging
import warnings
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any

from sheetgen.faults import MachineError

PLATE = "plate:"
HALF = "half"
INSTALL = "pip install 'sheetgen[pdf]'"
SYSTEM_LIBRARY = "on Debian: apt install libpango-1.0-0 libpangoft2-1.0-0 libharfbuzz-subset0 fontconfig"


@dataclass(frozen=True)
class Manuscript:
    """What one document is set from: its HTML, and the SVG of each figure that it shows as plate:name."""

    name: str
    html: str
    figures: Mapping[str, bytes] = field(default_factory=dict)
    most_pages: int | None = None
    least_on_last: float = 0.0  # millimetres of column below which a last page is not worth its paper


def require() -> Any:
    """WeasyPrint, loaded. Raises MachineError, saying what to install, where it or what it needs is missing."""
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore")  # of its own imports: nothing that a person here could mend
            import pikepdf  # noqa: F401
            import segno  # noqa: F401
            import weasyprint
    except ModuleNotFoundError as missing:
        raise MachineError(f"the paper edition needs the library '{missing.name}': {INSTALL}") from missing
    except OSError as missing:
        found = str(missing).splitlines()[0]
        raise MachineError(f"the paper edition needs a library of the system ({found}); {SYSTEM_LIBRARY}") from missing
    return weasyprint


@dataclass(frozen=True)
class Bookmark:
    """An entry of the outline: its level from 1, its words, the page from 0, and how far down in points."""

    level: int
    words: str
    page: int
    down: float


@dataclass(frozen=True)
class Printed:
    """A document that was set: the PDF, its number of pages, and what a handbook that takes it in needs of it."""

    pdf: bytes
    pages: int
    bookmarks: tuple[Bookmark, ...]
    anchors: Mapping[str, int]
    excess: float = 0.0  # millimetres of column beyond the pages that were allowed; there is no PDF then


class Typesetter:
    """Sets documents in one style; one for each process, since fonts and style cost more than a sheet."""

    def __init__(self, style: str, fonts: str):
        """`style` is CSS; `fonts` the address of the folder that its font faces are relative to."""
        weasyprint = require()
        from weasyprint.text.fonts import FontConfiguration
        from weasyprint.urls import URLFetcher

        _quieten()
        self.fetcher = URLFetcher(allowed_protocols=["file", "data"])
        self.fonts = FontConfiguration()
        self.html = weasyprint.HTML
        self.style = weasyprint.CSS(string=style, base_url=fonts, font_config=self.fonts, url_fetcher=self.fetcher)

    def set(self, manuscript: Manuscript) -> Printed:
        """The document as tagged PDF/UA-1; the same manuscript gives the same bytes.

        Where it needs more pages than it may, or the last is as good as empty, there is no PDF but the excess.
        """
        with _uncollected():
            document = self._laid_out(manuscript)
            pages = document.pages
            if excess := _excess(pages, manuscript):
                return Printed(b"", len(pages), (), {}, excess)
            anchors = {name: number for number, page in enumerate(pages) for name in page.anchors}
            pdf = document.write_pdf(
                pdf_variant="pdf/ua-1",
                pdf_identifier=fingerprint(manuscript),
                finisher=lambda _document, pdf: _name_cells(pdf, manuscript.name),
            )
            return Printed(pdf, len(pages), tuple(_bookmarks(pages)), anchors)

    def plain(self, html: str) -> bytes:
        """A document without structure, for what is laid over pages that have theirs."""
        document = self.html(string=html, base_url=None, url_fetcher=self.fetcher)
        return document.render(font_config=self.fonts, stylesheets=[self.style]).write_pdf(pdf_identifier=b"plain")

    def _laid_out(self, manuscript: Manuscript) -> Any:
        from sheetgen.paper.plates import Plate

        plates = {f"{PLATE}{name}": Plate(svg) for name, svg in manuscript.figures.items()}
        document = self.html(string=manuscript.html, base_url=None, url_fetcher=self.fetcher)
        laid_out = document.render(font_config=self.fonts, stylesheets=[self.style], cache=plates)
        return laid_out.copy(in_two_columns(laid_out.pages))


@contextlib.contextmanager
def _uncollected() -> Iterator[None]:
    """Spare the collector of garbage, which would look a dozen times through the many small boxes of a page.

    They are held in circles and are collected at once when the document is done.
    """
    active = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if active:
            gc.enable()
        gc.collect()


def _excess(pages: Sequence[Any], manuscript: Manuscript) -> float:
    if manuscript.most_pages and len(pages) > manuscript.most_pages:
        return sum(map(_filled, pages[manuscript.most_pages :]))
    last = _filled(pages[-1])
    return last if len(pages) > 1 and last < manuscript.least_on_last else 0.0


def _filled(page: Any) -> float:
    """Millimetres of column that a page's text takes."""
    top = page._page_box.content_box_y()
    roots = [child for child in page._page_box.children if child.element_tag == "html"]
    deepest = (max((box.position_y + box.height for box in root.descendants() if _is_text(box)), default=top)
               for root in roots)  # fmt: skip
    return sum((down - top) * 25.4 / 96 for down in deepest)


def _is_text(box: Any) -> bool:
    return hasattr(box, "text")


def _bookmarks(pages: Sequence[Any]) -> Iterator[Bookmark]:
    for number, page in enumerate(pages):
        for level, words, (_, y), _ in page.bookmarks:
            yield Bookmark(level, words, number, y * 0.75)


def _name_cells(pdf: Any, name: str) -> None:
    """Put the document's name before the names of table cells, so that those of two documents never meet."""
    import pydyf

    def named(cell: Any) -> Any:
        return pydyf.String(f"{name}-{cell.string}")

    for element in pdf.objects:
        if isinstance(element, pydyf.Dictionary) and element.get("S") in ("/TH", "/TD"):
            if "ID" in element:
                element["ID"] = named(element["ID"])
            if headers := element.get("A", {}).get("Headers"):
                headers[:] = [named(header) for header in headers]


def in_two_columns(pages: Sequence[Any]) -> list[Any]:
    """The pages with every two halves put side by side.

    WeasyPrint can set columns, but lays out each of them five times to balance them; a page of the name `half` has its
    text in the left column, and the next of them gives its text to the right one.
    """
    made: list[Any] = []
    waiting = None
    for page in pages:
        if page._page_box.page_type.name != HALF:
            made.append(page)
            waiting = None
        elif waiting is None:
            made.append(page)
            waiting = page
        else:
            made[-1] = _side_by_side(waiting, page)
            waiting = None
    return made


def _side_by_side(left: Any, right: Any) -> Any:
    box, other = left._page_box, right._page_box
    column = other.children[0]
    # The right column begins where the white margin on the right would be, mirrored.
    column.translate(dx=box.margin_width() - 2 * box.margin_left - box.width)
    return type(left)(box.copy_with_children([box.children[0], column, *box.children[1:]]))


def fingerprint(manuscript: Manuscript) -> bytes:
    """What tells this document from every other: it stands for the chance that most programs put there."""
    digest = hashlib.sha256(manuscript.html.encode())
    for name, svg in manuscript.figures.items():
        digest.update(name.encode() + b"\0" + svg)
    return digest.hexdigest()[:32].encode()


def _quieten() -> None:
    """The library's remarks are about CSS and fonts of ours, which the tests see; a reader of stderr gains nothing."""
    logging.getLogger("weasyprint").setLevel(logging.CRITICAL)
    logging.getLogger("fontTools").setLevel(logging.CRITICAL)
