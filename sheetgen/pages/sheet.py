"""The sheet of one material: everything that its template shows, in reading order."""

from __future__ import annotations

import itertools
import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Any

from markupsafe import Markup

from . import citations, entries, hazards, metadata, numbers, words
from .entries import Cell, Line

KEY_NUMBERS = (
    "electron_density", "sheet_density", "electron_sphere_radius", "fermi_energy", "fermi_wavevector", "fermi_velocity",
    "fermi_temperature", "plasma_energy", "relaxation_time", "mean_free_path",
)  # fmt: skip
# A table wider than this breaks on paper: its columns are set in as many bands as needed.
COLUMNS = 6
_OPTICAL = re.compile(r"measured\.refractive_index\.\d+\.")
_GROUPS = (
    ("structure.", "Structure"),
    ("electrons.", "Electrons"),
    ("measured.", "Measured"),
    ("specimens.", "Specimens"),
)


@dataclass(frozen=True)
class Row:
    """One quantity of a list: the power of ten and unit that its cells share, and a cell for each column."""

    id: str
    symbol: str
    title: str
    power: int
    unit: Markup
    cells: tuple[Cell | None, ...]
    anchored: bool = True


@dataclass(frozen=True)
class Band:
    """A compact table over one axis: temperatures, edges or photon energies."""

    axis: str
    words: str
    unit: str
    heads: tuple[Markup, ...]
    rows: tuple[Row, ...]


@dataclass(frozen=True)
class Section:
    """A section of numbers: single ones first, then the lists."""

    title: str
    lines: tuple[Line, ...]
    bands: tuple[Band, ...]


@dataclass(frozen=True)
class Given:
    """One input as it is shown."""

    label: str
    value: Markup
    at: Markup
    sources: tuple[citations.Citation, ...]
    recalled: bool
    certain: bool
    note: str


