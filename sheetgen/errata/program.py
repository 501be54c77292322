"""What changed in how numbers are made: the program, its constants and definitions, and the imprint's conditions."""

from __future__ import annotations

from typing import Any

from sheetgen.errata.editions import Edition
from sheetgen.errata.model import ProgramErrata
from sheetgen.records import Imprint


def program_errata(old: Edition, new: Edition, imprints: tuple[Imprint, Imprint]) -> ProgramErrata:
    """What differs between the editions; `imprints` are those that the old and the new one are taken to have."""
    before, after = (edition.data.get("quantities", {}) for edition in (old, new))
    definitions = {}
    for id in dict.fromkeys((*after, *before)):
        if id not in before or id not in after:
            definitions[id] = "withdrawn" if id in before else "new"
            continue
        prints = [edition[id].get("fingerprint") for edition in (before, after)]
        if None not in prints and prints[0] != prints[1]:
            definitions[id] = "changed"
    conditions = {}
    for key in ("reference_temperature", "temperatures", "thresholds"):
        one, other = (_plain(getattr(imprint, key)) for imprint in imprints)
        if one != other:
            conditions[key] = (one, other)
    texts = [[str(edition.data.get(key, "")) for edition in (old, new)] for key in ("version", "constants")]
    return ProgramErrata(tuple(texts[0]), tuple(texts[1]), definitions, conditions)


def _plain(value: Any) -> Any:
    if isinstance(value, tuple):
        return list(value)
    return {key: _plain(one) for key, one in value.items()} if isinstance(value, dict) else value
