"""What changed between two editions of a handbook: which numbers moved, by how much, and why."""

from __future__ import annotations

from sheetgen.errata.attribution import errata
from sheetgen.errata.editions import Edition, EditionError, edition_of, open_edition
from sheetgen.errata.model import Errata, MaterialErrata, Moved, StandingChange

__all__ = [
    "Edition",
    "EditionError",
    "Errata",
    "MaterialErrata",
    "Moved",
    "StandingChange",
    "edition_of",
    "errata",
    "open_edition",
]
