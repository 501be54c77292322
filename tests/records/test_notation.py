"""Every form of a number, and every text that is none."""

from __future__ import annotations

import pytest

from sheetgen.records.notation import read_number
from sheetgen.records.unreadable import UnreadableError


@pytest.mark.parametrize(
    "text, value, uncertainty, unit",
    [
        ("1.03", 1.03, None, ""),
        ("5", 5.0, None, ""),
        (".5", 0.5, None, ""),
        ("5.", 5.0, None, ""),
        ("+2", 2.0, None, ""),
        ("-9.6e-6", -9.6e-6, None, ""),
        ("−9.6e−6", -9.6e-6, None, ""),
        ("1e-8", 1e-8, None, ""),
        ("1E8", 1e8, None, ""),
        ("1.03(2)", 1.03, 0.02, ""),
        ("12(3)", 12.0, 3.0, ""),
        ("12.5(1.2)", 12.5, 1.2, ""),
        ("0.010(10)", 0.01, 0.01, ""),
        ("1.03(0)", 1.03, None, ""),
        ("1.03(2)e19", 1.03e19, 2e17, ""),
        ("1.03(2)×10^19", 1.03e19, 2e17, ""),
        ("1.03(2) × 10^19 cm^-3", 1.03e19, 2e17, "cm^-3"),
        ("1.03(2)×10¹⁹ cm⁻³", 1.03e19, 2e17, "cm⁻³"),
        ("1.03(2)·10^19", 1.03e19, 2e17, ""),
        ("1.03(2)x10**19", 1.03e19, 2e17, ""),
        ("5.1*10^-11 m³/C", 5.1e-11, None, "m³/C"),
        ("-5.1×10⁻¹¹ m³/C", -5.1e-11, None, "m³/C"),
        ("3.6149 ± 0.0002 Å", 3.6149, 0.0002, "Å"),
        ("3.6149±0.0002 Å", 3.6149, 0.0002, "Å"),
        ("3.6149 +/- 0.0002 Å", 3.6149, 0.0002, "Å"),
        ("3.6149 +- 2e-4 Å", 3.6149, 0.0002, "Å"),
        ("(3.6149 ± 0.0002) Å", 3.6149, 0.0002, "Å"),
        ("(1.03 ± 0.02)×10^19 cm^-3", 1.03e19, 2e17, "cm^-3"),
        ("(1.03 ± 0.02)e19", 1.03e19, 2e17, ""),
        ("1.03e19 ± 2e17 cm^-3", 1.03e19, 2e17, "cm^-3"),
        ("16.5e-6 1/K", 1.65e-5, None, "1/K"),
        ("3.0 /cm^3", 3.0, None, "/cm^3"),
        ("4.2K", 4.2, None, "K"),
        ("0.5 eV", 0.5, None, "eV"),
        ("57.23°", 57.23, None, "°"),
        ("\u00a03.6\u2009Å ", 3.6, None, "Å"),
        ("1.676(5) µΩ cm", 1.676, 0.005, "µΩ cm"),
    ],
)
def test_form_is_read(text, value, uncertainty, unit):
    number = read_number(text)
    assert number.value == pytest.approx(value, rel=1e-15)
    assert number.standard_uncertainty == (None if uncertainty is None else pytest.approx(uncertainty, rel=1e-15))
    assert number.unit == unit


@pytest.mark.parametrize(
    "text, message",
    [
        ("", "found nothing; expected a number with its unit, or leave the key out"),
        (
            "about 3 Å",
            "'about 3 Å' does not begin with a number; expected a form such as 1.03(2), 1.03(2)e19 or 1.03 ± 0.02",
        ),
        ("nan", "'nan' is not a finite number; leave the key out where nothing is known"),
        ("-.inf", "'-.inf' is not a finite number; leave the key out where nothing is known"),
        ("1e999 Å", "'1e999 Å' is beyond what a number can hold; check the exponent"),
        ("1e-999 Å", "'1e-999 Å' is beyond what a number can hold; check the exponent"),
        ("1(9)e308 Å", "'1(9)e308 Å' is beyond what a number can hold; check the exponent"),
        (
            "3,6149 Å",
            "'3,6149 Å' has a decimal comma; expected a decimal point: write '3.6149 Å', and leave thousands ungrouped",
        ),
        ("8 960 kg/m³", "'8 960 kg/m³' has a space between its digits; write the digits without spaces"),
        ("3.6 4.1 Å", "'3.6 4.1 Å' has a second number '4.1 Å'; expected one number and its unit"),
        ("10^19 cm^-3", "'10^19 cm^-3' is a bare power; expected a form such as 1e19 or 1×10^19"),
        ("1.03(x)", "'1.03(x)' has brackets that are no uncertainty; expected digits in them, as 1.03(2)"),
        ("3 ± -1 Å", "'3 ± -1 Å' has a negative uncertainty; expected one above 0"),
        ("1" * 201, "found a text of 201 characters; expected a number of at most 200"),
    ],
)
def test_complaint_says_what_was_found_and_expected(text, message):
    with pytest.raises(UnreadableError) as caught:
        read_number(text)
    assert str(caught.value) == message
