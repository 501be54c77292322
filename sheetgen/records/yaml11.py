"""Plain words that YAML 1.1 reads as something else than what stands there (https://yaml.org/type/).

This program reads the typed text, but another reader of the same file would see a truth value, minutes or an octal
number: such a word must be written so that all agree.
"""

from __future__ import annotations

import re
from functools import lru_cache

from sheetgen.records.unreadable import shown

_TRUTH = re.compile(r"yes|Yes|YES|no|No|NO|on|On|ON|off|Off|OFF")
_NUMBERS = [
    (
        re.compile(r"[-+]?\d[\d_]*(?::[0-5]?\d)+(?:\.[\d_]*)?"),
        "{found} is a number to the base 60 in YAML 1.1; write {quoted} in quotes.",
    ),
    (
        re.compile(r"[-+]?0[\d_]+"),
        "{found} is an octal number in YAML 1.1; write it without the leading zero, or for a text {quoted} in quotes.",
    ),
    (
        re.compile(r"[-+]?0(?:x[\da-fA-F_]+|b[01_]+)"),
        "{found} is not a decimal number in YAML 1.1; write decimal digits, or for a text {quoted} in quotes.",
    ),
    (
        re.compile(r"[-+]?\d[\d_]*_[\d_]*(?:\.[\d_]*)?"),
        "{found} has underscores between its digits; write the digits without them.",
    ),
]


_LONGEST = 80


def surprise(text: str) -> str | None:
    """What is wrong with a plain word, and how to write it; None for a word that every reader takes alike."""
    return _surprise(text) if len(text) <= _LONGEST else None


@lru_cache(maxsize=4096)
def _surprise(text: str) -> str | None:
    if _TRUTH.fullmatch(text):
        found = f"the word {shown(text)} is a truth value in YAML 1.1"
        mend = " The day of a review is 'date'." if text.lower() == "on" else ""
        return f'{found}; write "{text}" in quotes, or true or false where that is meant.{mend}'
    if text == "<<":
        return "'<<' merges another mapping, which is not read; write its keys out here."
    if text[:1] not in "+-0123456789":
        return None
    for pattern, message in _NUMBERS:
        if pattern.fullmatch(text):
            return message.format(found=shown(text), quoted=f'"{text}"')
    return None
