"""The tables of universal functions, read as the script reads them, against the functions themselves."""

from __future__ import annotations

import json

import numpy as np
import pytest

from sheetgen.pages.universal import STATED_ERROR, tables
from sheetgen.physics import bloch_grueneisen, debye, films, occupation

FUNCTIONS = {
    "debyeHeat": (lambda x: debye.debye_heat_ratio(x, 1.0), lambda series, x: np.exp(series)),
    "blochGrueneisen": (lambda x: bloch_grueneisen.bloch_grueneisen_shape(x, 1.0), lambda series, x: np.exp(series)),
    "chemicalPotential": (occupation.chemical_potential_ratio, lambda series, t: series * (1 + t)),
    "electronHeat": (occupation.heat_capacity_ratio, lambda series, t: np.exp(series)),
}


@pytest.fixture(scope="module")
def found():
    text = tables().decode()
    return json.loads(text[text.index("{") : text.rindex("}") + 1])


@pytest.mark.parametrize("name", FUNCTIONS)
def test_series_keeps_the_stated_error_at_random_points(found, name):
    table = found[name]
    exact, shaped = FUNCTIONS[name]
    low, high = np.log(table["from"]), np.log(table["to"])
    logarithm = np.random.default_rng(20261201).uniform(low, high, 20_000)
    variable = np.exp(logarithm)
    series = np.polynomial.chebyshev.chebval((2 * logarithm - low - high) / (high - low), table["series"])
    wanted = exact(variable)
    # The chemical potential goes through zero, where the thermal energy is what an error is measured by.
    size = np.maximum(np.abs(wanted), variable) if name == "chemicalPotential" else np.abs(wanted)
    assert np.max(np.abs(shaped(series, variable) - wanted) / size) < STATED_ERROR


def test_film_nodes_give_the_film_factor(found):
    film = {name: np.array(values) for name, values in found["film"].items()}
    random = np.random.default_rng(20261202)
    many = (10 ** random.uniform(-2, 2, 50), 10 ** random.uniform(-2, 1, 50), random.uniform(0, 1, 50))
    for kappa, alpha, p in zip(*many, strict=True):
        slowing = 1 + alpha / film["cosine"]
        z = kappa * (slowing * film["inverseSine"])[:, None] * film["inverseAzimuth"]
        scattered = -np.expm1(-z)
        free = ((1 - p) * (1 - scattered / z) + p * scattered) / (1 - p + p * scattered)
        conductance = 6 / np.pi * ((free @ film["inner"]) * film["outer"] * film["cosine"] ** 2 / slowing).sum()
        assert 1 / conductance == pytest.approx(films.film_factor(kappa, alpha, p), rel=STATED_ERROR)


def test_surface_nodes_give_the_surface_factor(found):
    stretch, weight = (np.array(found["surface"][name]) for name in ("inverseCosine", "weight"))
    random = np.random.default_rng(20261203)
    for kappa, p in zip(10 ** random.uniform(-2, 2, 50), random.uniform(0, 1, 50), strict=True):
        z = kappa * stretch
        scattered = -np.expm1(-z)
        free = ((1 - p) * (1 - scattered / z) + p * scattered) / (1 - p + p * scattered)
        assert 1 / (free @ weight) == pytest.approx(films.surface_factor(kappa, p), rel=STATED_ERROR)


def test_tables_are_one_frozen_object_and_small():
    text = tables().decode()
    assert text.startswith('"use strict";\nconst UNIVERSAL = Object.freeze({') and len(text) < 12_000
