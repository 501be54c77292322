"""Draws: intervals, the validation of first-order results, and that nothing depends on what else is drawn."""

import pytest
from quantities.small import COPPER, handbook_of

from sheetgen.draws import INVALID, UNRESOLVED, VALID, validate
from sheetgen.handbook import Handbook
from sheetgen.uncertainty import Number

DRAWS = 4000
WIDE = COPPER.replace("0.21(1)", "0.21(5)").replace("1.678(9)", "1.678(10)")


@pytest.fixture(scope="module")
def folder(tmp_path_factory):
    place = tmp_path_factory.mktemp("draws")
    handbook_of(place, copper=WIDE, other=WIDE.replace("name: Copper", "name: Other"))
    return place


@pytest.fixture(scope="module")
def drawn(folder):
    return Handbook.load(folder, draws=DRAWS)["copper"]


def test_a_linear_number_is_valid_and_has_the_textbook_interval(drawn):
    # ρ at its own reference is the input itself: y ± 1.96 u, JCGM 101 (2008), 9.2.2.
    entry = drawn.entries("resistivity_from_debye")[0]
    low, high = entry["coverage_interval"]
    assert low == pytest.approx(1.678 - 1.96 * 0.010, abs=2e-4)
    assert high == pytest.approx(1.678 + 1.96 * 0.010, abs=2e-4)
    assert entry["first_order"] == VALID


def test_a_reciprocal_of_something_uncertain_is_flagged(drawn):
    # τ ∝ 1/ρ with u(ρ)/ρ = 24 %: the interval is far from symmetric, its ends those of 1/ρ.
    entry = drawn.entries("relaxation_time")[1]
    assert entry["temperature"] == 77
    low, high = (end / entry["value"] for end in entry["coverage_interval"])
    spread = 1.96 * 0.05 / 0.21
    assert low == pytest.approx(1 / (1 + spread), rel=0.01)
    assert high == pytest.approx(1 / (1 - spread), rel=0.02)
    assert entry["first_order"] == INVALID


def test_without_draws_nothing_is_said(folder):
    sheet = Handbook.load(folder)["copper"]
    assert all("first_order" not in entry for id in sheet.data["quantities"] for entry in sheet.entries(id))


def test_the_same_seed_gives_the_same_interval_whatever_else_is_drawn(folder, drawn, tmp_path):
    alone = handbook_of(tmp_path, copper=WIDE)
    again = Handbook.load(alone.folder.path, draws=DRAWS)["copper"]
    assert again.data["quantities"] == drawn.data["quantities"]
    other = Handbook.load(folder, draws=DRAWS, seed=1)["copper"]
    assert other.entries("mean_free_path") != drawn.entries("mean_free_path")


# JCGM 101 (2008), 8.2: u = 0.47 keeps two digits as 47 × 10⁻², so the tolerance is 0.005; u = 1.0 gives 0.05.
@pytest.mark.parametrize(
    "uncertainty, off, noise, word",
    [(0.47, 0.004, 0, VALID), (0.47, 0.006, 0, INVALID), (1.0, 0.04, 0, VALID), (1.0, 0.04, 0.02, UNRESOLVED)],
)
def test_validation_at_two_digits(uncertainty, off, noise, word):
    number = Number(10.0, uncertainty)
    half = 1.959963984540054 * uncertainty
    assert validate(number, 10 - half + off, 10 + half, noise) == word
