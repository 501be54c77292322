"""The chemical elements: symbols, atomic numbers and standard atomic weights."""

from __future__ import annotations

import csv
from functools import cache
from importlib.resources import files
from typing import NamedTuple


class Element(NamedTuple):
    """One row of the table; `weight` is in g/mol, None for an element without a standard atomic weight."""

    number: int
    weight: float | None


@cache
def elements() -> dict[str, Element]:
    """Every element by its symbol, in the order of atomic number.

    Source: CIAAW, abridged standard atomic weights 2021 with the revisions of 2024 (data/README.md).
    """
    table = files(__package__).joinpath("data/atomic_weights.csv").read_text(encoding="utf-8")
    return {
        row["element"]: Element(
            int(row["atomic_number"]), float(row["atomic_weight"]) if row["atomic_weight"] else None
        )
        for row in csv.DictReader(table.splitlines())
    }


def atomic_weight(element: str) -> float | None:
    """Abridged standard atomic weight in g/mol, or None where the element has none (Tc, Pm, Po …).

    Raises KeyError for a symbol that is no element.
    """
    return elements()[element].weight


def atomic_number(element: str) -> int:
    """Protons in the nucleus. Raises KeyError for a symbol that is no element."""
    return elements()[element].number
