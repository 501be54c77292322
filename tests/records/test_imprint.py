"""The imprint: what it says, what it leaves to defaults, and every way to get it wrong."""

from __future__ import annotations

from pathlib import Path

import pytest

from sheetgen.records import imprint as imprints
from sheetgen.records.spelling import written_key

FULL = """\
title: A handbook
group: Some group
edition: 2026.1
date: 2026-11-02
license: CC-BY-4.0
language: en-GB
contact: post@example.org
base address: https://handbook.example.org/
reference temperature: 20 °C
temperatures: [4.2 K, 77, 293.15 K, 100 °C]
paper: Letter
units: {fermi_velocity: km/s, coordination number: "1"}
thresholds: {agrees: 0.05, adjust: 3, undecided: 0.2, degenerate_gas: [0.2, 0.4], flat potential: [0.8, null]}
own quantities: quantities.py
previous edition: editions.json
"""
KEYS = ", ".join(map(written_key, imprints._KEYS))


def test_everything_that_an_imprint_can_say(read):
    imprint = read(imprint=FULL, files={"quantities.py": "1 / 0", "editions.json": "{"}).imprint
    assert (imprint.title, imprint.group, imprint.edition) == ("A handbook", "Some group", "2026.1")
    assert (imprint.licence, imprint.language, imprint.contact) == ("CC-BY-4.0", "en-GB", "post@example.org")
    assert imprint.base_address == "https://handbook.example.org/"
    assert imprint.reference_temperature == pytest.approx(293.15)
    assert imprint.temperatures == pytest.approx((293.15, 4.2, 77, 373.15))
    assert imprint.paper == "letter"
    assert imprint.units == {"fermi_velocity": "km/s", "coordination_number": "1"}
    assert imprint.thresholds == {
        "agrees": 0.05, "adjust": 3.0, "undecided": 0.2, "degenerate_gas": (0.2, 0.4), "flat_potential": (0.8, None),
    }  # fmt: skip
    # Named, and neither loaded nor read.
    assert imprint.own_quantities == Path("m/quantities.py")
    assert (imprint.date, imprint.previous_edition) == ("2026-11-02", Path("m/editions.json"))


def test_defaults(read):
    imprint = read(imprint="title: A handbook\n").imprint
    assert (imprint.group, imprint.edition, imprint.licence, imprint.contact, imprint.base_address) == ("",) * 5
    assert (imprint.language, imprint.paper, imprint.units) == ("en", "A4", {})
    assert imprint.reference_temperature == 293.15
    assert imprint.temperatures == (293.15, 4.2, 77.0)
    assert imprint.thresholds == {"agrees": 0.10, "adjust": 2.0, "undecided": 0.25}
    assert (imprint.own_quantities, imprint.date, imprint.previous_edition) == (None, "", None)


@pytest.mark.parametrize(
    "imprint, message",
    [
        ("", ": the file is empty; expected lines such as 'title: Handbook of our materials'."),
        ("- a\n", ":1:1: the file holds no keys; expected lines such as 'title: Handbook of our materials'."),
        ("group: x\n", ":1:1: the imprint has no title; add 'title: Handbook of …'."),
        ("title:\n", ":1:7: title: found nothing; expected a text of at most 300 characters."),
        ("title: [a]\n", ":1:8: title: found a list of 1; expected a text of at most 300 characters."),
        ("title: x\nsubtitle: y\n", f":2:1: unknown key 'subtitle'; expected one of {KEYS}. Did you mean 'title'?"),
        (
            "title: x\nlanguage: english!\n",
            ":2:11: language: found 'english!'; expected a language tag such as 'en' or 'en-GB'.",
        ),
        ("title: x\ncontact: me\n", ":2:10: contact: found 'me'; expected a mail address or a web address."),
        (
            "title: x\nbase address: javascript:alert(1)\n",
            ":2:15: base address: found 'javascript:alert(1)'; expected an address such as"
            " 'https://handbook.example.org/'.",
        ),
        (
            "title: x\nreference temperature: 0 K\n",
            ":2:24: reference temperature: '0 K' is absolute zero; expected a temperature above it.",
        ),
        (
            "title: x\nreference temperature: warm\n",
            ":2:24: reference temperature: 'warm' does not begin with a number; expected a form such as 1.03(2),"
            " 1.03(2)e19 or 1.03 ± 0.02.",
        ),
        (
            "title: x\ntemperatures: 77 K\n",
            ":2:15: temperatures: found '77 K'; expected a list of 1 to 50, such as [4.2 K, 77 K, 20 °C].",
        ),
        ("title: x\npaper: A5\n", ":2:8: paper: found 'A5'; expected A4 or letter."),
        ("title: x\nunits: eV\n", ":2:8: units: found 'eV'; expected a mapping such as {fermi_energy: eV}."),
        (
            "title: x\nunits: {fermi_energy: ev}\n",
            ":2:23: unit of fermi energy: 'ev' is no unit known here. Did you mean 'eV'?",
        ),
        ("title: x\nthresholds: {agrees: 2}\n", ":2:22: agrees: found '2'; expected a number above 0 and at most 1."),
        (
            "title: x\nthresholds: {bulk: 10}\n",
            ":2:20: bulk: found '10'; expected [strained, broken] such as [0.1, 0.3], null standing for a bound that"
            " does not exist.",
        ),
        ("title: x\nthresholds: {bulk: [x, 1]}\n", ":2:21: bulk: found 'x'; expected a number above 0, or null."),
        (
            "title: x\nthresholds: {Bulk: [1, 1]}\n",
            ":2:14: 'Bulk' is no id of an assumption; expected one such as degenerate_gas.",
        ),
        (
            "title: x\ndate: 2.11.2026\n",
            ":2:7: date: found '2.11.2026'; expected the day of the edition, such as 2026-11-02.",
        ),
        (
            "title: x\nprevious edition: ../other.json\n",
            ":2:19: previous edition: found '../other.json', no such file below handbook.yaml; expected the"
            " data/handbook.json of that edition, kept in this folder, such as editions/2026-1.json.",
        ),
        *(
            (
                f"title: x\nown quantities: {name}\n",
                f":2:17: own quantities: found '{name}', no Python file beside handbook.yaml; expected a name such as"
                " quantities.py.",
            )
            for name in ("../evil.py", "/tmp/evil.py", "missing.py")
        ),
    ],
)
def test_fault_of_the_imprint(faults, imprint, message):
    assert faults(imprint=imprint) == [f"m/handbook.yaml{message}"]
