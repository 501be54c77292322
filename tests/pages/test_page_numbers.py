"""Numbers and units as printed."""

from __future__ import annotations

import re
from decimal import Decimal

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from sheetgen.pages import numbers
from sheetgen.pages.numbers import MINUS, NARROW, column, printed, stated, unit, unit_text

SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻", "0123456789-")
finite = st.floats(allow_nan=False, allow_infinity=False, allow_subnormal=False)
magnitudes = st.floats(min_value=1e-250, max_value=1e250)


def read(text: str) -> tuple[Decimal, Decimal | None]:
    """A printed number as value and uncertainty, by a reader of its own."""
    plain = text.replace(NARROW, "").replace(MINUS, "-")
    found = re.fullmatch(r"(-?[\d.]+)(?:\((\d+)\))?(?:×10([⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+))?", plain)
    assert found, text
    digits, bracket, power = found.groups()
    scale = Decimal(10) ** int(power.translate(SUPERSCRIPTS)) if power else Decimal(1)
    decimals = len(digits.partition(".")[2])
    spread = None if bracket is None else Decimal(bracket).scaleb(-decimals) * scale
    return Decimal(digits) * scale, spread


# JCGM 100:2008, 7.2.2: 100.021 47(35) g stands for 100.021 47 g with a standard uncertainty of 0.35 mg.
# 7.2.6: 10.057 62 ohm with 27 milliohm becomes 10.058 ohm (0.027); 28.05 kHz as uncertainty is given as 28 kHz.
@pytest.mark.parametrize(
    ("value", "uncertainty", "expected"),
    [
        (100.02147, 0.00035, "100.02147(35)"),
        (10.05762, 0.027, "10.058(27)"),
        (0.0, 0.02805, "0.000(28)"),
        (8.491e28, 1.2e25, f"8.4910(12){NARROW}×{NARROW}10²⁸"),
        (-1.6e-11, None, f"{MINUS}1.6{NARROW}×{NARROW}10⁻¹¹"),
        (1250.0, 340.0, f"1.25(34){NARROW}×{NARROW}10³"),
        (0.0995, 0.0996, "0.10(10)"),
        (12.34, 1.24, "12.3(12)"),
        (81673.2, None, f"81{NARROW}673.2"),
        (0.1 + 0.2, None, "0.3"),
        (0.0, None, "0"),
        (-0.0, None, "0"),
        (999999.7, None, f"1{NARROW}×{NARROW}10⁶"),
        (7.0, 0.0, "7"),
    ],
)
def test_printed_by_hand(value, uncertainty, expected):
    assert printed(value, uncertainty).text == expected


def test_a_whole_number_is_shown_in_full():
    assert printed(10475180.0, None, whole=True).text == f"10{NARROW}475{NARROW}180"


@given(value=finite, uncertainty=magnitudes)
def test_two_digits_of_uncertainty_and_no_more_rounding_than_half_the_last_place(value, uncertainty):
    assume(uncertainty > abs(value) * 1e-12)
    shown, spread = read(printed(value, uncertainty).text)
    assert spread is not None
    assert 10 <= int(printed(value, uncertainty).uncertainty) <= 99
    last = spread / int(printed(value, uncertainty).uncertainty)
    assert abs(shown - Decimal(value)) <= last * Decimal("0.500001")
    assert abs(spread - Decimal(uncertainty)) <= last * Decimal("0.500001")


@given(value=finite)
def test_six_digits_where_there_is_no_uncertainty(value):
    shown, spread = read(printed(value).text)
    assert spread is None
    assert abs(shown - Decimal(value)) <= abs(Decimal(value)) * Decimal("5.000001e-6")
    digits = re.sub(r"\D", "", printed(value).digits).lstrip("0")
    assert len(digits) <= 6


@given(value=finite, uncertainty=st.one_of(st.none(), st.floats(min_value=0, allow_infinity=False)))
def test_nothing_is_ever_shown_as_plus_minus_zero(value, uncertainty):
    text = printed(value, uncertainty).text
    assert "(0)" not in text and "(00)" not in text
    assert "nan" not in text.lower() and "e" not in text


@pytest.mark.parametrize("bad", [(float("nan"), None), (float("inf"), 1.0), (1.0, -1.0), (1.0, float("nan"))])
def test_what_is_no_number_is_refused(bad):
    with pytest.raises(ValueError, match="cannot be printed"):
        printed(*bad)


@pytest.mark.parametrize(
    ("value", "uncertainty", "expected"),
    [(3.6149, 0.0002, "3.6149(2)"), (0.695, 0.01, "0.695(10)"), (40.0, 2.0, "40(2)"), (343.0, None, "343")],
)
def test_an_input_keeps_the_digits_of_its_author(value, uncertainty, expected):
    assert stated(value, uncertainty).text == expected


def test_a_power_of_ten_is_a_real_superscript():
    assert str(printed(1.6e-11).html).endswith(f"10<sup>{MINUS}11</sup>")


def test_a_column_stands_in_line_at_the_decimal_point():
    power, cells = column([(1.57e6, 1e3), (12.03e6, None), None, (0.86e6, 2e4)])
    assert power == 6
    before = [re.sub(r"<[^>]+>", "", str(cell)).split(".")[0] for cell in cells if cell]
    assert {len(text) for text in before} == {2}
    assert cells[2] == ""


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("1/(eV nm^3)", "eV⁻¹ nm⁻³"),
        ("uohm cm", "µΩ cm"),
        ("angstrom^3", "Å³"),
        ("rad/(s T)", "rad s⁻¹ T⁻¹"),
        ("W ohm/K^2", "W Ω K⁻²"),
        ("mJ/(mol K^2)", "mJ mol⁻¹ K⁻²"),
        ("mJ/(mol K²)", "mJ mol⁻¹ K⁻²"),
        ("cm^2/(V s)", "cm² V⁻¹ s⁻¹"),
        ("J mol⁻¹ K⁻¹", "J mol⁻¹ K⁻¹"),
        ("kg/m³", "kg m⁻³"),
        ("W/m/K", "W m⁻¹ K⁻¹"),
        ("fohm m^2", "fΩ m²"),
        ("1/T", "T⁻¹"),
        ("°C", "°C"),
        ("1", ""),
        ("not [a] unit", "not [a] unit"),
    ],
)
def test_units_are_set_with_powers(text, expected):
    assert unit_text(text).replace(NARROW, " ") == expected


def test_every_unit_of_the_handbook_is_understood(small_handbook):
    for definition in small_handbook.registry.all:
        if definition.published and definition.unit != "1":
            assert numbers.unit_factors(definition.unit), definition.unit


def test_a_hostile_unit_is_escaped():
    assert unit("<script>") == "&lt;script&gt;"


def test_another_unit_keeps_the_relative_uncertainty():
    value, uncertainty = numbers.converted(1.57e6, 1.57e3, "m/s", "km/s")
    assert value == pytest.approx(1570, rel=1e-14)
    assert uncertainty / value == pytest.approx(1e-3, rel=1e-12)
