"""The machine-readable side of the site: JSON for each material, JSON, CSV and its description for all."""

from __future__ import annotations

import csv
import io
import json
from collections.abc import Iterable, Iterator, Mapping, Sequence
from typing import Any

from sheetgen import __version__
from sheetgen.handbook import Handbook
from sheetgen.quantities.fingerprints import fingerprint
from sheetgen.records.assembly import assembly
from sheetgen.records.schema import record_schema
from sheetgen.sheet import CONSTANTS, PRINTED_UNITS, Sheet


def documents(handbook: Handbook, figures: Mapping[str, Sequence[Any]]) -> Iterator[tuple[str, bytes]]:
    """(path within the site, content) of every data file and figure; `figures` holds those of each slug."""
    whole = []
    for sheet in handbook.sheets:
        slug = sheet.record.slug
        drawn = figures.get(slug, ())
        material = {**sheet.data, "figures": [_figure(slug, figure.id) for figure in drawn]}
        whole.append(material)
        yield f"data/materials/{slug}.json", as_json(material)
        for figure in drawn:
            yield f"figures/{slug}/{figure.id}.svg", figure.svg
            yield f"figures/{slug}/{figure.id}.csv", figure.csv
    yield "data/handbook.json", as_json(handbook_data(handbook, whole))
    columns = table_columns(handbook.sheets, handbook)
    yield "data/handbook.csv", as_csv(handbook.sheets, columns)
    yield "data/handbook.csv-metadata.json", as_json(_csv_description(handbook, columns))
    yield "data/record.schema.json", as_json(record_schema())


def as_json(content: Any) -> bytes:
    """UTF-8 JSON that refuses NaN and infinity, ends with a newline, and keeps the order of the content."""
    return (json.dumps(content, ensure_ascii=False, indent=1, allow_nan=False) + "\n").encode()


def table_columns(sheets: Iterable[Sheet], handbook: Handbook) -> dict[str, dict]:
    """Column name → {"quantity", "unit", "title"}; an entry of a list other than the first has its point in the name.

    `relaxation_time` is the first entry, `relaxation_time@77` the one at 77 K; a column that ends in `.u` holds
    standard uncertainties.
    """
    found: dict[str, set[str]] = {}
    for sheet in sheets:
        for name, id, entry in _cells(sheet):
            found.setdefault(id, set()).add(name)
            if "standard_uncertainty" in entry:
                found[id].add(f"{name}.u")
    columns = {}
    for id in handbook.registry.published():
        for name in sorted(found.get(id, ()), key=_column_order):
            definition = handbook.registry[id]
            columns[name] = {"quantity": id, "unit": definition.unit, "title": definition.title}
    return columns


def as_csv(sheets: Iterable[Sheet], columns: Mapping[str, dict]) -> bytes:
    """One line per material, one column per quantity; a cell is empty where the quantity is absent."""
    text = io.StringIO()
    writer = csv.DictWriter(text, ["slug", "name", "formula", *columns], restval="", lineterminator="\n")
    writer.writeheader()
    for sheet in sheets:
        row = {"slug": sheet.record.slug, "name": sheet.record.name, "formula": sheet.record.formula}
        for name, _, entry in _cells(sheet):
            row[name] = _plain(entry["value"])
            if "standard_uncertainty" in entry:
                row[f"{name}.u"] = repr(entry["standard_uncertainty"])
        writer.writerow(row)
    return text.getvalue().encode()


def _cells(sheet: Sheet) -> Iterator[tuple[str, str, dict]]:
    for id, stated in sheet.data["quantities"].items():
        if not isinstance(stated, list):
            yield id, id, stated
            continue
        seen: set[str] = set()
        for position, entry in enumerate(stated):
            axis = next(axis for axis in PRINTED_UNITS if axis in entry)
            named = position > 0 or axis != "temperature"
            name = f"{id}@{entry[axis]:g}" if named else id
            if name not in seen:  # a second resistivity at one temperature stays in the JSON alone
                seen.add(name)
                yield name, id, entry


def _column_order(name: str) -> tuple:
    base = name.removesuffix(".u")
    id, _, point = base.partition("@")
    return (id, float(point) if point else -1.0, name != base)


def _plain(value: Any) -> str:
    if isinstance(value, list):
        parts = [f"{one['distance']!r}:{one['count']!r}" if isinstance(one, dict) else repr(one) for one in value]
        return " ".join(parts)
    return repr(value)


def _figure(slug: str, id: str) -> dict:
    return {"id": id, "svg": f"figures/{slug}/{id}.svg", "csv": f"figures/{slug}/{id}.csv"}


def handbook_data(handbook: Handbook, materials: list[dict]) -> dict:
    """The content of handbook.json, around the data of its materials.

    `conditions`, `assemblies` and the fingerprints are what the next edition needs to say what changed since.
    """
    imprint = handbook.imprint
    return {
        "title": imprint.title,
        "group": imprint.group,
        "edition": imprint.edition,
        **({"date": imprint.date} if imprint.date else {}),
        "licence": imprint.licence,
        "constants": CONSTANTS,
        "version": __version__,
        "conditions": {
            "reference_temperature": imprint.reference_temperature,
            "temperatures": list(imprint.temperatures),
            "thresholds": imprint.thresholds,
        },
        "quantities": {
            id: {
                "title": handbook.registry[id].title,
                "units": list(dict.fromkeys(d.unit for d in handbook.registry.definitions_of(id))),
                "section": handbook.registry[id].section,
                "fingerprint": fingerprint(handbook.registry.definitions_of(id)),
            }
            for id in (*handbook.registry.published(), *handbook.registry.published("specimen"))
        },
        "assemblies": {sheet.record.slug: assembly(sheet.record) for sheet in handbook.sheets},
        "materials": materials,
    }


def _csv_description(handbook: Handbook, columns: Mapping[str, dict]) -> dict:
    """Metadata of the table by the W3C recommendation "Metadata Vocabulary for Tabular Data" (2015)."""
    texts = [{"name": name, "titles": name, "datatype": "string"} for name in ("slug", "name", "formula")]
    numbers = [
        {
            "name": name.replace("@", "_at_").replace(".u", "_u"),
            "titles": name,
            "dc:description": f"{'standard uncertainty of: ' if name.endswith('.u') else ''}{about['title']}",
            "datatype": "string" if handbook.registry[about["quantity"]].form != "number" else "number",
            "schema:unitText": about["unit"],
        }
        for name, about in columns.items()
    ]
    return {
        "@context": "http://www.w3.org/ns/csvw",
        "url": "handbook.csv",
        "dc:title": handbook.imprint.title,
        "tableSchema": {"columns": texts + numbers, "primaryKey": "slug"},
    }
