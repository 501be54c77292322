"""Texts of a figure as operators of a PDF page, in the fonts that the page itself embeds."""

from __future__ import annotations

import io
import itertools
import math
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache, lru_cache
from typing import Any

from sheetgen.pages.environment import template_folder
from sheetgen.paper.strokes import PlateError, Style, colour, pen, plain

FAMILY = "Libertinus Serif"


@dataclass(frozen=True)
class Text:
    """A line of text: where it stands, by how much it is turned, its runs, and the style that they share."""

    x: float
    y: float
    turned: float
    runs: tuple[tuple[str, Style, float], ...]  # text, style, shift down
    style: Style


def lettered(text: Text, fonts: Fonts) -> Iterator[bytes]:
    """A line of text; where it has a rim, the rim of all runs first, then their letters."""
    pieces = [piece for run in text.runs for piece in _pieces(run, fonts)]
    width = sum(piece.width for piece in pieces)
    start = -{"middle": width / 2, "end": width}.get(text.style.get("text-anchor", ""), 0.0)
    cosine, sine = (turn(math.radians(text.turned)) for turn in (math.cos, math.sin))
    rim = colour(text.style.get("stroke", "none"))
    yield f"q {' '.join(map(plain, (cosine, sine, -sine, cosine, text.x, text.y)))} cm".encode()
    if rim is not None:
        yield b"%s RG" % rim
        yield from pen(text.style)
        yield from _shown(pieces, start, rim=float(text.style.get("stroke-width", 1)))
    yield from _shown(pieces, start)
    yield b"Q"


@dataclass(frozen=True)
class _Piece:
    """A part of a run that one font can show."""

    font: _Letters | _Signs
    string: str
    size: float
    fill: bytes
    shift: float

    @property
    def width(self) -> float:
        return self.font.width(self.string) * self.size


def _pieces(run: tuple[str, Style, float], fonts: Fonts) -> Iterator[_Piece]:
    string, style, shift = run
    size, fill = float(style["font-size"].removesuffix("px")), colour(style.get("fill", "#000000")) or b"0 0 0"
    letters = fonts.of(style)
    for known, part in itertools.groupby(string, letters.has):
        yield _Piece(letters if known else _signs(), "".join(part), size, fill, shift)


def _shown(pieces: list[_Piece], x: float, rim: float = 0.0) -> Iterator[bytes]:
    for piece in pieces:
        if not rim:
            yield b"%s rg" % piece.fill
        yield from piece.font.shown(piece.string, piece.size, x, piece.shift, rim)
        x += piece.width


class Fonts:
    """The fonts that the document itself embeds, found by their look: a plate adds its letters to them."""

    def __init__(self, stream: Any):
        self.stream = stream
        self.known: dict[bool, _Letters] = {}

    def of(self, style: Style) -> _Letters:
        """The upright or the italic face."""
        italic = style.get("font-style") == "italic"
        if italic not in self.known:
            self.known[italic] = _Letters(self._embedded(italic))
        return self.known[italic]

    def _embedded(self, italic: bool) -> Any:
        for font in self.stream._fonts.values():
            if font.family == FAMILY and bool(font.style) == italic and font.weight == 400:
                return font
        raise PlateError(f"the page before a figure has no text in {FAMILY}{' Italic' if italic else ''}")

    def opacity(self, value: float) -> bytes:
        """The operator that makes what is filled from here on translucent."""
        from pydyf import Dictionary

        name = f"a{value:g}"
        self.stream._resources["ExtGState"].setdefault(name, Dictionary({"ca": value}))
        return f"/{name} gs".encode()


class _Letters:
    """One embedded font: glyph numbers and widths of strings; each glyph used is noted for the subset."""

    def __init__(self, font: Any):
        self.font, self.name = font, font.hash
        self.characters, self.numbers, self.widths, self.units = _metrics(bytes(font.file_content))

    def has(self, letter: str) -> bool:
        """Whether the font can show a letter."""
        return ord(letter) in self.characters

    def width(self, string: str) -> float:
        """The width of a string, in units of the font size."""
        return sum(self.widths[self.characters[ord(letter)]] for letter in string) / self.units

    def shown(self, string: str, size: float, x: float, y: float, rim: float) -> Iterator[bytes]:
        """The operators that show a string at x, y, or a rim of that width around its letters."""
        where = f"{plain(size)} Tf 1 0 0 -1 {plain(x)} {plain(y)} Tm"
        yield f"BT {1 if rim else 0} Tr /{self.name} {where} <{''.join(map(self._glyph, string))}> Tj ET".encode()

    def _glyph(self, letter: str) -> str:
        glyph = self.characters[ord(letter)]
        number = self.numbers[glyph]
        self.font.to_unicode.setdefault(number, letter)
        self.font.widths.setdefault(number, round(self.widths[glyph] * 1000 / self.units))
        return f"{number:04x}"


class _Signs:
    """Signs that the text fonts lack, drawn as outlines from the mathematical one."""

    def __init__(self, font: Any):
        self.glyphs, self.characters = font.getGlyphSet(), font.getBestCmap()
        self.units = font["head"].unitsPerEm

    def width(self, string: str) -> float:
        """The width of a string, in units of the font size."""
        return sum(self.glyphs[self._name(sign)].width for sign in string) / self.units

    def shown(self, string: str, size: float, x: float, y: float, rim: float) -> Iterator[bytes]:
        """The operators that draw a string at x, y, or a rim of that width around its signs."""
        scale = size / self.units
        for sign in string:
            yield f"q {plain(scale)} 0 0 {plain(-scale)} {plain(x)} {plain(y)} cm".encode()
            if rim:  # a stroke grows and shrinks with what it goes around
                yield f"{plain(rim / scale)} w".encode()
            yield _drawn_glyph(self.glyphs, self._name(sign)) + (b" S Q" if rim else b" f Q")
            x += self.glyphs[self._name(sign)].width * scale

    def _name(self, sign: str) -> str:
        if (name := self.characters.get(ord(sign))) is None:
            raise PlateError(f"no font of the paper edition has the sign {sign!r} (U+{ord(sign):04X})")
        return name


def _drawn_glyph(glyphs: Any, name: str) -> bytes:
    from fontTools.pens.recordingPen import DecomposingRecordingPen

    recorded = DecomposingRecordingPen(glyphs)
    glyphs[name].draw(recorded)
    operators = {"moveTo": "m", "lineTo": "l", "curveTo": "c", "closePath": "h", "endPath": ""}
    parts = []
    for operation, points in recorded.value:
        numbers = " ".join(f"{plain(u)} {plain(v)}" for u, v in points)
        parts.append(f"{numbers} {operators[operation]}".strip())
    return " ".join(parts).encode()


@lru_cache(maxsize=8)
def _metrics(program: bytes) -> tuple[dict[int, str], dict[str, int], dict[str, int], float]:
    """Character → glyph name, glyph name → number, glyph name → width, units per em of a font program."""
    from fontTools.ttLib import TTFont

    font = TTFont(io.BytesIO(program))
    widths = {name: advance for name, (advance, _) in font["hmtx"].metrics.items()}
    return font.getBestCmap(), font.getReverseGlyphMap(), widths, font["head"].unitsPerEm


@cache
def _signs() -> _Signs:
    from fontTools.ttLib import TTFont

    return _Signs(TTFont(template_folder() / "fonts" / "LibertinusMath-Regular.woff2"))
