"""Units as people write them, held against the units library's own reading of their plain form."""

from __future__ import annotations

import subprocess
import sys
import time

import pint
import pytest
from hypothesis import given
from hypothesis import strategies as st

from sheetgen.records import dimension_matches, si_factor, to_si
from sheetgen.records.units import _library_unit, _usual_units, read_unit
from sheetgen.records.unreadable import UnreadableError


@pytest.fixture(scope="module")
def registry():
    return pint.UnitRegistry()


@pytest.mark.parametrize(
    "written, plain",
    [
        ("Å", "angstrom"),
        ("\u212b", "angstrom"),
        ("µm", "micrometer"),
        ("\u03bcm", "micrometer"),
        ("µΩ cm", "microohm * centimeter"),
        ("\u00b5\u2126 cm", "microohm * centimeter"),
        ("µΩcm", "microohm * centimeter"),
        ("μΩ·cm", "microohm * centimeter"),
        ("µΩ-cm", "microohm * centimeter"),
        ("uohm cm", "microohm * centimeter"),
        ("nΩ m", "nanoohm * meter"),
        ("mJ/(mol K²)", "millijoule / (mole * kelvin**2)"),
        ("mJ mol⁻¹ K⁻²", "millijoule / (mole * kelvin**2)"),
        ("mJ/mol/K^2", "millijoule / (mole * kelvin**2)"),
        ("mJ·mol^-1·K**-2", "millijoule / (mole * kelvin**2)"),
        ("mJ per mol per K^2", "millijoule / (mole * kelvin**2)"),
        ("1/(eV nm^3)", "1 / (electron_volt * nanometer**3)"),
        ("rad/(s T)", "radian / (second * tesla)"),
        ("fohm m^2", "femtoohm * meter**2"),
        ("W ohm/K^2", "watt * ohm / kelvin**2"),
        ("cm^2/(V s)", "centimeter**2 / (volt * second)"),
        ("g/cm³", "gram / centimeter**3"),
        ("kg m^(-3)", "kilogram / meter**3"),
        ("cm-3", "1 / centimeter**3"),
        ("/cm^3", "1 / centimeter**3"),
        ("m³/C", "meter**3 / coulomb"),
        ("1/K", "1 / kelvin"),
        ("kT", "kilotesla"),
        ("GPa", "gigapascal"),
        ("kbar", "kilobar"),
        ("Ry", "rydberg"),
        ("u/Å^3", "unified_atomic_mass_unit / angstrom**3"),
        ("°", "degree"),
        ("deg", "degree"),
        ("%", "percent"),
        ("1", "dimensionless"),
        ("", "dimensionless"),
        ("K/°C", "kelvin / delta_degree_Celsius"),
    ],
)
def test_unit_is_what_the_library_makes_of_its_plain_form(registry, written, plain):
    expected = registry.Quantity(1.0, plain).to_base_units()
    unit = read_unit(written)
    assert unit.factor == pytest.approx(expected.magnitude, rel=1e-12)
    powers = {base: power for base, power in expected.unit_items() if base != "radian"}
    assert dict(unit.dimension) == pytest.approx(powers)


def test_table_of_usual_units_is_what_the_library_says():
    assert len(_usual_units()) > 100
    for name, unit in _usual_units().items():
        library = _library_unit(name)
        assert unit[2:] == library[2:], name
        assert unit[:2] == pytest.approx(library[:2], rel=4e-16), name


def test_usual_units_do_not_load_the_library():
    program = (
        "import sys\n"
        "from sheetgen.records.units import _library_unit, _usual_units, read_unit\n"
        "for unit in ('µΩ cm', 'mJ/(mol K²)', '1/(eV nm^3)', 'Ω/sq', '°C', 'g/cm³'):\n"
        "    read_unit(unit)\n"
        "print('pint' in sys.modules)\n"
    )
    assert subprocess.run([sys.executable, "-c", program], capture_output=True, text=True).stdout == "False\n"


@pytest.mark.parametrize("unit", ["Ω", "Ω/sq", "Ω/□", "ohm/square", "ohm per square", "Ω per sq"])
def test_sheet_resistance_is_in_ohms(unit):
    assert si_factor(unit) == 1.0
    assert dimension_matches(unit, "ohm")


def test_temperature_in_celsius_is_shifted_and_its_difference_is_not():
    assert to_si(20, "°C") == pytest.approx(293.15, abs=1e-12)
    assert to_si(20, "℃") == to_si(20, "degC")
    assert si_factor("ppm/°C") == pytest.approx(1e-6, rel=1e-12)


@pytest.mark.parametrize(
    "unit, message",
    [
        ("ev", "'ev' is no unit known here. Did you mean 'eV'?"),
        ("µOhm cm", "'uOhm' in 'µOhm cm' is no unit known here. Did you mean 'uohm'?"),
        ("dB", "'dB' is no unit known here."),
        ("m/sq", "'m/sq' is per square, which only a sheet resistance is; expected such as 'Ω/sq'"),
        ("10 cm", "the unit '10 cm' holds the number '10 cm'; expected one number, then its unit"),
        ("cm^99", "the unit 'cm^99' has the exponent 99; expected at most 12"),
        ("(cm", "the unit '(cm' leaves a bracket open; close it"),
        ("cm)", "the unit 'cm)' cannot be read at ')'; expected a form such as 'µΩ cm' or 'mJ/(mol K^2)'"),
        ("cm/", "the unit 'cm/' cannot be read at its end; expected a form such as 'µΩ cm' or 'mJ/(mol K^2)'"),
        ("m^x", "the unit 'm^x' cannot be read at '^x'; expected a form such as 'µΩ cm' or 'mJ/(mol K^2)'"),
        ("Ym^12 Ym^12", "the unit 'Ym^12 Ym^12' is beyond what a number can hold; check its exponents"),
        ("m" * 61, "a unit of 61 characters; expected at most 60"),
    ],
)
def test_complaint_says_what_was_found_and_expected(unit, message):
    with pytest.raises(UnreadableError) as caught:
        read_unit(unit)
    assert str(caught.value) == message


@given(st.text(alphabet="m kgΩµ^*/()-+0123456789.eE_√%°²⁻\u202e'\"\\;[]{}", max_size=80))
def test_no_text_does_anything_but_be_a_unit_or_a_complaint(text):
    began = time.perf_counter()
    try:
        unit = read_unit(text)
    except UnreadableError as error:
        assert str(error)
    else:
        assert unit.factor > 0
    assert time.perf_counter() - began < 1


@pytest.mark.parametrize("blank", ["\x1c", "\x1e", "\u2003", "\u3000", "\t"])
def test_any_blank_may_stand_before_an_exponent(blank):
    assert read_unit(f"m^{blank}3") == read_unit("m^3")


VANISHING = ["m/(ae^9 ae^9 ae^9)", "1/B/1/B/d/ae9/ee999/", "1/(qe^12 qe^12)", "(qe^12)^12", "m/(Qm^12)^12"]


@pytest.mark.parametrize("unit", VANISHING)
def test_a_unit_beyond_all_numbers_is_refused(unit):
    with pytest.raises(UnreadableError):
        read_unit(unit)
