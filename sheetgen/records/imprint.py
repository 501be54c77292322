"""The imprint, handbook.yaml: who publishes the handbook, at which temperatures, in which units, on what paper."""

from __future__ import annotations

import datetime
import re
from contextlib import suppress
from pathlib import Path

from sheetgen.faults import Place, did_you_mean
from sheetgen.records.look import read_look, read_pages, read_subfolder
from sheetgen.records.model import Imprint
from sheetgen.records.nodes import Listing, Node, Scalar, Table, found
from sheetgen.records.spelling import written_key
from sheetgen.records.units import read_unit
from sheetgen.records.unreadable import UnreadableError, shown
from sheetgen.records.values import Reader, text_of

FILE_NAME = "handbook.yaml"
REFERENCE_TEMPERATURE = 293.15
TEMPERATURES = (4.2, 77.0, 293.15)
MAXIMUM_TEMPERATURES = 50
PAPERS = {"a4": "A4", "letter": "letter"}
THRESHOLDS: dict[str, float | tuple[float | None, ...]] = {"agrees": 0.10, "adjust": 2.0, "undecided": 0.25}

_TEXTS = ("title", "group", "edition", "date", "licence", "language", "contact", "base_address")
_KEYS = (
    *_TEXTS,
    "previous_edition",
    "reference_temperature",
    "temperatures",
    "paper",
    "units",
    "thresholds",
    "remarks_as_faults",
    "review_interval",
    "own_quantities",
    "look",
    "templates",
    "pages",
)
_LONGEST_TEXT = 300
_LANGUAGE = re.compile(r"[a-z]{2,3}(?:-[A-Za-z0-9]{2,8})*")
_ADDRESS = re.compile(r"https?://[^\s\"<>\\^`{|}]+")
_CONTACT = re.compile(r"[^\s@\"<>()]+@[^\s@\"<>()]+\.[A-Za-z0-9-]{2,}|https?://[^\s\"<>\\^`{|}]+")
_MODULE = re.compile(r"[A-Za-z_][A-Za-z0-9_]{0,63}\.py")
_NUMBER = re.compile(r"[\d.eE+-]{1,20}")
_MONTHS = re.compile(r"([1-9]\d{0,2}) (month|year)s?")
_BARE = re.compile(r"\s*[+-]?[\d.]+\s*")
_IDENTIFIER = re.compile(r"[a-z][a-z0-9_]{0,63}")
_EARLIER = re.compile(r"(?:[A-Za-z0-9_-][A-Za-z0-9._-]{0,63}/){0,4}[A-Za-z0-9_-][A-Za-z0-9._-]{0,63}\.json")


def default_imprint(path: Path) -> Imprint:
    """What holds where nothing was stated; stands in for a faulty imprint while the records are checked."""
    return Imprint(
        title="", group="", edition="", licence="", language="en", contact="", base_address="",
        reference_temperature=REFERENCE_TEMPERATURE, temperatures=_ordered(TEMPERATURES, REFERENCE_TEMPERATURE),
        paper="A4", units={}, thresholds=dict(THRESHOLDS), own_quantities=None, place=Place(str(path)),
    )  # fmt: skip


def read_imprint(root: Table, path: Path, reader: Reader) -> Imprint:
    """The imprint at the root of handbook.yaml; what cannot be read is logged and left at its default."""
    _check_keys(root, reader)
    texts = {key: _text(root.node(key), key, reader) for key in _TEXTS}
    if "title" not in root.entries:
        reader.fault(root, "the imprint has no title; add 'title: Handbook of …'.")
    _check_form(root, "language", _LANGUAGE, "a language tag such as 'en' or 'en-GB'", reader)
    _check_form(root, "base_address", _ADDRESS, "an address such as 'https://handbook.example.org/'", reader)
    _check_date(root, reader)
    _check_form(root, "contact", _CONTACT, "a mail address or a web address", reader)
    reference = _temperature(root.node("reference_temperature"), "reference temperature", reader)
    reference = REFERENCE_TEMPERATURE if reference is None else reference
    return Imprint(
        **{**texts, "language": texts["language"] or "en"},
        reference_temperature=reference,
        temperatures=_ordered(_temperatures(root.node("temperatures"), reader), reference),
        paper=_paper(root.node("paper"), reader),
        units=_units(root.node("units"), reader),
        thresholds=THRESHOLDS | _thresholds(root.node("thresholds"), reader),
        own_quantities=_own_quantities(root.node("own_quantities"), path.parent, reader),
        place=root.place,
        previous_edition=_previous_edition(root.node("previous_edition"), path.parent, reader),
        remarks_as_faults=_remarks_as_faults(root.node("remarks_as_faults"), reader),
        review_interval=_review_interval(root.node("review_interval"), reader),
        look=read_look(root.node("look"), path.parent, reader),
        templates=read_subfolder(root.node("templates"), "templates", path.parent, reader),
        pages=read_pages(root.node("pages"), path.parent, reader),
    )


