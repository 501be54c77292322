"""Paths of a figure as operators of a PDF page: fill, stroke, lines and arcs."""

from __future__ import annotations

import math
import re
from collections.abc import Callable, Iterator, Mapping
from functools import lru_cache

Style = Mapping[str, str]
_SEGMENT = re.compile(r"([MmLlHhVvAaZz])([^MmLlHhVvAaZz]*)")
_NUMBER = re.compile(r"[-+]?(?:\d+\.?\d*|\.\d+)(?:e[-+]?\d+)?")
_CAPS = {"butt": 0, "round": 1, "square": 2}


class PlateError(ValueError):
    """A figure that uses a word of SVG which plates do not know."""


def plain(number: float) -> str:
    """A number as a PDF wants it: no exponent, and no more digits than an eye could tell apart."""
    text = f"{number:.4f}".rstrip("0").rstrip(".")
    return "0" if text == "-0" else text


def painted(d: str, style: Style, translucent: Callable[[float], bytes]) -> Iterator[bytes]:
    """A path with its fill and its stroke; `translucent` gives the operator for an opacity."""
    fill, stroke = colour(style.get("fill", "none")), colour(style.get("stroke", "none"))
    if fill is None and stroke is None:
        return
    yield b"q"
    if fill is not None:
        yield b"%s rg" % fill
        if (opacity := float(style.get("fill-opacity", 1))) < 1:
            yield translucent(opacity)
    if stroke is not None:
        yield b"%s RG" % stroke
        yield from pen(style)
    yield outline(d)
    yield {(True, False): b"f", (False, True): b"S", (True, True): b"B"}[fill is not None, stroke is not None]
    yield b"Q"


def pen(style: Style) -> Iterator[bytes]:
    """Width, ends, corners and dashes of a stroke."""
    yield f"{plain(float(style.get('stroke-width', '1')))} w".encode()
    yield b"%d J" % _CAPS[style.get("stroke-linecap", "butt")]
    yield b"1 j" if style.get("stroke-linejoin") == "round" else b"0 j"
    if dashes := style.get("stroke-dasharray"):
        yield b"[%s] 0 d" % dashes.replace(",", " ").encode()


@lru_cache(maxsize=64)
def colour(value: str) -> bytes | None:
    """A colour such as #1b1f24 as three numbers from 0 to 1; None for none at all."""
    if value in ("none", "transparent", ""):
        return None
    digits = value.removeprefix("#")
    if len(digits) == 3:
        digits = "".join(2 * digit for digit in digits)
    if not re.fullmatch(r"[0-9a-fA-F]{6}", digits):
        raise PlateError(f"a figure uses the colour {value!r}; plates know #rrggbb")
    return b" ".join(b"%.3g" % (int(digits[start : start + 2], 16) / 255) for start in (0, 2, 4))


def outline(d: str) -> bytes:
    """The data of an SVG path as operators of a PDF path."""
    out: list[str] = []
    x = y = first_x = first_y = 0.0
    for letter, rest in _SEGMENT.findall(d):
        numbers = [float(number) for number in _NUMBER.findall(rest)]
        relative, kind = letter.islower(), letter.upper()
        if kind == "Z":
            out.append("h")
            x, y = first_x, first_y
            continue
        size = {"M": 2, "L": 2, "H": 1, "V": 1, "A": 7}[kind]
        for start in range(0, len(numbers), size):
            part = numbers[start : start + size]
            if kind == "A":
                end = (part[5] + (x if relative else 0), part[6] + (y if relative else 0))
                out.append(_arc((x, y), end, part[0], part[1], bool(part[3]), bool(part[4])))
                x, y = end
                continue
            if kind in "HV":
                x, y = _moved(kind, part[0], relative, x, y)
            else:
                x, y = (x + part[0], y + part[1]) if relative else (part[0], part[1])
            moves = kind == "M" and start == 0
            out.append(f"{plain(x)} {plain(y)} {'m' if moves else 'l'}")
            if moves:
                first_x, first_y = x, y
    return " ".join(out).encode()


def _moved(kind: str, to: float, relative: bool, x: float, y: float) -> tuple[float, float]:
    if kind == "H":
        return (x + to if relative else to), y
    return x, (y + to if relative else to)


def _arc(start: tuple[float, float], end: tuple[float, float], rx: float, ry: float, large: bool, sweep: bool) -> str:
    """An elliptical arc with upright axes as Bézier curves (SVG 2, appendix B.2.4)."""
    if start == end or not rx or not ry:
        return f"{plain(end[0])} {plain(end[1])} l"
    half_x, half_y = (start[0] - end[0]) / 2 / rx, (start[1] - end[1]) / 2 / ry
    reach = math.hypot(half_x, half_y)
    if reach > 1:
        rx, ry, half_x, half_y, reach = rx * reach, ry * reach, half_x / reach, half_y / reach, 1.0
    away = math.sqrt(max(1 / reach**2 - 1, 0.0)) * (-1 if large == sweep else 1)
    middle = away * half_y, -away * half_x
    first = math.atan2(half_y - middle[1], half_x - middle[0])
    turn = math.atan2(-half_y - middle[1], -half_x - middle[0]) - first
    turn = turn % math.tau if sweep else -(-turn % math.tau)
    centre = (start[0] + end[0]) / 2 + rx * middle[0], (start[1] + end[1]) / 2 + ry * middle[1]
    pieces = max(1, math.ceil(abs(turn) / (math.pi / 2) - 1e-9))
    step = turn / pieces
    pull = 4 / 3 * math.tan(step / 4)
    curves = []
    for piece in range(pieces):
        a, b = first + piece * step, first + (piece + 1) * step
        points = (
            (math.cos(a) - pull * math.sin(a), math.sin(a) + pull * math.cos(a)),
            (math.cos(b) + pull * math.sin(b), math.sin(b) - pull * math.cos(b)),
            (math.cos(b), math.sin(b)),
        )
        curves.append(" ".join(f"{plain(centre[0] + rx * u)} {plain(centre[1] + ry * v)}" for u, v in points) + " c")
    return " ".join(curves)
