"""The pages at the back of the handbook: methods, limits of use, sources."""

from __future__ import annotations

from typing import Any

from markupsafe import Markup

from sheetgen.standing import thresholds

from . import citations, numbers


def methods(handbook: Any) -> dict[str, Any]:
    """Every definition by section, and the assumptions with their bounds as this handbook sets them."""
    registry = handbook.registry
    ids = dict.fromkeys([*registry.published(), *registry.published("specimen")])
    sections: dict[str, list[tuple[str, Any]]] = {}
    for id in ids:
        definitions = registry.definitions_of(id)
        sections.setdefault(definitions[0].section, []).append((id, definitions))
    covered = {a.id: [registry.definitions_of(q)[0] for q in registry.resting_on(a.id)] for a in registry.assumptions}
    return {
        "sections": sections,
        "titles": {assumption.id: assumption.title for assumption in registry.assumptions},
        "standings": standing_rules(thresholds(handbook.imprint)),
        "assumptions": [(a, _bounds(a, handbook), covered[a.id]) for a in _each_once(registry)],
    }


def standing_rules(bounds: Any) -> list[tuple[str, str]]:
    """The standings in the order in which they are tried, each with its rule at the bounds of this handbook."""
    off, wide, factor = (numbers.printed(bound).text for bound in (bounds.agrees, bounds.undecided, bounds.adjust))
    least = numbers.printed(float(f"{1 / bounds.adjust:.3g}")).text
    return [
        ("outside", "an assumption that the number rests on is broken"),
        ("unchecked", "nothing measured is at hand to hold the number against"),
        ("agrees", f"the ratio lies within {off} of 1, or within twice its uncertainty where that is at most {wide}"),
        ("undecided", "the ratio lies within twice its uncertainty of 1, but that uncertainty is larger"),
        ("adjust", f"the ratio lies between {least} and {factor}: usable when multiplied by it"),
        ("fails", "all else: the ratio lies further off, or has the other sign"),
    ]


def _each_once(registry: Any) -> list[Any]:
    """The assumptions, each id once (one may be declared for materials and again for specimens)."""
    return list({assumption.id: assumption for assumption in reversed(registry.assumptions)}.values())[::-1]


def _bounds(assumption: Any, handbook: Any) -> tuple[Markup | None, Markup | None]:
    sign = "<" if assumption.below else ">"
    pair = assumption.bounds(handbook.imprint.thresholds)
    shown = [None if bound is None else Markup.escape(f"{sign} ") + numbers.printed(bound).html for bound in pair]
    until = assumption.strained_until
    if until is not None and shown[0] is not None:
        shown[0] = Markup("between ") + numbers.printed(pair[0]).html + " and " + numbers.printed(until).html
    return shown[0], shown[1]


USES = ("use", "scale", "avoid", "undecided", "unchecked")


def limits(handbook: Any) -> dict[str, Any]:
    """For each quantity in which materials it may be used; those never held against anything are named apart."""
    rows, silent = [], []
    for id in handbook.registry.published():
        uses: dict[str, list] = {use: [] for use in USES}
        for sheet in handbook.sheets:
            if sheet.entries(id):
                use, line = _use(sheet, id)
                uses[use].append((sheet.record, line))
        if any(uses[use] for use in USES[:-1]):
            rows.append((handbook.registry.definitions_of(id)[0], uses))
        elif uses["unchecked"]:
            silent.append(handbook.registry.definitions_of(id)[0])
    return {"rows": rows, "silent": silent}


def _use(sheet: Any, id: str) -> tuple[str, dict[str, Any]]:
    """How a number of a sheet may be used, by its plain answer, else by the standing of its first entry."""
    for use in USES[:3]:
        for line in getattr(sheet.answer, use):
            if line.quantity == id:
                factor = None
                if line.factor is not None:
                    factor = numbers.printed(line.factor, line.factor_uncertainty).html
                return use, {"reason": line.reason, "factor": factor}
    standings = {entry["standing"] for entry in sheet.entries(id)}
    return ("undecided" if "undecided" in standings else "unchecked"), {"reason": "", "factor": None}


def sources(handbook: Any) -> dict[str, Any]:
    """Every source with the values that it supplies; unused ones are listed too."""
    supplied = citations.supplied_by(handbook.sheets)
    used = _methods_by_source(handbook)
    listed = [
        {
            "source": source,
            "link": citations.safe_link(source.link),
            "supplied": supplied.get(key, []),
            "methods": used.get(key, []),
        }
        for key, source in citations.all_sources(handbook).items()
    ]
    return {"sources": sorted(listed, key=lambda item: citations.order(item["source"]))}


def _methods_by_source(handbook: Any) -> dict[str, list[Any]]:
    """Source key → the quantities whose formulas are taken from it."""
    known = citations.all_sources(handbook)
    used: dict[str, dict[str, Any]] = {}
    for definition in handbook.registry.all:
        if definition.published:
            for key in citations.keys_in(definition.source, known):
                used.setdefault(key, {}).setdefault(definition.id, definition)
    return {key: list(found.values()) for key, found in used.items()}