class SheetPage:
    """What the sheet's template asks for."""

    def __init__(self, sheet: Any, handbook: Any, figures: Sequence[Any]):
        self.sheet, self.handbook, self.figures = sheet, handbook, figures
        self.record, self.data = sheet.record, sheet.data
        self.preference = entries.Preference(handbook.imprint.units)
        self.specimen_names = tuple(specimen.name for specimen in self.record.specimens)
        self.definitions = _fitting(handbook.registry, self.record.electrons.dimension)

    def context(self) -> dict[str, Any]:
        """The names that the template uses."""
        return {
            "sheet": self.sheet,
            "record": self.record,
            "data": self.data,
            "draft": self.record.review is None or self.record.review.state != "reviewed",
            "lattice": words.lattice_words(self.record.crystal.lattice) if self.record.crystal else "",
            "answer": self.sheet.answer,
            "unchecked": self.unchecked(),
            "key_numbers": [line for id in KEY_NUMBERS for line in self.lines([id])],
            "cautions": [
                (caution, [(c, hazards.statement(c)) for c in caution.hazard]) for caution in self.record.cautions
            ],
            "input_groups": self.input_groups(),
            "recalled": sum(bool(given.get("recalled")) for given in self.data["inputs"].values()),
            "optical": self.optical_points(),
            "sections": list(self.sections()),
            "confrontations": self.confrontations(),
            "checks": self.check_groups(),
            "specimens": self.specimens(),
            "figures": [(figure, figure_size(figure.svg)) for figure in self.figures],
            "missing": self.missing(),
            "cited": self.cited(),
            "json_ld": metadata.material(self.sheet, self.handbook, self.definitions),
            "running_head": words.css_string(f"{self.record.name} ({self.record.formula})"),
        }

    # --- the answer

    def unchecked(self) -> list[Any]:
        """Definitions of the numbers that the answer leaves out because nothing measured is at hand."""
        answer = self.sheet.answer
        named = {line.quantity for part in (answer.use, answer.scale, answer.avoid) for line in part}
        return [
            definition
            for id, definition in self.definitions.items()
            if id not in named
            and (found := self.sheet.entries(id))
            and all(e["standing"] == "unchecked" for e in found)
        ]

    # --- inputs

    def input_groups(self) -> list[tuple[str, list[Given]]]:
        """The inputs by group; the points of the refractive index stand in a table of their own."""
        groups = []
        for prefix, title in _GROUPS:
            ids = [id for id in self.data["inputs"] if id.startswith(prefix) and not _OPTICAL.match(id)]
            if ids:
                groups.append((title, [self.given(id) for id in ids]))
        return groups

    def given(self, id: str) -> Given:
        """One input with its temperature, sources and note."""
        stated = self.data["inputs"][id]
        value = self.record.inputs.get(id)
        number = numbers.printed(stated["value"], stated.get("standard_uncertainty"))
        at = {"temperature": stated["temperature"]} if stated.get("temperature") is not None else {}
        return Given(
            words.input_words(id.partition("@")[0], self.specimen_names),
            numbers.with_unit(number, stated["unit"]),
            entries.where(at),
            self.cite(stated.get("sources", ())),
            bool(stated.get("recalled")),
            "standard_uncertainty" in stated,
            value.note if value else "",
        )

    def optical_points(self) -> list[tuple[Markup, Markup, Markup, tuple[citations.Citation, ...]]]:
        """Photon energy, n, k and sources of each measured refractive index."""
        return [
            (*(_written(value) for value in (point.photon_energy, point.n, point.k)), self.cite(point.n.sources))
            for point in self.record.optical
        ]

    def cite(self, keys: Sequence[str]) -> tuple[citations.Citation, ...]:
        """Short citations of some sources."""
        return tuple(citations.citation(key, self.handbook.sources) for key in keys)

    # --- numbers

    def lines(self, ids: Sequence[str]) -> list[Line]:
        """One line for each quantity that the sheet states (of a list its first entry)."""
        return [
            self.line(self.definitions[id], self.sheet.entries(id)[0])
            for id in ids
            if id in self.definitions and self.sheet.entries(id)
        ]

    def line(self, definition: Any, entry: dict[str, Any]) -> Line:
        """One quantity as it is printed."""
        shown = entries.cell(definition.id, entry, self.preference)
        return Line(
            definition.id, definition.symbol, definition.title, shown, entries.origin(entry, self.specimen_names)
        )

    def sections(self) -> Iterator[Section]:
        """The sections of the sheet that hold at least one number."""
        by_section: dict[str, list[Any]] = {}
        for definition in self.definitions.values():
            if self.sheet.entries(definition.id):
                by_section.setdefault(definition.section, []).append(definition)
        for title, definitions in by_section.items():
            single = [d.id for d in definitions if not d.listed_by]
            listed = [d for d in definitions if d.listed_by]
            yield Section(title, tuple(self.lines(single)), tuple(self.bands(listed)))

    def bands(self, definitions: Sequence[Any]) -> Iterator[Band]:
        """The lists of a section, those over the same conditions in one table."""
        tables: dict[tuple, list[Any]] = {}
        for definition in definitions:
            heads = tuple(entries.where(entry) for entry in self.sheet.entries(definition.id))
            tables.setdefault(definition.listed_by, {}).setdefault(_conditions(heads), []).append(definition)
        for axis, by_heads in tables.items():
            heads = list(dict.fromkeys(itertools.chain.from_iterable(by_heads)))
            found = list(itertools.chain.from_iterable(by_heads.values()))
            name, unit = words.unit_of_axis(axis)
            for start in range(0, len(heads), COLUMNS):
                chosen = tuple(heads[start : start + COLUMNS])
                rows = tuple(row for definition in found if (row := self.row(definition, chosen, start == 0)))
                yield Band(axis, name, unit, tuple(head for head, _ in chosen), rows)

    def row(self, definition: Any, columns: Sequence[tuple[Markup, int]], anchored: bool) -> Row | None:
        """One quantity over the columns, None where it has no entry in any of them.

        Links within the page lead to the row that is `anchored`.
        """
        found = self.sheet.entries(definition.id)
        keys = _conditions(tuple(entries.where(entry) for entry in found))
        at = dict(zip(keys, found, strict=True))
        chosen = [at.get(column) for column in columns]
        present = [entry for entry in chosen if entry is not None]
        if not present:
            return None
        whole = all(entries.is_count(entry) for entry in present)
        pairs = [self.preference.number(definition.id, entry) if entry else None for entry in chosen]
        power, cells = numbers.column(pairs, whole)
        printed = tuple(
            Cell(cell, entry["standing"]) if entry else None for cell, entry in zip(cells, chosen, strict=True)
        )
        unit = numbers.unit(self.preference.of(definition.id, present[0]["unit"]))
        return Row(definition.id, definition.symbol, definition.title, power, unit, printed, anchored)

    # --- standing

    def confrontations(self) -> list[dict[str, Any]]:
        """Model against measurement, each number printed."""
        return [
            {
                "id": found.quantity,
                "title": found.title,
                "at": entries.where(found),
                "model": _maybe(found.model),
                "measured": _maybe(found.measured),
                "unit": numbers.unit(found.unit),
                "ratio": _maybe(found.ratio, found.ratio_uncertainty),
                "standing": found.standing,
                "meaning": found.meaning,
                "reason": found.reason,
                "sources": self.cite(found.sources),
            }
            for found in self.sheet.confrontations
        ]

    def check_groups(self) -> list[dict[str, Any]]:
        """The assumptions with all their evaluations; the standing of a group is its worst."""
        groups: dict[str, list[Any]] = {}
        for check in self.sheet.checks:
            groups.setdefault(check.id, []).append(check)
        order = list(words.CONDITIONS)
        indicators = {assumption.id: assumption.formula for assumption in self.handbook.registry.assumptions}
        return [
            {
                "id": id,
                "first": checks[0],
                "indicator": indicators.get(id, ""),
                "standing": max((check.standing for check in checks), key=order.index),
                "evaluations": [
                    (entries.where(c), _maybe(c.value), _maybe(c.bound), c.standing, c.reason) for c in checks
                ],
                "covers": [
                    self.definitions[q] for q in checks[0].covers if q in self.definitions and self.sheet.entries(q)
                ],
            }
            for id, checks in groups.items()
        ]

    def specimens(self) -> list[dict[str, Any]]:
        """The group's own specimens with what was stated of them and what follows."""
        definitions = self.handbook.registry.published("specimen")
        derived = {found["name"]: found["quantities"] for found in self.data.get("specimens", ())}
        return [
            {
                "specimen": specimen,
                "given": self.specimen_inputs(specimen),
                "lines": [
                    self.line(definitions[id], entry)
                    for id, entry in derived.get(specimen.name, {}).items()
                    if id in definitions and isinstance(entry, dict)
                ],
            }
            for specimen in self.record.specimens
        ]

    def specimen_inputs(self, specimen: Any) -> list[tuple[str, Markup]]:
        """What the record says of a specimen."""
        names = ("thickness", "diameter", "edge", "grain_size", "specularity", "grain_reflection", "resistivity")
        stated = [(name, getattr(specimen, name)) for name in names]
        return [(name.replace("_", " "), _written(value)) for name, value in stated if value is not None]

    def missing(self) -> list[tuple[str, list[Any]]]:
        """What is absent and why, quantities with the same reason together."""
        reasons: dict[str, list[Any]] = {}
        known = self.handbook.registry.published()
        for id, reason in self.sheet.missing.items():
            reasons.setdefault(reason, []).append(self.definitions.get(id) or known.get(id) or id)
        return list(reasons.items())

    def cited(self) -> list[Any]:
        """The sources that the sheet's values name, in the order of the list of sources."""
        keys = {key for given in self.data["inputs"].values() for key in given.get("sources", ())}
        return [source for key, source in self.handbook.sources.items() if key in keys]


