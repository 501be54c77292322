"""Materials in rows, ranked by one number: a quantity of the handbook, or a ratio of measurement to model."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from sheetgen.figures.layout import BOTTOM, LEGEND_ROW, RIGHT, TOP
from sheetgen.figures.markup import from_latex
from sheetgen.figures.plot import Axis, Figure, Key, Layer, Note, Panel, Plot, Points
from sheetgen.figures.scales import FINE_STEPS, place, snap_up, spread
from sheetgen.figures.stamp import stamp
from sheetgen.figures.style import WIDTH
from sheetgen.figures.words import number, unit_label

ROW = 9.0
LABELS = 112.0
LONGEST_NAME = 26
NEARBY = 5.0  # kelvins within which a temperature counts as the reference one


@dataclass(frozen=True)
class Entry:
    """One marker: the material it belongs to, the number with its standard uncertainty (or None), and its look.

    `at` is the temperature, edge or photon energy that it was taken at, NaN where there is none.
    """

    slug: str
    name: str
    value: float
    uncertainty: float | None = None
    look: str = "one"
    at: float = float("nan")


def draw(handbook, id: str, root: str = "../../") -> Figure | None:
    """All materials ranked by a quantity; None where fewer than two state it.

    `root` leads from where the picture is shown to the top of the site; each row links to its sheet.
    """
    definition = handbook.registry[id]
    entries = [entry for sheet in handbook.sheets if (entry := _entry(sheet, handbook, id))]
    if len(entries) < 2:
        return None
    ranked = sorted(entries, key=lambda entry: (-entry.value, entry.slug))
    mixed = ranked[0].value > 0 > ranked[-1].value
    keys = (Key("positive", "points", "one"), Key("negative", "points", "ring")) if mixed else ()
    unit = "" if definition.unit == "1" else f" {unit_label(definition.unit).strip('()')}"
    title = definition.title + _condition(definition, ranked[0].at)
    text = (
        f"{title}, of {len(ranked)} materials, largest first: {ranked[0].name} {number(ranked[0].value)}{unit}, … "
        f"{ranked[-1].name} {number(ranked[-1].value)}{unit}."
    )
    axis = _axis(definition, ranked)
    return stamp(rows(f"ranking-{id}", title, text, ranked, axis, keys, root=root))


def rows(
    id: str,
    title: str,
    description: str,
    entries: Sequence[Entry],
    axis: Axis,
    keys: tuple[Key, ...] = (),
    behind: tuple[Layer, ...] = (),
    root: str = "../../",
    signed: bool = False,
) -> Plot:
    """A row a material, in the order in which the materials first appear among the entries.

    What is negative stands at its size: its name in the CSV says so where others are positive, and with `signed` a
    note in its row.
    """
    materials = list(dict.fromkeys(entry.slug for entry in entries))
    names = {entry.slug: entry.name for entry in entries}
    mixed = len({entry.value > 0 for entry in entries}) == 2
    levels = {slug: len(materials) - 0.5 - rank for rank, slug in enumerate(materials)}
    layers: list[Layer] = list(behind)
    for look in dict.fromkeys(entry.look for entry in entries):
        layers.append(_markers([entry for entry in entries if entry.look == look], levels, look, mixed))
    layers += [
        Note(_short(names[slug]), axis.low, level, "end", dx=-4, dy=-2.3, link=f"{root}materials/{slug}.html")
        for slug, level in levels.items()
    ]
    layers += [
        opposite_sign([abs(entry.value) for entry in entries if entry.slug == slug], axis, levels[slug])
        for slug in dict.fromkeys(entry.slug for entry in entries if signed and entry.value < 0)
    ]
    tall = ROW * len(materials) + 4
    panel = Panel(
        (LABELS, BOTTOM, WIDTH - LABELS - RIGHT - 5, tall),
        axis,
        Axis("", -0.2, len(materials) + 0.2, bare=True),
        tuple(layers),
        keys,
        5,
    )
    height = BOTTOM + tall + TOP + (LEGEND_ROW if keys else 0)
    return Plot(id, "handbook", title, description, (panel,), height)


def opposite_sign(sizes: list[float], axis: Axis, level: float) -> Note:
    """Says in a row of markers that a ratio is negative, at the end where there is more room."""
    shares = place(axis, sizes, 0.0, 1.0)
    left = shares.min() > 1 - shares.max()
    end, anchor, shift = (axis.low, "start", 3) if left else (axis.high, "end", -3)
    return Note("opposite sign", end, level, anchor, dx=shift, dy=-2.3, ink="two")


def _markers(entries: list[Entry], levels: dict[str, float], look: str, mixed: bool) -> Points:
    return Points(
        "",
        np.array([abs(entry.value) for entry in entries]),
        np.array([levels[entry.slug] for entry in entries]),
        look,
        x_uncertainty=np.array([entry.uncertainty or 0.0 for entry in entries]),
        names=tuple(f"{entry.name} (negative)" if mixed and entry.value < 0 else entry.name for entry in entries),
    )


def _axis(definition, entries: Sequence[Entry]) -> Axis:
    """Sizes from 0 on; logarithmic where they spread over more than a factor of five."""
    sizes = np.abs([entry.value for entry in entries])
    sign = "−" if all(entry.value < 0 for entry in entries) else ""
    symbol = from_latex(definition.symbol) or definition.title
    if not sign and any(entry.value < 0 for entry in entries):
        symbol = f"|{symbol}|"
    label = sign + (symbol if definition.unit == "1" else f"{symbol} / {unit_label(definition.unit)}")
    positive = sizes[sizes > 0]
    if len(positive) and positive.max() > 5 * positive.min():
        return Axis(label, *spread(positive), "log", aside=True)
    return Axis(label, 0.0, snap_up(1.08 * sizes.max(), FINE_STEPS) if len(positive) else 1.0, aside=True)


def _entry(sheet, handbook, id: str) -> Entry | None:
    """The number at the reference temperature, or the first of a list over anything else."""
    reference = handbook.imprint.reference_temperature
    for entry in sheet.entries(id):
        near = abs(entry.get("temperature", reference) - reference) <= NEARBY
        if near and isinstance(entry["value"], (int, float)):
            uncertainty = entry.get("standard_uncertainty")
            look = "ring" if entry["value"] < 0 else "one"
            return Entry(sheet.record.slug, sheet.record.name, float(entry["value"]), uncertainty, look, _at(entry))
    return None


def _short(name: str) -> str:
    return name if len(name) <= LONGEST_NAME else name[: LONGEST_NAME - 1].rstrip() + "…"


_AXES = {"temperature": "K", "edge": "nm", "photon_energy": "eV"}


def _at(entry: dict) -> float:
    return next((float(entry[axis]) for axis in _AXES if axis in entry), float("nan"))


def _condition(definition, at: float) -> str:
    """What a listed quantity was taken at; resistivities are each at a temperature of their own near the reference."""
    return f" at {at:g} {_AXES[definition.listed_by]}" if definition.listed_by in _AXES else ""
