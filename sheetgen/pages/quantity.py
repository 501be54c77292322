"""The page of one quantity: its definition, and all materials ranked."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from markupsafe import Markup

from . import entries, numbers, words

# A scale that spans more than this many times its smallest value is logarithmic.
WIDE = 30.0
SCALE_WIDTH = 100


@dataclass(frozen=True)
class Ranked:
    """One row of the ranking."""

    slug: str
    material: str
    formula: str
    draft: bool
    at: Markup
    value: Markup
    standing: str
    origin: str
    mark: tuple[float, float, float] | None
    recalled: bool


@dataclass(frozen=True)
class Ranking:
    """All materials in the order of one quantity, largest first, in one unit."""

    unit: Markup
    power: int
    rows: tuple[Ranked, ...]
    scale: tuple[Markup, Markup, bool] | None
    listed: bool


def context(id: str, handbook: Any) -> dict[str, Any]:
    """The names that the quantity page's template uses."""
    definitions = handbook.registry.definitions_of(id)
    assumptions = {assumption.id: assumption for assumption in handbook.registry.assumptions}
    assumed = list(dict.fromkeys(name for definition in definitions for name in definition.assumes))
    return {
        "id": id,
        "definitions": definitions,
        "first": definitions[0],
        "assumptions": [assumptions[name] for name in assumed if name in assumptions],
        "rankings": rankings(id, handbook),
        "absent": [sheet.record for sheet in handbook.sheets if not _stated(sheet, id)],
        "axis": words.unit_of_axis(definitions[0].listed_by) if definitions[0].listed_by else None,
    }


def rankings(id: str, handbook: Any) -> list[Ranking]:
    """One ranking for each unit in which the quantity is stated (two dimensions may have another)."""
    preference = entries.Preference(handbook.imprint.units)
    by_unit: dict[str, list[tuple[Any, dict, str]]] = {}
    for sheet in handbook.sheets:
        for entry, name in _stated(sheet, id):
            by_unit.setdefault(entry["unit"], []).append((sheet, entry, name))
    return [_ranking(id, unit, found, preference) for unit, found in by_unit.items()]


def _stated(sheet: Any, id: str) -> list[tuple[dict, str]]:
    """The first entry of a material, and one for each of its specimens, with the specimen's name."""
    found = [(entry, "") for entry in sheet.entries(id)[:1]]
    for specimen in sheet.data.get("specimens", ()):
        entry = specimen["quantities"].get(id)
        if isinstance(entry, dict):
            found.append((entry, specimen["name"]))
    return found


def _ranking(id: str, unit: str, found: list[tuple[Any, dict, str]], preference: entries.Preference) -> Ranking:
    listed = isinstance(found[0][1]["value"], list)
    if listed:
        cells, power, marks, scale = [entries.cell(id, entry, preference).value for _, entry, _ in found], 0, None, None
    else:
        found = sorted(found, key=lambda row: -row[1]["value"])
        pairs = [preference.number(id, entry) for _, entry, _ in found]
        whole = all(entries.is_count(entry) for _, entry, _ in found)
        power, cells = numbers.column(pairs, whole)
        marks, scale = _marks(pairs)
    rows = tuple(
        _ranked(id, sheet, entry, name, cells[index], marks[index] if marks else None)
        for index, (sheet, entry, name) in enumerate(found)
    )
    shown_unit = Markup("") if listed else numbers.unit(preference.of(id, unit))
    return Ranking(shown_unit, power, rows, scale, listed)


def _ranked(id: str, sheet: Any, entry: dict, specimen: str, value: Markup, mark: tuple | None) -> Ranked:
    record = sheet.record
    at = entries.where(entry)
    names = tuple(found.name for found in record.specimens)
    draft = record.review is None or record.review.state != "reviewed"
    return Ranked(
        record.slug,
        f"{record.name}, {specimen}" if specimen else record.name,
        record.formula,
        draft,
        at,
        value,
        entry["standing"],
        entries.origin(entry, names),
        mark,
        not specimen and id in sheet.recalled,
    )


def _marks(pairs: Sequence[tuple[float, float | None]]) -> tuple[list[tuple] | None, tuple | None]:
    """Where each number and its uncertainty lie on a common scale, from 0 to 100; None where a scale says nothing."""
    low, high = min(value for value, _ in pairs), max(value for value, _ in pairs)
    if len(pairs) < 3 or low == high:
        return None, None
    logarithmic = low > 0 and high / low > WIDE
    shape = math.log if logarithmic else float
    if not logarithmic:
        low, high = min(low, 0.0), max(high, 0.0)

    def place(value: float) -> float:
        within = min(max(value, low), high)
        return round(SCALE_WIDTH * (shape(within) - shape(low)) / (shape(high) - shape(low)), 2)

    marks = [(place(value - (spread or 0)), place(value), place(value + (spread or 0))) for value, spread in pairs]
    ends = (numbers.printed(float(f"{low:.3g}")).html, numbers.printed(float(f"{high:.3g}")).html)
    return marks, (*ends, logarithmic)
