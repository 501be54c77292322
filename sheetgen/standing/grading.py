"""The rules that turn a ratio or an indicator into a word, with the thresholds of the imprint."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from sheetgen.faults import FaultLog, did_you_mean
from sheetgen.quantities import Assumption
from sheetgen.records import Imprint

OUTSIDE, UNCHECKED, AGREES, UNDECIDED, ADJUST, FAILS = (
    "outside", "unchecked", "agrees", "undecided", "adjust", "fails",
)  # fmt: skip
HOLDS, STRAINED, BROKEN = "holds", "strained", "broken"
ROUNDING = 1e-12  # so that a ratio printed as 1.10 lies within 0.10 of 1
COVERAGE = 2  # standard uncertainties within which a ratio may still be 1


@dataclass(frozen=True)
class Thresholds:
    """Bounds on the ratio r = measured / model.

    `agrees` is how far r may lie from 1; `undecided` the largest standard uncertainty of r at which agreement
    within two of them still counts; `adjust` the largest factor that a user may scale by.
    """

    agrees: float = 0.10
    undecided: float = 0.25
    adjust: float = 2.0

    def grade(self, ratio: float, uncertainty: float) -> str:
        """The standing of a ratio whose assumptions hold."""
        off = abs(ratio - 1) - ROUNDING
        within = off <= COVERAGE * uncertainty
        if off <= self.agrees or (within and uncertainty <= self.undecided):
            return AGREES
        if within:
            return UNDECIDED
        return ADJUST if 1 / self.adjust <= ratio <= self.adjust else FAILS


def thresholds(imprint: Imprint) -> Thresholds:
    """The thresholds of an imprint; what it leaves out keeps its default."""
    names = ("agrees", "undecided", "adjust")
    return Thresholds(**{name: float(imprint.thresholds[name]) for name in names if name in imprint.thresholds})


def check_thresholds(imprint: Imprint, assumptions: Iterable[Assumption], log: FaultLog) -> None:
    """Note a fault for each threshold in the imprint that names nothing."""
    known = {"agrees", "undecided", "adjust"} | {assumption.id for assumption in assumptions}
    for name in imprint.thresholds:
        if name not in known:
            log.fault(
                imprint.place,
                f"threshold '{name}' names no assumption; expected one of {', '.join(sorted(known))}."
                f"{did_you_mean(name, known)}",
            )


def grade_indicator(assumption: Assumption, value: float, stated: dict) -> tuple[str, float | None]:
    """(standing, bound) of an indicator: the bound is the last one passed, else the first there is."""
    strained, broken = assumption.bounds(stated)
    if _passed(assumption, value, broken):
        return BROKEN, broken
    until = float("inf") if assumption.strained_until is None else assumption.strained_until
    if _passed(assumption, value, strained) and value <= until:
        return STRAINED, strained
    return HOLDS, broken if strained is None else strained


def _passed(assumption: Assumption, value: float, bound: float | None) -> bool:
    if bound is None:
        return False
    return value < bound if assumption.below else value > bound
