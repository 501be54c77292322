"""Tables for the scripts of the pages: what a reader may filter, sort, shade and compare.

A page opened from a disk may load a script and no other data, so that each table is a script that sets one frozen
object. A column is a file of its own: a page loads what its reader asks for.
"""

from __future__ import annotations

import json
import math
from collections.abc import Iterator, Mapping, Sequence
from functools import cache
from typing import Any

from sheetgen.figures.markup import from_latex

from . import entries, front, numbers, unit_choices, words

AXES = {"temperature": "K", "edge": "nm", "photon_energy": "eV"}
NEARBY = 5.0  # kelvins within which a temperature counts as the reference one
ABSENT = "-"


class Tables:
    """The tables of one handbook; every column is computed once."""

    def __init__(self, handbook: Any):
        self.handbook = handbook
        self.reference = handbook.imprint.reference_temperature
        published = handbook.registry.published().items()
        found = {id: self._column(definition) for id, definition in published if definition.form == "number"}
        # Point by point; a quantity that no material states has no column.
        self.columns = {id: column for id, column in found.items() if column}

    def files(self, figures: Mapping[str, Sequence[Any]]) -> Iterator[tuple[str, bytes]]:
        """(path, content) of the lists of materials and quantities, each column, and each material's own table."""
        yield "tables/materials.js", as_script("materials", materials(self.handbook))
        yield "tables/quantities.js", as_script("quantities", self.quantities())
        for id, column in self.columns.items():
            yield f"tables/columns/{id}.js", as_script(f"columns/{id}", column)
        for sheet in self.handbook.sheets:
            slug = sheet.record.slug
            own = self.material(sheet, figures.get(slug, ()))
            yield f"tables/materials/{slug}.js", as_script(f"materials/{slug}", own)

    def quantities(self) -> dict[str, dict[str, Any]]:
        """What each quantity is called, its units, and the points at which its column has numbers."""
        preference = entries.Preference(self.handbook.imprint.units)
        found = {}
        for id, column in self.columns.items():
            definition = self.handbook.registry.definitions_of(id)[0]
            found[id] = {
                "title": definition.title,
                "symbol": symbol_marked(definition.symbol),
                "section": definition.section,
                "units": unit_choices.choices(definition.unit, preference.of(id, definition.unit)),
                "points": [[point, words_of_point(point, definition.listed_by, self.reference)] for point in column],
            }
        return found

    def material(self, sheet: Any, figures: Sequence[Any]) -> dict[str, Any]:
        """All numbers of one material by quantity and point, and the curves of its figures."""
        stated: dict[str, dict[str, list]] = {}
        for id in self.columns:
            for point, entry in self.stated(sheet, self.handbook.registry.definitions_of(id)[0]):
                stated.setdefault(id, {}).setdefault(point, _number(entry))
        return {"quantities": stated, "curves": marked(curves(figures), sheet)}

    def _column(self, definition: Any) -> dict[str, dict[str, Any]]:
        found: dict[str, dict[int, dict]] = {}
        for row, sheet in enumerate(self.handbook.sheets):
            for point, entry in self.stated(sheet, definition):
                found.setdefault(point, {}).setdefault(row, entry)
        return {point: _packed(by_row, len(self.handbook.sheets)) for point, by_row in found.items()}

    def stated(self, sheet: Any, definition: Any) -> Iterator[tuple[str, dict]]:
        """(point, entry) of the entries that have a place in the column of a quantity.

        Two dimensions may state the same quantity in another unit, which has none.
        """
        for entry in sheet.entries(definition.id):
            point = point_of(entry, definition.listed_by, self.reference)
            if point is not None and entry["unit"] == definition.unit:
                yield point, entry


def point_of(entry: dict[str, Any], axis: str | None, reference: float) -> str | None:
    """Where in a column an entry stands: "" at the reference temperature, '@5' at an edge of 5 nm.

    None for a resistivity taken away from the reference temperature, which materials do not share.
    """
    place = next((entry[name] for name in AXES if name in entry), None)
    if place is None or ("temperature" in entry and abs(place - reference) <= NEARBY):
        return ""
    return None if axis == "resistivity" else f"@{place:g}"


def as_script(name: str, content: Any) -> bytes:
    """A script that adds one table to those that the page has loaded. Refuses NaN and infinity."""
    text = json.dumps(content, ensure_ascii=False, allow_nan=False, separators=(",", ":"))
    return f"(globalThis.handbookTables??={{}})[{json.dumps(name)}]=Object.freeze({text});\n".encode()


