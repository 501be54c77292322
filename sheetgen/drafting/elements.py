"""What is usual for each element: its name, the electrons it gives, the lattice at room temperature."""

from __future__ import annotations

import csv
from functools import cache
from importlib.resources import files
from typing import NamedTuple


class Usual(NamedTuple):
    """One element; `valence` with its `reason` and `lattice` are empty where nothing is usual."""

    name: str
    valence: str
    reason: str
    lattice: str


@cache
def usual() -> dict[str, Usual]:
    """Every element by its symbol; everything but the name is recalled (data/README.md)."""
    table = files(__package__).joinpath("data/elements.csv").read_text(encoding="utf-8")
    rows = csv.DictReader(table.splitlines())
    return {row["element"]: Usual(row["name"], row["valence"], row["reason"], row["lattice"]) for row in rows}
