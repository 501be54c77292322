"""Formulas: LaTeX of the declarations set as MathML, which is read on screen, on paper and aloud."""

from __future__ import annotations

import re
from functools import cache
from xml.etree import ElementTree

from markupsafe import Markup

NAMESPACE = "http://www.w3.org/1998/Math/MathML"
# The converter sets a single upright letter as a slanted one; as text it stays upright, in the same fount.
_UPRIGHT = re.compile(r"\\(?:mathrm|operatorname)\s*\{([^{}\\$]+)\}")
_ELEMENTS = frozenset(
    """math mi mn mo mtext mspace mrow mfrac msqrt mroot mstyle mpadded mphantom msub msup msubsup munder mover
    munderover mtable mtr mtd""".split()  # noqa: SIM905, a list of words reads better as words
)
_ATTRIBUTES = frozenset(
    """mathvariant stretchy fence form accent accentunder linethickness displaystyle scriptlevel width columnalign
    separator minsize maxsize lspace rspace movablelimits largeop symmetric""".split()  # noqa: SIM905
)
# The converter's sign for a square is in few founts, the plain white square is in ours; as a superscript the asterisk
# operator is set at the height of a sign, the common asterisk far above.
_REPLACED = str.maketrans({"\u25fb": "\u25a1", "*": "\u2217"})
# Letters that lean over the subscript that follows them.
_LEANING = frozenset("vy")
# A solidus is set solid, as print does (1/3, not 1 / 3); the name of a function stands off from its argument.
_SPACED = {"/": "0.06em"} | dict.fromkeys(("cos", "sin", "tan", "ln", "log", "exp", "min", "max"), "0.12em")
_NOT_SPOKEN = frozenset(["\u2061", "\u2062", "\u2063"])
_SPOKEN_POWERS = {"2": "squared", "3": "cubed"}


class FormulaError(ValueError):
    """A formula that cannot be set."""


@cache
def formula(latex: str, display: bool = False) -> Markup:
    """MathML for a LaTeX formula, with its reading in words as the alternative text; nothing for no formula.

    Only MathML's own elements and attributes pass, and no styling (the pages allow no inline style). Raises
    FormulaError where the LaTeX is not understood.
    """
    if not latex:
        return Markup("")
    root = _converted(latex, "block" if display else "inline")
    _unwrap(root)
    for element in root.iter():
        _tidy(element, latex)
    for element in list(root.iter("msub")):
        _make_room(element)
    root.attrib.clear()
    root.set("alttext", spoken(root))
    if display:
        root.set("displaystyle", "true")
    return Markup(ElementTree.tostring(root, encoding="unicode"))


def _converted(latex: str, display: str) -> ElementTree.Element:
    from latex2mathml.converter import convert

    try:
        return ElementTree.fromstring(convert(_UPRIGHT.sub(r"\\text{\1}", latex), display=display))
    except Exception as error:  # the converter's own errors have no common class below Exception
        raise FormulaError(f"the formula {latex!r} cannot be set ({type(error).__name__})") from error


def _unwrap(element: ElementTree.Element) -> None:
    """Take out rows that hold one thing only, which change nothing but the size of the page."""
    for position, child in enumerate(list(element)):
        _unwrap(child)
        if child.tag.endswith("}mrow") and len(child) == 1:
            element[position] = child[0]
    if element.tag.endswith("}math") and len(element) == 1 and element[0].tag.endswith("}mrow"):
        element[:] = list(element[0])


def _make_room(element: ElementTree.Element) -> None:
    """Keep a subscript clear of a letter that leans over it."""
    base = element[0]
    if base.tag == "mi" and base.text in _LEANING:
        row = ElementTree.Element("mrow")
        row.extend([base, ElementTree.Element("mspace", {"width": "0.08em"})])
        element[0] = row


def _tidy(element: ElementTree.Element, latex: str) -> None:
    """Drop the namespace prefix and every attribute but the few that matter; refuse what is not MathML."""
    element.tag = element.tag.removeprefix(f"{{{NAMESPACE}}}")
    if element.tag not in _ELEMENTS:
        raise FormulaError(f"the formula {latex!r} holds <{element.tag}>, which is no part of a formula")
    element.attrib = {key: value for key, value in element.attrib.items() if key in _ATTRIBUTES}
    if element.text:
        element.text = element.text.translate(_REPLACED)
        if element.text in _SPACED:
            element.tag = "mo"
            element.attrib |= dict.fromkeys(("lspace", "rspace"), _SPACED[element.text])
        if "\\" in element.text:
            raise FormulaError(f"the formula {latex!r} uses {element.text}, which is not a known command")


def spoken(element: ElementTree.Element) -> str:
    """The formula in words, as 'E sub F' or '(a) over (b)'."""
    parts = [spoken(child) for child in element]
    match element.tag:
        case "mfrac":
            return f"({parts[0]}) over ({parts[1]})"
        case "msqrt":
            return f"square root of ({' '.join(parts)})"
        case "mroot":
            return f"root of order {parts[1]} of ({parts[0]})"
        case "msub" | "munder":
            return f"{parts[0]} sub {parts[1]}"
        case "msup" | "mover":
            return f"{parts[0]} {_power(parts[1])}"
        case "msubsup" | "munderover":
            return f"{parts[0]} sub {parts[1]} {_power(parts[2])}"
    return " ".join(part for part in [_own_text(element), *parts] if part)


def _power(words: str) -> str:
    return _SPOKEN_POWERS.get(words, f"to the power ({words})" if " " in words else f"to the power {words}")


def _own_text(element: ElementTree.Element) -> str:
    text = (element.text or "").replace("\xa0", " ").strip()
    return "" if text in _NOT_SPOKEN else text
