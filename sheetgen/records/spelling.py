"""Keys and words in British or American spelling, with spaces or underscores: all read, one used inside."""

from __future__ import annotations

import re
from functools import lru_cache

_BRITISH = {
    "license": "licence",
    "center": "centre",
    "centered": "centred",
    "neighbor": "neighbour",
    "color": "colour",
    "colors": "colours",
    "gray": "grey",
}
_AMERICAN = {british: american for american, british in _BRITISH.items()}
_SPECIAL = {"c/a": "c_over_a"}
_SPLIT = re.compile(r"[ _]+")
_WORD = re.compile(r"[a-z]+")


_LONGEST = 80


def canonical_key(key: str) -> str:
    """The key as used inside: words joined by underscores, British spelling, `c/a` as `c_over_a`."""
    return _canonical(key) if len(key) <= _LONGEST else key


@lru_cache(maxsize=4096)
def _canonical(key: str) -> str:
    joined = "_".join(_SPLIT.split(key.strip()))
    return _SPECIAL.get(joined) or british(joined)


def british(text: str) -> str:
    """The text with every American word of the record's vocabulary in British spelling."""
    return _WORD.sub(lambda word: _BRITISH.get(word[0], word[0]), text)


def american(text: str) -> str:
    """The text with every British word of the record's vocabulary in American spelling."""
    return _WORD.sub(lambda word: _AMERICAN.get(word[0], word[0]), text)


def written_key(key: str) -> str:
    """A canonical key as a person would write it: `heat coefficient`, `c/a`."""
    special = {canonical: written for written, canonical in _SPECIAL.items()}
    return special.get(key) or key.replace("_", " ")


def key_variants(key: str) -> list[str]:
    """Every spelling under which a canonical key is read, the usual one first."""
    usual = written_key(key)
    variants = {usual: None, key: None}
    for joined in _joinings(key.split("_")):
        variants[joined] = None
        variants[american(joined)] = None
    return list(variants)


def _joinings(words: list[str]) -> list[str]:
    if len(words) == 1:
        return words
    return [words[0] + mark + rest for rest in _joinings(words[1:]) for mark in " _"]
