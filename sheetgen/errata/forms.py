"""Whether a data file has the form of a handbook's, in all that a comparison reads of it."""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import Any

from sheetgen.errata.comparing import flat
from sheetgen.errata.model import AXES

LARGEST = 1e300  # beyond it the square of a number is none
_Check = Callable[[Any], bool]


def is_handbook(data: Any) -> bool:
    """Whether the parts that a comparison needs are there, and these and the others have their form."""
    return _has(data, {"materials": _all(_is_material)}, {
        "quantities": _each(lambda one: _has(one, {}, {"title": _is_text, "fingerprint": _is_text})),
        "assemblies": _each(lambda one: True),
        "conditions": _are_conditions,
    })  # fmt: skip


def _are_conditions(conditions: Any) -> bool:
    bounds = _any(_is_number, _all(_any(_is_number, lambda bound: bound is None)))
    return _has(conditions, {}, {
        "reference_temperature": _is_number,
        "temperatures": _all(_is_number),
        "thresholds": _each(bounds),
    })  # fmt: skip


def _is_material(material: Any) -> bool:
    needed = {"slug": _is_text, "name": _is_text, "formula": _is_text}
    needed |= {"inputs": _each(_is_input), "quantities": _are_quantities}
    return _has(material, needed, {"specimens": _all(_is_specimen), "assumptions": _all(_is_check)})


def _is_input(stated: Any) -> bool:
    further = {"standard_uncertainty": _is_number, "temperature": _is_number, "sources": _all(_is_text)}
    return _has(stated, {"value": _is_number, "unit": _is_text}, further)


def _is_specimen(specimen: Any) -> bool:
    return _has(specimen, {"name": _is_text, "quantities": _are_quantities}, {})


def _is_check(check: Any) -> bool:
    return _has(
        check, {"id": _is_text, "standing": _is_text}, {**dict.fromkeys(AXES, _is_number), "specimen": _is_text}
    )


def _are_quantities(quantities: Any) -> bool:
    return _each(_any(_is_entry, _all(_is_entry)))(quantities)


def _is_entry(entry: Any) -> bool:
    numbers = dict.fromkeys((*AXES, "standard_uncertainty"), _is_number)
    further = {"standing": _is_text, "depends_on": _all(_is_text), "budget": _each(_is_number)}
    return _has(entry, {"value": _is_value, "unit": _is_text}, numbers | further)


def _is_value(value: Any) -> bool:
    shell = {"distance": _is_number, "count": _is_number}
    parts = _any(_is_number, lambda part: _has(part, shell, {}) and part.keys() == shell.keys())
    return _any(_is_number, _all(parts))(value) and all(map(_is_number, flat(value)))


def _is_text(value: Any) -> bool:
    return isinstance(value, str)


def _is_number(value: Any) -> bool:
    """A finite number; true and false are none."""
    if isinstance(value, bool) or not isinstance(value, (int, float)):
        return False
    return abs(value) <= LARGEST and not math.isnan(value)


# --- checks of checks ------------------------------------------------------------------------------------------------


def _has(node: Any, needed: dict[str, _Check], further: dict[str, _Check]) -> bool:
    """Whether it is a mapping with all that is needed, and what else it has of these has its form."""
    if not isinstance(node, dict) or not needed.keys() <= node.keys():
        return False
    return all(check(node[key]) for key, check in (needed | further).items() if key in node)


def _all(check: _Check) -> _Check:
    return lambda node: isinstance(node, list) and all(map(check, node))


def _each(check: _Check) -> _Check:
    return lambda node: isinstance(node, dict) and all(map(check, node.values()))


def _any(*checks: _Check) -> _Check:
    return lambda node: any(check(node) for check in checks)
