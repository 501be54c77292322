"""Texts of a CIF in plain Unicode: its codes for accents, Greek letters, raised and lowered digits.

Source: International Union of Crystallography, CIF 1.1 common semantic features, paragraphs 30 to 37.
"""

from __future__ import annotations

import re
import unicodedata

_MARKS = {
    "'": "\u0301", "`": "\u0300", "^": "\u0302", ",": "\u0327", '"': "\u0308", "~": "\u0303", ";": "\u0328",
    ">": "\u030b", "=": "\u0304", ".": "\u0307", "<": "\u030c", "(": "\u0306",
}  # fmt: skip
_LETTERS = {
    "%a": "å", "%A": "Å", "/o": "ø", "/O": "Ø", "/l": "ł", "/L": "Ł", "&s": "ß", "?i": "ı", "/d": "đ", "/D": "Đ",
}  # fmt: skip
_GREEK = dict(zip("abgdezhqiklmnxoprstufcyw", "αβγδεζηθικλμνξοπρστυφχψω", strict=True))
_WORDS = {
    "times": "×", "square": "□", "infty": "∞", "rightarrow": "→", "leftarrow": "←", "sim": "∼", "simeq": "≃",
    "neq": "≠", "pm": "±", "mp": "∓", "degree": "°",
}  # fmt: skip
_CODE = re.compile(
    r"\\\\(?P<word>[a-z]+)|\\(?P<mark>['`^,\"~;>=.<(])(?P<marked>[A-Za-z])|\\(?P<letter>%[aA]|/[oOlLdD]|&s|\?i)"
    r"|\\(?P<greek>[A-Za-z])|\\%"
)
_SCRIPT = re.compile(r"(?P<sign>[~^])(?P<inside>[^~^\s]{1,12})(?P=sign)")
_TAG = re.compile(r"</?(?:i|b|sub|sup)>", re.IGNORECASE)
_LOWERED = str.maketrans("0123456789+-=()", "₀₁₂₃₄₅₆₇₈₉₊₋₌₍₎")
_RAISED = str.maketrans("0123456789+-=()", "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻⁼⁽⁾")


def plain_text(text: str) -> str:
    """A text of a CIF in one line of plain Unicode; a code that is none stays as it stands."""
    decoded = _SCRIPT.sub(_script, _CODE.sub(_decoded, _TAG.sub("", text)))
    return unicodedata.normalize("NFC", " ".join(decoded.split()))


def _decoded(code: re.Match[str]) -> str:
    if code["word"]:
        return _WORDS.get(code["word"], code["word"])
    if code["mark"]:
        return unicodedata.normalize("NFC", code["marked"] + _MARKS[code["mark"]])
    if code["letter"]:
        return _LETTERS[code["letter"]]
    if code["greek"]:
        letter = _GREEK.get(code["greek"].lower(), code["greek"])
        return letter.upper() if code["greek"].isupper() else letter
    return "°"


def _script(found: re.Match[str]) -> str:
    return found["inside"].translate(_LOWERED if found["sign"] == "~" else _RAISED)
