"""A group's own quantities: a Python file beside the imprint, loaded, checked, and joined to ours."""

from __future__ import annotations

import contextlib
import functools
import re
import sys
import traceback
import types
import warnings
from collections.abc import Callable, Iterable, Iterator
from dataclasses import fields, replace
from pathlib import Path
from typing import Any

import numpy as np

from sheetgen.faults import Fault, FaultLog, FaultsError, Place, did_you_mean
from sheetgen.quantities.declaration import Assumption, Comparison, Declarations, Definition
from sheetgen.quantities.formula_check import unsettable
from sheetgen.quantities.registry import Registry
from sheetgen.records.files import read_text
from sheetgen.records.measures import MEASURED
from sheetgen.records.units import read_unit
from sheetgen.records.unreadable import UnreadableError, sentence

NAME = "declarations"
BEGINNING = f"from sheetgen.quantities import Declarations; {NAME} = Declarations()"

_ID = re.compile(r"[a-z][a-z0-9_]{0,63}")
# What a list runs along, and the inputs that carry it.
_AXIS_INPUTS = {
    "temperature": {"temperature"},
    "resistivity": {"measured_resistivity", "measured_sheet_resistance", "resistivity_temperature"},
    "edge": {"tabulated_edge"},
    "photon_energy": {"photon_energy"},
}
_TEXTS = ("id", "title", "symbol", "unit", "formula", "source", "section")
# What the decorator itself fills in, or an own quantity has no use for.
_NOT_STATED = {"title", "note", "function", "parameters", "place", "published", "form"}
_FIELDS = tuple(field.name for field in fields(Definition) if field.name not in _NOT_STATED)
_WRONG_WORD = re.compile(r"got an unexpected keyword argument '(\w+)'")


def registry_with_own(path: Path) -> Registry:
    """Our declarations joined with those of a file; raises FaultsError with every mistake found in it."""
    from sheetgen.quantities import registry_with

    declared = load_own(path)
    joined = registry_with([declared])
    log = FaultLog()
    for definition in declared.definitions:
        _check_axis(definition, joined, log)
    log.raise_if_any()
    return joined


def load_own(path: Path) -> Declarations:
    """What a file declares, its functions guarded against what they must not do to our arrays.

    The file is code of the handbook's own people and runs with all rights of this process. Raises FaultsError
    naming file:line for whatever is wrong with it.
    """
    module = _run(path)
    declared = getattr(module, NAME, None)
    if not isinstance(declared, Declarations):
        others = [name for name, value in vars(module).items() if isinstance(value, Declarations)]
        mend = f"rename '{others[0]}' to it" if others else f"begin the file with: {BEGINNING}"
        raise _error(Place(str(path), 1), f"the file makes no '{NAME}'; {mend}.")
    if not declared.definitions:
        message = f"'{NAME}' declares no quantity; declare one with @{NAME}.quantity(…)"
        raise _error(Place(str(path), 1), f"{message}, or take 'own quantities' out of handbook.yaml.")
    log = FaultLog()
    for definition in declared.definitions:
        _check_definition(definition, log)
    for assumption in declared.assumptions:
        _check_assumption(assumption, log)
    log.raise_if_any()
    return Declarations(
        [replace(d, function=_guarded(d.function)) for d in declared.definitions],
        [replace(a, function=_guarded(a.function)) for a in declared.assumptions],
    )


# ---------------------------------------------------------------- running the file


def _run(path: Path) -> types.ModuleType:
    """The file as a module; nothing is cached, so that a changed file is read anew, and nothing is written."""
    log = FaultLog()
    text = read_text(path, path.parent, log)
    log.raise_if_any()
    module = types.ModuleType("own_quantities")
    module.__file__ = str(path)
    try:
        code = _compiled(text or "", path)
        sys.modules[module.__name__] = module  # where dataclasses and the like look a module up
        # What it prints goes where messages go: stdout carries results only.
        with contextlib.redirect_stdout(sys.stderr):
            exec(code, module.__dict__)
    except (Exception, SystemExit) as error:
        raise _error(_place(error, path), _what(error)) from error
    finally:
        sys.modules.pop(module.__name__, None)
    return module


def _compiled(text: str, path: Path) -> types.CodeType:
    with warnings.catch_warnings():
        # An unknown escape such as "\s" is a LaTeX command that has lost, or will lose, its backslash.
        warnings.simplefilter("error")
        return compile(text, str(path), "exec", dont_inherit=True)


def _place(error: BaseException, path: Path) -> Place:
    """The innermost line of the file itself."""
    if isinstance(error, SyntaxError) and error.filename == str(path):
        return Place(str(path), error.lineno or 0, error.offset or 0)
    lines = [frame.lineno for frame in traceback.extract_tb(error.__traceback__) if frame.filename == str(path)]
    return Place(str(path), (lines[-1] if lines else 0) or 0)


def _what(error: BaseException) -> str:
    """What went wrong while the file was read, and a mend."""
    if isinstance(error, SyntaxError):
        raw = ' Write LaTeX as a raw string, r"…".' if "escape" in str(error.msg) else ""
        return f"not readable as Python: {error.msg}.{raw}"
    if isinstance(error, SystemExit):
        return "the file ends the program; take the call of exit() out."
    if isinstance(error, ModuleNotFoundError):
        return f"there is no library '{error.name}'; install it where sheetgen runs, or do without it."
    if wrong := _WRONG_WORD.search(str(error)):
        guess = did_you_mean(wrong[1], _FIELDS)
        return f"a quantity has no '{wrong[1]}'; expected one of {', '.join(_FIELDS)}.{guess}"
    if "required keyword-only argument" in str(error):
        missing = str(error).partition(":")[2].strip()
        return f"a quantity is declared without {missing}; add what is missing."
    return f"reading the file fails here with {type(error).__name__}: {sentence(str(error))} Mend this line."


