"""Energy along the standard path of the lattice: the bands of an empty lattice in the reduced zone."""

from __future__ import annotations

import numpy as np
from scipy import constants as c

from sheetgen.figures.layout import BOTTOM, LEFT, RIGHT, TOP
from sheetgen.figures.markup import visible
from sheetgen.figures.plot import Axis, Curve, Figure, Key, Layer, Note, Panel, Plot, Points, Rule
from sheetgen.figures.scales import FINE_STEPS, snap_up
from sheetgen.figures.stamp import stamp
from sheetgen.figures.style import HEIGHT, TICK_SIZE, WIDTH
from sheetgen.figures.subject import Subject
from sheetgen.figures.words import energy, number
from sheetgen.physics import crystals, zones
from sheetgen.quantities.structure import nominal_cell, structure_facts

PER_NANOMETRE = 1e9
SAMPLES = 260
MOST_BANDS = 120
KEYS = (
    Key("empty-lattice bands", "line", "thin"),
    Key("Fermi level", "line", "level"),
    Key("*k* = *k*_{F}", "points", "open"),
)
BOX = (LEFT, BOTTOM - 6, WIDTH - LEFT - RIGHT, HEIGHT - BOTTOM - TOP - 4)


def draw(subject: Subject) -> Figure | None:
    """The bands of one crystal whose electrons are given by valence."""
    return stamp(plot(subject)) if subject.has("fermi_energy", "fermi_to_zone_ratio") else None


def plot(subject: Subject) -> Plot:
    """Bands up to somewhat above the Fermi level, with the points where k + G has the length k_F."""
    level = subject.si("fermi_energy") / c.e
    top = snap_up(1.25 * level, FINE_STEPS)
    path, bands = path_and_bands(subject, top)
    x = path.distances / PER_NANOMETRE
    breaks = _jumps(path)
    layers: list[Layer] = [Rule("", x=tick / PER_NANOMETRE, look="grid") for tick in path.ticks[1:-1]]
    layers += [
        Curve(f"band {index + 1}", np.insert(x, breaks, np.nan), np.insert(band, breaks, np.nan), "thin")
        for index, band in enumerate(_without_repeats(bands).T)
        if np.nanmin(band, initial=np.inf) < top
    ]
    layers += [
        Rule("Fermi level", y=level, look="level"),
        Points("k = k_F", *_crossings(x, bands, level, breaks), "open"),
        *_tick_labels(path),
    ]
    panel = Panel(
        BOX,
        Axis("", 0, path.ticks[-1] / PER_NANOMETRE, bare=True, column="k along the path / nm⁻¹"),
        Axis("*E* / eV", 0, top),
        tuple(layers),
        KEYS,
        3,
    )
    title = f"Free-electron bands: {subject.name}"
    return Plot("bands", subject.slug, title, _words(subject, path), (panel,))


def path_and_bands(subject: Subject, top: float) -> tuple[zones.Path, np.ndarray]:
    """The path, and every band (points, bands) in eV that comes below the top of the figure."""
    cell, primitive = lattice_of(subject)
    path = zones.standard_path(cell, primitive, SAMPLES)
    basis = crystals.reciprocal_basis(primitive @ cell)
    count = 8
    while True:
        bands = zones.empty_lattice_bands(path.points, basis, subject.number("effective_mass"), count) / c.e
        if bands[:, -1].min() > top or count >= MOST_BANDS:
            return path, bands
        count = min(2 * count, MOST_BANDS)


def _without_repeats(bands: np.ndarray) -> np.ndarray:
    """The bands, NaN where one runs upon the one below it: drawn once, a line has one weight."""
    same = np.zeros(bands.shape, dtype=bool)
    same[:, 1:] = np.abs(np.diff(bands, axis=1)) < 1e-9 * bands[:, -1:].max()
    # A band stays up to the point where it leaves the other, so that no gap opens there.
    inside = same.copy()
    inside[1:] &= same[:-1]
    inside[:-1] &= same[1:]
    return np.where(inside, np.nan, bands)


def lattice_of(subject: Subject) -> tuple[np.ndarray, np.ndarray]:
    """The conventional cell in m, and the primitive vectors in units of it."""
    crystal = subject.record.crystal
    return nominal_cell(crystal), structure_facts(crystal).primitive_basis


def _jumps(path: zones.Path) -> np.ndarray:
    """Indices before which the path leaps to another point, at labels such as U|K."""
    standing = np.diff(path.distances) == 0
    moved = np.abs(np.diff(path.points, axis=0)).max(axis=1) > 1e-6 * np.abs(path.points).max()
    return np.flatnonzero(standing & moved) + 1


def _crossings(x: np.ndarray, bands: np.ndarray, level: float, breaks: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Where bands cross the Fermi level, each place once."""
    above = bands > level
    change = above[1:] != above[:-1]
    change[breaks - 1] = False
    place, band = np.nonzero(change)
    share = (level - bands[place, band]) / (bands[place + 1, band] - bands[place, band])
    places = np.unique(np.round(x[place] + share * (x[place + 1] - x[place]), 6))
    return places, np.full(len(places), level)


def _tick_labels(path: zones.Path) -> list[Note]:
    """Labels of the special points under the panel; one that would run into its neighbour is left out."""
    scale = BOX[2] / path.ticks[-1]
    notes, free = [], -np.inf
    for tick, label in zip(path.ticks, path.labels, strict=True):
        text = "|".join(part[0] + (f"_{{{part[1:]}}}" if part[1:] else "") for part in label.split("|"))
        half = 0.3 * TICK_SIZE * len(visible(text))
        if tick * scale - half > free:
            notes.append(Note(text, tick / PER_NANOMETRE, 0, "middle", dy=-9))
            free = tick * scale + half + 0.8
    return notes


def _words(subject: Subject, path: zones.Path) -> str:
    return (
        f"Energies of free electrons in the empty {path.lattice} lattice of {subject.phrase} along "
        f"{'–'.join(path.labels)} in the reduced zone, up to somewhat above the Fermi energy of "
        f"{energy(subject.si('fermi_energy'))}; circles mark where the reduced sphere of radius "
        f"{number(subject.si('fermi_wavevector') / PER_NANOMETRE)} per nanometre crosses the path."
    )
