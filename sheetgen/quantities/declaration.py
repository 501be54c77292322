"""How a quantity, a step on the way to one, and an assumption are declared."""

from __future__ import annotations

import inspect
from collections.abc import Callable
from dataclasses import dataclass, field

from sheetgen.faults import Place

SECTIONS = (
    "Crystal",
    "Electron gas at T = 0",
    "Heat and magnetism",
    "Transport",
    "Optics",
    "Finite specimens",
    "Specimens",
)
AXES = (None, "temperature", "resistivity", "edge", "photon_energy")
FORMS = ("number", "list", "shells")
SCOPES = ("material", "specimen")


@dataclass(frozen=True)
class Comparison:
    """The measurement that a quantity is held against, and what their ratio says.

    `measured` is the key of the record. `above`, `below` and `opposite` are the sentences for a ratio
    measured / model above 1, between 0 and 1, and below 0; `ratio` is the ratio's own name.
    """

    measured: str
    ratio: str
    above: str
    below: str
    opposite: str = ""

    def meaning(self, ratio: float) -> str:
        """The sentence that fits a ratio measured / model."""
        if ratio < 0:
            return self.opposite or self.below
        return self.above if ratio > 1 else self.below


@dataclass(frozen=True)
class Definition:
    """One quantity as it is defined in some number of dimensions; made by `quantity`.

    `listed_by` names the axis of its list, `needs` the inputs that must be there although the formula does not
    use them, `absent` says when the formula gives nothing, `stated_at` is the photon energy (eV) of an optical
    line that is not listed by it; `drawn` is false where a value takes too long to find for thousands of draws;
    `kinked` is true where the slope jumps within the uncertainty of an input; `forms` are the forms of specimens
    that a line of theirs is for.
    """

    id: str
    title: str
    note: str
    function: Callable
    parameters: tuple[str, ...]
    place: Place
    published: bool = True
    scope: str = "material"
    dimensions: tuple[int, ...] = (3,)
    symbol: str = ""
    unit: str = "1"
    formula: str = ""
    source: str = ""
    section: str = ""
    assumes: tuple[str, ...] = ()
    listed_by: str | None = None
    form: str = "number"
    needs: tuple[str, ...] = ()
    absent: str = ""
    comparison: Comparison | None = None
    stated_at: float | None = None
    carries_uncertainty: bool = True
    drawn: bool = True
    kinked: bool = False
    in_specimens: bool = False
    forms: tuple[str, ...] = ()

    @property
    def held_against(self) -> str | None:
        """Key of the measurement that the quantity is held against, if there is one."""
        return self.comparison.measured if self.comparison else None

    @property
    def reads(self) -> tuple[str, ...]:
        """Names of everything that the value depends on directly: the parameters and what it needs to exist."""
        return self.parameters + self.needs


@dataclass(frozen=True)
class Assumption:
    """A condition under which some numbers hold, with the indicator that shows how well it is met.

    The indicator is a function like a quantity's, printed as `formula` (LaTeX) or `indicator` (plain text).
    `strained` and `broken` are bounds on it; with `below` the condition is left when the indicator falls under a
    bound, otherwise when it rises over it. `strained_until` ends the strained range, for a condition that is kept
    on both sides of it.
    """

    id: str
    title: str
    sentence: str
    function: Callable
    parameters: tuple[str, ...]
    place: Place
    indicator: str
    formula: str
    strained: float | None
    broken: float | None
    source: str
    below: bool = False
    strained_until: float | None = None
    listed_by: str | None = None
    scope: str = "material"

    def bounds(self, thresholds: dict) -> tuple[float | None, float | None]:
        """The strained and the broken bound, as the imprint's thresholds or else this declaration set them."""
        stated = thresholds.get(self.id)
        if stated is None:
            return self.strained, self.broken
        pair = tuple(stated) if isinstance(stated, (tuple, list)) else (stated, self.broken)
        return (pair[0], pair[1]) if len(pair) == 2 else (pair[0], self.broken)


@dataclass
class Declarations:
    """What a module, ours or a group's own, declares; `registry` joins several."""

    definitions: list[Definition] = field(default_factory=list)
    assumptions: list[Assumption] = field(default_factory=list)

    def quantity(self, *, symbol: str, unit: str, formula: str, source: str, section: str, **further) -> Callable:
        """Declare a quantity: the decorated function computes it from the quantities and inputs it names.

        The function gets SI arrays of shape (draws, materials, entries) that broadcast, and returns one; the
        first line of its docstring is the title. `further` are the other fields of Definition.
        """

        def declare(function: Callable) -> Callable:
            further_fields = dict(symbol=symbol, unit=unit, formula=formula, source=source, section=section, **further)
            self.definitions.append(_definition(function, published=True, **further_fields))
            return function

        return declare

    def step(self, **further) -> Callable:
        """Declare a step on the way to quantities: computed like one, shown nowhere."""

        def declare(function: Callable) -> Callable:
            self.definitions.append(_definition(function, published=False, **further))
            return function

        return declare

    def assumption(self, *, indicator: str, formula: str, source: str, **further) -> Callable:
        """Declare an assumption: the decorated function is its indicator, its docstring the title and sentence."""

        def declare(function: Callable) -> Callable:
            title, sentence = _docstring(function)
            further.setdefault("id", function.__name__)
            self.assumptions.append(
                Assumption(
                    title=title,
                    sentence=sentence,
                    function=function,
                    parameters=_parameters(function),
                    place=_place(function),
                    indicator=indicator,
                    formula=formula,
                    source=source,
                    **{"strained": None, "broken": None, **further},
                )
            )
            return function

        return declare


def _definition(function: Callable, **fields) -> Definition:
    title, note = _docstring(function)
    return Definition(
        id=fields.pop("id", function.__name__),
        title=title,
        note=note,
        function=function,
        parameters=_parameters(function),
        place=_place(function),
        **fields,
    )


def _docstring(function: Callable) -> tuple[str, str]:
    title, _, note = inspect.cleandoc(function.__doc__ or "").partition("\n")
    return title.strip().rstrip("."), " ".join(note.split())


def _parameters(function: Callable) -> tuple[str, ...]:
    return tuple(inspect.signature(function).parameters)


def _place(function: Callable) -> Place:
    code = function.__code__
    return Place(code.co_filename, code.co_firstlineno)
