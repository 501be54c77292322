"""Figures of the whole handbook: every material as a point that links to its sheet."""

from __future__ import annotations

import math

import numpy as np
from scipy import constants as c

from sheetgen.figures.confrontation import LOOKS
from sheetgen.figures.layout import single
from sheetgen.figures.placing import Label, placed
from sheetgen.figures.plot import Axis, Curve, Figure, Key, Layer, Panel, Plot, Points, Rule, keys_of
from sheetgen.figures.ranking import Entry, rows
from sheetgen.figures.ranking import draw as draw_ranking
from sheetgen.figures.scales import decades
from sheetgen.figures.stamp import stamp
from sheetgen.figures.words import number

PER_CUBIC_NANOMETRE = 1e27
TALL = 236.0
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
    """E_F against density on logarithmic axes, where the free-electron law is a straight line of slope 2/3."""
    sheets = _with(handbook, "electron_density", "fermi_energy")
    if len(sheets) < 2:
        return None
    density = np.array([sheet.si("electron_density") for sheet in sheets]) / PER_CUBIC_NANOMETRE
    energy = np.array([sheet.si("fermi_energy") for sheet in sheets]) / c.e
    x = Axis("*n* / nm⁻³", *decades(density, least=2), "log")
    y = Axis("*E*_{F} / eV", *decades(energy, least=2), "log")
    law = Curve("free-electron mass, slope 2/3", *_free_electron_law(handbook, x), "two")
    text = (
        f"Fermi energy against electron density of {len(sheets)} materials on logarithmic axes, with the line of slope "
        "two thirds for the free-electron mass; above it electrons are lighter, below it heavier or in "
        "several valleys."
    )
    return stamp(
        _map("fermi-energy", "Fermi energy against density", text, x, y, sheets, (density, energy), (law,), root)
    )


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
    x = Axis("*T*/*T*_{F}", *decades([*heat, *hot], least=2), "log")
    y = Axis("*r*_{s}*", *decades([*radius, *strong], least=2), "log")
    behind = (
        *(Rule("strained", x=hot[0]), Rule("broken", x=hot[1], look="level")),
        *(Rule("strained", y=strong[0]), Rule("broken", y=strong[1], look="level")),
    )
    text = (
        f"Effective electron sphere radius against temperature over Fermi temperature at {number(reference)} kelvin, "
        f"for {len(sheets)} materials, with the bounds beyond which a degenerate gas ({hot[0]:g}, {hot[1]:g}) and "
        f"independent electrons ({strong[0]:g}, {strong[1]:g}) are strained or broken assumptions."
    )
    return stamp(
        _map("interaction-map", "Interaction and degeneracy", text, x, y, sheets, (heat, radius), behind, root)
    )


def _map(id, title, text, x: Axis, y: Axis, sheets, places, behind: tuple[Layer, ...], root: str) -> Plot:
    """A point a material with its formula beside it where there is room."""
    links = tuple((f"{root}materials/{s.record.slug}.html", s.record.name) for s in sheets)
    box = single(1, TALL)
    labels = placed(
        box, x, y, [Label(s.record.formula, *at) for s, at in zip(sheets, np.transpose(places), strict=True)]
    )
    layers = (*behind, Points("", *places, "one", links=links, names=tuple(s.record.name for s in sheets)), *labels)
    return Plot(id, "handbook", title, text, (Panel(box, x, y, layers, keys_of(behind), 3),), TALL)


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
    axis = Axis(label, *decades([abs(entry.value) for entry in entries], least=2), "log", aside=True)
    keys = tuple(Key(standing, "points", look) for standing, look in LOOKS.items())
    text = f"{title}, {label}, of {len({entry.slug for entry in entries})} materials, largest first: " + "; ".join(
        f"{entry.name} {number(entry.value)}" for entry in (entries[0], entries[-1])
    )
    return stamp(rows(id, title, f"{text}.", entries, axis, keys, (Rule("", x=1.0, look="axis"),), root))


def _with(handbook, *ids: str) -> list:
    return [s for s in handbook.sheets if s.record.electrons.dimension == 3 and all(np.isfinite(s.si(i)) for i in ids)]