def _check_keys(root: Table, reader: Reader) -> None:
    for key, entry in root.entries.items():
        if key not in _KEYS:
            names = list(map(written_key, _KEYS))
            guess = did_you_mean(key.replace("_", " "), names)
            reader.fault(
                entry.key.place,
                f"unknown key {shown(entry.key.text)}; expected one of {', '.join(names)}.{guess}",
            )


def _text(node: Node | None, key: str, reader: Reader) -> str:
    if node is None:
        return ""
    if not isinstance(node, Scalar) or not node.text.strip() or len(node.text) > _LONGEST_TEXT:
        expected = f"expected a text of at most {_LONGEST_TEXT} characters"
        reader.fault(node, f"{written_key(key)}: found {found(node)}; {expected}.")
        return ""
    return node.text.strip()


def _check_form(root: Table, key: str, form: re.Pattern[str], expected: str, reader: Reader) -> None:
    text = text_of(root.node(key))
    if text and not form.fullmatch(text):
        reader.fault(root.node(key), f"{written_key(key)}: found {shown(text)}; expected {expected}.")


def _check_date(root: Table, reader: Reader) -> None:
    text = text_of(root.node("date"))
    with suppress(ValueError):
        if not text or datetime.date.fromisoformat(text).isoformat() == text:
            return
    if text:
        expected = "expected the day of the edition, such as 2026-11-02"
        reader.fault(root.node("date"), f"date: found {shown(text)}; {expected}.")


def _temperature(node: Node | None, name: str, reader: Reader) -> float | None:
    """A temperature above absolute zero in K; a bare number counts kelvins."""
    if node is None:
        return None
    if not isinstance(node, Scalar):
        reader.fault(node, f"{name}: found {found(node)}; expected a temperature such as '293.15 K' or '20 °C'.")
        return None
    if _BARE.fullmatch(node.text):
        node = Scalar(f"{node.text.strip()} K", node.plain, node.place)
    kelvins = reader.temperature(node, name)
    if kelvins is not None and kelvins <= 0:
        reader.fault(node, f"{name}: {shown(node.text)} is absolute zero; expected a temperature above it.")
        return None
    return kelvins


def _temperatures(node: Node | None, reader: Reader) -> tuple[float, ...]:
    if node is None:
        return TEMPERATURES
    if not isinstance(node, Listing) or not 0 < len(node.items) <= MAXIMUM_TEMPERATURES:
        expected = f"expected a list of 1 to {MAXIMUM_TEMPERATURES}, such as [4.2 K, 77 K, 20 °C]"
        reader.fault(node, f"temperatures: found {found(node)}; {expected}.")
        return TEMPERATURES
    kelvins = [_temperature(item, "temperatures", reader) for item in node.items]
    return tuple(value for value in kelvins if value is not None)


def _ordered(temperatures: tuple[float, ...], reference: float) -> tuple[float, ...]:
    """The reference temperature first, then the others in ascending order, each once."""
    return (reference, *sorted(set(temperatures) - {reference}))


def _paper(node: Node | None, reader: Reader) -> str:
    if node is None:
        return "A4"
    if (paper := PAPERS.get(text_of(node).lower())) is None:
        reader.fault(node, f"paper: found {found(node)}; expected A4 or letter.")
        return "A4"
    return paper


def _table(node: Node | None, name: str, example: str, reader: Reader) -> Table:
    if node is not None and not isinstance(node, Table):
        reader.fault(node, f"{name}: found {found(node)}; expected a mapping such as {example}.")
        node = None
    return node or Table({}, Place(""))