def _fitting(registry: Any, dimension: int) -> dict[str, Any]:
    """id → the definition that applies in this number of dimensions, in the order of the sheet."""
    fitting = {}
    for id in registry.published():
        here = [d for d in registry.definitions_of(id) if d.scope == "material" and dimension in d.dimensions]
        if here:
            fitting[id] = here[0]
    return fitting


def _conditions(heads: Sequence[Markup]) -> tuple[tuple[Markup, int], ...]:
    """Heads told apart where a condition occurs twice (two resistivities at one temperature)."""
    seen: dict[Markup, int] = {}
    found = []
    for head in heads:
        seen[head] = seen.get(head, 0) + 1
        found.append((head, seen[head]))
    return tuple(found)


def _maybe(value: float | None, uncertainty: float | None = None) -> Markup | None:
    return None if value is None else numbers.printed(value, uncertainty).html


def _written(value: Any) -> Markup:
    return numbers.with_unit(numbers.printed(value.value, value.standard_uncertainty), value.unit)


def figure_size(svg: bytes) -> tuple[int, int] | None:
    """Width and height of a figure in its own units, so that the page keeps its place while it loads."""
    found = re.search(rb'viewBox="[\d.-]+ [\d.-]+ ([\d.]+) ([\d.]+)"', svg[:2000])
    return (round(float(found[1])), round(float(found[2]))) if found else None
