"""Editions of small handbooks for tests of errata."""

from __future__ import annotations

import json

import pytest
from quantities.small import COPPER, IMPRINT, handbook_of

from sheetgen.errata import Edition, edition_of


@pytest.fixture
def edition(tmp_path):
    """Make an edition of some records; the imprint's edition is its name."""

    def make(name: str = "1", further: str = "", **records: str) -> Edition:
        imprint = IMPRINT.replace('"1"', f'"{name}"') + further
        return edition_of(handbook_of(tmp_path / name, imprint, **(records or {"copper": COPPER})))

    return make


@pytest.fixture
def data_alone():
    """An edition of which only the data file is at hand; without assemblies, as an older program wrote it."""

    def strip(edition: Edition, assemblies: bool = True) -> Edition:
        data = json.loads(json.dumps(edition.data))
        if not assemblies:
            del data["assemblies"]
        return Edition(edition.name, data)

    return strip
