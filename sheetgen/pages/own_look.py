"""What a group adds to the look of its handbook: colours in the style sheet, and pages of its own."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from typing import Any

# Which property of the style sheet a named colour sets.
_PROPERTIES = {"link": "--link", "tab": "--tab"}


def colours(look: Any) -> bytes:
    """Rules to stand behind the style sheet; on paper its own colours stay."""
    light, dark = _rule(look.light), _rule(look.dark)
    rules = [
        f"\n@media screen and (prefers-color-scheme: light) {{ {light} }}" if light else "",
        f"\n@media screen and (prefers-color-scheme: dark) {{ {dark} }}" if dark else "",
    ]
    text = "".join(rules)
    return f"{text}\n".encode() if text else b""


def _rule(chosen: dict[str, str]) -> str:
    parts = "; ".join(f"{_PROPERTIES[name]}: {colour}" for name, colour in chosen.items())
    return f":root {{ {parts} }}" if parts else ""


def pages(handbook: Any, page: Callable[..., bytes]) -> Iterator[tuple[str, bytes]]:
    """The group's own pages, in its order."""
    for own in handbook.imprint.pages:
        yield f"pages/{own.slug}.html", page("own-page.html", "../", own=own)
