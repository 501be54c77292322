"""The plain answer: which numbers to use, which to scale and by what, which not to use."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

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
        bound = f"{check.indicator} = {check.value:.2g}, bound {check.bound:g}"
        return f"{check.title[0].lower()}{check.title[1:]} is not given here ({bound})"
    confrontation = one.confrontation
    ratio = f"measured/model = {_ratio(confrontation)}"
    if one.standing == AGREES:
        return f"{ratio}: agrees within the stated bounds"
    if one.standing == UNDECIDED:
        return f"{ratio}: the uncertainty is too large to tell"
    return f"{ratio}: {confrontation.meaning}"


def _ratio(confrontation: Confrontation) -> str:
    ratio, uncertainty = confrontation.ratio, confrontation.ratio_uncertainty
    sign = "−" if ratio < 0 else ""
    text = f"{sign}{abs(ratio):.3g}"
    return f"{text} ± {uncertainty:.1g}" if uncertainty else text
