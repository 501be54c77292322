"""What the small parsers raise, and how messages quote what a person wrote."""

from __future__ import annotations

_LONGEST_QUOTE = 60


class UnreadableError(ValueError):
    """A text that cannot be read; its message says what was found, what was expected and how to mend it.

    The message is a sentence without its full stop, fit to stand behind the name of what was read.
    """


def shown(text: str) -> str:
    """A text as messages quote it: in one line, in quotes, not longer than a line bears."""
    line = " ".join(text.split())
    return f"'{line}'" if len(line) <= _LONGEST_QUOTE else f"'{line[: _LONGEST_QUOTE - 1]}…'"


def sentence(text: str) -> str:
    """The text with a full stop unless it ends a sentence already."""
    return text if text.endswith((".", "?")) else f"{text}."
