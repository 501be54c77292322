"""The shape of a record, written once as JSON Schema 2020-12: checked against here, published for editors."""

from __future__ import annotations

import copy
from functools import cache
from typing import TYPE_CHECKING

from sheetgen.records import measures
from sheetgen.records.lattices import LATTICES
from sheetgen.records.markdown import LONGEST as LONGEST_NOTES
from sheetgen.records.measures import Measure
from sheetgen.records.spelling import american, key_variants

if TYPE_CHECKING:
    from jsonschema.protocols import Validator

Schema = dict[str, object]

# A name of our own that resolves to nothing: the schema refers to no other document.
SCHEMA_ID = "urn:sheetgen:record"
DIALECT = "https://json-schema.org/draft/2020-12/schema"

ELEMENT_PATTERN = "^[A-Z][a-z]?$"
NAME_PATTERN = r"^\s*[^\s=+@-]"  # a cell that begins with one of these is a formula to a spreadsheet
HAZARD_PATTERN = r"^(EUH\d{3}[A-Z]?|H[234]\d{2}[A-Za-z]{0,2})(\s*\+\s*(EUH\d{3}[A-Z]?|H[234]\d{2}[A-Za-z]{0,2}))*$"

LONGEST_SERIES = 200  # specimens of a record, and values of one measured property


def _text(description: str, longest: int = 500) -> Schema:
    # A plain 2026 is a number to YAML and a perfectly good edition or name to a person.
    return {"type": ["string", "number"], "minLength": 1, "maxLength": longest, "description": description}


def _name(description: str, longest: int) -> Schema:
    return _text(description, longest) | {"pattern": NAME_PATTERN}


def _choice(description: str, options: list[str]) -> Schema:
    return {"enum": options, "description": description}


def _object(description: str, properties: Schema, required: tuple[str, ...] = (), **more: object) -> Schema:
    return {
        "type": "object",
        "description": description,
        "properties": properties,
        "required": list(required),
        "additionalProperties": False,
        **more,
    }


def _list(description: str, items: Schema, **more: object) -> Schema:
    return {
        "type": "array",
        "description": description,
        "items": items,
        "minItems": 1,
        "maxItems": 1000,
        **more,
    }


_TRUTH: Schema = {"type": "boolean", "description": "true or false"}
_FROM: Schema = {
    "type": ["string", "array"],
    "description": "a key of sources.bib, or a list of them",
    "items": {"type": "string", "description": "a key of sources.bib"},
    "minItems": 1,
}
_ORIGIN: Schema = {
    "at": {"type": "string", "description": "a temperature such as '293 K' or '20 °C'"},
    "from": _FROM,
    "note": _text("a remark in words", 2000),
    "recalled": _TRUTH | {"description": "true for a value quoted from memory, else false"},
}


def _value(measure: Measure, **more: object) -> Schema:
    """A value in any of its forms: a text or a number, or a mapping with `value` and where it comes from."""
    description = f"{measure.kind} such as '{measure.example}'"
    number: Schema = {"type": ["string", "number"], "description": description}
    return {
        "type": ["string", "number", "object"],
        "description": f"{description}, or a mapping with 'value'",
        "properties": {"value": number, **_ORIGIN},
        "required": ["value"],
        "additionalProperties": False,
        **more,
    }


def _values(measure: Measure) -> Schema:
    """A value or a list of values."""
    single = _value(measure)
    description = f"{single['description']}, or a list of these"
    return single | {
        "type": [*single["type"], "array"],
        "description": description,
        "items": single,
        "minItems": 1,
        "maxItems": LONGEST_SERIES,
    }


def _structure() -> Schema:
    atom = _object(
        "an atom with element and position",
        {
            "element": {"type": "string", "description": "an element symbol such as Ti"},
            "position": {
                "type": "array",
                "description": "three fractions of the cell edges such as [0, 1/2, 0.25]",
                "items": {
                    "type": ["number", "string"],
                    "description": "a fraction of a cell edge such as 0.25 or 1/4",
                },
                "minItems": 3,
                "maxItems": 3,
            },
            "occupancy": {"type": ["number", "string"], "description": "an occupancy above 0 and at most 1"},
        },
        ("element", "position"),
    )
    return _object(
        "a mapping with lattice and cell constants",
        {
            "lattice": _choice("the name of a lattice", list(LATTICES)),
            "space_group": _text("a space group by symbol or number, such as 'Fm-3m' or 225", 40),
            **{key: _value(measure) for key, measure in measures.STRUCTURE.items()},
            "atoms": _list("a list of atoms with element and position", atom, maxItems=500),
            "cif": {"type": "string", "description": "the name of a CIF file beside the record"},
        },
    )


