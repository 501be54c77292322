"""All declarations joined: checked once when they are loaded, ordered by what needs what."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from functools import cached_property
from graphlib import CycleError, TopologicalSorter

from sheetgen.faults import FaultLog, did_you_mean
from sheetgen.quantities.declaration import (
    AXES,
    FORMS,
    SCOPES,
    SECTIONS,
    Assumption,
    Declarations,
    Definition,
)


@dataclass(frozen=True)
class Plan:
    """The definitions that apply to one kind of row (materials or specimens) in one number of dimensions.

    `definitions` is in evaluation order: whatever a definition reads comes before it or is an input.
    """

    definitions: dict[str, Definition]
    assumptions: tuple[Assumption, ...]

    @cached_property
    def readers(self) -> dict[str, frozenset[str]]:
        """For each name, the ids of all definitions whose value it can change, near or far."""
        reach: dict[str, set[str]] = {}
        for definition in reversed(self.definitions.values()):
            downstream = {definition.id} | reach.get(definition.id, set())
            for name in definition.reads:
                reach.setdefault(name, set()).update(downstream)
        return {name: frozenset(ids) for name, ids in reach.items()}

    def inputs_of(self, id: str) -> tuple[str, ...]:
        """Names of all inputs that a definition rests on, near or far, in the order they are met."""
        return self._inputs[id]

    @cached_property
    def _inputs(self) -> dict[str, tuple[str, ...]]:
        found: dict[str, tuple[str, ...]] = {}
        for id, definition in self.definitions.items():
            parts = (found.get(name, (name,)) for name in definition.reads)
            found[id] = tuple(dict.fromkeys(name for part in parts for name in part))
        return found

    def needed_for(self, ids: Iterable[str]) -> frozenset[str]:
        """The ids themselves and every definition that they rest on."""
        needed, waiting = set(), [name for name in ids if name in self.definitions]
        while waiting:
            name = waiting.pop()
            if name not in needed:
                needed.add(name)
                waiting += [read for read in self.definitions[name].reads if read in self.definitions]
        return frozenset(needed)


class Registry:
    """Every quantity and assumption that a handbook states."""

    def __init__(self, declarations: Iterable[Declarations], inputs: Iterable[str]):
        """Join declarations; raises FaultsError naming file:line of each declaration that cannot work."""
        declarations = tuple(declarations)
        self.inputs = frozenset(inputs)
        self.all = tuple(definition for part in declarations for definition in part.definitions)
        self.assumptions = tuple(assumption for part in declarations for assumption in part.assumptions)
        self._check()
        self.plans = {(scope, dimension): self._plan(scope, dimension) for scope in SCOPES for dimension in (3, 2)}

    def __iter__(self) -> Iterator[str]:
        """Ids of the published quantities of materials, in the order of the sheet."""
        return iter(self.published())

    def __getitem__(self, id: str) -> Definition:
        """The definition in three dimensions, or else in two."""
        return self.definitions_of(id)[0]

    def __contains__(self, id: object) -> bool:
        return any(definition.id == id and definition.published for definition in self.all)

    def definitions_of(self, id: str) -> tuple[Definition, ...]:
        """All published definitions of one id: three dimensions first, then two, then specimens."""
        found = [definition for definition in self.all if definition.id == id and definition.published]
        if not found:
            raise KeyError(id)
        return tuple(sorted(found, key=lambda d: (d.scope != "material", -max(d.dimensions))))

    def published(self, scope: str = "material") -> dict[str, Definition]:
        """id → definition of what is published for materials or for specimens, in the order of the sheet."""
        shown = [d for d in self.all if d.published and (d.scope == scope or (scope == "specimen" and d.in_specimens))]
        shown.sort(key=lambda d: (SECTIONS.index(d.section), -max(d.dimensions)))
        first: dict[str, Definition] = {}
        for definition in shown:
            first.setdefault(definition.id, definition)
        order = {id: position for position, id in enumerate(dict.fromkeys(d.id for d in self.all))}
        return dict(sorted(first.items(), key=lambda item: (SECTIONS.index(item[1].section), order[item[0]])))

    def resting_on(self, assumption: str) -> tuple[str, ...]:
        """Ids of the published quantities that rest on an assumption."""
        return tuple(dict.fromkeys(d.id for d in self.all if d.published and assumption in d.assumes))

    def _plan(self, scope: str, dimension: int) -> Plan:
        chosen: dict[str, Definition] = {}
        for wanted in dict.fromkeys(("material", scope)):
            chosen |= {d.id: d for d in self.all if d.scope == wanted and dimension in d.dimensions}
        given = self.inputs | chosen.keys()
        known = {id: d for id, d in chosen.items() if given.issuperset(d.reads)}
        graph = {id: [name for name in d.reads if name in known] for id, d in known.items()}
        order = TopologicalSorter(graph).static_order()
        # What cannot be formed in this number of dimensions takes with it all that reads it.
        definitions: dict[str, Definition] = {}
        for id in order:
            if all(name in self.inputs or name in definitions for name in known[id].reads):
                definitions[id] = known[id]
        available = self.inputs | definitions.keys()
        fitting = tuple(a for a in self.assumptions if available.issuperset(a.parameters) and a.scope == scope)
        whole = Plan(definitions, fitting)
        if scope == "material":
            return whole
        # A specimen repeats of its material only what its own lines rest on.
        stated = [*self.published(scope), *(name for a in fitting for name in a.parameters)]
        needed = whole.needed_for(stated)
        return Plan({id: d for id, d in definitions.items() if id in needed}, fitting)

    def _check(self) -> None:
        log = FaultLog()
        names = self.inputs | {definition.id for definition in self.all}
        assumptions = {assumption.id for assumption in self.assumptions}
        for definition in self.all:
            _check_names(definition, names, log)
            _check_fields(definition, assumptions, log)
        for assumption in self.assumptions:
            _check_names(assumption, names, log)
        self._check_once_each(log)
        log.raise_if_any()
        self._check_cycles(log)
        log.raise_if_any()

    def _check_once_each(self, log: FaultLog) -> None:
        seen: dict[tuple, Definition] = {}
        for definition in self.all:
            if definition.id in self.inputs:
                log.fault(definition.place, f"{definition.id}() has the name of an input; give it another name")
            for dimension in definition.dimensions:
                earlier = seen.setdefault((definition.id, definition.scope, dimension), definition)
                if earlier is not definition:
                    log.fault(
                        definition.place,
                        f"{definition.id}() is declared in {dimension} dimensions already at {earlier.place}; "
                        "rename one of the two",
                    )

    def _check_cycles(self, log: FaultLog) -> None:
        places = {definition.id: definition.place for definition in self.all}
        for scope in SCOPES:
            graph = {d.id: [n for n in d.reads if n in places] for d in self.all if d.scope in ("material", scope)}
            try:
                TopologicalSorter(graph).prepare()
            except CycleError as error:
                ring = " → ".join(error.args[1])
                log.fault(places[error.args[1][0]], f"quantities need each other in a ring: {ring}; break the ring")


def _check_names(declared: Definition | Assumption, names: frozenset[str] | set[str], log: FaultLog) -> None:
    needs = declared.needs if isinstance(declared, Definition) else ()
    for name in declared.parameters + needs:
        if name not in names:
            log.fault(
                declared.place,
                f"{declared.function.__name__}() takes '{name}', but no quantity or input has that name;"
                f" rename it.{did_you_mean(name, names)}",
            )


def _check_fields(definition: Definition, assumptions: set[str], log: FaultLog) -> None:
    for id in definition.assumes:
        if id not in assumptions:
            guess = did_you_mean(id, assumptions)
            log.fault(definition.place, f"{definition.id}() assumes '{id}', which is not declared.{guess}")
    choices = {"listed_by": AXES, "form": FORMS, "scope": SCOPES}
    if definition.published:
        choices["section"] = SECTIONS
        if not definition.title:
            log.fault(
                definition.place,
                f"{definition.id}() has no docstring; its first line is the quantity's title",
            )
    for name, allowed in choices.items():
        if (found := getattr(definition, name)) not in allowed:
            expected = ", ".join(str(choice) for choice in allowed)
            log.fault(definition.place, f"{definition.id}() has {name}={found!r}; expected one of {expected}")
