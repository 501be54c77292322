"""Symbols in labels, and units and numbers in words."""

import pytest
from scipy import constants as c

from sheetgen.figures.markup import from_latex, plain, spans, visible
from sheetgen.figures.words import energy, enumeration, in_sentence, kelvin, number, unit_label
from sheetgen.quantities import registry


def test_a_label_in_a_csv_header_is_plain():
    assert plain("*E*_{F} / eV") == "E_F / eV"
    assert plain("*T*^{2} / K^{2}") == "T^2 / K^2"


def test_a_label_in_a_picture_has_italics_and_a_subscript_that_shifts_back():
    assert spans("*E*_{F} / eV", 1000) == (
        '<tspan class="i">E</tspan><tspan class="s" dy="220">F</tspan><tspan dy="-220"> / eV</tspan>'
    )


@pytest.mark.parametrize(
    ("latex", "label"),
    [
        (r"E_\mathrm{F}", "*E*_{F}"),
        (r"\hbar\omega_\mathrm{sp}", "*ħ**ω*_{sp}"),
        (r"k_\mathrm{F}/k_\mathrm{zone}", "*k*_{F}/*k*_{zone}"),
        (r"\langle E \rangle", "⟨*E*⟩"),
        (r"r_\mathrm{s}^*", "*r*_{s}^{*}"),
        (r"L_{1\,\%}", "*L*_{1\u202f%}"),
        (r"\frac{a}{b}", None),
    ],
)
def test_symbols_of_declarations(latex, label):
    assert from_latex(latex) == label


def test_markup_characters_of_xml_are_escaped():
    assert spans("a < b & c", 700) == "a &lt; b &amp; c"


def test_what_is_measured_is_what_is_seen():
    assert visible("*k*_{F}*L*") == "kFL"


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (7.0312, "7.03"),
        (0.0744, "0.0744"),
        (81612.0, "8.16·10⁴"),
        (-2.5e-5, "−2.50·10⁻⁵"),
        (226.4, "226"),
        (1e-3, "0.00100"),
    ],
)
def test_numbers(value, text):
    assert number(value) == text


def test_temperatures_energies_and_lists():
    assert (kelvin(4.2), kelvin(293.15)) == ("4.2 K", "293 K")
    assert (energy(7.03 * c.e), energy(0.0107 * c.e)) == ("7.03 eV", "10.7 meV")
    assert (enumeration(["a"]), enumeration(["a", "b", "c"])) == ("a", "a, b and c")


@pytest.mark.parametrize(
    ("name", "phrase"),
    [
        ("Copper", "copper"),
        ("Gallium arsenide, n-type", "gallium arsenide, n-type"),
        ("Beta-prime brass", "beta-prime brass"),
        ("GaAs well", "GaAs well"),
        ("Tin", "Tin"),
        ("", ""),
    ],
)
def test_names_within_a_sentence(name, phrase):
    assert in_sentence(name) == phrase


@pytest.mark.parametrize(
    ("unit", "label"),
    [
        ("eV", "eV"),
        ("1/nm^3", "nm⁻³"),
        ("1/(eV nm^3)", "(eV⁻¹ nm⁻³)"),
        ("mJ/(mol K^2)", "(mJ mol⁻¹ K⁻²)"),
        ("uohm cm", "(µΩ cm)"),
        ("W ohm/K^2", "(W Ω K⁻²)"),
        ("rad/(s T)", "(rad s⁻¹ T⁻¹)"),
        ("angstrom^3", "Å³"),
        ("uV/K", "(µV K⁻¹)"),
    ],
)
def test_units_are_printed_as_the_si_brochure_does(unit, label):
    assert unit_label(unit) == label


def test_no_declared_unit_keeps_its_plain_ascii_form():
    for id in registry():
        for definition in registry().definitions_of(id):
            if definition.unit != "1":
                assert not set(unit_label(definition.unit)) & set("^/*")
                assert "ohm" not in unit_label(definition.unit)