def _electrons() -> Schema:
    per_atom = _value(measures.VALENCE)
    by_element = "electrons per atom such as 1, or for a compound a mapping such as {Ti: 4, N: -3}"
    valence = per_atom | {"description": by_element, "patternProperties": {ELEMENT_PATTERN: per_atom}}
    del valence["required"]
    return _object(
        "a mapping with valence or density",
        {
            "valence": valence,
            "density": _value(measures.DENSITIES[3]),
            "dimension": _choice("3 or 2", [3, 2]),
            **{key: _value(measure) for key, measure in measures.ELECTRONS.items()},
            "valleys": {
                "type": "integer",
                "minimum": 1,
                "maximum": 100,
                "description": "a whole number of valleys from 1 to 100",
            },
            "charge": _choice("electron or hole", ["electron", "hole"]),
            "note": _text("a remark in words", 2000),
        },
    )


def _measured() -> Schema:
    point = _object(
        "a mapping with photon energy, n and k",
        {key: _value(measure) for key, measure in measures.OPTICAL.items()} | _ORIGIN,
        tuple(measures.OPTICAL),
    )
    return _object(
        "a mapping from measured properties to values",
        {key: _values(measure) for key, measure in measures.MEASURED.items()}
        | {"refractive_index": _list("a list of {photon energy, n, k, from}", point)},
    )


def _specimen() -> Schema:
    return _object(
        "a specimen with name and form",
        {
            "name": _name("a name such as F-12", 100),
            "form": _choice("the form of a specimen", list(measures.FORMS)),
            **{key: _value(measure) for key, measure in measures.SPECIMEN.items()},
            "note": _text("a remark in words", 2000),
            "invented": _TRUTH,
        },
        ("name", "form"),
    )


def _caution() -> Schema:
    code: Schema = {
        "type": "string",
        "pattern": HAZARD_PATTERN,
        "description": "a GHS hazard code such as H228",
    }
    return {
        "type": ["string", "object"],
        "description": "a text, or a mapping with text and hazard",
        "minLength": 1,
        "maxLength": 2000,
        "properties": {
            "text": _text("a caution in words", 2000),
            "hazard": code
            | {
                "type": ["string", "array"],
                "description": "a GHS hazard code such as H228, or a list of them",
                "items": code,
            },
        },
        "required": ["text"],
        "additionalProperties": False,
    }


@cache
def canonical_schema() -> Schema:
    """The schema over canonical keys: words joined by underscores, British spelling."""
    review = {
        "state": _choice("draft or reviewed", ["draft", "reviewed"]),
        "by": _text("who reviewed the record", 100),
        "date": {"type": "string", "description": "a date such as 2026-11-02"},
    }
    return {
        "$schema": DIALECT,
        "$id": SCHEMA_ID,
        "title": "A record of one conducting material",
        **_object(
            "a record with name and formula",
            {
                "name": _name("the name of the material", 200),
                "formula": {"type": "string", "description": "a chemical formula such as GaAs"},
                "structure": _structure(),
                "electrons": _electrons(),
                "measured": _measured(),
                "specimens": _list("a list of specimens", _specimen(), maxItems=LONGEST_SERIES),
                "cautions": _list("a list of cautions", _caution()),
                "review": _object("a mapping with state, by and date", review, ("state",)),
                "notes": _text("notes in Markdown", LONGEST_NOTES),
            },
            ("name", "formula"),
        ),
    }


def record_schema() -> Schema:
    """The schema as published: JSON Schema 2020-12 that accepts every spelling in which a key or word is read."""
    return _with_variants(copy.deepcopy(canonical_schema()))


def _with_variants(schema: Schema) -> Schema:
    for keyword in ("items",):
        if keyword in schema:
            schema[keyword] = _with_variants(schema[keyword])
    if "patternProperties" in schema:
        schema["patternProperties"] = {k: _with_variants(v) for k, v in schema["patternProperties"].items()}
    if "enum" in schema:
        schema["enum"] = list(dict.fromkeys(word for option in schema["enum"] for word in _word_variants(option)))
    if "properties" in schema:
        properties = {key: _with_variants(value) for key, value in schema["properties"].items()}
        schema["properties"] = {name: value for key, value in properties.items() for name in key_variants(key)}
        _spell_required(schema)
    return schema


def _word_variants(option: object) -> list[object]:
    if not isinstance(option, str):
        return [option]
    spaced = option.replace("-", " ")
    return [option, american(option), spaced, american(spaced)]


def _spell_required(schema: Schema) -> None:
    """Let any one spelling of a required key do."""
    required = schema.pop("required", [])
    single = [key for key in required if len(key_variants(key)) == 1]
    if single:
        schema["required"] = single
    if several := [key for key in required if key not in single]:
        schema["allOf"] = [{"anyOf": [{"required": [name]} for name in key_variants(key)]} for key in several]


@cache
def validator() -> Validator:
    """The compiled check of canonical data."""
    from jsonschema import Draft202012Validator

    return Draft202012Validator(canonical_schema())
