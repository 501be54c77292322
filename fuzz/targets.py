"""What strangers write, given to the readers as bytes: a target takes any input and ends well, or finds an error.

A target returns where the input was read, or refused with a fault that has a place and a message of one line. Whatever
else happens (an exception, a warning, a number that is not finite, markup on a page that nobody may put there) is an
error of the program, and so is more than a second of the processor.
"""

from __future__ import annotations

import atexit
import math
import re
import shutil
import tempfile
import time
import warnings
from collections.abc import Callable
from functools import cache
from html.parser import HTMLParser
from pathlib import Path

from sheetgen.faults import FaultLog, FaultsError, Place
from sheetgen.handbook import derive
from sheetgen.pages.notes import notes
from sheetgen.quantities import registry
from sheetgen.records.cif import read_cif
from sheetgen.records.files import HIDDEN
from sheetgen.records.formulas import composition
from sheetgen.records.imprint import default_imprint, read_imprint
from sheetgen.records.markdown import LONGEST as LONGEST_NOTES
from sheetgen.records.markdown import check_notes
from sheetgen.records.measures import ELECTRONS, MEASURED, SPECIMEN, STRUCTURE
from sheetgen.records.nodes import Scalar
from sheetgen.records.readings import read_quantity
from sheetgen.records.record import read_record
from sheetgen.records.sources import read_sources
from sheetgen.records.trees import read_tree
from sheetgen.records.units import read_unit
from sheetgen.records.unreadable import UnreadableError
from sheetgen.records.values import Reader

LONGEST_SECONDS = 1.0
LONGEST_MESSAGE = 2000
MEASURES = tuple({**STRUCTURE, **ELECTRONS, **MEASURED, **SPECIMEN}.values())
ALLOWED_TAGS = frozenset(
    "p br hr em strong b i code pre blockquote ul ol li dl dt dd a sup sub table thead tbody tr th td h3 h4 h5 h6 "
    "abbr del ins small".split()
)
ALLOWED_LINK = re.compile(r"https?://|mailto:|#|(?![a-z][a-z0-9+.-]*:)[^/\\]", re.IGNORECASE)


class HangError(AssertionError):
    """An input took longer than a second of the processor."""


def _refusal(message: str) -> None:
    assert message and "\n" not in message and len(message) < LONGEST_MESSAGE, message


def _faults_of(log: FaultLog) -> None:
    for fault in log:
        assert fault.place.file, fault
        _refusal(fault.message)


def _text(data: bytes) -> str | None:
    """What the reader of files passes on: UTF-8 without hidden characters."""
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError:
        return None
    return None if HIDDEN.search(text) else text


def value(data: bytes) -> None:
    """A value as one types it, under the key that the first byte chooses."""
    measure = MEASURES[data[0] % len(MEASURES)] if data else MEASURES[0]
    try:
        reading = read_quantity(data[1:].decode("utf-8", "replace"), measure)
    except UnreadableError as error:
        return _refusal(str(error))
    assert math.isfinite(reading.value) and math.isfinite(reading.si)
    spread = reading.si_uncertainty
    assert spread is None or (math.isfinite(spread) and spread >= 0)
    return None


def unit(data: bytes) -> None:
    """A unit as one types it."""
    try:
        meaning = read_unit(data.decode("utf-8", "replace"))
    except UnreadableError as error:
        return _refusal(str(error))
    assert math.isfinite(meaning.factor) and meaning.factor > 0 and math.isfinite(meaning.offset)
    return None


def formula(data: bytes) -> None:
    """A chemical formula."""
    try:
        counts = composition(data.decode("utf-8", "replace"))
    except UnreadableError as error:
        return _refusal(str(error))
    assert counts and all(math.isfinite(count) and count > 0 for count in counts.values())
    return None


def record(data: bytes) -> None:
    """A record, read as far as its values."""
    text = _text(data)
    if text is None:
        return
    log = FaultLog()
    found = read_record(Path("copper.yaml"), text, Reader(log), _folder(), 293.15)
    _faults_of(log)
    assert found is not None or log.faults
    for given in found.inputs.values() if found else ():
        assert math.isfinite(given.si)


