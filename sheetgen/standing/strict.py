"""What a strict proof holds against a handbook: values without a source or from memory, and reviews too old."""

from __future__ import annotations

import datetime
from collections.abc import Iterator

from sheetgen.faults import Fault
from sheetgen.records import Imprint, Record


def strict_faults(record: Record, imprint: Imprint, today: datetime.date) -> Iterator[Fault]:
    """The faults of one record; `today` counts where the imprint has no date of its own."""
    yield from _origins(record)
    yield from _review(record, imprint, today)


def _origins(record: Record) -> Iterator[Fault]:
    for id, value in record.inputs.items():
        if id.startswith("specimens."):
            continue  # the group's own: the record itself is the source
        if value.recalled:
            yield Fault(value.place, f"{id}: {value.text} is from memory. See it in print, then drop 'recalled'.")
        elif not value.sources:
            yield Fault(value.place, f"{id}: {value.text} has no source. Add 'from' with a key of sources.bib.")


def _review(record: Record, imprint: Imprint, today: datetime.date) -> Iterator[Fault]:
    review = record.review
    if review is None or review.state != "reviewed":
        yield Fault(record.place, "the record is not reviewed. Check it, then add 'review' with state, by and date.")
        return
    if not review.date:
        yield Fault(record.place, "the review has no date. Add 'date' with the day of the review.")
    elif imprint.review_interval is not None:
        reference = datetime.date.fromisoformat(imprint.date) if imprint.date else today
        reviewed = datetime.date.fromisoformat(review.date)
        if (months := months_between(reviewed, reference)) > imprint.review_interval:
            yield Fault(
                record.place,
                f"the review of {review.date} is {months} months old, the imprint allows {imprint.review_interval}. "
                "Review the record again and date it.",
            )


def months_between(start: datetime.date, end: datetime.date) -> int:
    """Whole months from one day to another."""
    return (end.year - start.year) * 12 + end.month - start.month - (end.day < start.day)
