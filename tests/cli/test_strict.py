"""A strict proof and a press with draws, on the command line."""

import json

from sheetgen.cli import run


def test_a_strict_proof_lists_what_has_no_source_or_review(small_handbook, capsys):
    assert run(["proof", str(small_handbook)]) == 0
    assert run(["proof", "--strict", str(small_handbook)]) == 1
    lines = capsys.readouterr().err.splitlines()
    place = small_handbook / "copper.yaml"
    assert f"{place}:7:12: electrons.valence: 1 has no source. Add 'from' with a key of sources.bib." in lines
    assert any(line.endswith("Check it, then add 'review' with state, by and date.") for line in lines)


def test_draws_state_intervals_in_the_data(small_handbook, tmp_path):
    site = tmp_path / "site"
    assert run(["press", str(small_handbook), "--into", str(site), "--draws", "400"]) == 0
    copper = json.loads((site / "data/materials/copper.json").read_text())
    low, high = copper["quantities"]["fermi_energy"]["coverage_interval"]
    assert low < copper["quantities"]["fermi_energy"]["value"] < high


def test_too_few_draws_are_a_fault_of_the_command_line(small_handbook, tmp_path, capsys):
    assert run(["press", str(small_handbook), "--into", str(tmp_path / "site"), "--draws", "7"]) == 2
    assert "7 is not in the range" in capsys.readouterr().err
