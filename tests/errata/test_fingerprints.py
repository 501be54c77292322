"""A fingerprint changes with what is computed, and with nothing else."""

from __future__ import annotations

import importlib.util
import subprocess
import sys

import pytest

from sheetgen.quantities import registry
from sheetgen.quantities.fingerprints import fingerprint

MODULE = '''\
from sheetgen.quantities import Declarations

declarations = Declarations()
{constant}


def helper(x):
    return {helper}


@declarations.quantity(symbol="A", unit="{unit}", formula="{formula}", source="a test", section="Crystal")
def invented(fermi_energy):
    """{title}."""
    {comment}
    return {body}
'''
USUAL = {"constant": "FACTOR = 3.0", "helper": "x * FACTOR", "unit": "eV", "formula": "3 E", "title": "Invented",
         "comment": "# said in other words", "body": "helper(fermi_energy)"}  # fmt: skip


@pytest.fixture
def printed(tmp_path):
    """The fingerprint of a quantity declared in a file of its own, as a module of the package would be."""
    count = iter(range(100))

    def load(**different: str) -> str:
        name = f"sheetgen.quantities.invented_{next(count)}"
        path = tmp_path / f"{name}.py"
        path.write_text(MODULE.format(**(USUAL | different)))
        spec = importlib.util.spec_from_file_location(name, path)
        module = importlib.util.module_from_spec(spec)
        spec.loader.exec_module(module)
        return fingerprint(tuple(module.declarations.definitions))

    return load


@pytest.mark.parametrize(
    "same", [{"comment": "# or not at all"}, {"title": "Another title"}, {"body": "helper( fermi_energy )  # the same"}]
)
def test_words_do_not_count(printed, same):
    assert printed(**same) == printed()


@pytest.mark.parametrize(
    "other",
    [
        {"unit": "J"},
        {"formula": "4 E"},
        {"body": "2 * helper(fermi_energy)"},
        {"helper": "x * FACTOR * 1.01"},
        {"constant": "FACTOR = 3.01"},
    ],
)
def test_what_is_computed_counts(printed, other):
    assert printed(**other) != printed()


def test_no_two_quantities_share_one():
    declared = registry()
    ids = {*declared.published(), *declared.published("specimen")}
    assert len({fingerprint(declared.definitions_of(id)) for id in ids}) == len(ids)


def test_they_are_the_same_in_another_process():
    declared = registry()
    program = (
        "from sheetgen.quantities import registry; from sheetgen.quantities.fingerprints import fingerprint;"
        "r = registry(); print(*(fingerprint(r.definitions_of(id)) for id in r.published()))"
    )
    run = subprocess.run(
        [sys.executable, "-c", program], capture_output=True, text=True, check=True, env={"PYTHONHASHSEED": "7"}
    )
    assert run.stdout.split() == [fingerprint(declared.definitions_of(id)) for id in declared.published()]


OWN = '''\
from sheetgen.quantities import Declarations

declarations = Declarations()


def helper(x):
    return x * {factor}


@declarations.quantity(symbol="A", unit="eV", formula="3 E", source="a test", section="Crystal")
def invented(fermi_energy):
    """Invented."""
    return helper(fermi_energy)
'''


def test_a_helper_in_a_groups_own_file_counts_also_when_it_is_saved_anew(tmp_path):
    from quantities.small import COPPER, IMPRINT, handbook_of

    prints = []
    for factor in (3.0, 3.1, 3.0):
        tmp_path.joinpath("quantities.py").write_text(OWN.format(factor=factor))
        book = handbook_of(tmp_path, IMPRINT + "own quantities: quantities.py\n", copper=COPPER)
        prints.append(fingerprint(book.registry.definitions_of("invented")))
    assert prints[0] == prints[2] != prints[1]
