"""Figures as vector plates: the SVG of a figure turned into the operators of a PDF page.

A figure uses few of SVG's words (paths, lines of text, classes), so that a straight translation takes a twentieth of
the time that a general renderer needs. A word that is not known is an error, never a gap in the picture.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from functools import lru_cache
from typing import Any
from xml.etree import ElementTree

from sheetgen.paper.letters import Fonts, Text, lettered
from sheetgen.paper.strokes import PlateError, Style, painted

SVG = "{http://www.w3.org/2000/svg}"
MILLIMETRE = 96 / 25.4  # in CSS pixels
_RULE = re.compile(r"([^{}]+)\{([^{}]*)\}")
_VARIABLE = re.compile(r"var\(--([\w-]+)(?:,[^)]*)?\)")
_SELECTOR = re.compile(r"(text|path)?(?:\.([\w-]+))?")
_PLACED = re.compile(r"translate\(([-\d.]+)[ ,]+([-\d.]+)\)(?:rotate\(([-\d.]+)\))?")
_SIZE = re.compile(r"([\d.]+)mm")


@lru_cache(maxsize=64)
def rules(sheet: str) -> tuple[tuple[str, str, Style], ...]:
    """(element or "", class or "", declarations) for each rule of a figure's style sheet, colours put in."""
    plain = re.sub(r"@media[^{]*\{(?:[^{}]*\{[^{}]*\})*[^{}]*\}", "", sheet)
    found = [(selectors, dict(_declarations(body))) for selectors, body in _RULE.findall(plain)]
    colours = {name[2:]: value for _, body in found for name, value in body.items() if name.startswith("--")}
    listed = []
    for selectors, body in found:
        style = {name: _VARIABLE.sub(lambda use: colours.get(use[1], ""), value) for name, value in body.items()}
        for selector in selectors.split(","):
            # Every rule is bound to the class of the picture; what answers to a pointer has no place on paper.
            local = selector.strip().removeprefix(".sheetgen-figure").strip()
            if local and (known := _SELECTOR.fullmatch(local)):
                listed.append((known[1] or "", known[2] or "", style))
    return tuple(listed)


def _declarations(body: str) -> Iterator[tuple[str, str]]:
    for declaration in body.split(";"):
        name, colon, value = declaration.partition(":")
        if colon:
            yield name.strip(), value.strip()


class Plate:
    """One figure as WeasyPrint takes an image: it has a size and draws itself on the stream of a page."""

    def __init__(self, svg: bytes):
        self.root = ElementTree.fromstring(svg)
        self.rules = rules("".join(element.text or "" for element in self.root.iter(f"{SVG}style")))
        self.width, self.height = (_millimetres(self.root.get(side, "")) for side in ("width", "height"))
        self.box = tuple(float(number) for number in self.root.get("viewBox", "").split())
        if len(self.box) != 4 or not self.width or not self.height:
            raise PlateError("a figure needs a size in millimetres and a viewBox")

    def get_intrinsic_size(self, _resolution: Any, _font_size: Any) -> tuple[float, float, float]:
        """Width and height in CSS pixels, and their ratio: WeasyPrint asks for it."""
        return self.width * MILLIMETRE, self.height * MILLIMETRE, self.width / self.height

    def draw(self, stream: Any, width: float, height: float, _style: Any) -> None:
        """Append the operators to the stream of a page, whose origin is the upper left corner of the image."""
        fonts = Fonts(stream)
        with stream.stacked():
            stream.transform(width / self.box[2], 0, 0, height / self.box[3], -self.box[0], -self.box[1])
            for element in self.root:
                stream.stream.extend(self._drawn(element, fonts))

    def _drawn(self, element: ElementTree.Element, fonts: Fonts) -> Iterator[bytes]:
        match element.tag.removeprefix(SVG):
            case "path":
                yield from painted(element.get("d", ""), self._style(element, {}), fonts.opacity)
            case "text":
                yield from lettered(self._text(element), fonts)
            case "g" | "a":
                for child in element:
                    yield from self._drawn(child, fonts)
            case "title" | "desc" | "style" | "metadata":
                return
            case other:
                raise PlateError(f"a figure holds <{other}>, which plates do not draw")

    def _style(self, element: ElementTree.Element, inherited: Style) -> dict[str, str]:
        tag, classes = element.tag.removeprefix(SVG), (element.get("class") or "").split()
        style = dict(inherited)
        for wanted, name, declarations in self.rules:
            if (not wanted or wanted == tag) and (not name or name in classes):
                style |= declarations
        return style

    def _text(self, element: ElementTree.Element) -> Text:
        style = self._style(element, {})
        turned, x, y = 0.0, float(element.get("x", 0)), float(element.get("y", 0))
        if transform := element.get("transform"):
            if not (placed := _PLACED.fullmatch(transform)):
                raise PlateError(f"a figure turns a text by {transform!r}, which plates do not know")
            x, y, turned = x + float(placed[1]), y + float(placed[2]), float(placed[3] or 0)
        runs, shift = [], 0.0
        if element.text:
            runs.append((element.text, style, 0.0))
        for child in element:
            shift += float(child.get("dy", 0))
            runs.append((child.text or "", self._style(child, style), shift))
            if child.tail:
                runs.append((child.tail, style, shift))
        return Text(x, y, turned, tuple(runs), style)


def _millimetres(text: str) -> float:
    found = _SIZE.fullmatch(text)
    return float(found[1]) if found else 0.0
