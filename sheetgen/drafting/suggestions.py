"""What someone may have meant by a word that is no formula."""

from __future__ import annotations

import re

from sheetgen.drafting.compounds import COMMON_LATTICES
from sheetgen.drafting.elements import usual
from sheetgen.faults import did_you_mean
from sheetgen.records import composition
from sheetgen.records.unreadable import UnreadableError, sentence

_LONGEST = 20
_QUOTED = re.compile("'(.+)'")


class FormulaRefusedError(ValueError):
    """A word that is no formula; one line that guesses which was meant."""


def read_formula(text: str) -> tuple[str, dict[str, float]]:
    """A formula without blanks around it, and its composition; raises FormulaRefusedError."""
    formula = text.strip()
    try:
        return formula, composition(formula)
    except UnreadableError as error:
        message = sentence(str(error))
        guess = "" if "Did you mean" in message else suggestion(formula)
        raise FormulaRefusedError(f"{message[:1].upper()}{message[1:]}{guess}") from None


def suggestion(word: str) -> str:
    """A closing sentence with the formula that a name or a careless spelling stands for; "" where none is near."""
    symbols = {element.name: symbol for symbol, element in usual().items()}
    formulas = {text.lower(): text for text in (*usual(), *COMMON_LATTICES)}
    near = word.lower()
    meant = [f"'{symbols[near]}' ({near})"] if near in symbols else []
    meant += [f"'{formulas[near]}'"] if near in formulas else []
    if not meant and (found := _QUOTED.search(did_you_mean(word, symbols))):
        meant = [f"'{symbols[found[1]]}' ({found[1]})"]
    # Most words split into symbols somehow; only one with counts, or a very short one, was meant as a formula.
    like_formula = word.isascii() and word.isalnum() and (len(word) <= 4 or not word.isalpha())
    if not meant and like_formula and len(word) <= _LONGEST and (spelt := _symbols(near)):
        meant = [f"'{spelt}'"]
    return f" Did you mean {' or '.join(meant)}?" if meant else ""


def _symbols(word: str) -> str:
    """The word split into symbols and counts, long symbols first; "" where it cannot be."""
    if not word:
        return ""
    digits = len(word) - len(word.lstrip("0123456789"))
    if digits:
        return word[:digits] + rest if (rest := _symbols(word[digits:])) or len(word) == digits else ""
    for length in (2, 1):
        symbol = word[:length].capitalize()
        if len(word) >= length and symbol in usual():
            if len(word) == length:
                return symbol
            if rest := _symbols(word[length:]):
                return symbol + rest
    return ""
