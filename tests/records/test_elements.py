"""Atomic weights held against two packages, and against the revisions that these do not carry yet."""

from __future__ import annotations

from decimal import ROUND_HALF_UP, Decimal

import mendeleev.fetch
import periodictable
import pytest

from sheetgen.records import atomic_number, atomic_weight
from sheetgen.records.elements import elements

# CIAAW, standard atomic weights revised in 2024: Zr 91.222(3) from 91.224(2), Gd 157.249(2) from 157.25(3),
# Lu 174.966 69(5) from 174.9668(1); abridged to five digits.
REVISED = {"Zr": 91.222, "Gd": 157.25, "Lu": 174.97}
# Changed by CIAAW in 2021, later than the package's table: Ar [39.792, 39.963], Hf 178.486(6).
NEWER = {"Ar", "Hf"}


def test_there_are_118_elements_in_order():
    assert [element.number for element in elements().values()] == list(range(1, 119))


def test_numbers_and_symbols_agree_with_periodictable():
    for symbol in elements():
        assert periodictable.elements.symbol(symbol).number == atomic_number(symbol)


@pytest.mark.parametrize("symbol, weight", REVISED.items())
def test_revisions_of_2024(symbol, weight):
    assert atomic_weight(symbol) == weight


def abridged(weight: float) -> float:
    """Five significant digits of the printed number, as the abridged table has them (V 50.9415 is 50.942)."""
    printed = Decimal(repr(float(weight)))
    return float(printed.quantize(Decimal(1).scaleb(printed.adjusted() - 4), ROUND_HALF_UP))


def test_weights_are_the_abridged_ones_of_periodictable():
    for symbol, element in elements().items():
        if element.weight is not None and symbol not in REVISED:
            full = periodictable.elements.symbol(symbol).mass
            assert element.weight == pytest.approx(abridged(full), rel=1e-12), symbol


def test_weights_are_the_abridged_ones_of_mendeleev():
    table = mendeleev.fetch.fetch_table("elements").set_index("symbol").atomic_weight
    for symbol, element in elements().items():
        if element.weight is not None and symbol not in REVISED | dict.fromkeys(NEWER):
            assert element.weight == pytest.approx(abridged(table[symbol]), rel=1e-12), symbol


def test_an_element_without_a_stable_isotope_has_no_weight():
    without = {symbol for symbol, element in elements().items() if element.weight is None}
    # All from polonium on but Th, Pa, U, which have a characteristic terrestrial composition.
    expected = {"Tc", "Pm"} | {symbol for symbol in elements() if atomic_number(symbol) >= 84} - {"Th", "Pa", "U"}
    assert without == expected


def test_unknown_symbol_raises():
    with pytest.raises(KeyError):
        atomic_weight("Xx")
