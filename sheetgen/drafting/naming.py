"""File names for new records: the slug of a name, and whether the folder has room for it."""

from __future__ import annotations

import re
import unicodedata
from pathlib import Path

LONGEST = 64
_DEVICE = re.compile(r"con|prn|aux|nul|(?:com|lpt)\d")
# Letters that Unicode does not take apart into a plain one and its mark.
_LETTERS = str.maketrans({"ß": "ss", "æ": "ae", "ø": "o", "đ": "d", "ł": "l", "β": "beta", "α": "alpha", "γ": "gamma"})


def slug_of(name: str) -> str:
    """Lower-case letters, digits and hyphens that name the record's file; "" where nothing of the name is left."""
    lowered = unicodedata.normalize("NFKD", name.casefold().translate(_LETTERS))
    plain = "".join(character for character in lowered if not unicodedata.combining(character))
    slug = re.sub(r"[^a-z0-9]+", "-", plain)[:LONGEST].strip("-")
    return f"{slug}-1" if _DEVICE.fullmatch(slug) else slug


def taken(folder: Path, slug: str) -> Path | None:
    """The file that already goes by a slug, in whatever capitals and with either ending of YAML, or None."""
    names = {f"{slug}.yaml", f"{slug}.yml"}
    return next((entry for entry in sorted(folder.iterdir()) if entry.name.lower() in names), None)