def _units(node: Node | None, reader: Reader) -> dict[str, str]:
    units = {}
    for key, entry in _table(node, "units", "{fermi_energy: eV}", reader).entries.items():
        text = text_of(entry.node)
        try:
            if not text:
                raise UnreadableError("no unit stands here; expected such as 'eV'")
            read_unit(text)
        except UnreadableError as error:
            reader.unreadable(entry.node, f"unit of {written_key(key)}", error)
            continue
        units[key] = text
    return units


def _thresholds(node: Node | None, reader: Reader) -> dict[str, float | tuple[float | None, ...]]:
    thresholds = {}
    for key, entry in _table(node, "thresholds", "{agrees: 0.1}", reader).entries.items():
        if key in THRESHOLDS:
            thresholds[key] = _threshold(entry.node, key, reader)
        elif not _IDENTIFIER.fullmatch(key):
            message = f"{shown(entry.key.text)} is no id of an assumption; expected one such as degenerate_gas."
            reader.fault(entry.key.place, message)
        elif not isinstance(entry.node, Listing) or len(entry.node.items) != 2:
            expected = "expected [strained, broken] such as [0.1, 0.3], null standing for a bound that does not exist"
            reader.fault(entry.node, f"{key}: found {found(entry.node)}; {expected}.")
        else:
            thresholds[key] = tuple(_bound(item, key, reader) for item in entry.node.items)
    return {key: value for key, value in thresholds.items() if value is not None}


def _threshold(node: Node, key: str, reader: Reader) -> float | None:
    number = _number(node)
    low, high = {"agrees": (0, 1), "adjust": (1, 1000), "undecided": (0, 10)}[key]
    if number is None or not low < number <= high:
        reader.fault(node, f"{key}: found {found(node)}; expected a number above {low} and at most {high}.")
        return None
    return number


def _bound(node: Node, key: str, reader: Reader) -> float | None:
    if text_of(node) in ("", "~", "null"):
        return None
    if (number := _number(node)) is None or number <= 0:
        reader.fault(node, f"{key}: found {found(node)}; expected a number above 0, or null.")
        return None
    return number


def _number(node: Node) -> float | None:
    try:
        return float(text_of(node)) if _NUMBER.fullmatch(text_of(node)) else None
    except ValueError:
        return None


def _remarks_as_faults(node: Node | None, reader: Reader) -> tuple[str, ...]:
    """Names of the cross-checks whose remarks stop a press here; which there are, the checks themselves know."""
    if node is None:
        return ()
    items = node.items if isinstance(node, Listing) else [node]
    if not all(isinstance(item, Scalar) for item in items):
        reader.fault(node, f"remarks as faults: found {found(node)}; expected names of checks, such as [density].")
        return ()
    return tuple(item.text.strip() for item in items)


def _review_interval(node: Node | None, reader: Reader) -> int | None:
    """Months after which a review counts as stale; None where the imprint sets no limit."""
    if node is None:
        return None
    if (match := _MONTHS.fullmatch(text_of(node).strip())) is None:
        reader.fault(node, f"review interval: found {found(node)}; expected a time such as '36 months' or '3 years'.")
        return None
    return int(match[1]) * (12 if match[2] == "year" else 1)


def _own_quantities(node: Node | None, folder: Path, reader: Reader) -> Path | None:
    """The file of own quantities, named but not loaded: a Python file beside the imprint."""
    if node is None:
        return None
    name = text_of(node)
    path = folder / name
    if _MODULE.fullmatch(name) and path.is_file() and not path.is_symlink():
        return path
    expected = "expected a name such as quantities.py"
    reader.fault(node, f"own quantities: found {found(node)}, no Python file beside handbook.yaml; {expected}.")
    return None


def _previous_edition(node: Node | None, folder: Path, reader: Reader) -> Path | None:
    """The data file of the edition before this one: a file inside the folder, named but not yet read."""
    if node is None:
        return None
    path = folder / text_of(node)
    if _EARLIER.fullmatch(text_of(node)) and path.is_file() and path.resolve().is_relative_to(folder.resolve()):
        return path
    expected = "expected the data/handbook.json of that edition, kept in this folder, such as editions/2026-1.json"
    reader.fault(node, f"previous edition: found {found(node)}, no such file below handbook.yaml; {expected}.")
    return None
