"""Formulas on paper: short ones as letters with sub- and superscripts, the others as drawn outlines.

Both come with the same reading in words that the pages give, so that a formula is seen and heard.
"""

from __future__ import annotations

import base64
import html
import re
import tempfile
from collections.abc import Iterator
from functools import cache
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

from markupsafe import Markup

from sheetgen.pages import formulas
from sheetgen.pages.environment import template_folder

FACES = {"rm": "Serif-Regular", "it": "Serif-Italic", "bf": "Serif-Semibold"}
FAMILY = "Sheetgen"
# Points; the outlines are scaled with the text around them, so that this is only the size they are made at.
SIZE = 10.0
# What mathtext wants in other words: the argument of a limit stands below by itself, a set's size is a plain sign.
_OTHER_WORDS = (
    (re.compile(r"\\frac"), r"\\dfrac"),
    (re.compile(r"\\square"), "□"),
    (re.compile(r"\\left\\\{"), r"\\left\\lbrace "),
    (re.compile(r"\\right\\\}"), r"\\right\\rbrace "),
    (re.compile(r"\\(min|max)_\{"), r"\\operatorname{\1}_{"),
    (re.compile(r"\\mathbf\{([A-Z])\}"), r"\\mathbf{\1}"),
)
# Figures and brackets stand upright between slanted letters; mathtext slants all that is not told otherwise.
_PIECE = re.compile(
    r"\\(?:mathrm|text|operatorname|mathbf)\{[^{}]*\}|\\(?:left|right)\s*(?:\\[A-Za-z]+|\\?.)|\\[A-Za-z]+|\\."
    r"|(?P<upright>[0-9]+|[()\[\]])"
)
_OPERATIONS = {1: "M", 2: "L", 3: "Q", 4: "C", 79: "Z"}
_POINTS = {1: 1, 2: 1, 3: 2, 4: 3, 79: 0}


_UNSEEN = {0x2061: None, 0x2062: None, 0x2063: None, 0x2217: "*"}


class _NotPlainError(Exception):
    """A formula that a line of letters cannot show."""


@cache
def symbol(latex: str) -> Markup:
    """A symbol as letters with sub- and superscripts; one that needs more than these as a picture with its reading."""
    if not latex:
        return Markup("")
    root = ElementTree.fromstring(str(formulas.formula(latex)))
    try:
        return Markup("".join(_letters(child) for child in root))
    except _NotPlainError:
        return equation(latex)


def _letters(element: ElementTree.Element) -> str:
    children = list(element)
    match element.tag:
        case "mi":
            text = (element.text or "").replace("ℏ", "ħ")  # the same letter, which the italic has too
            upright = len(text) > 1 or not text.isalpha() or element.get("mathvariant") == "normal"
            return html.escape(text) if upright else f"<i>{html.escape(text)}</i>"
        case "mn" | "mo" | "mtext":
            text = (element.text or "").translate(_UNSEEN)
            if not text.isascii() and not set(map(ord, text)) <= _text_letters():
                raise _NotPlainError(text)
            return html.escape(text)
        case "mspace":
            return ""
        case "mrow" | "mstyle" | "math":
            return "".join(map(_letters, children))
        case "msub":
            return f"{_letters(children[0])}<sub>{_letters(children[1])}</sub>"
        case "msup":
            return f"{_letters(children[0])}<sup>{_letters(children[1])}</sup>"
        case "msubsup":
            return f"{_letters(children[0])}<sub>{_letters(children[1])}</sub><sup>{_letters(children[2])}</sup>"
    raise _NotPlainError(element.tag)


@cache
def _text_letters() -> frozenset[int]:
    """Every character of the text font."""
    from fontTools.ttLib import TTFont

    return frozenset(TTFont(template_folder() / "fonts" / "LibertinusSerif-Regular.woff2").getBestCmap())


@cache
def equation(latex: str) -> Markup:
    """A formula as outlines, with its reading in words as the alternative text.

    Raises FormulaError where the LaTeX cannot be set.
    """
    if not latex:
        return Markup("")
    reading = ElementTree.fromstring(str(formulas.formula(latex))).get("alttext", latex)
    svg, width, height, depth = _outlines(latex)
    source = base64.b64encode(svg.encode()).decode()
    return Markup(
        '<img class="formula" alt="{}" src="data:image/svg+xml;base64,{}" '
        'style="width:{:.3f}em;height:{:.3f}em;vertical-align:{:.3f}em">'
    ).format(reading, source, width / SIZE, (height + depth) / SIZE, -depth / SIZE)


