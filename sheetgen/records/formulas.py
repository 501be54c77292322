"""Chemical formulas: `Cu`, `Ga0.7Al0.3As`, `Mg(OH)2`."""

from __future__ import annotations

import re
from collections import Counter

from sheetgen.faults import did_you_mean
from sheetgen.records.elements import elements
from sheetgen.records.unreadable import UnreadableError, shown

MAXIMUM_LENGTH = 120
MAXIMUM_DEPTH = 5
MAXIMUM_COUNT = 10_000

_TOKEN = re.compile(r"(?P<element>[A-Z][a-z]?)|(?P<opening>[(\[])|(?P<closing>[)\]])")
_COUNT = re.compile(r"\d{1,6}(?:\.\d{1,6})?|\.\d{1,6}")
_SUBSCRIPTS = str.maketrans("₀₁₂₃₄₅₆₇₈₉", "0123456789")


def composition(formula: str) -> dict[str, float]:
    """Atoms of each element in one formula unit, in the order in which the formula names them.

    Raises UnreadableError for anything that is not a formula of known elements with positive counts.
    """
    text = formula.translate(_SUBSCRIPTS)
    if not 0 < len(text) <= MAXIMUM_LENGTH:
        raise UnreadableError(f"a formula of {len(text)} characters; expected 1 to {MAXIMUM_LENGTH}, such as 'GaAs'")
    groups: list[Counter[str]] = [Counter()]
    position = 0
    while position < len(text):
        token = _TOKEN.match(text, position)
        if not token:
            raise UnreadableError(_unexpected(formula, text[position]))
        position = token.end()
        if token["opening"]:
            groups.append(Counter())
            if len(groups) > MAXIMUM_DEPTH:
                raise UnreadableError(f"formula {shown(formula)} has brackets nested deeper than {MAXIMUM_DEPTH}")
            continue
        if token["closing"]:
            if len(groups) == 1:
                raise UnreadableError(f"formula {shown(formula)} closes a bracket that it never opened; remove it")
            group = groups.pop()
        else:
            group = Counter({_known(token["element"], formula): 1})
        count, position = _count(text, position, formula)
        for element, number in group.items():
            groups[-1][element] += number * count
    if len(groups) > 1:
        raise UnreadableError(f"formula {shown(formula)} leaves a bracket open; close it")
    return _bounded(dict(groups[0]), formula)


def _known(symbol: str, formula: str) -> str:
    if symbol in elements():
        return symbol
    raise UnreadableError(
        f"formula {shown(formula)} names {shown(symbol)}, which is no element;"
        f" expected symbols such as Cu or Ga.{did_you_mean(symbol, elements())}"
    )


def _count(text: str, position: int, formula: str) -> tuple[float, int]:
    number = _COUNT.match(text, position)
    if not number:
        return 1.0, position
    if float(number[0]) == 0:
        raise UnreadableError(f"formula {shown(formula)} counts an element or a bracket 0 times; leave it out")
    return float(number[0]), number.end()


def _unexpected(formula: str, character: str) -> str:
    return (
        f"formula {shown(formula)} has an unexpected {shown(character)};"
        " expected element symbols, counts and brackets, such as GaAs or Al0.3Ga0.7As"
    )


def _bounded(counts: dict[str, float], formula: str) -> dict[str, float]:
    if not counts:
        raise UnreadableError(f"formula {shown(formula)} names no element; expected such as GaAs")
    if max(counts.values()) > MAXIMUM_COUNT:
        raise UnreadableError(f"formula {shown(formula)} counts more than {MAXIMUM_COUNT} atoms of one element")
    return counts
