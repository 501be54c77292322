"""Figures of the whole handbook: every material as a point that links to its sheet."""

from __future__ import annotations

import math
import re

import numpy as np
from scipy import constants as c

from sheetgen.figures.confrontation import LOOKS
from sheetgen.figures.layout import single, stacked
from sheetgen.figures.placing import Label, placed
from sheetgen.figures.plot import Axis, Curve, Figure, Key, Layer, Panel, Plot, Points, Rule, keys_of
from sheetgen.figures.ranking import Entry, rows
from sheetgen.figures.ranking import draw as draw_ranking
from sheetgen.figures.scales import spread
from sheetgen.figures.stamp import stamp
from sheetgen.figures.words import number

PER_CUBIC_NANOMETRE = 1e27
TALL = 200.0
DENSE = 200.0  # a metal holds more than this part of the largest density
LONGEST_FORMULA = 8
RATIOS = (
    ("thermal-mass-ratio", "heat_coefficient", "Thermal mass ratio", "measured / model heat coefficient"),
    ("hall-ratio", "hall_coefficient", "Hall ratio", "measured / model Hall coefficient"),
    ("lorenz-ratio", "electron_thermal_conductivity", "Lorenz ratio", "measured / model Lorenz number"),
)


def draw_handbook(handbook, root: str = "../../") -> list[Figure]:
    """The figures of a handbook; `root` leads from where they are shown to the top of the site.

    One that fewer than two materials have a point in is left out.
    """
    figures = [
        _fermi_energies(handbook, root),
        *(_ratios(handbook, root, *ratio) for ratio in RATIOS),
        draw_ranking(handbook, "resistivity_path_product", root),
        _interaction_map(handbook, root),
    ]
    return [figure for figure in figures if figure is not None]


def _fermi_energies(handbook, root: str) -> Figure | None:
    """E_F against density on logarithmic axes, where the free-electron law is a straight line of slope 2/3.

    Metals crowd at the upper end, so that a panel of their own names them.
    """
    sheets = _with(handbook, "electron_density", "fermi_energy")
    if len(sheets) < 2:
        return None
    density = np.array([sheet.si("electron_density") for sheet in sheets]) / PER_CUBIC_NANOMETRE
    energy = np.array([sheet.si("fermi_energy") for sheet in sheets]) / c.e
    dense = density > density.max() / DENSE
    height, upper, lower = stacked(TALL, 96.0, (1, 0))
    whole = _energy_panel(handbook, sheets, lower, density, energy, None, np.ones(len(sheets), dtype=bool))
    panels = (_energy_panel(handbook, sheets, upper, density, energy, root, dense), whole)
    text = (
        f"Fermi energy against electron density of {len(sheets)} materials on logarithmic axes, with the line of slope "
        "two thirds for the free-electron mass; above it electrons are lighter, below it heavier or in several "
        "valleys. The upper panel names the dense ones, the lower one shows all."
    )
    return stamp(Plot("fermi-energy", "handbook", "Fermi energy against density", text, panels, height))


def _energy_panel(handbook, sheets, box, density, energy, root: str | None, chosen: np.ndarray) -> Panel:
    """The chosen materials with the law; named and linked where there is a root."""
    x = Axis("*n* / nm⁻³", *spread(density[chosen]), "log")
    y = Axis("*E*_{F} / eV", *spread(energy[chosen]), "log")
    law = Curve("free-electron mass, slope 2/3", *_free_electron_law(handbook, x), "two", unlisted=root is None)
    places = density[chosen], energy[chosen]
    some = [sheet for sheet, wanted in zip(sheets, chosen, strict=True) if wanted]
    layers = (law, *_points(some, places, root), *(_names(some, places, box, x, y) if root else ()))
    return Panel(box, x, y, layers, keys_of((law,)) if root else ())


def _free_electron_law(handbook, x: Axis) -> tuple[np.ndarray, np.ndarray]:
    definitions = handbook.registry.plans["material", 3].definitions
    density = np.geomspace(x.low, x.high, 41)
    wavevector = definitions["fermi_wavevector"].function(density * PER_CUBIC_NANOMETRE, 2.0)
    return density, definitions["fermi_energy"].function(wavevector, c.m_e) / c.e


