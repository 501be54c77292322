"""A quick look at data that fit a schema, so that the schema library is asked only where something may be wrong.

A sound record is the usual case, and the library takes twenty times as long to find nothing. This look knows the
keywords of the record's schema and never accepts what the library would not: a test holds the two against each other.
"""

from __future__ import annotations

import re

_KINDS = {str: "string", float: "number", bool: "boolean", dict: "object", list: "array"}


def fits(instance: object, schema: dict) -> bool:
    """Whether the data fit the schema for certain; False means no more than that the library must look."""
    if "enum" in schema:
        return instance in schema["enum"]
    kind, types = _KINDS.get(type(instance)), schema["type"]
    if types == "integer":
        whole = kind == "number" and instance.is_integer()
        return whole and schema["minimum"] <= instance <= schema["maximum"]
    if kind is None or (kind != types and kind not in types):
        return False
    if kind == "object":
        return _object_fits(instance, schema)
    if kind == "array":
        enough = schema.get("minItems", 0) <= len(instance) <= schema.get("maxItems", len(instance))
        return enough and all(fits(item, schema["items"]) for item in instance)
    return kind != "string" or not _BOUNDS & schema.keys() or _text_fits(instance, schema)


_BOUNDS = {"minLength", "maxLength", "pattern"}


def _text_fits(instance: str, schema: dict) -> bool:
    fitting = schema.get("minLength", 0) <= len(instance) <= schema.get("maxLength", len(instance))
    return fitting and re.search(schema.get("pattern", ""), instance) is not None


def _object_fits(instance: dict, schema: dict) -> bool:
    if not all(key in instance for key in schema.get("required", ())):
        return False
    known = schema["properties"]
    return all(fits(part, known.get(key) or _by_pattern(key, schema)) for key, part in instance.items())


def _by_pattern(key: str, schema: dict) -> dict:
    """What the schema says of a key that it knows by a pattern alone; of an unknown key, what nothing fits."""
    parts = (part for pattern, part in schema.get("patternProperties", {}).items() if re.search(pattern, key))
    return next(parts, {"enum": []})
