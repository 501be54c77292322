"""The paper edition: a PDF for every sheet, and all of them bound with title page, methods, sources and index."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from typing import Any

from sheetgen.pages.environment import template_folder
from sheetgen.paper import binding, covers, sheets, workers
from sheetgen.paper.typesetting import Printed, Typesetter, require

HANDBOOK = "handbook.pdf"
Progress = Callable[[str, int, int], None]


def paper_edition(
    handbook: Any, figures: Mapping[str, Sequence[Any]], progress: Progress = lambda step, done, total: None
) -> Iterator[tuple[str, bytes]]:
    """Yield (relative path, PDF) for each sheet in the order of the handbook, and for the handbook.

    Raises MachineError where WeasyPrint or a library that it needs is missing, FaultsError where a template cannot be
    rendered.
    """
    require()
    style, fonts = sheets.style(handbook), f"{(template_folder() / 'fonts').as_uri()}/"
    printed: list[Printed] = []
    with workers.pool(style, fonts, len(handbook.sheets)) as executor:
        for sheet, one in zip(handbook.sheets, _sheets(executor, handbook, figures), strict=True):
            printed.append(one)
            progress("setting sheets on paper", len(printed), len(handbook.sheets))
            yield f"materials/{sheet.record.slug}.pdf", one.pdf
    progress("binding the handbook", 0, 0)
    yield HANDBOOK, _bound(handbook, printed, Typesetter(style, fonts))


def _sheets(executor: Any, handbook: Any, figures: Mapping[str, Sequence[Any]]) -> Iterator[Printed]:
    """Every sheet, those that come out too long set a second time, pressed together."""
    of = [(sheet, handbook, figures.get(sheet.record.slug, ())) for sheet in handbook.sheets]
    first = workers.submitted(executor, [sheets.manuscript(*one) for one in of])
    for parts, future in zip(of, first, strict=True):
        printed, level = future.result(), sheets.LEVELS[0]
        while not printed.pdf:
            level = sheets.tighter(level, printed.excess)
            printed = workers.submitted(executor, [sheets.manuscript(*parts, level=level)])[0].result()
        yield printed


def _bound(handbook: Any, printed: Sequence[Printed], setter: Typesetter) -> bytes:
    """The whole handbook: the sheets count from page 1, what comes before them in Roman figures."""
    numbers, page = [], 1
    for one in printed:
        numbers.append(page)
        page += one.pages
    back = setter.set(covers.back(handbook, first_page=page))
    front = setter.set(covers.front(handbook, numbers, {name: page + at for name, at in back.anchors.items()}))
    folios = setter.plain(covers.folios(handbook, front.pages, page - 1 + back.pages))
    titles = [sheet.record.name for sheet in handbook.sheets]
    return binding.bound(front, list(zip(titles, printed, strict=True)), back, folios)
