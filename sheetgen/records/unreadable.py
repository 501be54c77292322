"""The one exception of the small parsers; the reader turns it into a fault with a place."""


class UnreadableError(ValueError):
    """A text that cannot be read; its message says what was found, what was expected and how to mend it."""
