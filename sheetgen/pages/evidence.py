"""What a sheet's numbers are judged by: measurements beside the model, assumptions beside their indicators."""

from __future__ import annotations

from typing import Any

from markupsafe import Markup

from . import citations, entries, numbers, words


class Evidence:
    """The confrontations and checks of one sheet, ready for its template."""

    def __init__(self, sheet: Any, handbook: Any, definitions: dict[str, Any], preference: entries.Preference):
        self.sheet, self.handbook, self.definitions, self.preference = sheet, handbook, definitions, preference

    def confrontations(self) -> list[dict[str, Any]]:
        """Model against measurement by quantity; what a deviation means and the sources stand once under their rows."""
        groups: dict[str, list[Any]] = {}
        for found in self.sheet.confrontations:
            groups.setdefault(found.quantity, []).append(found)
        return [
            {
                "first": found[0],
                "rows": [self.comparison(one) for one in found],
                "remarks": list(
                    dict.fromkeys(one.meaning for one in found if one.standing != "agrees" and one.meaning)
                ),
                "recalled": any(one.recalled for one in found),
                "sources": citations.citations(
                    dict.fromkeys(k for one in found for k in one.sources), self.handbook.sources
                ),
            }
            for found in groups.values()
        ]

    def comparison(self, found: Any) -> dict[str, Any]:
        """One measurement beside the model, each number printed; a reason that only names the ratio is left out."""
        return {
            "at": entries.where(found),
            "model": self.compared(found, found.model, found.model_uncertainty),
            "measured": self.compared(found, found.measured, found.measured_uncertainty),
            "unit": numbers.unit(self.unit(found)),
            "ratio": None if found.ratio is None else _ratio(found.ratio, found.ratio_uncertainty),
            "standing": found.standing,
            "reason": found.reason if found.reason != found.ratio_name else "",
        }

    def draws(self) -> dict[str, int]:
        """How the check of the uncertainties by draws came out: word → numbers; empty where no draws were made."""
        found = [entry.get("first_order") for id in self.definitions for entry in self.sheet.entries(id)]
        return {word: found.count(word) for word in ("valid", "not valid", "too few draws") if word in found}

    def unit(self, found: Any) -> str:
        """The unit of both sides: the preferred one, unless what is compared is another quantity (κ is held as L)."""
        own = found.unit == self.handbook.registry[found.quantity].unit
        return self.preference.of(found.quantity, found.unit) if own else found.unit

    def compared(self, found: Any, value: float | None, uncertainty: float | None) -> Markup | None:
        """One side of a confrontation, from SI to the unit on the page."""
        if value is None:
            return None
        factor = numbers.si_factor(self.unit(found))
        return numbers.printed(value / factor, uncertainty / factor if uncertainty else None).html

    def check_groups(self) -> list[dict[str, Any]]:
        """The assumptions with all their evaluations; the standing of a group is its worst."""
        groups: dict[tuple[str, str], list[Any]] = {}
        for check in self.sheet.checks:
            groups.setdefault((check.id, check.indicator), []).append(check)
        declared = {
            (assumption.id, assumption.indicator): assumption for assumption in self.handbook.registry.assumptions
        }
        return [
            {
                "id": id,
                "first": checks[0],
                "worst": self.evaluation(_worst(checks, declared.get((id, indicator)))),
                "formula": declared[id, indicator].formula if (id, indicator) in declared else "",
                "standing": max((check.standing for check in checks), key=words.CONDITIONS.index),
                "evaluations": _each_once([self.evaluation(check) for check in checks]),
                "covers": [
                    self.definitions[q] for q in checks[0].covers if q in self.definitions and self.sheet.entries(q)
                ],
            }
            for (id, indicator), checks in groups.items()
        ]

    def evaluation(self, check: Any) -> dict[str, Any]:
        """One evaluation of an assumption, printed: three digits are enough to see how it stands."""
        own = self.definitions.get(check.quantity)
        return {
            # A photon energy that is a number of the sheet is named, any other is stated.
            "at": words.lower_first(own.title) if own else entries.where({check.axis: check.at}) if check.axis else "",
            "value": _three_digits(check.value),
            "bound": None if check.bound is None else numbers.printed(check.bound).html,
            "standing": check.standing,
        }


def _worst(checks: list[Any], assumption: Any) -> Any:
    """The check of the worst standing whose indicator lies furthest to the side that the bound shuts out."""
    side = -1 if assumption is not None and assumption.below else 1
    return max(checks, key=lambda check: (words.CONDITIONS.index(check.standing), side * check.value))


def _each_once(evaluations: list[dict[str, Any]]) -> list[dict[str, Any]]:
    """Evaluations without repeats, as where a measurement was taken at a tabulated photon energy."""
    return list({tuple(one.values()): one for one in evaluations}.values())


def _ratio(ratio: float, uncertainty: float | None) -> Markup:
    return numbers.printed(ratio, uncertainty).html if uncertainty else _three_digits(ratio)


def _three_digits(value: float) -> Markup:
    return numbers.printed(float(f"{value:.3g}")).html