def _error(place: Place, message: str) -> FaultsError:
    return FaultsError([Fault(place, message)])


# ---------------------------------------------------------------- checking what it declares


def _check_definition(definition: Definition, log: FaultLog) -> None:
    """Types and texts, which our own declarations get right by their tests."""
    for message in _mistakes(definition):
        log.fault(definition.place, f"{definition.function.__name__}(): {message}")


def _mistakes(definition: Definition) -> Iterator[str]:
    wrong = [name for name in _TEXTS if not isinstance(getattr(definition, name), str)]
    if wrong:
        yield f"{wrong[0]}={getattr(definition, wrong[0])!r} is no text; put it in quotes."
        return
    if not _ID.fullmatch(definition.id):
        yield f"'{definition.id}' cannot be an id and an address; expected lower-case letters, digits and underscores."
    yield from _wrong_tuples(definition)
    yield from _wrong_unit(definition.unit)
    if definition.form != "number":
        yield f"form={definition.form!r}; own quantities are numbers, leave it out."
    if definition.published:
        yield from _wrong_formulas({"symbol": definition.symbol, "formula": definition.formula})
    comparison = definition.comparison
    if comparison is not None and not isinstance(comparison, Comparison):
        yield "comparison is none; expected Comparison(measured=…, ratio=…, above=…, below=…)."
    elif comparison is not None and comparison.measured not in MEASURED:
        guess = did_you_mean(comparison.measured, MEASURED)
        yield f"it is held against '{comparison.measured}', which is no key under 'measured' of a record.{guess}"


def _wrong_tuples(definition: Definition) -> Iterator[str]:
    if not isinstance(definition.dimensions, tuple) or not set(definition.dimensions) <= {2, 3}:
        yield f"dimensions={definition.dimensions!r}; expected (3,), (2,) or (3, 2)."
    for name in ("assumes", "needs", "forms"):
        value = getattr(definition, name)
        if not isinstance(value, tuple) or not all(isinstance(word, str) for word in value):
            example = '("flat_potential",)' if name == "assumes" else '("…",)'
            yield f"{name}={value!r}; expected texts in brackets, each followed by a comma, such as {example}."


def _wrong_unit(unit: str) -> Iterator[str]:
    try:
        read_unit(unit)
    except UnreadableError as error:
        yield f"unit: {sentence(str(error))}"


def _wrong_formulas(texts: dict[str, str]) -> Iterator[str]:
    for name, latex in texts.items():
        if reason := unsettable(latex):
            yield f"{name} {reason}"


def _check_assumption(assumption: Assumption, log: FaultLog) -> None:
    name = assumption.function.__name__
    if not isinstance(assumption.id, str) or not _ID.fullmatch(assumption.id):
        expected = "expected lower-case letters, digits and underscores"
        log.fault(assumption.place, f"{name}(): '{assumption.id}' cannot be an id; {expected}.")
    if not assumption.title:
        log.fault(assumption.place, f"{name}() has no docstring; its first line is the assumption's title")
    for field in ("strained", "broken"):
        bound = getattr(assumption, field)
        if not (bound is None or isinstance(bound, (int, float))):
            log.fault(assumption.place, f"{name}(): {field}={bound!r}; expected a number or None.")
    axes = (None, "temperature", "resistivity", "photon_energy", "specimen")
    if assumption.listed_by not in axes:
        expected = ", ".join(map(str, axes))
        log.fault(assumption.place, f"{name}() has listed_by={assumption.listed_by!r}; expected one of {expected}")
    for message in _wrong_formulas({"formula": assumption.formula}):
        log.fault(assumption.place, f"{name}(): {message}")


def _check_axis(definition: Definition, joined: Registry, log: FaultLog) -> None:
    """A list needs an input that runs along it, or it would have one entry only."""
    if definition.listed_by is None or not definition.published:
        return
    expected = _AXIS_INPUTS[definition.listed_by]
    for dimension in definition.dimensions:
        plan = joined.plans[definition.scope, dimension]
        if definition.id in plan.definitions and not expected & set(plan.inputs_of(definition.id)):
            log.fault(
                definition.place,
                f"{definition.function.__name__}() is listed by {definition.listed_by} and reads nothing that changes "
                f"along it; take {' or '.join(sorted(expected))} as a parameter, or leave listed_by out.",
            )
            return


# ---------------------------------------------------------------- guarding its functions


def _guarded(function: Callable[..., Any]) -> Callable[..., Any]:
    """The function on arrays that it cannot change; its warnings and prints stay away from results."""

    @functools.wraps(function)
    def guarded(*arguments: np.ndarray) -> Any:
        try:
            with warnings.catch_warnings(), contextlib.redirect_stdout(sys.stderr):
                warnings.simplefilter("ignore")
                result = function(*_read_only(arguments))
        except SystemExit:
            raise RuntimeError("it ends the program") from None
        if np.iscomplexobj(result):
            raise TypeError("it gives complex numbers, and a sheet states real ones")
        return result

    return guarded


def _read_only(arrays: Iterable[np.ndarray]) -> Iterator[np.ndarray]:
    for array in arrays:
        view = np.asarray(array).view()
        view.flags.writeable = False
        yield view
