"""Whether LaTeX of a declaration can be set as MathML, asked before a page needs it."""

from __future__ import annotations

import re
from xml.etree import ElementTree

# A "\f" or "\t" that a string without r in front has turned into a control character.
_LOST = re.compile(r"[\x00-\x1f]")
_SET = frozenset(
    """math mi mn mo mtext mspace mrow mfrac msqrt mroot mstyle mpadded mphantom msub msup msubsup munder mover
    munderover mtable mtr mtd""".split()  # noqa: SIM905, a list of words reads better as words
)
_PARTS = {"mfrac": 2, "msub": 2, "msup": 2, "munder": 2, "mover": 2, "mroot": 2, "msubsup": 3, "munderover": 3}


def unsettable(latex: str) -> str:
    """Why a formula cannot be set, with a mend, fit to stand behind its name; "" where it can or is empty."""
    if not latex:
        return ""
    if lost := _LOST.search(latex):
        return f'holds the control character {lost[0]!r}, once a LaTeX command; write it as a raw string, r"…".'
    bare = latex.replace(r"\{", "").replace(r"\}", "")
    if bare.count("{") != bare.count("}"):
        return f"{latex!r} opens and closes different numbers of braces; close each that is open."
    from latex2mathml.converter import convert

    try:
        root = ElementTree.fromstring(convert(latex))
    except Exception as error:  # the converter's own errors have no common class below Exception
        return f"{latex!r} cannot be set ({type(error).__name__}); check its braces and commands."
    for element in root.iter():
        if len(element) != _PARTS.get(element.tag.rpartition("}")[2], len(element)):
            return f"{latex!r} lacks a part of a fraction, an index or a power; write both in braces."
        if element.tag.rpartition("}")[2] not in _SET or "\\" in (element.text or ""):
            what = (element.text or "").strip() or f"<{element.tag.rpartition('}')[2]}>"
            return f"{latex!r} uses {what}, which is not set here; write it in other commands."
    return ""
