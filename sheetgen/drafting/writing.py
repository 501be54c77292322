"""Pieces of a record as YAML text: scalars in the quotes they need, folded sentences, comments in a column."""

from __future__ import annotations

import json
import re
import textwrap
from collections.abc import Iterable, Mapping

WIDTH = 100
COLUMN = 64  # where the comments behind blanks begin

# Texts that every YAML reader takes for what stands there.
_PLAIN = re.compile(r"[A-Za-z][A-Za-z0-9./()+-]*(?: [A-Za-z0-9./()+-]+)*")
_PLAIN_INSIDE = re.compile(r"[A-Za-z0-9+.-][^,\[\]{}:#'\"&*!|>%@`?]*")
_TRAPS = frozenset(("y", "n", "yes", "no", "on", "off", "true", "false", "null"))


def scalar(text: str) -> str:
    """A text of one line, in quotes where it could be read as something else."""
    return text if _PLAIN.fullmatch(text) and text.lower() not in _TRAPS else json.dumps(text, ensure_ascii=False)


def flow(mapping: Mapping[str, str]) -> str:
    """A mapping in one line; its values stand as they are given."""
    return "{" + ", ".join(f"{key}: {value}" for key, value in mapping.items()) + "}"


def inside_flow(text: str) -> str:
    """A text within a mapping or list of one line, where a comma, a bracket or a colon would end it."""
    return text if _PLAIN_INSIDE.fullmatch(text) else json.dumps(text, ensure_ascii=False)


def folded(text: str, indent: int) -> list[str]:
    """The lines of a folded block that holds one paragraph."""
    return textwrap.wrap(
        " ".join(text.split()), WIDTH, initial_indent=" " * indent, subsequent_indent=" " * indent,
        break_long_words=False, break_on_hyphens=False,
    )  # fmt: skip


def commented(text: str) -> list[str]:
    """A paragraph as lines of a comment."""
    return textwrap.wrap(
        " ".join(text.split()), WIDTH, initial_indent="# ", subsequent_indent="# ",
        break_long_words=False, break_on_hyphens=False,
    )  # fmt: skip


def blank(line: str, remark: str = "", indent: int = 0) -> str:
    """A line to be filled in: commented out so that a reader skips it, with what is expected behind it."""
    text = f"# {' ' * indent}{line}"
    return f"{text:<{COLUMN}}  # {remark}" if remark else text


def joined(blocks: Iterable[Iterable[str]]) -> str:
    """Blocks of lines, an empty line between them."""
    return "\n\n".join("\n".join(line.rstrip() for line in block) for block in blocks if block) + "\n"
