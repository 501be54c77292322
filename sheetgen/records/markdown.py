"""Bounds on the Markdown of notes: what no reader misses, and what would keep a converter busy for minutes.

The converter of the pages looks ahead from each opening bracket and calls itself for each level of a list, so a few
thousand marks in a row cost minutes or its stack. With these bounds any text of the longest length takes well below
a second.
"""

from __future__ import annotations

import re

from sheetgen.records.nodes import Scalar
from sheetgen.records.values import Reader

LONGEST = 20_000
MAXIMUM_LEVELS = 10

_BOUNDS = (
    ("lines", re.compile(r"\n"), 1000),
    ("opening brackets", re.compile(r"\["), 100),
    ("signs '<'", re.compile(r"<"), 500),
    ("backticks", re.compile(r"`"), 500),
    ("abbreviations", re.compile(r"^ *\*\[", re.MULTILINE), 50),
    ("definitions", re.compile(r"^ *:", re.MULTILINE), 50),
)
_MARK = r"(?:>|(?:[-*+:]|\d{1,9}[.)])(?=[ \t]))"
_MARKS = re.compile(rf"[ \t]*(?:{_MARK}[ \t]*)+")
_ONE_MARK = re.compile(_MARK)
_INDENT = 4


def check_notes(node: Scalar | None, reader: Reader) -> None:
    """Log a fault for notes with more of something than a page of notes needs."""
    if node is None:
        return
    for name, mark, most in _BOUNDS:
        if (count := len(mark.findall(node.text))) > most:
            reader.fault(node, f"notes: {count} {name}; expected at most {most}. Shorten the notes.")
            return
    for number, line in enumerate(node.text.split("\n"), 1):
        if _levels(line) > MAXIMUM_LEVELS:
            deep = f"line {number} of the notes is nested deeper than {MAXIMUM_LEVELS} levels"
            reader.fault(node, f"notes: {deep}; a reader needs fewer.")
            return


def _levels(line: str) -> int:
    """How many lists and quotations a line may open or continue, going by its marks and its indentation."""
    marks = _MARKS.match(line)
    if not marks:
        return 0
    indentation = len(line.expandtabs(_INDENT)) - len(line.expandtabs(_INDENT).lstrip())
    return indentation // _INDENT + len(_ONE_MARK.findall(marks[0]))
