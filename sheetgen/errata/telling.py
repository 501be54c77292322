"""What is told of one material: its numbers and standings in both editions, and in the states between them."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from sheetgen.errata.comparing import Entry, checks_of, entries_of, in_unit, moved_beyond, paired
from sheetgen.errata.inference import inferred
from sheetgen.errata.model import Moved, Point, Share, StandingChange
from sheetgen.quantities import assumptions

PROGRAM = "the program"
NEGLIGIBLE = 1e-9  # of a change: below it a share is the rounding of the machine


@dataclass(frozen=True)
class Case:
    """A material whose data differ between the editions."""

    slug: str
    old: Mapping[str, Any]
    new: Mapping[str, Any]


@dataclass(frozen=True)
class Derived:
    """A material derived here: the old and the new record, and the old one with each single cause."""

    old: Mapping[str, Any]
    new: Mapping[str, Any]
    alone: dict[str, Mapping[str, Any]]


@dataclass(frozen=True)
class Words:
    """What holds for all materials: titles, quantities listed by resistivity, and definitions that changed."""

    title: Callable[[str], str]
    by_resistivity: Sequence[str]
    definitions: Mapping[str, str]


class Told:
    """The entries of one material in all its states, side by side."""

    def __init__(self, words: Words, case: Case, derived: Derived | None):
        self.words, self.case = words, case
        self.pairs = list(paired(entries_of(case.old), entries_of(case.new), words.by_resistivity))
        self.checks = list(paired(checks_of(case.old), checks_of(case.new)))
        self.derived = derived
        self.states = self._lined_up(derived, entries_of, words.by_resistivity) if derived else {}
        self.check_states = self._lined_up(derived, checks_of, ()) if derived else {}

    def _lined_up(self, derived: Derived, read: Any, by_resistivity: Iterable[str]) -> dict[str, dict[Point, Entry]]:
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
            title = self.words.title(point.quantity)
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
        changed, found = self.words.definitions, []
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
                standings = [entry and entry.get("standing") for entry in (old, new)]
                if not all(standings) or standings[0] == standings[1]:
                    continue
                id = point.quantity
                title = self.words.title(id) if kind == "quantity" else titles.get(id, id.replace("_", " "))
                because = self._that_bring_about(point, *standings, states)
                yield StandingChange(point, title, kind, *standings, because)

    def _that_bring_about(self, point: Point, old: str, new: str, states: Mapping[str, Any]) -> tuple[str, ...]:
        if not states:
            return ()
        stands = {name: at[point].get("standing") for name, at in states.items() if point in at}
        alone = [name[1:] for name, standing in stands.items() if name[0] == "~" and standing == new]
        by_program = stands.get("old") != old or stands.get("new") != new
        return (*alone, *([PROGRAM] if by_program else []))


def _number(entry: Entry | None) -> dict[str, Any] | None:
    return entry and {key: entry[key] for key in ("value", "standard_uncertainty") if key in entry}


def _differ(one: Entry | None, other: Entry | None) -> bool:
    if one is None or other is None:
        return one is not other
    return moved_beyond(one, in_unit(other, one["unit"])) is not None
