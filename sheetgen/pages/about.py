"""The pages about the handbook itself: how to read it, and what in it waits for someone's eyes."""

from __future__ import annotations

import datetime
from dataclasses import dataclass
from typing import Any

import sheetgen
from sheetgen.sheet import CONSTANTS
from sheetgen.standing import thresholds
from sheetgen.standing.strict import months_between

from . import citations, front, numbers, words
from .reference import standing_rules


@dataclass(frozen=True)
class Waiting:
    """One material of the review page: why it waits ("" if it does not), and its values without a source in print."""

    slug: str
    name: str
    why: str
    recalled: tuple[tuple[str, Any, tuple[citations.Citation, ...]], ...]
    unsourced: tuple[tuple[str, Any], ...]
    resting: int


def about(handbook: Any) -> dict[str, Any]:
    """The names that the template of about.html uses."""
    imprint = handbook.imprint
    reviewed = [sheet for sheet in handbook.sheets if not front.is_draft(sheet)]
    return {
        "materials": len(handbook.sheets),
        "reviewed": len(reviewed),
        "recalled": sum(value.recalled for sheet in handbook.sheets for value in sheet.record.inputs.values()),
        "standings": standing_rules(thresholds(imprint)),
        "constants": CONSTANTS,
        "version": sheetgen.__version__,
        "citation": front.citation(handbook),
        "example": numbers.printed(7.0315, 0.0012).html,
        "contact_link": _contact(imprint.contact),
    }


def _contact(text: str) -> str:
    """Where the contact of the imprint leads."""
    return "" if not text else text if text.startswith(("http://", "https://")) else f"mailto:{text}"


def review(handbook: Any) -> dict[str, Any]:
    """The names that the template of review.html uses."""
    found = [_waiting(sheet, handbook) for sheet in handbook.sheets]
    return {
        "reviews": [one for one in found if one.why],
        "from_memory": [one for one in found if one.recalled],
        "unsourced": [one for one in found if one.unsourced],
        "interval": handbook.imprint.review_interval,
        "materials": len(found),
    }


def _waiting(sheet: Any, handbook: Any) -> Waiting:
    record = sheet.record
    names = tuple(specimen.name for specimen in record.specimens)
    # A specimen is the group's own: its record is the source.
    inputs = {id: value for id, value in record.inputs.items() if not id.startswith("specimens.")}
    return Waiting(
        slug=record.slug,
        name=record.name,
        why=_why(record.review, handbook.imprint),
        recalled=tuple(
            (words.input_words(id, names), _written(value), citations.citations(value.sources, handbook.sources))
            for id, value in inputs.items()
            if value.recalled
        ),
        unsourced=tuple(
            (words.input_words(id, names), _written(value))
            for id, value in inputs.items()
            if not value.recalled and not value.sources
        ),
        resting=len(sheet.recalled),
    )


def _why(review: Any, imprint: Any) -> str:
    """Why a record waits for a review; "" where it does not. Without a date of the edition no review is too old."""
    if review is None:
        return "nobody has reviewed it"
    if review.state != "reviewed":
        return f"a draft{f' by {review.by}' if review.by else ''}"
    if not review.date:
        return "its review has no date"
    if imprint.review_interval is None or not imprint.date:
        return ""
    age = months_between(datetime.date.fromisoformat(review.date), datetime.date.fromisoformat(imprint.date))
    if age <= imprint.review_interval:
        return ""
    return f"its review of {words.date(review.date)} is {age} months old"


def _written(value: Any) -> Any:
    return numbers.with_unit(numbers.stated(value.value, value.standard_uncertainty), value.unit)
