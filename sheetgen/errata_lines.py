"""The changes between two editions as lines for a terminal."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator

from sheetgen.errata import Errata, MaterialErrata, Moved
from sheetgen.pages.changes import SPREAD, input_change_words, number_words, size_words, why_words


def lines(errata: Errata) -> Iterator[str]:
    """The edition, then each material that changed, then how many numbers moved."""
    yield f"{errata.title}: edition {errata.old} → {errata.new}"
    yield from _edition(errata)
    for material in errata.materials:
        yield ""
        yield f"{material.name} ({material.slug})"
        yield from _material(material)
    beyond = sum(moved.beyond == "uncertainty" for material in errata.materials for moved in material.moved)
    yield ""
    yield (
        f"{_count(errata.count, 'number')} moved in {_count(len(errata.materials), 'material')}; "
        f"{beyond} by more than the uncertainty of edition {errata.old}."
    )


def _edition(errata: Errata) -> Iterator[str]:
    program = errata.program
    for head, pair in (("program", program.version), ("constants", program.constants)):
        if pair[0] != pair[1]:
            yield _line(head, f"{pair[0] or 'not stated'} → {pair[1] or 'not stated'}")
    for id, what in program.definitions.items():
        yield _line("definition", f"{id} is {what}" if what != "changed" else f"{id} has changed")
    for key, (old, new) in program.conditions.items():
        yield _line("imprint", f"{key.replace('_', ' ')} {old} → {new}")
    for slug, name in errata.new_materials.items():
        yield _line("new", f"{name} ({slug})")
    for slug, name in errata.withdrawn.items():
        yield _line("withdrawn", f"{name} ({slug})")


def _material(material: MaterialErrata) -> Iterator[str]:
    for change in material.inputs:
        yield _line("input", f"{change.cause}: {input_change_words(change)}")
    for name, what in material.specimens.items():
        yield _line("specimen", f"{name} is {what}")
    for moved in (one for one in material.moved if one.beyond != SPREAD):
        where = f" {moved.point.place}" if moved.point.place else ""
        values = f"{number_words(moved.old, moved.unit)} → {number_words(moved.new, moved.unit)}"
        size = f", {size_words(moved)}" if size_words(moved) else ""
        yield _line("number", f"{moved.point.quantity}{where}: {values}{size}; because of {why_words(moved, str)}")
    yield from _spreads([one for one in material.moved if one.beyond == SPREAD])
    for change in material.standings:
        where = f" {change.point.place}" if change.point.place else ""
        why = ", ".join(change.because) or "several changes together"
        yield _line("standing", f"{change.point.quantity}{where}: {change.old} → {change.new}; because of {why}")


def _spreads(moved: list[Moved]) -> Iterator[str]:
    """One line for all numbers whose uncertainty alone is another one: a list of many entries has many of them."""
    if moved:
        entries = Counter(one.point.quantity for one in moved)
        named = ", ".join(f"{id} ({count} entries)" if count > 1 else id for id, count in entries.items())
        causes = dict.fromkeys(share.cause for one in moved for share in one.because)
        yield _line("u alone", f"{named}; because of {', '.join(causes) or 'several changes together'}")


def _line(head: str, text: str) -> str:
    return f"  {head:<10} {text}"


def _count(number: int, word: str) -> str:
    return f"{number} {word}{'' if number == 1 else 's'}"
