"""Every kind of fault in a record, each with its whole message: the cases stand in faults.yaml."""

from __future__ import annotations

from pathlib import Path

import pytest
import yaml

from sheetgen.records.measures import MEASURED
from sheetgen.records.spelling import written_key

CASES = yaml.safe_load(Path(__file__).with_name("faults.yaml").read_text(encoding="utf-8"))

KEYS_OF_MEASURED = ", ".join(map(written_key, [*MEASURED, "refractive_index"]))


@pytest.mark.parametrize(
    "case",
    [pytest.param(case, id=f"{kind}-{number}") for kind, cases in CASES.items() for number, case in enumerate(cases)],
)
def test_fault_says_where_what_and_how_to_mend_it(faults, edited, case):
    record = edited(case["replace"], case["by"])
    expected = [message.replace("<keys of measured>", KEYS_OF_MEASURED) for message in case["says"]]
    assert faults(record) == [f"m/copper.yaml:{message}" for message in expected]


def test_the_sample_itself_has_no_fault(faults):
    assert faults() == []


def test_all_faults_of_all_files_come_in_one_run_sorted_by_place(faults, edited):
    found = faults(
        edited("valence: 1", "valence: 99").replace("0.2 µΩ cm", "0.2 µΩ"),
        imprint="titel: A handbook\n",
        sources="@misc{good2000}\n",
        files={"gold.yaml": "name: Gold\n"},
    )
    assert [fault.split(": ")[0] for fault in found] == [
        "m/copper.yaml:7:12",
        "m/copper.yaml:11:15",
        "m/gold.yaml:1:1",
        "m/handbook.yaml:1:1",
        "m/handbook.yaml:1:1",
        "m/sources.bib:1:1",
    ]
