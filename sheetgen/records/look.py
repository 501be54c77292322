"""The group's own look: colours, a logo, pages and templates of its own, each only where the imprint names it."""

from __future__ import annotations

import re
from pathlib import Path

from sheetgen.faults import Place, did_you_mean
from sheetgen.records.files import read_text
from sheetgen.records.logo import read_logo
from sheetgen.records.markdown import LONGEST, check_notes
from sheetgen.records.model import Look, OwnPage
from sheetgen.records.nodes import Node, Scalar, Table, found
from sheetgen.records.spelling import written_key
from sheetgen.records.unreadable import shown
from sheetgen.records.values import Reader, text_of

LEAST_CONTRAST = 4.5  # WCAG 2.2, 1.4.3
# What stands behind a colour, or on it, in the light and in the dark: paper and tinted ground for links, the text of
# the tab for the tab. The style sheet of the pages has the same values.
_GROUNDS = {
    "colours": {"link": ("#ffffff", "#f1f3f4"), "tab": ("#ffffff",)},
    "colours_in_the_dark": {"link": ("#14171a", "#1d2125"), "tab": ("#14171a",)},
}
_KEYS = ("logo", *_GROUNDS)
_COLOUR = re.compile(r"#[0-9A-Fa-f]{6}")
_FOLDER = re.compile(r"[A-Za-z0-9_-][A-Za-z0-9._-]{0,63}")
_SLUG = re.compile(r"[a-z0-9]+(?:-[a-z0-9]+)*")
_HEADING = re.compile(r"#[ \t]+([^\s#][^\n]*)(?:\n|$)")
_MOST_PAGES = 50


def read_look(node: Node | None, folder: Path, reader: Reader) -> Look:
    """The look that the imprint sets; what cannot be used is logged and left as it comes with the program."""
    if node is None:
        return Look()
    if not isinstance(node, Table):
        reader.fault(node, f"look: found {found(node)}; expected a mapping such as {{logo: logo.svg}}.")
        return Look()
    for key, entry in node.entries.items():
        if key not in _KEYS:
            names = [written_key(name) for name in _KEYS]
            guess = did_you_mean(key.replace("_", " "), names)
            message = f"look: unknown key {shown(entry.key.text)}; expected one of {', '.join(names)}.{guess}"
            reader.fault(entry.key.place, message)
    light, dark = (_colours(node.node(key), key, reader) for key in _GROUNDS)
    return Look(light, dark, read_logo(node.node("logo"), folder, reader))


# --- colours ---------------------------------------------------------------------------------------------------------


def _colours(node: Node | None, key: str, reader: Reader) -> dict[str, str]:
    if node is None:
        return {}
    name = f"look, {written_key(key)}"
    if not isinstance(node, Table):
        reader.fault(node, f"{name}: found {found(node)}; expected a mapping such as {{link: '#0d3f6b'}}.")
        return {}
    colours = {}
    for part, entry in node.entries.items():
        text = text_of(entry.node)
        if part not in _GROUNDS[key]:
            expected = f"expected one of {', '.join(_GROUNDS[key])}"
            reader.fault(entry.key.place, f"{name}: unknown colour {shown(entry.key.text)}; {expected}.")
        elif not _COLOUR.fullmatch(text):
            expected = "expected six hexadecimal digits in quotes, such as '#0d3f6b'"
            reader.fault(entry.node, f"{name}: {part} is {found(entry.node)}; {expected}.")
        elif weakest := _too_weak(text, _GROUNDS[key][part]):
            ratio, ground = weakest
            better = readable(text, _GROUNDS[key][part])
            reader.fault(
                entry.node,
                f"{name}: {part} {shown(text)} has a contrast of {ratio:.1f} against {ground}; expected at least "
                f"{LEAST_CONTRAST}. Write '{better}', the nearest shade of it that has.",
            )
        else:
            colours[part] = text.lower()
    return colours


def _too_weak(colour: str, grounds: tuple[str, ...]) -> tuple[float, str] | None:
    """The least contrast with the ground it is against, where that is not enough."""
    weakest = min((contrast(colour, ground), ground) for ground in grounds)
    return weakest if weakest[0] < LEAST_CONTRAST else None


def contrast(one: str, other: str) -> float:
    """Contrast ratio of two colours by WCAG 2.2, from 1 to 21."""
    low, high = sorted((_luminance(one), _luminance(other)))
    return (high + 0.05) / (low + 0.05)


def _luminance(colour: str) -> float:
    parts = [int(colour[start : start + 2], 16) / 255 for start in (1, 3, 5)]
    red, green, blue = (part / 12.92 if part <= 0.04045 else ((part + 0.055) / 1.055) ** 2.4 for part in parts)
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue


def readable(colour: str, grounds: tuple[str, ...]) -> str:
    """The colour moved towards black (on light grounds) or white just as far as its contrast needs."""
    end = 0 if _luminance(grounds[0]) > 0.5 else 255
    parts = [int(colour[start : start + 2], 16) for start in (1, 3, 5)]
    for step in range(101):
        mixed = "#" + "".join(f"{round(part + (end - part) * step / 100):02x}" for part in parts)
        if not _too_weak(mixed, grounds):
            return mixed
    raise AssertionError("black and white have contrast enough with every ground")


# --- folders ---------------------------------------------------------------------------------------------------------


def read_subfolder(node: Node | None, name: str, folder: Path, reader: Reader) -> Path | None:
    """A folder beside the imprint that it names."""
    if node is None:
        return None
    path = folder / text_of(node)
    if _FOLDER.fullmatch(text_of(node)) and path.is_dir() and not path.is_symlink():
        return path
    expected = f"expected the name of a folder such as {name}"
    reader.fault(node, f"{name}: found {found(node)}, no folder beside handbook.yaml; {expected}.")
    return None


def read_pages(node: Node | None, folder: Path, reader: Reader) -> tuple[OwnPage, ...]:
    """The pages in Markdown of the folder that the imprint names, in the order of their file names."""
    path = read_subfolder(node, "pages", folder, reader)
    if path is None:
        return ()
    files = sorted(file for file in path.iterdir() if file.suffix == ".md" and not file.name.startswith("."))
    if not files:
        reader.fault(node, "pages: the folder holds no page; expected files such as safety.md.")
    if len(files) > _MOST_PAGES:
        reader.fault(node, f"pages: {len(files)} files; expected at most {_MOST_PAGES}.")
    return tuple(page for file in files[:_MOST_PAGES] if (page := _page(file, folder, reader)))


def _page(file: Path, folder: Path, reader: Reader) -> OwnPage | None:
    place = Place(str(file), 1, 1)
    if not _SLUG.fullmatch(file.stem):
        expected = "expected lower-case letters, digits and hyphens, such as clean-room.md"
        reader.fault(place, f"the file name {shown(file.name)} cannot be an address; {expected}. Rename it.")
        return None
    text = read_text(file, folder, reader.log, LONGEST)
    if text is None:
        return None
    heading = _HEADING.match(text)
    if heading is None:
        reader.fault(place, "a page begins with its title; expected a first line such as '# Safety'.")
        return None
    check_notes(Scalar(text, False, place), reader)
    return OwnPage(file.stem, heading[1].rstrip(" \t#"), text[heading.end() :])
