"""Why numbers moved: every difference is put into the old record alone, and the record is derived once more.

What one difference does alone is its share. What is left of the whole change when the shares are added is what the
differences do together: their interaction. What the old record gives today, against what the old edition states, is
the share of the program: its definitions, its constants, its version.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from contextlib import suppress
from dataclasses import replace
from typing import Any

from sheetgen.errata.changes import Alone, changes, input_changes
from sheetgen.errata.editions import UNFIT, Edition
from sheetgen.errata.model import Errata, MaterialErrata
from sheetgen.errata.program import program_errata
from sheetgen.errata.telling import Case, Derived, Told, Words
from sheetgen.handbook import derive
from sheetgen.quantities import Registry, registry
from sheetgen.records import Imprint, Record

CONDITIONS = "the imprint"


def errata(old: Edition, new: Edition) -> Errata:
    """What changed from one edition to the other, with every cause derived where the records can be had."""
    both = [slug for slug in new.materials if slug in old.materials]
    comparison = _Comparison(old, new)
    cases = [Case(slug, old.materials[slug], new.materials[slug]) for slug in both if comparison.differs(slug)]
    derived = comparison.derived(cases)
    found = (comparison.material(case, derived.get(case.slug)) for case in cases)
    return Errata(
        title=str(new.data.get("title", "")),
        old=old.edition,
        new=new.edition,
        program=comparison.program,
        new_materials=_names(new, old),
        withdrawn=_names(old, new),
        materials=tuple(one for one in found if one.inputs or one.moved or one.standings or one.specimens),
    )


def _names(here: Edition, there: Edition) -> dict[str, str]:
    return {slug: data["name"] for slug, data in here.materials.items() if slug not in there.materials}


class _Comparison:
    """Two editions, and what holds for all their materials."""

    def __init__(self, old: Edition, new: Edition):
        self.old, self.new = old, new
        # Data that do not say under which conditions they were derived are taken to have those of the other edition.
        self.old_imprint = old.imprint if "conditions" in old.data else new.imprint
        self.new_imprint = new.imprint if "conditions" in new.data else old.imprint
        at_hand = next((edition.handbook for edition in (new, old) if edition.handbook), None)
        self.registry: Registry = at_hand.registry if at_hand else registry()
        self.program = program_errata(old, new, (self.old_imprint, self.new_imprint))
        all_ids = {*self.registry.published(), *self.registry.published("specimen")}
        by_resistivity = sorted(id for id in all_ids if self.registry[id].listed_by == "resistivity")
        self.words = Words(self._title, by_resistivity, self.program.definitions)

    def differs(self, slug: str) -> bool:
        """Whether the data of a material differ in anything but the name of the edition."""
        kept = ("name", "formula", "inputs", "quantities", "assumptions", "specimens")
        one, other = self.old.materials[slug], self.new.materials[slug]
        return any(one.get(key) != other.get(key) for key in kept)

    # --- deriving ----------------------------------------------------------------------------------------------------

    def derived(self, cases: Sequence[Case]) -> dict[str, Derived]:
        """Slug → what was derived, for the materials whose records can be had on both sides and can be derived."""
        try:
            return self._derived(cases)
        except UNFIT:
            if self.old.handbook and self.new.handbook:
                raise
        found: dict[str, Derived] = {}
        for case in cases:  # the data of one of them do not fit together: the others need not suffer from it
            with suppress(*UNFIT):
                found |= self._derived([case])
        return found

    def _derived(self, cases: Sequence[Case]) -> dict[str, Derived]:
        causes: dict[str, list[Alone]] = {}
        under_old: list[Record] = []
        under_new: list[Record] = []
        for case in cases:
            old, new = self.old.record(case.slug), self.new.record(case.slug)
            if old is None or new is None:
                continue
            causes[case.slug] = changes(old, new)
            under_old.append(_marked(old, "old"))
            under_old += [_marked(one.record, str(n), case.slug) for n, one in enumerate(causes[case.slug])]
            under_new += [_marked(new, "new"), *([_marked(old, "conditions")] if self._conditions_differ else [])]
        data = self._derive(under_old, self.old_imprint) | self._derive(under_new, self.new_imprint)
        return {slug: self._collected(slug, alone, data) for slug, alone in causes.items()}

    @property
    def _conditions_differ(self) -> bool:
        return bool(self.program.conditions)

    def _derive(self, records: Sequence[Record], imprint: Imprint) -> dict[str, Mapping[str, Any]]:
        return {sheet.record.slug: sheet.data for sheet in derive(records, imprint, self.registry)}

    def _collected(self, slug: str, alone: list[Alone], data: Mapping[str, Any]) -> Derived:
        by_cause = {one.cause: data[f"{slug}~{n}"] for n, one in enumerate(alone)}
        if self._conditions_differ:
            by_cause[CONDITIONS] = data[f"{slug}~conditions"]
        return Derived(data[f"{slug}~old"], data[f"{slug}~new"], by_cause)

    # --- telling -----------------------------------------------------------------------------------------------------

    def material(self, case: Case, derived: Derived | None) -> MaterialErrata:
        """Everything that changed for one material."""
        inputs = tuple(input_changes(case.old, case.new))
        names = [{specimen["name"] for specimen in data.get("specimens", ())} for data in (case.old, case.new)]
        specimens = dict.fromkeys(sorted(names[1] - names[0]), "new")
        specimens |= dict.fromkeys(sorted(names[0] - names[1]), "withdrawn")
        told = Told(self.words, case, derived)
        return MaterialErrata(
            slug=case.slug,
            name=case.new["name"],
            formula=case.new["formula"],
            inputs=inputs,
            moved=tuple(moved for moved in told.numbers() if moved.point.specimen not in specimens),
            standings=tuple(change for change in told.standings() if change.point.specimen not in specimens),
            specimens=specimens,
        )

    def _title(self, id: str) -> str:
        """What a quantity is called, in this program or in the data of either edition."""
        for data in (self.new.data, self.old.data):
            if title := data.get("quantities", {}).get(id, {}).get("title"):
                return title
        return id.replace("_", " ")


def _marked(record: Record, mark: str, slug: str = "") -> Record:
    return replace(record, slug=f"{slug or record.slug}~{mark}")
