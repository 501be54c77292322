"""Why numbers moved: every difference is put into the old record alone, and the record is derived once more.

What one difference does alone is its share. What is left of the whole change when the shares are added is what the
differences do together: their interaction. What the old record gives today, against what the old edition states, is
the share of the program: its definitions, its constants, its version.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from sheetgen.errata.changes import Alone, changes, input_changes
from sheetgen.errata.comparing import Entry, checks_of, entries_of, in_unit, moved_beyond, paired
from sheetgen.errata.editions import Edition
from sheetgen.errata.inference import inferred
from sheetgen.errata.model import (
    Errata,
    MaterialErrata,
    Moved,
    Point,
    ProgramErrata,
    Share,
    StandingChange,
)
from sheetgen.handbook import derive
from sheetgen.quantities import Registry, assumptions, registry
from sheetgen.records import Imprint, Record

PROGRAM = "the program"
CONDITIONS = "the imprint"
NEGLIGIBLE = 1e-9  # of a change: below it a share is the rounding of the machine


def errata(old: Edition, new: Edition) -> Errata:
    """What changed from one edition to the other, with every cause derived where the records can be had."""
    both = [slug for slug in new.materials if slug in old.materials]
    comparison = _Comparison(old, new)
    cases = [_Case(slug, old.materials[slug], new.materials[slug]) for slug in both if comparison.differs(slug)]
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


@dataclass(frozen=True)
class _Case:
    """A material whose data differ between the editions."""

    slug: str
    old: Mapping[str, Any]
    new: Mapping[str, Any]


@dataclass(frozen=True)
class _Derived:
    """A material derived here: the old and the new record, and the old one with each single cause."""

    old: Mapping[str, Any]
    new: Mapping[str, Any]
    alone: dict[str, Mapping[str, Any]]


class _Comparison:
    """Two editions, and what holds for all their materials."""

    def __init__(self, old: Edition, new: Edition):
        self.old, self.new = old, new
        # Data that do not say under which conditions they were derived are taken to have those of the other edition.
        self.old_imprint = old.imprint if "conditions" in old.data else new.imprint
        self.new_imprint = new.imprint if "conditions" in new.data else old.imprint
        at_hand = next((edition.handbook for edition in (new, old) if edition.handbook), None)
        self.registry: Registry = at_hand.registry if at_hand else registry()
        self.program = _program(old, new, (self.old_imprint, self.new_imprint))
        all_ids = {*self.registry.published(), *self.registry.published("specimen")}
        self.by_resistivity = [id for id in all_ids if self.registry[id].listed_by == "resistivity"]

    def differs(self, slug: str) -> bool:
        """Whether the data of a material differ in anything but the name of the edition."""
        kept = ("name", "formula", "inputs", "quantities", "assumptions", "specimens")
        one, other = self.old.materials[slug], self.new.materials[slug]
        return any(one.get(key) != other.get(key) for key in kept)

    # --- deriving ----------------------------------------------------------------------------------------------------

    def derived(self, cases: Iterable[_Case]) -> dict[str, _Derived]:
        """Slug → what was derived, for the materials whose records can be had on both sides."""
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

    def _collected(self, slug: str, alone: list[Alone], data: Mapping[str, Any]) -> _Derived:
        by_cause = {one.cause: data[f"{slug}~{n}"] for n, one in enumerate(alone)}
        if self._conditions_differ:
            by_cause[CONDITIONS] = data[f"{slug}~conditions"]
        return _Derived(data[f"{slug}~old"], data[f"{slug}~new"], by_cause)

    # --- telling -----------------------------------------------------------------------------------------------------

    def material(self, case: _Case, derived: _Derived | None) -> MaterialErrata:
        """Everything that changed for one material."""
        inputs = tuple(input_changes(case.old, case.new))
        names = [{specimen["name"] for specimen in data.get("specimens", ())} for data in (case.old, case.new)]
        specimens = dict.fromkeys(sorted(names[1] - names[0]), "new")
        specimens |= dict.fromkeys(sorted(names[0] - names[1]), "withdrawn")
        told = _Told(self, case, derived)
        return MaterialErrata(
            slug=case.slug,
            name=case.new["name"],
            formula=case.new["formula"],
            inputs=inputs,
            moved=tuple(moved for moved in told.numbers() if moved.point.specimen not in specimens),
            standings=tuple(change for change in told.standings() if change.point.specimen not in specimens),
            specimens=specimens,
        )

    def title(self, id: str) -> str:
        """What a quantity is called, in this program or in the data of either edition."""
        for data in (self.new.data, self.old.data):
            if title := data.get("quantities", {}).get(id, {}).get("title"):
                return title
        return id.replace("_", " ")


class _Told:
    """The entries of one material in all its states, side by side."""

    def __init__(self, comparison: _Comparison, case: _Case, derived: _Derived | None):
        self.comparison, self.case = comparison, case
        self.pairs = list(paired(entries_of(case.old), entries_of(case.new), comparison.by_resistivity))
        self.checks = list(paired(checks_of(case.old), checks_of(case.new)))
        self.derived = derived
        self.states = self._lined_up(derived, entries_of, comparison.by_resistivity) if derived else {}
        self.check_states = self._lined_up(derived, checks_of, ()) if derived else {}

    def _lined_up(self, derived: _Derived, read: Any, by_resistivity: Iterable[str]) -> dict[str, dict[Point, Entry]]:
        """State → place in the new edition → entry: what stood there in the old one, is there now, or would be."""
        published = read(self.case.new)
        states = {"old": derived.old, "new": derived.new, **{f"~{c}": data for c, data in derived.alone.items()}}
        lined_up = {}
        for name, data in states.items():
            pairs = paired(read(data), published, by_resistivity)
            lined_up[name] = {point: entry for point, entry, _ in pairs if entry is not None}
        return lined_up

    def numbers(self) -> Iterable[Moved]:
        """Every number that moved, is new or is gone."""
        for point, old, new in self.pairs:
            unit = (new or old)["unit"]
            title = self.comparison.title(point.quantity)
            if old is None or new is None:
                because = self._that_bring_it(point, new is not None)
                yield Moved(point, title, unit, _number(old), _number(new), None, "presence", because, None, self.how)
                continue
            old = in_unit(old, unit)
            if (beyond := moved_beyond(old, new)) is not None:
                yield self._moved(point, title, unit, old, new, beyond)

    @property
    def how(self) -> str:
        return "derived" if self.derived else "inferred"

    def _moved(self, point: Point, title: str, unit: str, old: Entry, new: Entry, beyond: str) -> Moved:
        lists = isinstance(old["value"], list) or isinstance(new["value"], list)
        change = None if lists else new["value"] - old["value"]
        if self.derived is None:
            because, rest = inferred(point, self.case.old, self.case.new, change, self._definitions(point))
        elif lists or beyond == "its uncertainty":
            because, rest = self._that_change_it(point, old, new), None
        else:
            because, rest = self._shares(point, unit, old, new)
        return Moved(point, title, unit, _number(old), _number(new), change, beyond, because, rest, self.how)

    def _shares(self, point: Point, unit: str, old: Entry, new: Entry) -> tuple[tuple[Share, ...], float | None]:
        """What each cause does alone, and what they do together beyond that."""
        values = {name: in_unit(at[point], unit)["value"] for name, at in self.states.items() if point in at}
        whole = new["value"] - old["value"]
        floor = NEGLIGIBLE * max(abs(whole), abs(new["value"]) * 1e-6)
        if "old" not in values or "new" not in values:
            return (Share(PROGRAM),), None
        program = (values["old"] - old["value"]) + (new["value"] - values["new"])
        changes = {name[1:]: value - values["old"] for name, value in values.items() if name[0] == "~"}
        changes[PROGRAM] = program
        shares = [Share(cause, change) for cause, change in changes.items() if abs(change) > floor]
        rest = whole - sum(share.change for share in shares)
        shares.sort(key=lambda share: -abs(share.change))
        return tuple(shares), rest if abs(rest) > floor * 10 else None

    def _that_change_it(self, point: Point, old: Entry, new: Entry) -> tuple[Share, ...]:
        """The causes that alone make another number (or another uncertainty) of it."""
        base = self.states["old"].get(point)
        found = [name for name, at in self.states.items() if name[0] == "~" and _differ(base, at.get(point))]
        by_program = _differ(base, old) or _differ(self.states["new"].get(point), new)
        return tuple(Share(name[1:]) for name in found) + ((Share(PROGRAM),) if by_program else ())

    def _that_bring_it(self, point: Point, there: bool) -> tuple[Share, ...]:
        """The causes that alone make a number appear, or vanish."""
        if self.derived is None:
            return ()
        was = point in self.states["old"]
        if was == there:
            return (Share(PROGRAM),)
        found = [name[1:] for name, at in self.states.items() if name[0] == "~" and (point in at) == there]
        return tuple(map(Share, found))

    def _definitions(self, point: Point) -> list[str]:
        """The changed definitions that a number rests on, near or far, as far as the data tell."""
        changed, found = self.comparison.program.definitions, []
        waiting, seen = [point.quantity], set()
        entries = self.case.new["quantities"]
        while waiting:
            id = waiting.pop()
            if id in seen:
                continue
            seen.add(id)
            found += [id] if id in changed else []
            stated = entries.get(id, {})
            first = (stated[0] if stated else {}) if isinstance(stated, list) else stated
            waiting += [name for name in first.get("depends_on", ()) if name in entries]
        return found

    def standings(self) -> Iterable[StandingChange]:
        """Every standing of a number and of an assumption that is another one now."""
        titles = {id: assumption.title for id, assumption in assumptions().items()}
        for kind, pairs, states in (
            ("quantity", self.pairs, self.states),
            ("assumption", self.checks, self.check_states),
        ):
            for point, old, new in pairs:
                if old is None or new is None or old.get("standing") == new.get("standing"):
                    continue
                id = point.quantity
                title = self.comparison.title(id) if kind == "quantity" else titles.get(id, id.replace("_", " "))
                because = self._that_bring_about(point, old["standing"], new["standing"], states)
                yield StandingChange(point, title, kind, old["standing"], new["standing"], because)

    def _that_bring_about(self, point: Point, old: str, new: str, states: Mapping[str, Any]) -> tuple[str, ...]:
        if not states:
            return ()
        stands = {name: at[point]["standing"] for name, at in states.items() if point in at}
        alone = [name[1:] for name, standing in stands.items() if name[0] == "~" and standing == new]
        by_program = stands.get("old") != old or stands.get("new") != new
        return (*alone, *([PROGRAM] if by_program else []))


def _marked(record: Record, mark: str, slug: str = "") -> Record:
    return replace(record, slug=f"{slug or record.slug}~{mark}")


def _number(entry: Entry | None) -> dict[str, Any] | None:
    return entry and {key: entry[key] for key in ("value", "standard_uncertainty") if key in entry}


def _differ(one: Entry | None, other: Entry | None) -> bool:
    if one is None or other is None:
        return one is not other
    return moved_beyond(one, in_unit(other, one["unit"])) is not None


def _program(old: Edition, new: Edition, imprints: tuple[Imprint, Imprint]) -> ProgramErrata:
    before, after = (edition.data.get("quantities", {}) for edition in (old, new))
    definitions = {}
    for id in dict.fromkeys((*after, *before)):
        if id not in before or id not in after:
            definitions[id] = "withdrawn" if id in before else "new"
            continue
        prints = [edition[id].get("fingerprint") for edition in (before, after)]
        if None not in prints and prints[0] != prints[1]:
            definitions[id] = "changed"
    conditions = {}
    for key in ("reference_temperature", "temperatures", "thresholds"):
        one, other = (_plain(getattr(imprint, key)) for imprint in imprints)
        if one != other:
            conditions[key] = (one, other)
    texts = [[str(edition.data.get(key, "")) for edition in (old, new)] for key in ("version", "constants")]
    return ProgramErrata(tuple(texts[0]), tuple(texts[1]), definitions, conditions)


def _plain(value: Any) -> Any:
    if isinstance(value, tuple):
        return list(value)
    return {key: _plain(one) for key, one in value.items()} if isinstance(value, dict) else value
