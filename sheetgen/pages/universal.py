"""Universal functions as tables for the page: what a reader's own conditions need, the same for all materials.

Each function of one variable is a Chebyshev series in the logarithm of that variable over the range in which no
limiting law holds; outside, the script uses the limits. The factors of a film need no interpolation: the page sums over
the nodes that sheetgen.physics.films integrates with.
"""

from __future__ import annotations

import json
from collections.abc import Callable
from functools import cache

import numpy as np

from sheetgen.physics import bloch_grueneisen, debye, films, occupation

# Relative error that the series add, as the page states it; a test holds it against the functions themselves.
STATED_ERROR = 1e-5
_DIGITS = 9
# In the order of sheetgen.physics.films.
FILM_NODES = ("cosine", "inverseSine", "outer", "inverseAzimuth", "inner")
# Coefficients smaller than this add nothing to that.
_NEGLIGIBLE = 3e-8


@cache
def tables() -> bytes:
    """The script that hands the tables to the page: one frozen object, nothing else."""
    series = {
        "debyeHeat": _series(lambda x: np.log(debye.debye_heat_ratio(x, 1.0)), 0.04, 2.0),
        "blochGrueneisen": _series(lambda x: np.log(bloch_grueneisen.bloch_grueneisen_shape(x, 1.0)), 0.04, 2.0),
        "chemicalPotential": _series(lambda t: occupation.chemical_potential_ratio(t) / (1 + t), 0.03, 10.0),
        "electronHeat": _series(lambda t: np.log(occupation.heat_capacity_ratio(t)), 0.02, 10.0),
    }
    surface = dict(zip(("inverseCosine", "weight"), map(_short, films.polar_nodes()), strict=True))
    film = dict(zip(FILM_NODES, map(_short, films.film_nodes()), strict=True))
    found = {**series, "surface": surface, "film": film}
    text = json.dumps(found, separators=(",", ":"))
    return f'"use strict";\nconst UNIVERSAL = Object.freeze({text});\n'.encode()


def _series(function: Callable[[np.ndarray], np.ndarray], low: float, high: float) -> dict:
    """Chebyshev coefficients of a function of the logarithm of its variable between two bounds."""
    degree = 64
    middle, half = (np.log(high) + np.log(low)) / 2, (np.log(high) - np.log(low)) / 2
    nodes = np.cos(np.pi * (np.arange(degree) + 0.5) / degree)
    values = function(np.exp(middle + half * nodes))
    coefficients = np.polynomial.chebyshev.chebfit(nodes, values, degree - 1)
    last = int(np.flatnonzero(np.abs(coefficients) > _NEGLIGIBLE).max())
    return {"from": low, "to": high, "series": [round(value, _DIGITS) for value in coefficients[: last + 1].tolist()]}


def _short(nodes: np.ndarray) -> list[float]:
    return [float(f"{value:.{_DIGITS}g}") for value in nodes.tolist()]
