"""Whoever opens the sheet of a dangerous material finds the danger on it."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from sheetgen.records import read_folder

RECORDS = {record.slug: record for record in read_folder(Path(__file__).parents[2] / "materials").records}

# Hazard statements of the GHS (Rev. 9, annex 3) that a supplier's sheet of the element or compound carries, the
# gravest ones: H260/H261 water, H300 to H331 poison, H314 burns, H330 fatal if inhaled, H340/H341 genes, H350/H351
# cancer, H360 unborn child, H372 organs.
GRAVEST = {
    "lithium": {"H260", "H314"}, "sodium": {"H260", "H314"}, "potassium": {"H260", "H314"},
    "rubidium": {"H260", "H314"}, "caesium": {"H260", "H314"},
    "beryllium": {"H330", "H350i", "H372"}, "cadmium": {"H330", "H350", "H372"},
    "mercury": {"H330", "H360D", "H372"}, "mercury-liquid": {"H330", "H360D", "H372"},
    "thallium": {"H300", "H330"}, "lead": {"H360FD", "H372"}, "barium": {"H301"},
    "calcium": {"H261"}, "strontium": {"H260"}, "magnesium": {"H228"},
    "nickel": {"H351", "H372", "H317"}, "cobalt": {"H350", "H334", "H317"},
    "gallium-arsenide-n": {"H350", "H360F", "H372"}, "gallium-arsenide-quantum-well": {"H350", "H360F", "H372"},
    "indium": {"H372"}, "indium-tin-oxide": {"H372"}, "antimony": {"H351"},
}


@pytest.mark.parametrize(("slug", "codes"), GRAVEST.items())
def test_the_gravest_hazards_stand_there(slug, codes):
    stated = {code for caution in RECORDS[slug].cautions for code in caution.hazard}
    assert codes <= stated


@pytest.mark.parametrize("slug", RECORDS)
def test_codes_are_hazard_statements(slug):
    codes = [code for caution in RECORDS[slug].cautions for code in caution.hazard]
    # 2 physical, 3 health, 4 environment; letters narrow cancer by inhalation and harm to fertility or child.
    assert all(re.fullmatch(r"H[234]\d\d(i|F|D|FD|f|d|fd)?", code) for code in codes)


@pytest.mark.parametrize("slug", RECORDS)
def test_every_sheet_defers_to_the_safety_data_sheet(slug):
    last = RECORDS[slug].cautions[-1].text
    assert "not design allowables" in last
    assert "safety data sheet" in last
