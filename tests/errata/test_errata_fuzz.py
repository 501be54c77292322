"""Data files with something in them replaced by anything: refused with a fault, or compared; never a traceback."""

from __future__ import annotations

import copy
import json
from collections.abc import Iterator

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from quantities.small import COPPER, handbook_of

from sheetgen.errata import edition_of, errata
from sheetgen.errata.editions import read_edition
from sheetgen.errata_lines import lines
from sheetgen.faults import FaultsError

FILM = "specimens:\n  - {name: F-1, form: film, thickness: 40(2) nm, specularity: 0.2}\n"
ANYTHING = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats() | st.just(10**400) | st.text(max_size=8),
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(st.text(max_size=8), inner, max_size=3),
    max_leaves=5,
)


class Editions(tuple):
    """What the test compares; short to print."""

    def __repr__(self) -> str:
        return "editions"


@pytest.fixture(scope="module")
def editions(tmp_path_factory):
    base = tmp_path_factory.mktemp("fuzzed")
    old = edition_of(handbook_of(base / "old", copper=COPPER + FILM))
    new = edition_of(handbook_of(base / "new", copper=(COPPER + FILM).replace("3.6149(3)", "3.62(1)")))
    return Editions((json.loads(json.dumps(old.data)), new, base / "fuzzed.json"))


def places(node: object, path: tuple = ()) -> Iterator[tuple]:
    """The way to everything in a document."""
    yield path
    children = node.items() if isinstance(node, dict) else enumerate(node) if isinstance(node, list) else ()
    for key, child in children:
        yield from places(child, (*path, key))


def replaced(document: object, path: tuple, value: object, remove: bool) -> object:
    if not path:
        return value
    document = copy.deepcopy(document)
    node = document
    for key in path[:-1]:
        node = node[key]
    if remove:
        del node[path[-1]]
    else:
        node[path[-1]] = value
    return document


@settings(
    max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture, HealthCheck.too_slow]
)
@given(depth=st.integers(0, 9), pick=st.integers(0, 10**6), value=ANYTHING, remove=st.booleans(), bare=st.booleans())
def test_anything_in_the_place_of_something(editions, depth, pick, value, remove, bare):
    data, new, file = editions
    if bare:
        data = {key: part for key, part in data.items() if key not in ("assemblies", "conditions")}
    # A short way first: the outer parts of a document are few and matter most.
    near = [path for path in places(data) if len(path) <= depth]
    path = near[pick % len(near)]
    file.write_text(json.dumps(replaced(data, path, value, remove and bool(path))), encoding="utf-8")
    try:
        old = read_edition(file, "fuzzed")
    except FaultsError as refused:
        assert str(refused.faults[0].place).startswith(str(file))
        return
    for one, other in ((old, new), (new, old)):
        found = errata(one, other)
        json.dumps(found.as_json())
        assert list(lines(found))
