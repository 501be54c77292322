"""The plain answer: which numbers to use, which to scale and by what, which not to use."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import floor, log10

from sheetgen.quantities import Definition
from sheetgen.standing.confrontation import Confrontation
from sheetgen.standing.grading import ADJUST, AGREES, FAILS, OUTSIDE, UNDECIDED
from sheetgen.standing.limits import AssumptionCheck


@dataclass(frozen=True)
class AnswerLine:
    """One quantity with one reason; `factor` (and its uncertainty) is what to multiply the number by.

    `where` names the entries of a list that the line is about ("77 K"), and is empty for a single number.
    """

    quantity: str
    title: str
    symbol: str
    reason: str
    where: str = ""
    factor: float | None = None
    factor_uncertainty: float | None = None
    standing: str = ""


@dataclass(frozen=True)
class PlainAnswer:
    """Quantities by what a reader should do with them."""

    use: tuple[AnswerLine, ...] = ()
    scale: tuple[AnswerLine, ...] = ()
    avoid: tuple[AnswerLine, ...] = ()
    undecided: tuple[AnswerLine, ...] = ()


@dataclass(frozen=True)
class Judged:
    """Entries of a quantity that share a standing; `where` names them, the rest belongs to the first of them."""

    definition: Definition
    standing: str
    where: str
    confrontation: Confrontation | None
    broken: AssumptionCheck | None


def plain_answer(judged: Sequence[Judged]) -> PlainAnswer:
    """Sort quantities into lists; those that nothing was measured for are left to the tables of the sheet."""
    groups: dict[str, list[AnswerLine]] = {AGREES: [], ADJUST: [], FAILS: [], UNDECIDED: []}
    for one in judged:
        group = FAILS if one.standing == OUTSIDE else one.standing
        if group in groups:
            groups[group].append(_line(one))
    return PlainAnswer(*(tuple(groups[group]) for group in (AGREES, ADJUST, FAILS, UNDECIDED)))


def _line(one: Judged) -> AnswerLine:
    factor = uncertainty = None
    if one.standing == ADJUST:
        factor, uncertainty = one.confrontation.ratio, one.confrontation.ratio_uncertainty
    definition = one.definition
    return AnswerLine(
        quantity=definition.id,
        title=definition.title,
        symbol=definition.symbol,
        reason=_reason(one),
        where=one.where,
        factor=factor,
        factor_uncertainty=uncertainty,
        standing=one.standing,
    )


def _reason(one: Judged) -> str:
    if one.broken is not None:
        check = one.broken
        side = "below" if check.value < check.bound else "above"
        found = f"{check.indicator} = {check.value:.2g}, {side} {check.bound:g}"
        return f"rests on “{check.title.lower()}”, broken here: {found}"
    confrontation = one.confrontation
    if one.standing == AGREES:
        return f"measured {_apart(confrontation.ratio)} the model"
    ratio = f"measured/model = {_ratio(confrontation)}"
    if one.standing == UNDECIDED:
        return f"{ratio}: the uncertainty is too large to tell"
    return f"{ratio}: {confrontation.meaning}"


def _apart(ratio: float) -> str:
    """How far a measurement lies from the model: "4.3 % below", "within 0.1 % of"."""
    apart = abs(ratio - 1) * 100
    if apart < 0.1:
        return "within 0.1 % of"
    return f"{apart:.2g} % {'above' if ratio > 1 else 'below'}"


def _ratio(confrontation: Confrontation) -> str:
    """The ratio as a reader in a hurry wants it: three digits, and an uncertainty only where it shows in them."""
    ratio, uncertainty = confrontation.ratio, confrontation.ratio_uncertainty or 0.0
    digits = max(2 - floor(log10(abs(ratio))), 0)
    text = f"{ratio:.{digits}f}".replace("-", "−")
    shown = f"{uncertainty:.{digits}f}"
    return text if float(shown) == 0 else f"{text} ± {shown}"
