"""Why numbers moved, where only data files are at hand that their records cannot be put together from.

Two conclusions can be drawn from such data, and both are said to be inferred. Where one input alone changed among
all that a number rests on, the change is its doing. Where several did, the budget of the old edition gives the size
of each sensitivity, |∂f/∂x| = √share · u(f)/u(x); the sign is the one with which the parts come nearest to the whole.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from itertools import product
from math import sqrt
from typing import Any

from sheetgen.errata.comparing import entries_of
from sheetgen.errata.model import Point, Share

MOST = 10  # causes whose signs are tried: 2¹⁰ combinations


def inferred(
    point: Point, old: Mapping[str, Any], new: Mapping[str, Any], change: float | None, definitions: list[str]
) -> tuple[tuple[Share, ...], float | None]:
    """The causes of a change that the data of two editions point to, and what their shares leave over."""
    changed = [id for id in _rests_on(point, old, new) if old["inputs"].get(id) != new["inputs"].get(id)]
    causes = [*changed, *(f"definition of {id}" for id in definitions)]
    if len(causes) == 1 or change is None or not causes:
        only = change if len(causes) == 1 else None
        return tuple(Share(cause, only) for cause in causes), None
    sizes = {id: size for id in changed if (size := _size(point, id, old, new)) is not None}
    if definitions or len(sizes) < len(changed) or len(sizes) > MOST:
        return tuple(Share(cause) for cause in causes), None
    signs = min(
        product((1, -1), repeat=len(sizes)),
        key=lambda choice: abs(change - sum(s * size for s, size in zip(choice, sizes.values(), strict=True))),
    )
    shares = tuple(Share(id, sign * size) for sign, (id, size) in zip(signs, sizes.items(), strict=True))
    return shares, change - sum(share.change for share in shares)


def _size(point: Point, id: str, old: Mapping[str, Any], new: Mapping[str, Any]) -> float | None:
    """The size of what an input does to a number, from the old edition's budget; None where it does not say."""
    entry = entries_of(old).get(point, {})
    share, spread = entry.get("budget", {}).get(id), entry.get("standard_uncertainty")
    one, other = old["inputs"].get(id), new["inputs"].get(id)
    if share is None or not spread or one is None or other is None or one["unit"] != other["unit"]:
        return None
    if not one.get("standard_uncertainty"):
        return None
    return sqrt(share) * spread / one["standard_uncertainty"] * abs(other["value"] - one["value"])


def _rests_on(point: Point, old: Mapping[str, Any], new: Mapping[str, Any]) -> Iterator[str]:
    """Ids of all inputs that a number rests on in either edition, near or far, each once."""
    found: dict[str, None] = {}
    for material in (old, new):
        entries = entries_of(material)
        waiting, seen = [point], set()
        while waiting:
            here = waiting.pop()
            if here in seen:
                continue
            seen.add(here)
            entry = _near(here, entries)
            for name in entry.get("depends_on", ()):
                if name in material["inputs"]:
                    found[name] = None
                else:
                    waiting.append(Point(name, None, here.axis, here.at, here.repeat))
            if entry and not entry.get("depends_on"):  # it is read off the whole structure, which has no id of its own
                found |= dict.fromkeys(id for id in material["inputs"] if id.startswith("structure."))
            found |= dict.fromkeys(id for id in entry.get("budget", ()) if id in material["inputs"])
    return iter(found)


def _near(point: Point, entries: Mapping[Point, Any]) -> Mapping[str, Any]:
    """The entry at the same place of an axis, else the only or first one of the quantity."""
    if point in entries:
        return entries[point]
    return next((entry for at, entry in entries.items() if at.quantity == point.quantity and at.specimen is None), {})
