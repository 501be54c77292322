"""The front page: what the handbook is, and the table of all materials."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from markupsafe import Markup

from . import entries, metadata, numbers, words

COLUMNS = (
    "electron_density",
    "fermi_energy",
    "fermi_wavevector",
    "fermi_velocity",
    "electron_sphere_radius",
    "relaxation_time",
    "mean_free_path",
)
# Rows of the table on one page.
ROWS = 200


@dataclass(frozen=True)
class Column:
    """A column of numbers: head, power of ten taken into the head, and for each material value and sorting key."""

    id: str
    symbol: str
    title: str
    power: int
    unit: Markup
    cells: tuple[Markup, ...]
    keys: tuple[float | None, ...]


def context(handbook: Any) -> dict[str, Any]:
    """The names that the front page's template uses."""
    lattices = {sheet.record.crystal.lattice for sheet in handbook.sheets if sheet.record.crystal}
    return {
        **leaf(handbook, 1),
        "count": len(handbook.sheets),
        "drafts": sum(is_draft(sheet) for sheet in handbook.sheets),
        "elements": sorted({element for sheet in handbook.sheets for element in sheet.record.composition}),
        "lattices": sorted(lattices),
        "json_ld": metadata.whole(handbook),
        "citation": citation(handbook),
    }


def leaves(handbook: Any) -> list[str]:
    """The pages over which the table is spread for those who read it without a script."""
    number = max(1, math.ceil(len(handbook.sheets) / ROWS))
    return ["index.html", *(f"materials-{page}.html" for page in range(2, number + 1))]


def leaf(handbook: Any, number: int) -> dict[str, Any]:
    """The names that one page of the table uses, counted from 1."""
    sheets = handbook.sheets[(number - 1) * ROWS : number * ROWS]
    columns = [column for id in COLUMNS if (column := _column(id, handbook, sheets))]
    return {
        "columns": columns,
        "materials": [_material(sheet, row, columns) for row, sheet in enumerate(sheets)],
        "leaves": leaves(handbook),
        "leaf": number,
    }


def citation(handbook: Any) -> str:
    """How to cite the handbook."""
    imprint = handbook.imprint
    where = f" {imprint.base_address}" if imprint.base_address else ""
    return f"{imprint.group}. {imprint.title}. Edition {imprint.edition}.{where}"


def is_draft(sheet: Any) -> bool:
    """Whether nobody has reviewed the record."""
    return sheet.record.review is None or sheet.record.review.state != "reviewed"


def _column(id: str, handbook: Any, sheets: Sequence[Any]) -> Column | None:
    if id not in handbook.registry.published():
        return None
    definition = handbook.registry.definitions_of(id)[0]
    preference = entries.Preference(handbook.imprint.units)
    # A two-dimensional gas may state the same quantity in another unit; such a cell has no place in this column.
    first = [next(iter(sheet.entries(id)), None) for sheet in sheets]
    fitting = [entry if entry and entry["unit"] == definition.unit else None for entry in first]
    if not any(fitting):
        return None
    pairs = [preference.number(id, entry) if entry else None for entry in fitting]
    power, cells = numbers.column(pairs)
    unit = numbers.unit(preference.of(id, definition.unit))
    keys = tuple(pair[0] if pair else None for pair in pairs)
    return Column(id, definition.symbol, definition.title, power, unit, tuple(cells), keys)


def _material(sheet: Any, row: int, columns: list[Column]) -> dict[str, Any]:
    record = sheet.record
    return {
        "slug": record.slug,
        "name": record.name,
        "formula": record.formula,
        "lattice": record.crystal.lattice if record.crystal else "",
        "lattice_words": words.lattice_words(record.crystal.lattice) if record.crystal else "",
        "electrons": electrons(record),
        "draft": is_draft(sheet),
        "cells": [(column.cells[row], column.keys[row]) for column in columns],
        "standings": standings(sheet),
    }


def electrons(record: Any) -> Markup:
    """Electrons per atom, or the carrier density that the record gives instead."""
    stated = record.electrons
    if stated.valence:
        return Markup(", ").join(
            (Markup.escape(element) + "\u00a0" if len(stated.valence) > 1 else Markup(""))
            + numbers.stated(value.value, value.standard_uncertainty).html
            for element, value in stated.valence.items()
        )
    if stated.density is None:
        return Markup("")
    return numbers.with_unit(
        numbers.stated(stated.density.value, stated.density.standard_uncertainty), stated.density.unit
    )


def electrons_text(record: Any) -> str:
    """The same as plain Unicode."""
    stated = record.electrons
    if stated.valence:
        several = len(stated.valence) > 1
        counts = {e: numbers.stated(v.value, v.standard_uncertainty).text for e, v in stated.valence.items()}
        return ", ".join(f"{element}\u00a0{count}" if several else count for element, count in counts.items())
    if stated.density is None:
        return ""
    number = numbers.stated(stated.density.value, stated.density.standard_uncertainty).text
    return f"{number}{numbers.NARROW}{numbers.unit_text(stated.density.unit)}"


def standings(sheet: Any) -> list[tuple[str, int]]:
    """How many quantities have each standing (each counted once, by its first entry); unchecked ones apart."""
    count = dict.fromkeys(words.STANDINGS, 0)
    for id in sheet.data["quantities"]:
        count[sheet.entries(id)[0]["standing"]] += 1
    return [(standing, number) for standing, number in count.items() if number and standing != "unchecked"]
