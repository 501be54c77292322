"""The plain answer at the top of a sheet."""

from quantities.small import COPPER, handbook_of

MEASURED = """\
  bulk modulus: {value: 137 GPa, from: here}
  hall coefficient: {value: -5.4e-11 m³/C, from: here}
  plasma energy: {value: 10.5 eV, from: here}
  thermopower: {value: -1.6(2) µV/K, at: 293.15 K, from: here}
  interband threshold: {value: 2.1 eV, from: here}
  work function:"""


def answer(folder):
    return handbook_of(folder, copper=COPPER.replace("  work function:", MEASURED))["copper"].answer


def test_each_quantity_with_a_measurement_has_its_place(tmp_path):
    given = answer(tmp_path)
    assert [line.quantity for line in given.use] == ["thermopower"]
    assert "hall_coefficient" in [line.quantity for line in given.scale]
    avoided = {line.quantity: line.standing for line in given.avoid}
    assert avoided["bulk_modulus"] == "fails"
    assert avoided["plasma_energy"] == "outside"


def test_a_line_to_scale_has_its_factor_and_says_why(tmp_path):
    (line,) = (line for line in answer(tmp_path).scale if line.quantity == "heat_coefficient")
    assert line.factor > 1.3 and line.factor_uncertainty > 0
    assert line.reason == (
        "measured/model = 1.38 ± 0.02: electrons at the Fermi level are heavier than free ones: lattice "
        "vibrations, other electrons or a narrow band slow them"
    )


def test_a_broken_assumption_is_the_reason(tmp_path):
    (line,) = (line for line in answer(tmp_path).avoid if line.quantity == "plasma_energy")
    assert line.reason == ("rests on “one band only”, broken here: interband threshold/photon energy = 0.19, below 1")


def test_entries_of_a_list_are_told_apart(tmp_path):
    lines = [line for line in answer(tmp_path).avoid if line.quantity == "normal_reflectance"]
    assert [line.where for line in lines] == ["3 eV, 6 eV"]
    (used,) = answer(tmp_path).use
    assert used.where == "293.15 K"
    assert used.reason == "measured 4.7 % above the model"
