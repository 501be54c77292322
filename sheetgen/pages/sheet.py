"""The sheet of one material: everything that its template shows, in reading order."""

from __future__ import annotations

import itertools
import re
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, replace
from typing import Any

from markupsafe import Markup

from . import citations, copying, entries, hazards, metadata, numbers, words
from .conditions import Conditions
from .entries import Cell, Line
from .evidence import Evidence

KEY_NUMBERS = (
    "electron_density", "sheet_density", "electron_sphere_radius", "fermi_energy", "fermi_wavevector", "fermi_velocity",
    "fermi_temperature", "plasma_energy", "relaxation_time", "mean_free_path",
)  # fmt: skip
# A table wider than this breaks on paper: its columns are set in as many bands as needed.
COLUMNS = 6
OPTICAL_COLUMNS = 10
_OPTICAL = re.compile(r"measured\.refractive_index\.\d+\.")
# The values of specimens stand with the specimens.
_GROUPS = (("structure.", "Structure"), ("electrons.", "Electrons"), ("measured.", "Measured"))
# What a form is measured by: a number that needs another of these was never meant for it.
_DIMENSIONS = {"film": "thickness", "wire": "diameter", "particle": "diameter", "cube": "edge"}


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
    recalled: bool = False


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
    origins: str
    bands: tuple[Band, ...]


