"""How far each number may be trusted: measurement, assumptions, and the plain answer that follows."""

from sheetgen.standing.answer import AnswerLine, PlainAnswer, plain_answer
from sheetgen.standing.confrontation import Confrontation, confront
from sheetgen.standing.grading import Thresholds, thresholds
from sheetgen.standing.limits import AssumptionCheck, Limits

__all__ = [
    "AnswerLine", "AssumptionCheck", "Confrontation", "Limits", "PlainAnswer", "Thresholds", "confront",
    "plain_answer", "thresholds",
]  # fmt: skip