def sheet(data: bytes) -> None:
    """A record, derived as far as its sheet."""
    text = _text(data)
    if text is None:
        return
    log = FaultLog()
    found = read_record(Path("copper.yaml"), text, Reader(log), _folder(), 293.15)
    if found is None:
        return
    for made in derive([found], default_imprint(Path("handbook.yaml")), registry()):
        _finite(made.data)
        for stated in made.crosschecks:
            _refusal(stated.message)


def _finite(node: object) -> None:
    if isinstance(node, dict):
        for child in node.values():
            _finite(child)
    elif isinstance(node, (list, tuple)):
        for child in node:
            _finite(child)
    else:
        assert not isinstance(node, float) or math.isfinite(node), "a number that is not finite on a sheet"


def imprint(data: bytes) -> None:
    """An imprint."""
    text, log = _text(data), FaultLog()
    if text is None:
        return
    root = read_tree(text, "handbook.yaml", log)
    if root:
        read_imprint(root, _folder() / "handbook.yaml", Reader(log))
    _faults_of(log)


def bibliography(data: bytes) -> None:
    """A bibliography."""
    text, log = _text(data), FaultLog()
    if text is None:
        return
    for source in read_sources(text, Path("sources.bib"), log).values():
        assert "\n" not in source.text
        assert source.link is None or source.link.lower().startswith(("http://", "https://"))
    _faults_of(log)


def cif(data: bytes) -> None:
    """A CIF beside a record."""
    (_folder() / "x.cif").write_bytes(data)
    log = FaultLog()
    crystal = read_cif(Scalar("x.cif", True, Place("copper.yaml", 1, 1)), Reader(log), _folder())
    _faults_of(log)
    assert crystal is not None or log.faults
    assert crystal is None or (0 < len(crystal.sites) <= 1000 and math.isfinite(crystal.a.si))


@cache
def _folder() -> Path:
    memory = Path("/dev/shm")
    folder = Path(tempfile.mkdtemp(prefix="fuzz-", dir=memory if memory.is_dir() else None))
    atexit.register(shutil.rmtree, folder, ignore_errors=True)
    return folder


class _Look(HTMLParser):
    """Refuses whatever a note must not put on a page."""

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        assert tag in ALLOWED_TAGS, tag
        for name, given in attrs:
            assert (tag, name) in {("a", "href"), ("a", "title"), ("a", "rel"), ("abbr", "title"), ("ol", "start")}
            assert name != "href" or ALLOWED_LINK.match(given or "#"), given

    def handle_comment(self, data: str) -> None:
        raise AssertionError(f"a comment: {data}")

    def handle_decl(self, decl: str) -> None:
        raise AssertionError(f"a declaration: {decl}")

    def handle_pi(self, data: str) -> None:
        raise AssertionError(f"a processing instruction: {data}")


def markdown(data: bytes) -> None:
    """The notes of a record, as far as the page."""
    text, log = _text(data), FaultLog()
    if text is None or len(text) > LONGEST_NOTES:
        return
    check_notes(Scalar(text, True, Place("copper.yaml", 1, 1)), Reader(log))
    _faults_of(log)
    if not log.faults:
        look = _Look()
        look.feed(str(notes(text)))
        look.close()


TARGETS: dict[str, Callable[[bytes], None]] = {
    target.__name__: target
    for target in (value, unit, formula, record, sheet, imprint, bibliography, cif, markdown)
}


def guarded(target: Callable[[bytes], None]) -> Callable[[bytes], None]:
    """The target with warnings as errors and its processor time bounded."""

    def run(data: bytes) -> None:
        began = time.process_time()
        with warnings.catch_warnings():
            warnings.simplefilter("error")
            try:
                target(data)
            except FaultsError as error:
                for fault in error.faults:
                    _refusal(fault.message)
        if (taken := time.process_time() - began) > LONGEST_SECONDS:
            raise HangError(f"{taken:.1f} s")

    return run
