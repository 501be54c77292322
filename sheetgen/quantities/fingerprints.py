"""Fingerprints of definitions: two editions with equal ones computed a quantity in the same way.

A fingerprint covers what is declared (unit, formula, what it reads), the function, and every function and plain
constant of the program, or of its own file, that it calls or reads. Comments, docstrings and spaces do not count.
"""

from __future__ import annotations

import ast
import hashlib
import inspect
import re
from collections.abc import Callable, Iterator
from functools import lru_cache
from pathlib import Path
from types import CodeType, FunctionType, ModuleType
from typing import Any

from sheetgen.quantities.declaration import Definition

LENGTH = 16  # hexadecimal digits: enough to tell editions apart, short enough to read
_PLAIN = (int, float, complex, str)
_SPACE = re.compile(r"\s+")
_COMMENT = re.compile(r"(?m)(?:^|\s\s)#.*$")


def fingerprint(definitions: tuple[Definition, ...]) -> str:
    """One fingerprint for all definitions of a quantity (in three dimensions, in two, for specimens)."""
    digest = hashlib.sha256()
    for one in definitions:
        declared = (one.unit, one.formula, one.dimensions, one.scope, one.listed_by, one.form, one.needs, one.stated_at)
        digest.update(repr(declared).encode())
        for part in sorted(_parts(one.function)):
            digest.update(part.encode())
    return digest.hexdigest()[:LENGTH]


def _parts(function: Callable) -> set[str]:
    """The words of a function and of all of ours that it calls, and the constants of ours that they read."""
    parts: set[str] = set()
    waiting, seen = [inspect.unwrap(function)], set()
    while waiting:
        here = waiting.pop()
        if here in seen:
            continue
        seen.add(here)
        parts.add(f"{here.__qualname__}: {_words(here)}")
        for name, found in _reached(here):
            if isinstance(found, FunctionType):
                waiting.append(found)
            else:
                parts.add(f"{name} = {found!r}")
    return parts


def _reached(function: FunctionType) -> Iterator[tuple[str, Any]]:
    """Our functions, and plain constants of our modules, that the code of a function names."""
    names = _names(function.__code__)
    for name in names:
        found = function.__globals__.get(name)
        if isinstance(found, ModuleType) and found.__name__.startswith("sheetgen."):
            inside = {word: getattr(found, word) for word in names if hasattr(found, word)}
        else:
            inside = {name: found}
        for word, what in inside.items():
            what = inspect.unwrap(what) if callable(what) else what
            if _is_plain(what) or (isinstance(what, FunctionType) and _is_ours(what, function)):
                yield word, what


def _is_plain(constant: Any) -> bool:
    return all(map(_is_plain, constant)) if isinstance(constant, tuple) else isinstance(constant, _PLAIN)


def _is_ours(function: FunctionType, reader: FunctionType) -> bool:
    """Whether a function is one of the program's, or stands in the same file as the one that reads it."""
    same_file = function.__code__.co_filename == reader.__code__.co_filename
    return same_file or (function.__module__ or "").startswith("sheetgen.")


def _names(code: CodeType) -> list[str]:
    """Every global or attribute that a code object and those inside it name, sorted."""
    inner = (_names(constant) for constant in code.co_consts if isinstance(constant, CodeType))
    return sorted({*code.co_names, *(name for names in inner for name in names)})


def _words(function: FunctionType) -> str:
    """The text of a function without decorators, docstring, comments and spaces; its place, where that is not known."""
    path = Path(function.__code__.co_filename)
    try:
        saved = path.stat().st_mtime_ns  # a group's own file may be another one at the next press of a galley
    except OSError:
        return function.__qualname__
    return _sources(path, saved).get(function.__code__.co_name) or function.__qualname__


@lru_cache(maxsize=256)
def _sources(path: Path, _saved: int) -> dict[str, str]:
    """Function name → its words, for every function of a file; empty where the file cannot be read."""
    try:
        text = path.read_text(encoding="utf-8")
        tree = ast.parse(text)
    except (OSError, ValueError, SyntaxError):
        return {}
    lines = text.splitlines()
    found: dict[str, str] = {}
    for node in ast.walk(tree):
        if isinstance(node, ast.FunctionDef):
            first = node.body[1] if ast.get_docstring(node) and len(node.body) > 1 else node.body[0]
            body = "\n".join([ast.unparse(node.args), *lines[first.lineno - 1 : node.end_lineno]])
            # One name may be declared several times in a file, once for each number of dimensions.
            found[node.name] = found.get(node.name, "") + _SPACE.sub("", _COMMENT.sub("", body))
    return found