def _interaction_map(handbook, root: str) -> Figure | None:
    """r_s* against T/T_F at the reference temperature, with the bounds of the two assumptions that rest on them."""
    sheets = _with(handbook, "effective_electron_sphere_radius", "fermi_temperature")
    if len(sheets) < 2:
        return None
    reference = handbook.imprint.reference_temperature
    heat = reference / np.array([sheet.si("fermi_temperature") for sheet in sheets])
    radius = np.array([sheet.si("effective_electron_sphere_radius") for sheet in sheets])
    bounds = {a.id: a.bounds(handbook.imprint.thresholds) for a in handbook.registry.assumptions}
    hot, strong = bounds["degenerate_gas"], bounds["independent_electrons"]
    x = Axis("*T*/*T*_{F}", *spread([*heat, *hot]), "log")
    y = Axis("*r*_{s}*", *spread([*radius, *strong]), "log")
    behind = (
        *(Rule("strained", x=hot[0]), Rule("broken", x=hot[1], look="level")),
        *(Rule("strained", y=strong[0]), Rule("broken", y=strong[1], look="level")),
    )
    text = (
        f"Effective electron sphere radius against temperature over Fermi temperature at {number(reference)} kelvin, "
        f"for {len(sheets)} materials, with the bounds beyond which a degenerate gas ({hot[0]:g}, {hot[1]:g}) and "
        f"independent electrons ({strong[0]:g}, {strong[1]:g}) are strained or broken assumptions."
    )
    box = single(1, TALL + 40)
    places = heat, radius
    layers = (*behind, *_points(sheets, places, root), *_names(sheets, places, box, x, y))
    panel = Panel(box, x, y, layers, keys_of(behind), 3)
    return stamp(Plot("interaction-map", "handbook", "Interaction and degeneracy", text, (panel,), TALL + 40))


def _points(sheets, places, root: str | None) -> tuple[Points]:
    """A point a material, leading to its sheet where there is a root."""
    links = tuple((f"{root}materials/{s.record.slug}.html", s.record.name) for s in sheets) if root else ()
    names = tuple(s.record.name for s in sheets)
    return (Points("", *places, "one", links=links, names=names, unlisted=root is None),)


def _names(sheets, places, box, x: Axis, y: Axis) -> list[Layer]:
    """Formulas beside the points, or at the end of leaders."""
    labels = [
        Label(re.sub(r"([\d.]+)", r"_{\1}", sheet.record.formula), *at)
        for sheet, at in zip(sheets, np.transpose(places), strict=True)
        if len(sheet.record.formula) <= LONGEST_FORMULA
    ]
    return placed(box, x, y, labels)


def _ratios(handbook, root: str, id: str, quantity: str, title: str, label: str) -> Figure | None:
    """One ratio across the table, largest first; markers tell the standing."""
    entries = [
        Entry(sheet.record.slug, sheet.record.name, one.ratio, one.ratio_uncertainty, LOOKS[one.standing])
        for sheet in handbook.sheets
        for one in sheet.confrontations
        if one.quantity == quantity and one.ratio is not None and math.isfinite(one.ratio) and one.ratio != 0
    ]
    if len({entry.slug for entry in entries}) < 2:
        return None
    entries.sort(key=lambda entry: (-entry.value, entry.slug))
    axis = Axis(label, *spread([0.5, 2.0, *(abs(entry.value) for entry in entries)]), "log", aside=True)
    keys = tuple(Key(standing, "points", look) for standing, look in LOOKS.items())
    text = f"{title}, {label}, of {len({entry.slug for entry in entries})} materials, largest first: " + "; ".join(
        f"{entry.name} {number(entry.value)}" for entry in (entries[0], entries[-1])
    )
    return stamp(rows(id, title, f"{text}.", entries, axis, keys, (Rule("", x=1.0, look="axis"),), root, signed=True))


def _with(handbook, *ids: str) -> list:
    return [s for s in handbook.sheets if s.record.electrons.dimension == 3 and all(np.isfinite(s.si(i)) for i in ids)]