@dataclass(frozen=True)
class Given:
    """One input as it is shown."""

    id: str
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
        self.evidence = Evidence(sheet, handbook, self.definitions, self.preference)
        self.conditions = Conditions(sheet, handbook, self.definitions)

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
            "key_ids": KEY_NUMBERS,
            "key_numbers": [line for id in KEY_NUMBERS for line in self.lines([id])],
            "cautions": [
                (caution, [(c, hazards.statement(c)) for c in caution.hazard]) for caution in self.record.cautions
            ],
            "defers": any("design allowable" in caution.text for caution in self.record.cautions),
            "input_groups": self.input_groups(),
            "recalled": sum(bool(given.get("recalled")) for given in self.data["inputs"].values()),
            "optical": self.optical_bands(),
            "optical_sources": self.optical_sources(),
            "written": _written,
            "sections": list(self.sections()),
            "confrontations": self.evidence.confrontations(),
            "checks": self.evidence.check_groups(),
            "specimens": self.specimens(),
            "figures": [(figure, figure_size(figure.svg)) for figure in self.figures],
            "missing": self.missing(self.sheet.missing),
            "cited": self.cited(),
            "conditions": self.conditions.context(),
            "citation": copying.citation(self.record, self.handbook),
            "draws": self.evidence.draws(),
            "json_ld": metadata.material(self.sheet, self.handbook, self.definitions),
            "running_head": words.css_string(f"{self.record.name} ({self.record.formula})"),
        }

    def script(self) -> bytes:
        """The script beside the page: one frozen object of what the page's tools need."""
        copies = copying.Copies(self.sheet, self.handbook, self.definitions).data()
        data = copies | {"conditions": self.conditions.embedded()}
        return f'"use strict";\nconst SHEET = Object.freeze({metadata.embedded(data)});\n'.encode()

    # --- the answer

    def unchecked(self) -> list[Any]:
        """Definitions of the numbers that the answer leaves out because nothing measured is at hand."""
        answer = self.sheet.answer
        parts = (answer.use, answer.scale, answer.avoid, answer.undecided)
        named = {line.quantity for part in parts for line in part}
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
        number = numbers.stated(stated["value"], stated.get("standard_uncertainty"))
        at = {"temperature": stated["temperature"]} if stated.get("temperature") is not None else {}
        return Given(
            id,
            words.input_words(id.partition("@")[0], self.specimen_names),
            numbers.with_unit(number, stated["unit"]),
            entries.where(at),
            self.cite(stated.get("sources", ())),
            bool(stated.get("recalled")),
            "standard_uncertainty" in stated,
            value.note if value else "",
        )

    def optical_bands(self) -> list[Sequence[Any]]:
        """The measured refractive indices, as many side by side as fit."""
        points = self.record.optical
        return [points[start : start + OPTICAL_COLUMNS] for start in range(0, len(points), OPTICAL_COLUMNS)]

    def optical_sources(self) -> tuple[citations.Citation, ...]:
        """Where the refractive indices come from."""
        return self.cite(
            dict.fromkeys(key for point in self.record.optical for key in point.n.sources + point.k.sources)
        )

    def cite(self, keys: Iterable[str]) -> tuple[citations.Citation, ...]:
        """Short citations of some sources."""
        return citations.citations(keys, self.handbook.sources)

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
        origin = entries.origin(entry, self.specimen_names)
        recalled = definition.scope == "material" and definition.id in self.sheet.recalled
        return Line(definition.id, definition.symbol, definition.title, shown, origin, recalled)

    def sections(self) -> Iterator[Section]:
        """The sections of the sheet that hold at least one number."""
        by_section: dict[str, list[Any]] = {}
        for definition in self.definitions.values():
            if self.sheet.entries(definition.id):
                by_section.setdefault(definition.section, []).append(definition)
        for title, definitions in by_section.items():
            single = [d.id for d in definitions if not d.listed_by]
            listed = [d for d in definitions if d.listed_by]
            lines = tuple(self.lines(single))
            yield Section(title, lines, origins(lines), tuple(self.bands(listed)))

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
            Cell(
                cell,
                entry["standing"],
                anchor=copying.anchor(definition.id, entry, repeat),
                interval=entries.interval(definition.id, entry, self.preference, power),
            )
            if entry
            else None
            for cell, entry, (_, repeat) in zip(cells, chosen, columns, strict=True)
        )
        unit = numbers.unit(self.preference.of(definition.id, present[0]["unit"]))
        recalled = definition.id in self.sheet.recalled
        return Row(definition.id, definition.symbol, definition.title, power, unit, printed, anchored, recalled)

    # --- specimens, absences, sources

    def specimens(self) -> list[dict[str, Any]]:
        """The group's own specimens with what was stated of them and what follows."""
        definitions = self.handbook.registry.published("specimen")
        derived = {found["name"]: found["quantities"] for found in self.data.get("specimens", ())}
        return [
            {
                "specimen": specimen,
                "given": self.specimen_inputs(specimen),
                "missing": self.missing(self.missing_of(specimen)),
                "lines": [
                    self.line(definitions[id], entry)
                    for id, entry in derived.get(specimen.name, {}).items()
                    if id in definitions and isinstance(entry, dict)
                ],
            }
            for specimen in self.record.specimens
        ]

    def specimen_inputs(self, specimen: Any) -> list[Given]:
        """What the record says of a specimen."""
        number = self.record.specimens.index(specimen) + 1
        prefix = f"specimens.{number}."
        found = [self.given(id) for id in self.data["inputs"] if id.startswith(prefix)]
        own_name = f" of {specimen.name}"
        return [replace(given, label=given.label.removesuffix(own_name)) for given in found]

    def missing_of(self, specimen: Any) -> dict[str, str]:
        """What is absent for a specimen, other forms' quantities aside."""
        foreign = set(_DIMENSIONS.values()) - {_DIMENSIONS.get(specimen.form)}
        absent = self.sheet.specimen_missing.get(specimen.name, {})
        return {id: why for id, why in absent.items() if not any(word in why for word in foreign)}

    def missing(self, absent: dict[str, str]) -> list[tuple[str, list[Any]]]:
        """What is absent and why, quantities with the same reason together."""
        reasons: dict[str, list[Any]] = {}
        for id, reason in absent.items():
            reasons.setdefault(reason, []).append(self.handbook.registry[id])
        return list(reasons.items())

    def cited(self) -> list[Any]:
        """The sources that the sheet's values name, in the order of the list of sources."""
        keys = {key for given in self.data["inputs"].values() for key in given.get("sources", ())}
        return [source for key, source in self.handbook.sources.items() if key in keys]


def origins(lines: Sequence[Line]) -> str:
    """Where the uncertainties of some lines come from, in one sentence: what most share, then the exceptions."""
    by_origin: dict[str, list[str]] = {}
    for line in lines:
        if line.origin:
            by_origin.setdefault(line.origin.rpartition(",")[0], []).append(words.lower_first(line.title))
    if not by_origin:
        return ""
    most = max(by_origin, key=lambda origin: len(by_origin[origin]))
    exceptions = [f"of {words.joined(titles)} from {origin}" for origin, titles in by_origin.items() if origin != most]
    return "; ".join([f"Uncertainties come mostly from {most}", *exceptions]) + "."


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


def _written(value: Any) -> Markup:
    return numbers.with_unit(numbers.stated(value.value, value.standard_uncertainty), value.unit)


def figure_size(svg: bytes) -> tuple[int, int] | None:
    """Width and height of a figure in CSS pixels, so that the page keeps its place while it loads."""
    found = re.search(rb'<svg[^>]* width="([\d.]+)mm" height="([\d.]+)mm"', svg[:2000])
    return tuple(round(float(size) * 96 / 25.4) for size in found.groups()) if found else None
