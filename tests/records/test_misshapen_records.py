"""A record of the wrong shape still gets the faults of its values, in the same run."""

import pytest
from quantities.small import handbook_of

from sheetgen.faults import FaultsError

HEAD = "name: Copper\nformula: Cu\n"


def faults(folder, text: str) -> list[str]:
    with pytest.raises(FaultsError) as caught:
        handbook_of(folder, copper=HEAD + text)
    return [f"{fault.place.line}:{fault.place.column}: {fault.message}" for fault in caught.value.faults]


@pytest.mark.parametrize(
    "text, starts",
    [
        (
            "measured: {resistivity: {value: -1 µΩ cm}, resistivty: 3}\n",
            ["3:33: resistivity: '-1 µΩ cm' is out of the physical range", "3:44: unknown key 'resistivty'"],
        ),
        (
            "measured: {refractive index: [{photon energy: 1 eV, n: -1, k: 3}, {n: 1, k: 2}]}\n",
            ["3:56: n: '-1' is out of the physical range", "3:67: refractive index has no 'photon energy'"],
        ),
        (
            "electrns: {valence: 1}\nmeasured: {resistivity: 3 kg}\n",
            ["3:1: unknown key 'electrns'", "4:25: resistivity: given in 'kg'"],
        ),
        (
            "structure: {latice: fcc}\nmeasured: {debye temperature: 3 eV}\n"
            "specimens: [{name: a, form: film, thickness: 3 K}]\n",
            ["3:13: unknown key 'latice'", "4:31: debye temperature: given in 'eV'", "5:46: thickness: given in 'K'"],
        ),
    ],
)  # fmt: skip
def test_both_kinds_are_listed(tmp_path, text, starts):
    found = faults(tmp_path, text)
    assert len(found) == len(starts), found
    for message, start in zip(found, starts, strict=True):
        assert message.startswith(start)


def test_what_the_missing_part_would_upset_is_not_made_up(tmp_path):
    # Without the misspelt section nothing is said of what it should have held.
    assert len(faults(tmp_path, "structre: {lattice: fcc, a: 3.6 Å}\nelectrons: {valence: 1}\n")) == 1
