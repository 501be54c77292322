"""The whole road from a folder of records to a published site."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from itertools import chain
from pathlib import Path
from typing import TYPE_CHECKING

from sheetgen.faults import Fault
from sheetgen.press.disk import Disk
from sheetgen.press.manifest import digest, fingerprints
from sheetgen.press.publishing import Report, publish

if TYPE_CHECKING:
    from sheetgen.figures import Figure
    from sheetgen.handbook import Handbook
    from sheetgen.records import Imprint
    from sheetgen.sheet import Sheet

Progress = Callable[[str, int, int], None]


@dataclass(frozen=True)
class Pressed:
    """What a press came to: the number of sheets, what a person should know, and what changed in the site."""

    sheets: int
    remarks: tuple[Fault, ...]
    report: Report


def press(
    folder: Path,
    into: Path,
    progress: Progress = lambda step, done, total: None,
    disk: Disk | None = None,
    draws: int = 0,
    draw: Callable[[Sheet, Handbook], list[Figure]] | None = None,
    paper: bool = False,
) -> Pressed:
    """Derive the handbook of the folder and publish it; a site that needs no change is left untouched.

    `progress` is called with the name of a step, how much of it is done and how much there is (0: not known).
    With `draws`, each number also gets a coverage interval from that many. `draw` gives the figures of a sheet in
    the place of `draw_all`, for one who keeps those that did not change. With `paper`, the site also holds each sheet
    and the whole handbook as PDF.
    Raises FaultsError, FolderRefusedError or MachineError; the site that stood before then still stands.
    """
    from sheetgen.documents import documents
    from sheetgen.handbook import Handbook
    from sheetgen.pages import lay_out
    from sheetgen.paper import paper_edition, require

    if paper:
        require()  # before the work, not after it
    inputs = fingerprints(folder)
    progress("reading records", 0, 0)
    handbook = Handbook.load(folder, draws=draws)
    for path in _named_by_the_imprint(folder, handbook.imprint):
        inputs[path.relative_to(folder).as_posix()] = digest(path.read_bytes())
    figures = _figures(handbook, progress, draw)
    files = chain(documents(handbook, figures), lay_out(handbook, figures, paper=paper))
    files = _counted(files, progress)
    if paper:
        files = chain(files, paper_edition(handbook, figures, progress))
    report = publish(
        files,
        into,
        inputs,
        disk=disk,
        waiting=lambda: progress("waiting for another press of this site", 0, 0),
    )
    return Pressed(len(handbook.sheets), tuple(handbook.remarks), report)


def _named_by_the_imprint(folder: Path, imprint: Imprint) -> Iterator[Path]:
    """The further files that a handbook is made from because its imprint says so."""
    if imprint.previous_edition:
        yield imprint.previous_edition
    if imprint.look.logo:
        yield folder / imprint.look.logo[0]
    if imprint.pages:
        yield from (path for path in sorted(folder.glob("*/*.md")) if path.is_file())
    if imprint.templates:
        yield from (path for path in sorted(imprint.templates.rglob("*")) if path.is_file())


def _figures(
    handbook: Handbook, progress: Progress, draw: Callable[[Sheet, Handbook], list[Figure]] | None
) -> dict[str, list[Figure]]:
    from sheetgen.figures import draw_all

    draw = draw or draw_all
    figures = {}
    for done, sheet in enumerate(handbook.sheets, 1):
        figures[sheet.record.slug] = draw(sheet, handbook)
        progress("drawing figures", done, len(handbook.sheets))
    return figures


def _counted(files: Iterable[tuple[str, bytes]], progress: Progress) -> Iterator[tuple[str, bytes]]:
    for done, file in enumerate(files, 1):
        progress("laying out pages", done, 0)
        yield file
