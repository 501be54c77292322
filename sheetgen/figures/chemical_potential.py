"""Occupation near the Fermi level, and the chemical potential against temperature: exact and by Sommerfeld's series."""

from __future__ import annotations

from functools import lru_cache

import numpy as np
from scipy import constants as c

from sheetgen.figures.density_of_states import LOOKS, occupation
from sheetgen.figures.layout import rows_for, stacked
from sheetgen.figures.plot import Area, Axis, Curve, Figure, Note, Panel, Plot, Points, Rule, keys_of
from sheetgen.figures.scales import FINE_STEPS, snap_up
from sheetgen.figures.stamp import stamp
from sheetgen.figures.subject import Subject
from sheetgen.figures.words import enumeration, kelvin, number
from sheetgen.physics.occupation import (
    chemical_potential_ratio,
    chemical_potential_ratio_2d,
    chemical_potential_series,
)

MILLIELECTRONVOLT = c.e * 1e-3
SERIES_HOLDS_TO = 0.3
# End of the axis of T/T_F → range of µ/E_F that shows what happens up to there.
LEVELS = {1.2: (-0.5, 1.1), 3.0: (-5.0, 1.5)}


def draw(subject: Subject) -> Figure | None:
    """Occupation and chemical potential of one material."""
    return stamp(plot(subject)) if subject.has("fermi_energy", "chemical_potential") else None


def plot(subject: Subject) -> Plot:
    """Occupation over energies from the Fermi level; µ/E_F over T/T_F, the same curve for every gas."""
    reach = snap_up(7.5 * c.k * max(subject.temperatures) / MILLIELECTRONVOLT, FINE_STEPS)
    end = 1.2 if max(subject.temperatures) <= 1.2 * subject.si("fermi_temperature") else 3.0
    edges, potential = _occupations(subject, reach), _potential(subject, end)
    height, upper, lower = stacked(70, 86, (rows_for(edges, 4), 2))
    panels = (
        Panel(
            upper,
            Axis("(*E* − *E*_{F}) / meV", -reach, reach),
            Axis("*f*", 0, 1.08),
            edges,
            keys_of(edges),
            4,
        ),
        Panel(
            lower,
            Axis("*T*/*T*_{F}", 0, end),
            Axis("*µ*/*E*_{F}", *LEVELS[end]),
            potential,
            keys_of(potential),
            2,
        ),
    )
    title = f"Occupation and chemical potential: {subject.name}"
    return Plot("chemical-potential", subject.slug, title, _words(subject), panels, height)


def _occupations(subject: Subject, reach: float) -> tuple:
    level = subject.si("fermi_energy")
    energy = np.linspace(max(-reach * MILLIELECTRONVOLT, -level), reach * MILLIELECTRONVOLT, 241)
    layers: list = [
        Curve(
            kelvin(temperature),
            energy / MILLIELECTRONVOLT,
            occupation(level + energy, subject.si("chemical_potential", index), temperature),
            LOOKS[index],
        )
        for index, temperature in list(enumerate(subject.temperatures))[: len(LOOKS)]
    ]
    layers.append(Rule("", x=0.0))
    if level < reach * MILLIELECTRONVOLT:
        layers.append(Rule("band bottom", x=-level / MILLIELECTRONVOLT, look="level"))
    return tuple(layers)


@lru_cache(maxsize=4)
def universal_potential(dimension: int, end: float) -> tuple:
    """µ/E_F over T/T_F, which every gas of one number of dimensions shares, and the series where there is one."""
    share = np.linspace(0.0, end, 181)[1:]
    if dimension == 2:
        return (Curve("exact", share, chemical_potential_ratio_2d(share)),)
    low = np.linspace(0.0, SERIES_HOLDS_TO, 40)
    return (
        Area("series holds", low[[0, -1]], np.full(2, -9.0), np.full(2, 9.0), "faint", unlisted=True),
        Curve("exact", share, chemical_potential_ratio(share)),
        Curve("Sommerfeld series", low, chemical_potential_series(low), "two"),
    )


def _potential(subject: Subject, end: float) -> tuple:
    level, scale = subject.si("fermi_energy"), subject.si("fermi_temperature")
    temperatures = np.array(subject.temperatures)
    stated = np.array([subject.si("chemical_potential", index) for index in range(len(temperatures))])
    return (
        *universal_potential(subject.dimension, end),
        Rule("", y=0.0, look="axis"),
        Points("tabulated", temperatures / scale, stated / level, "open"),
        Note(f"*T*_{{F}} = {number(scale)} K", end, LEVELS[end][1], "end", dx=-4, dy=-10),
    )


def _words(subject: Subject) -> str:
    scale = subject.si("fermi_temperature")
    listed = enumeration([kelvin(t) for t in subject.temperatures[: len(LOOKS)]])
    return (
        f"Occupation of the states of {subject.phrase} near the Fermi level at {listed}, and the chemical potential "
        f"over the Fermi energy against temperature over the Fermi temperature of {number(scale)} kelvin"
        + (f": exact, and by Sommerfeld's series up to {SERIES_HOLDS_TO}." if subject.dimension == 3 else ".")
    )
