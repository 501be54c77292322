"""Looking one number up."""

from __future__ import annotations

import pytest

from sheetgen.quote import NotDerivedError, NotFoundError, plain, quote


@pytest.mark.parametrize(
    "latex, text",
    [
        (r"E_\mathrm{F}", "E_F"),
        (r"\hbar\omega_\mathrm{p}", "ħω_p"),
        (r"\lambda_\mathrm{TF}", "λ_TF"),
        (r"g(E_\mathrm{F})/n_\mathrm{at}", "g(E_F)/n_at"),
        (r"\langle E \rangle", "⟨E⟩"),
        (r"\varepsilon_\mathrm{x}", "ε_x"),
        (r"\Omega_\mathrm{BZ}", "Ω_BZ"),
        ("", ""),
    ],
)
def test_symbol_in_plain_text(latex, text):
    assert plain(latex) == text


def test_every_symbol_of_the_handbook_is_plain_text(handbook):
    for definition in handbook.registry.published().values():
        assert not set(plain(definition.symbol)) & set("\\{}$"), definition.id


@pytest.mark.parametrize("word", ["copper", "Copper", "COPPER", "Cu", "cu"])
def test_material_by_slug_name_or_formula(handbook, word):
    assert quote(handbook, word, "fermi_energy").sheet.record.slug == "copper"


@pytest.mark.parametrize("word", ["fermi_energy", "fermi energy", "Fermi-Energy", "FERMI_ENERGY"])
def test_quantity_by_id_in_any_spelling(handbook, word):
    assert quote(handbook, "copper", word).definition.id == "fermi_energy"


def test_every_quantity_by_its_title(handbook):
    for id, definition in handbook.registry.published().items():
        sheet = next((sheet for sheet in handbook.sheets if sheet.entries(id)), None)
        if sheet is not None:
            assert quote(handbook, sheet.record.slug, definition.title).definition.title == definition.title


def test_every_number_of_the_handbook_can_be_quoted(handbook):
    for sheet in handbook.sheets:
        for id in sheet.data["quantities"]:
            lines = list(quote(handbook, sheet.record.slug, id).lines())
            assert lines[0].startswith(f"{sheet.record.name}: ")
            assert [line.split()[0] for line in lines if line[2:3].strip()][-3:] != []


def test_reference_temperature_unless_another_is_named(handbook):
    reference = handbook.imprint.reference_temperature
    (entry,) = quote(handbook, "copper", "chemical_potential").entries
    assert entry["temperature"] == reference
    (entry,) = quote(handbook, "copper", "chemical_potential", 77.0).entries
    assert entry["temperature"] == 77.0


def test_temperature_that_is_not_stated(handbook):
    stated = ", ".join(f"{temperature:g}" for temperature in handbook.imprint.temperatures)
    with pytest.raises(NotFoundError) as error:
        quote(handbook, "copper", "chemical_potential", 55.0)
    assert str(error.value) == f"chemical_potential is stated at {stated} K, and not at 55 K."


def test_temperature_for_a_quantity_without_one(handbook):
    with pytest.raises(NotFoundError) as error:
        quote(handbook, "copper", "fermi_energy", 77.0)
    assert str(error.value) == "fermi_energy is not stated by temperature; leave --at out."


def test_every_edge_of_a_list_by_edge(handbook):
    edges = [entry["edge"] for entry in quote(handbook, "copper", "states_hard_wall").entries]
    assert edges == [1, 2, 5, 10, 20, 50]


def test_unknown_material_gets_a_guess(handbook):
    with pytest.raises(NotFoundError) as error:
        quote(handbook, "coper", "fermi_energy")
    assert str(error.value) == "The handbook has no material 'coper'. Did you mean 'copper'?"


def test_unknown_quantity_gets_a_guess(handbook):
    with pytest.raises(NotFoundError) as error:
        quote(handbook, "copper", "fermi_enrgy")
    assert str(error.value) == "The handbook has no quantity 'fermi_enrgy'. Did you mean 'fermi_energy'?"


def test_word_that_resembles_nothing_gets_the_list(handbook):
    with pytest.raises(NotFoundError) as error:
        quote(handbook, "zzzzqqqq", "fermi_energy")
    assert str(error.value).startswith("The handbook has no material 'zzzzqqqq'. It has ")
    assert "copper" in str(error.value)


def test_formula_of_two_materials_asks_which(handbook):
    formulas = [sheet.record.formula for sheet in handbook.sheets]
    twice = next(formula for formula in formulas if formulas.count(formula) > 1)
    slugs = [sheet.record.slug for sheet in handbook.sheets if sheet.record.formula == twice]
    with pytest.raises(NotFoundError) as error:
        quote(handbook, twice, "fermi_energy")
    assert str(error.value) == (
        f"'{twice}' is the formula of {len(slugs)} materials; choose one of {', '.join(slugs)}."
    )


def test_quantity_that_lacks_an_input_names_it(small_handbook):
    from sheetgen.handbook import Handbook

    with pytest.raises(NotDerivedError) as error:
        quote(Handbook.load(small_handbook), "sodium", "mobility")
    assert str(error.value).startswith("Sodium has no mobility: ")
    assert "resistivity" in str(error.value)