def _outlines(latex: str) -> tuple[str, float, float, float]:
    """The picture of a formula; its width, and its height above and depth below the line, in points."""
    from matplotlib import rc_context
    from matplotlib.font_manager import FontProperties
    from matplotlib.mathtext import MathTextParser

    _make_faces_known()
    with rc_context({"mathtext.fontset": "custom", "mathtext.fallback": "stix"} | _faces()):
        try:
            set_formula = MathTextParser("path").parse(f"${_in_other_words(latex)}$", 72, FontProperties(size=SIZE))
        except ValueError as error:
            raise formulas.FormulaError(f"the formula {latex!r} cannot be set on paper") from error
        width, height, depth, glyphs, boxes = set_formula
        paths = [_glyph(*glyph) for glyph in glyphs]
    paths += [f"M{x:.2f} {-y:.2f}h{w:.2f}v{-h:.2f}h{-w:.2f}z" for x, y, w, h in boxes]
    # Room for letters that lean out of their boxes.
    box = f"0 {-height:.3f} {width:.3f} {height + depth:.3f}"
    svg = f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="{box}"><path d="{"".join(paths)}"/></svg>'
    return svg, width, height, depth


def _in_other_words(latex: str) -> str:
    for pattern, words in _OTHER_WORDS:
        latex = pattern.sub(words, latex)
    return _PIECE.sub(lambda piece: rf"\mathrm{{{piece['upright']}}}" if piece["upright"] else piece[0], latex)


def _glyph(font: Any, size: float, character: int, *where: float) -> str:
    """The outline of one character, whose origin is at the last two numbers, x and y (upwards)."""
    *glyph, x, y = where
    # In font units, without hints: these would round the outlines to the pixels of a screen.
    if glyph:  # newer releases of matplotlib also say which glyph, of which a character may have several
        font.load_glyph(int(glyph[0]), flags=_as_drawn())
    else:
        font.load_char(character, flags=_as_drawn())
    vertices, codes = font.get_path()
    scale = 64 * size / font.units_per_EM  # what is not scaled still counts as 64ths of a pixel
    return "".join(_segments(((x + u * scale, -(y + v * scale)) for u, v in vertices.tolist()), codes.tolist()))


@cache
def _as_drawn() -> Any:
    """FreeType's word for an outline neither scaled nor hinted, which matplotlib has under two names."""
    from matplotlib import ft2font

    if hasattr(ft2font, "LoadFlags"):
        return ft2font.LoadFlags.NO_SCALE | ft2font.LoadFlags.NO_HINTING
    return ft2font.LOAD_NO_SCALE | ft2font.LOAD_NO_HINTING


def _segments(points: Iterator[tuple[float, float]], codes: list[int]) -> Iterator[str]:
    position = 0
    while position < len(codes):
        code = codes[position]
        taken = [next(points) for _ in range(max(_POINTS[code], 1))]
        position += len(taken)
        yield _OPERATIONS[code] + " ".join(f"{x:.2f} {y:.2f}" for x, y in taken[: _POINTS[code]])


def _faces() -> dict[str, str]:
    return {
        "mathtext.rm": FAMILY,
        "mathtext.it": f"{FAMILY}:italic",
        "mathtext.bf": f"{FAMILY}:bold",
        **dict.fromkeys(("mathtext.cal", "mathtext.sf", "mathtext.tt"), FAMILY),
        "mathtext.default": "it",
    }


@cache
def _make_faces_known() -> None:
    """Unpack the fonts of the pages for matplotlib, which reads no compressed ones, under a name of their own."""
    from fontTools.ttLib import TTFont
    from matplotlib import font_manager
    from matplotlib.font_manager import FontEntry

    folder = Path(tempfile.mkdtemp(prefix="sheetgen-fonts-"))
    looks = {"rm": ("normal", 400), "it": ("italic", 400), "bf": ("normal", 700)}
    for face, name in FACES.items():
        font = TTFont(template_folder() / "fonts" / f"Libertinus{name}.woff2")
        font.flavor = None
        font.save(folder / f"{name}.otf")
        style, weight = looks[face]
        font_manager.fontManager.ttflist.append(
            FontEntry(str(folder / f"{name}.otf"), 0, FAMILY, style, "normal", weight, "normal", "scalable")
        )
