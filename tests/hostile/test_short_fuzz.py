"""A short fuzz of every reader, with the targets of the long one: `python fuzz/run.py` runs those."""

from __future__ import annotations

import sys
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

FUZZ = Path(__file__).parents[2] / "fuzz"
sys.path.insert(0, str(FUZZ))
try:
    import seeds
    import targets
finally:
    sys.path.remove(str(FUZZ))

EXAMPLES = {"value": 400, "unit": 400, "formula": 300, "record": 80, "sheet": 15, "imprint": 150, "bibliography": 150,
            "cif": 300, "markdown": 150}  # fmt: skip
WORDS = st.sampled_from(seeds.WORDS) | st.text(max_size=6)
EDITS = st.lists(st.tuples(st.floats(0, 1), st.integers(0, 12), WORDS), min_size=1, max_size=6)


def edited(data: bytes, edits: list[tuple[float, int, str]]) -> bytes:
    """A seed with parts cut out and words put in."""
    for where, cut, word in edits:
        position = int(where * len(data))
        data = data[:position] + word.encode("utf-8", "surrogatepass") + data[position + cut :]
    return data


@pytest.mark.parametrize("name", targets.TARGETS)
def test_readers_end_well_whatever_they_are_given(name):
    target, begin = targets.TARGETS[name], seeds.seeds()[name]
    for data in begin:
        target(data)  # what is loaded at the first use is no part of any input's time

    @settings(max_examples=EXAMPLES[name], deadline=None, database=None, suppress_health_check=list(HealthCheck))
    @given(data=st.binary(max_size=200) | st.builds(edited, st.sampled_from(begin), EDITS))
    def fuzz(data: bytes) -> None:
        targets.guarded(target)(data)

    fuzz()
