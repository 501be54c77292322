"""References as plain Unicode text: LaTeX decoded, names in reading order, one sentence for each source."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Mapping, Sequence

from sheetgen.records.unreadable import UnreadableError, shown

_LATEX = re.compile(r"[\\{}$~]|--")
_MATH = re.compile(r"\$([^$]*)\$")
_SCRIPT = re.compile(r"([_^])\s*(?:\{([^{}]*)\}|(.))")
_LOWERED = str.maketrans("0123456789+-=()", "₀₁₂₃₄₅₆₇₈₉₊₋₌₍₎")
_RAISED = str.maketrans("0123456789+-=()", "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻⁼⁽⁾")
_COMMAND = re.compile(r"\\([A-Za-z]+)\s*")

_DOI = re.compile(r"10\.\d{4,9}/[^\s\"<>\\^`{|}]+")
_DOI_PREFIX = re.compile(r"(?:https?://(?:dx\.)?doi\.org/|doi:\s*)", re.IGNORECASE)
_WEB = re.compile(r"https?://[^\s\"<>\\^`{|}]+", re.IGNORECASE)


def plain_text(latex: str) -> str:
    """A BibTeX field as plain Unicode: accents decoded, braces gone, simple formulas with raised and lowered digits.

    Raises UnreadableError where its braces do not match.
    """
    if not _LATEX.search(latex):
        return latex
    from pybtex.richtext import Text
    from pybtex.scanner import PybtexSyntaxError

    without_math = _MATH.sub(lambda math: _SCRIPT.sub(_script, math[1]), latex)
    try:
        decoded = str(Text.from_latex(without_math))
    except PybtexSyntaxError:
        raise UnreadableError(f"the braces of {shown(latex)} do not match; close each that is open") from None
    return " ".join(_COMMAND.sub(_command, decoded).replace("\u00a0", " ").split())


def _script(match: re.Match[str]) -> str:
    inner = match[2] if match[2] is not None else match[3]
    return inner.translate(_LOWERED if match[1] == "_" else _RAISED)


def _command(match: re.Match[str]) -> str:
    """A Greek letter for its name; any other command leaves nothing."""
    name = match[1]
    case = "CAPITAL" if name[0].isupper() else "SMALL"
    try:
        return unicodedata.lookup(f"GREEK {case} LETTER {name.upper()}")
    except KeyError:
        return ""


def person_name(bibtex: str) -> str:
    """A name in reading order: `Matula, R. A.` as `R. A. Matula`. Raises UnreadableError for too many commas."""
    from pybtex.database import Person

    if bibtex.strip().lower() == "others":
        return "others"
    import pybtex.errors

    with pybtex.errors.capture() as errors:
        person = Person(bibtex)
    if errors:
        raise UnreadableError(
            f"the name {shown(bibtex)} has too many commas; write 'Family, Given' and put 'and' between names"
        )
    parts = (
        person.first_names,
        person.middle_names,
        person.prelast_names,
        person.last_names,
        person.lineage_names,
    )
    return plain_text(" ".join(word for words in parts for word in words))


def reference(authors: Sequence[str], fields: Mapping[str, str]) -> str:
    """One source as a reader expects it: authors: title. Where it appeared, volume, pages (year)."""
    if "author" not in fields and "editor" in fields:
        authors = [*authors[:-1], f"{authors[-1]} (ed.)"]
    head = ": ".join(part for part in (_joined(authors), fields.get("title", "")) if part)
    sentences = [head, _appeared(fields), fields.get("howpublished", "")]
    text = ". ".join(sentence.rstrip(".") for sentence in sentences if sentence)
    return f"{text}." if text else fields.get("note", "")


def _joined(names: Sequence[str]) -> str:
    *most, last = names or ("",)
    return f"{', '.join(most)} and {last}" if most else last


def _appeared(fields: Mapping[str, str]) -> str:
    """Journal with volume, or book with publisher, then pages and year."""
    host = fields.get("journal") or fields.get("booktitle", "")
    volume = fields.get("volume", "")
    if fields.get("number"):
        volume += f"({fields['number']})"
    maker = fields.get("publisher") or fields.get("institution") or fields.get("school", "")
    edition = _edition(fields.get("edition", ""))
    place = ", ".join(part for part in (f"{host} {volume}".strip(), edition, maker, fields.get("address", "")) if part)
    pages = f", {fields['pages']}" if fields.get("pages") else ""
    year = f" ({fields['year']})" if fields.get("year") else ""
    return f"{place}{pages}{year}".strip(" ,")


def _edition(written: str) -> str:
    """`3` as "edition 3", `Third` as "Third edition"."""
    if not written:
        return ""
    return f"{written} edition" if any(character.isalpha() for character in written) else f"edition {written}"


def link_of(fields: Mapping[str, str]) -> str | None:
    """The address of a source by its DOI or URL, else None. Raises UnreadableError for one that leads nowhere safe."""
    if doi := fields.get("doi"):
        bare = _DOI_PREFIX.sub("", doi.replace("\\_", "_").strip())
        if not _DOI.fullmatch(bare):
            raise UnreadableError(f"the doi {shown(doi)} is none; expected a form such as 10.1063/1.555614")
        return f"https://doi.org/{bare}"
    if url := fields.get("url"):
        address = url.replace("\\_", "_").replace("\\%", "%").replace("\\&", "&").strip()
        if not _WEB.fullmatch(address):
            raise UnreadableError(f"the url {shown(url)} is no web address; expected one that begins with https://")
        return address
    return None
