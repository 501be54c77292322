"""The one look of every figure: colours, strokes, sizes, and the style sheet that carries them.

Lengths are points (1/72 inch) on paper at the print width; inside an SVG one user unit is a hundredth of a
point, so that every coordinate is a short integer. Colours differ in dash and marker as well, so that a figure
survives grey printing and any colour vision.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import lru_cache

WIDTH = 240.94  # 85 mm, one column of a journal
HEIGHT = 168.0
UNITS_PER_POINT = 100
LABEL_SIZE = 7.6
TICK_SIZE = 7.0
NOTE_SIZE = 6.8
INDEX_SIZE = 6.0  # sub- and superscripts: nothing on paper is smaller

FACE = "var(--figure-face, sans-serif)"

LIGHT = {
    "ground": "#ffffff",
    "ink": "#1b1f24",
    "faint": "#5b6470",
    "grid": "#e3e7ec",
    "one": "#1f4e79",
    "two": "#b5542a",
    "three": "#4f7358",
    "four": "#6b4c8a",
}
DARK = {
    "ground": "#14171a",
    "ink": "#e9e7e2",
    "faint": "#a4adb8",
    "grid": "#2b323a",
    "one": "#8db9e8",
    "two": "#eb9d74",
    "three": "#98c6a4",
    "four": "#c2a5e0",
}
_CLASS = re.compile(r"\.([a-z-]+)")
INKS = ("ink", "faint", "grid", "one", "two", "three", "four")


@dataclass(frozen=True)
class Stroke:
    """Width and dash pattern of a line, in points; an empty dash is a solid line."""

    ink: str
    width: float
    dash: tuple[float, ...] = ()


STROKES = {
    "axis": Stroke("ink", 0.6),
    "grid": Stroke("grid", 0.5),
    "one": Stroke("one", 1.4),
    "two": Stroke("two", 1.3, (5, 2)),
    "three": Stroke("three", 1.3, (6, 1.6, 1.4, 1.6)),
    "four": Stroke("four", 1.3, (1.6, 1.5)),
    "thin": Stroke("one", 0.9),
    "ink": Stroke("ink", 1.0),
    "level": Stroke("two", 1.0, (4, 2)),
    "rule": Stroke("faint", 0.7, (2, 2)),
    "hidden": Stroke("faint", 0.5, (1.5, 1.5)),
    "edge": Stroke("ink", 0.8),
    "leader": Stroke("faint", 0.4),
}
AREAS = {"ground": 1.0, "one": 0.17, "two": 0.3, "three": 0.2, "four": 0.2, "faint": 0.13}

# Each marker with its ink and whether it is filled: shape tells apart what colour cannot.
MARKERS = {
    "one": ("circle", "one", True),
    "two": ("square", "two", True),
    "three": ("triangle", "three", True),
    "four": ("diamond", "four", True),
    "open": ("circle", "ink", False),
    "cross": ("cross", "two", False),
    "ring": ("circle", "two", False),
    "opentriangle": ("triangle", "faint", False),
}
RADIUS = 1.9


def _rules() -> list[str]:
    unit = UNITS_PER_POINT
    rules = [
        f"text{{font-family:{FACE};font-size:{TICK_SIZE * unit:g}px;fill:var(--ink)}}",
        f".la{{font-size:{LABEL_SIZE * unit:g}px}}",
        f".no{{font-size:{NOTE_SIZE * unit:g}px}}",
        ".mi{text-anchor:middle}",
        ".en{text-anchor:end}",
        # A ground-coloured rim keeps a note readable where it crosses a line.
        ".no{paint-order:stroke;stroke:var(--ground);stroke-width:220;stroke-linejoin:round}",
        ".i{font-style:italic}",
        f".s{{font-size:{INDEX_SIZE * unit:g}px}}",
        ".gr{fill:var(--ground)}",
        "path{fill:none;stroke-linejoin:round;stroke-linecap:butt}",
    ]
    for ink in INKS:
        rules.append(f".t-{ink}{{fill:var(--{ink})}}")
    for name, stroke in STROKES.items():
        dash = f";stroke-dasharray:{' '.join(str(round(d * unit)) for d in stroke.dash)}" if stroke.dash else ""
        rules.append(f".l-{name}{{stroke:var(--{stroke.ink});stroke-width:{round(stroke.width * unit)}{dash}}}")
    for ink, opacity in AREAS.items():
        rules.append(f".a-{ink}{{fill:var(--{ink});fill-opacity:{opacity:g}}}")
    for name, (shape, ink, filled) in MARKERS.items():
        if filled and shape == "circle":
            rules.append(
                f".m-{name}{{stroke:var(--{ink});stroke-width:{2 * RADIUS * unit + 50:g};stroke-linecap:round}}"
            )
            continue
        fill = f"var(--{ink})" if filled else "var(--ground)"
        rules.append(f".m-{name}{{fill:{fill};stroke:var(--{ink});stroke-width:{70 if filled else 100}}}")
    for ink in ("one", "two", "three", "four", "ink", "faint"):
        rules.append(f".e-{ink}{{stroke:var(--{ink});stroke-width:70}}")
    rules.append("a:hover path,a:focus path{stroke:var(--ink)}")
    rules.append("a:hover text,a:focus text{text-decoration:underline}")
    return rules


def _variables(colours: dict[str, str]) -> str:
    return "".join(f"--{name}:{colour};" for name, colour in colours.items()).rstrip(";")


@lru_cache(maxsize=256)
def sheet(classes: frozenset[str]) -> str:
    """The style sheet of an SVG that uses these classes; every rule is bound to the class `sheetgen-figure`.

    A page that shows the SVG inline may set the same variables; on dark screens they turn by themselves, on
    paper never.
    """
    root = ".sheetgen-figure"
    scoped = "".join(
        ",".join(f"{root} {part}" for part in selector.split(",")) + "{" + declarations
        for selector, _, declarations in (rule.partition("{") for rule in _rules())
        if not (named := set(_CLASS.findall(selector))) or named & classes
    )
    return (
        f"{root}{{{_variables(LIGHT)}}}"
        f"@media screen and (prefers-color-scheme:dark){{{root}{{{_variables(DARK)}}}}}" + scoped
    )


def whole_sheet() -> str:
    """The style sheet for any number of figures that one page shows inline.

    `paint-order` is left to an attribute of the notes: SVG knows it, the CSS of pages does not yet.
    """
    return sheet(frozenset(_CLASS.findall("".join(_rules())))).replace("paint-order:stroke;", "")