def materials(handbook: Any) -> dict[str, list]:
    """What the table says of each material besides numbers, in the order of the sheets; lists of equal length."""
    found: dict[str, list] = {
        name: [] for name in ("slug", "name", "formula", "lattice", "electrons", "elements", "draft", "standings")
    }
    for sheet in handbook.sheets:
        record = sheet.record
        counts = dict(front.standings(sheet))
        found["slug"].append(record.slug)
        found["name"].append(record.name)
        found["formula"].append(record.formula)
        found["lattice"].append(record.crystal.lattice if record.crystal else "")
        found["electrons"].append(front.electrons_text(record))
        found["elements"].append(" ".join(record.composition))
        found["draft"].append(int(front.is_draft(sheet)))
        found["standings"].append([counts.get(word, 0) for word in words.STANDINGS if word != "unchecked"])
    return found


@cache
def symbol_marked(latex: str) -> str:
    """A symbol in the marks of the figures, as *E*_{F}; "" where it needs more."""
    return from_latex(latex) or ""


def words_of_point(point: str, axis: str | None, reference: float) -> str:
    """A point of a column in words: '@5' along the edge is '5 nm'; "" where there is one number only."""
    if axis not in AXES:
        return ""
    return f"{point[1:] or f'{reference:g}'}{numbers.NARROW}{AXES[axis]}"


def _packed(by_row: dict[int, dict], rows: int) -> dict[str, Any]:
    order = {word: str(place) for place, word in enumerate(words.STANDINGS)}
    listed = [by_row.get(row) for row in range(rows)]
    spreads = [entry.get("standard_uncertainty") if entry else None for entry in listed]
    packed: dict[str, Any] = {
        "value": [
            short(entry["value"], spread) if entry else None for entry, spread in zip(listed, spreads, strict=True)
        ],
        "standing": "".join(order[entry["standing"]] if entry else ABSENT for entry in listed),
    }
    if any(spread is not None for spread in spreads):
        packed["spread"] = [None if spread is None else short(spread) for spread in spreads]
    if all(entries.is_count(entry) for entry in by_row.values()):
        packed["whole"] = 1
    return packed


def short(value: float, spread: float | None = None) -> float | int:
    """A number without the digits that mean nothing: five beyond those of its uncertainty, nine where it has none."""
    if not value or (isinstance(value, int) and not spread):
        return value
    digits = 9
    if spread:
        digits = min(17, max(9, math.floor(math.log10(abs(value))) - math.floor(math.log10(spread)) + 7))
    rounded = float(f"{value:.{digits}g}")
    return int(rounded) if rounded.is_integer() and abs(rounded) < 1e9 else rounded


# --- one material beside others --------------------------------------------------------------------------------

# Figures whose curves can be laid over each other, with the series that is taken from each.
CURVES = {"parabola": "all states", "density-of-states": "all states", "resistivity": "Bloch–Grüneisen"}


def _number(entry: dict[str, Any]) -> list:
    spread = entry.get("standard_uncertainty")
    packed = [short(entry["value"], spread), None if spread is None else short(spread)]
    return [*packed, words.STANDINGS.index(entry["standing"]), int(entries.is_count(entry))]


# What ends the filled part of a curve: the quantities at its Fermi level, as (x, y).
FERMI_LEVEL = {
    "parabola": ("fermi_wavevector", "fermi_energy"),
    "density-of-states": ("fermi_energy", "density_of_states"),
}
SMALLER = {" / meV": (" / eV", 1e-3)}


def curves(figures: Sequence[Any]) -> dict[str, dict[str, Any]]:
    """Figure → title, names of both axes and the points of its one curve, in units common to all."""
    found = {}
    for figure in figures:
        if figure.id in CURVES:
            head, *lines = (line.split(",") for line in figure.csv.decode().splitlines())
            points = [(float(line[1]), float(line[2])) for line in lines if line[0] == CURVES[figure.id]]
            if len(points) > 1:
                scaled = [_common(*axis) for axis in zip(head[1:3], zip(*points, strict=True), strict=True)]
                (x_name, x), (y_name, y) = scaled
                title = figure.title.partition(":")[0]
                found[figure.id] = {"title": title, "names": [x_name, y_name], "x": x, "y": y}
    return found


def _common(name: str, values: Sequence[float]) -> tuple[str, list[float]]:
    """An axis in the larger unit where its figure has a smaller one."""
    for ending, (common, factor) in SMALLER.items():
        if name.endswith(ending):
            return name.removesuffix(ending) + common, [short(value * factor) for value in values]
    return name, [short(value) for value in values]


def marked(found: dict[str, dict[str, Any]], sheet: Any) -> dict[str, dict[str, Any]]:
    """The curves, each with the point of its Fermi level where it has one."""
    for figure, ids in FERMI_LEVEL.items():
        place = [sheet.entries(id)[0]["value"] for id in ids if sheet.entries(id)]
        if figure in found and len(place) == len(ids):
            found[figure]["level"] = [short(value) for value in place]
    return found
