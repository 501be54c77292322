"""Metadata that machines read: schema.org Dataset as JSON-LD."""

from __future__ import annotations

import json
from typing import Any

from markupsafe import Markup

from . import numbers
from .citations import safe_link

_ESCAPES = {"<": "\\u003c", ">": "\\u003e", "&": "\\u0026", "\u2028": "\\u2028", "\u2029": "\\u2029"}

_WITH = "with uncertainty, source and standing against measurement"


def embedded(data: dict[str, Any]) -> Markup:
    """JSON that can stand inside a script element whatever its texts say."""
    text = json.dumps(data, ensure_ascii=False, separators=(",", ":"))
    for sign, escape in _ESCAPES.items():
        text = text.replace(sign, escape)
    return Markup(text)


def material(sheet: Any, handbook: Any, definitions: dict[str, Any]) -> Markup:
    """The sheet of one material as a schema.org Dataset."""
    slug = sheet.record.slug
    data = _common(handbook) | {
        "name": f"{sheet.record.name} ({sheet.record.formula}): free-electron numbers",
        "description": f"Free-electron numbers of {sheet.record.name} {_WITH}.",
        "identifier": slug,
        "isPartOf": {"@type": "Dataset", "name": handbook.imprint.title},
        "distribution": [_download(f"../data/materials/{slug}.json", "application/json")],
        "variableMeasured": [
            _variable(definition, entry)
            for id, definition in definitions.items()
            for entry in sheet.entries(id)[:1]
            if not isinstance(entry["value"], list)
        ],
    }
    return embedded(data | _address(handbook, f"materials/{slug}.html"))


def whole(handbook: Any) -> Markup:
    """The handbook as a schema.org Dataset."""
    data = _common(handbook) | {
        "name": handbook.imprint.title,
        "description": f"Free-electron numbers of {len(handbook.sheets)} materials {_WITH}.",
        "distribution": [
            _download("data/handbook.json", "application/json"),
            _download("data/handbook.csv", "text/csv"),
        ],
        "variableMeasured": [
            {"@type": "PropertyValue", "name": d.title, "propertyID": d.id, "unitText": d.unit}
            for d in handbook.registry.published().values()
        ],
    }
    return embedded(data | _address(handbook, "index.html"))


def _common(handbook: Any) -> dict[str, Any]:
    imprint = handbook.imprint
    licence = {"license": {"@type": "CreativeWork", "name": imprint.licence}} if imprint.licence else {}
    return {
        "@context": "https://schema.org",
        "@type": "Dataset",
        "creator": {"@type": "Organization", "name": imprint.group},
        "version": imprint.edition,
        "inLanguage": imprint.language,
        "isAccessibleForFree": True,
        "measurementTechnique": "free-electron model",
    } | licence


def _address(handbook: Any, page: str) -> dict[str, str]:
    base = safe_link(handbook.imprint.base_address)
    return {"url": f"{base.rstrip('/')}/{page}"} if base else {}


def _download(path: str, kind: str) -> dict[str, str]:
    return {"@type": "DataDownload", "encodingFormat": kind, "contentUrl": path}


def _variable(definition: Any, entry: dict[str, Any]) -> dict[str, Any]:
    found = {"@type": "PropertyValue", "name": definition.title, "propertyID": definition.id, "value": entry["value"]}
    if unit := numbers.unit_text(entry["unit"]):
        found["unitText"] = unit.replace(numbers.NARROW, " ")
    if uncertainty := entry.get("standard_uncertainty"):
        found["description"] = f"standard uncertainty {uncertainty:.2g}"
    return found
