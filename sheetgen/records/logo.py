"""A group's logo: an SVG freed of all that is not a picture, or a PNG."""

from __future__ import annotations

import re
from pathlib import Path
from xml.etree import ElementTree

from sheetgen.faults import Place
from sheetgen.records.files import read_text
from sheetgen.records.nodes import Node, found
from sheetgen.records.values import Reader, text_of

MAXIMUM_BYTES = 200_000
MAXIMUM_LEVELS = 50
_NAME = re.compile(r"[A-Za-z0-9_-][A-Za-z0-9._-]{0,63}\.(?:svg|png)")
_SVG = "http://www.w3.org/2000/svg"
_PNG = b"\x89PNG\r\n\x1a\n"
_ELEMENTS = frozenset(
    """svg g path rect circle ellipse line polyline polygon defs title desc linearGradient radialGradient stop clipPath
    mask text tspan""".split()  # noqa: SIM905, a list of words reads better as words
)
_ATTRIBUTES = frozenset(
    """id viewBox width height x y x1 y1 x2 y2 cx cy r rx ry fx fy d points transform fill fill-opacity fill-rule stroke
    stroke-width stroke-linecap stroke-linejoin stroke-dasharray stroke-opacity stroke-miterlimit opacity offset
    stop-color stop-opacity gradientUnits gradientTransform spreadMethod clip-path clip-rule mask clipPathUnits
    maskUnits preserveAspectRatio font-family font-size font-weight font-style text-anchor letter-spacing dx dy
    """.split()  # noqa: SIM905
)
# A value may refer to a part of the same picture, and to nothing else.
_REFERENCE = re.compile(r"url\((?!\s*['\"]?#)", re.IGNORECASE)


def read_logo(node: Node | None, folder: Path, reader: Reader) -> tuple[str, bytes] | None:
    """(name on the site, content) of the file beside the imprint that it names."""
    if node is None:
        return None
    path = folder / text_of(node)
    if not (_NAME.fullmatch(text_of(node)) and path.is_file() and not path.is_symlink()):
        expected = "expected the name of a picture beside handbook.yaml such as logo.svg or logo.png"
        reader.fault(node, f"logo: found {found(node)}; {expected}.")
        return None
    if path.suffix == ".png":
        return _png(path, node, reader)
    text = read_text(path, folder, reader.log, MAXIMUM_BYTES)
    if text is None:
        return None
    try:
        return "logo.svg", clean_svg(text)
    except ElementTree.ParseError as error:
        line, column = error.position
        message = f"not an SVG: {str(error).partition(':')[0]}; expected a picture. Save it anew as plain SVG."
        reader.fault(Place(str(path), line, column + 1), message)
    except ValueError as error:
        reader.fault(Place(str(path), 1, 1), f"{error}. Save it anew as plain SVG.")
    return None


def _png(path: Path, node: Node, reader: Reader) -> tuple[str, bytes] | None:
    with path.open("rb") as stream:
        content = stream.read(MAXIMUM_BYTES + 1)
    if content.startswith(_PNG) and len(content) <= MAXIMUM_BYTES:
        return "logo.png", content
    reader.fault(node, f"logo: {path.name} is no PNG of at most {MAXIMUM_BYTES} bytes; expected one. Save it smaller.")
    return None


def clean_svg(text: str) -> bytes:
    """The picture alone: no script, style, link, foreign content or reference to anything outside.

    Raises ParseError where the text is not XML, ValueError where it is no SVG or declares entities.
    """
    if "<!DOCTYPE" in text or "<!ENTITY" in text:
        raise ValueError("it declares a document type, which may hide entities")
    root = ElementTree.fromstring(text)
    if root.tag != f"{{{_SVG}}}svg":
        raise ValueError("its outermost element is not an svg of the namespace of SVG")
    _clean(root)
    ElementTree.register_namespace("", _SVG)
    return ElementTree.tostring(root, encoding="unicode").encode()


def _clean(element: ElementTree.Element, levels: int = MAXIMUM_LEVELS) -> None:
    if not levels:
        raise ValueError(f"it nests groups deeper than {MAXIMUM_LEVELS} levels")
    element.attrib = {
        name: value for name, value in element.attrib.items() if name in _ATTRIBUTES and not _REFERENCE.search(value)
    }
    for child in list(element):
        namespace, _, name = child.tag.rpartition("}") if isinstance(child.tag, str) else ("", "", "")
        if namespace == f"{{{_SVG}" and name in _ELEMENTS:
            _clean(child, levels - 1)
        else:
            element.remove(child)
