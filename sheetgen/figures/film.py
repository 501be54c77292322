"""Films: resistivity against thickness by surfaces and grains with the group's specimens, and the Fermi energy."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from sheetgen.figures.layout import stacked
from sheetgen.figures.plot import Axis, Curve, Figure, Panel, Plot, Points, Rule, keys_of
from sheetgen.figures.scales import FINE_STEPS, decades, snap_up
from sheetgen.figures.stamp import stamp
from sheetgen.figures.subject import Subject, si_arrays
from sheetgen.figures.words import number

NANOMETRE = 1e-9
MICROOHM_CENTIMETRE = 1e-8
THICKNESSES = np.geomspace(1.0, 1000.0, 46)


def draw(subject: Subject) -> Figure | None:
    """Films of one material."""
    if subject.reference_resistivity is None or not subject.has("mean_free_path", "fermi_energy"):
        return None
    return stamp(plot(subject)) if subject.dimension == 3 else None


def plot(subject: Subject) -> Plot:
    """ρ(d) for rough and smooth surfaces and for grains as wide as the film is thick; E_F(d) at fixed density."""
    height, upper, lower = stacked(92, 64, (2, 1))
    end = snap_up(9 * subject.si("fermi_wavelength") / NANOMETRE, FINE_STEPS)
    films, levels = _resistivities(subject), _fermi_energies(subject, end)
    reached = np.concatenate([layer.y for layer in films if isinstance(layer, (Curve, Points))])
    low, high = decades([max(subject.reference_resistivity.si / MICROOHM_CENTIMETRE, 1e-9), *reached[reached > 0]])
    panels = (
        Panel(
            upper,
            Axis("*d* / nm", 1, 1000, "log"),
            Axis("*ρ* / (µΩ cm)", low, min(high, low * 1e3), "log"),
            films,
            keys_of(films),
            3,
        ),
        Panel(
            lower,
            Axis("*d* / nm", 0, end),
            Axis("*E*_{F}(*d*)/*E*_{F}", 0.95, 1.35),
            levels,
            keys_of(levels),
            3,
        ),
    )
    return Plot("film", subject.slug, f"Films: {subject.name}", _words(subject), panels, height)


@dataclass(frozen=True)
class Scattering:
    """What the surfaces and grains of a film do: specularity p, grain size in m (an array: one a thickness), R."""

    name: str
    look: str
    specularity: float
    grain_size: float | np.ndarray = np.nan
    reflection: float = np.nan


def _resistivities(subject: Subject) -> tuple:
    layers: list = [
        Rule("bulk", y=subject.reference_resistivity.si / MICROOHM_CENTIMETRE, look="edge"),
        *(_curve(subject, scattering) for scattering in _scatterings(subject)),
    ]
    films = [film for film in _films(subject) if film.resistivity is not None]
    if films:
        x, x_uncertainty = si_arrays([film.thickness for film in films], NANOMETRE)
        y, y_uncertainty = si_arrays([film.resistivity for film in films], MICROOHM_CENTIMETRE)
        layers.append(Points("specimens", x, y, "two", y_uncertainty, x_uncertainty))
    return tuple(layers)


def _films(subject: Subject) -> list:
    return [s for s in subject.record.specimens if s.form == "film" and s.thickness is not None]


def _scatterings(subject: Subject) -> list[Scattering]:
    """The limits of the surface, grains as wide as the film is thick, and what the first stated film says."""
    cases = [
        Scattering("*p* = 0", "one", 0.0),
        Scattering("*p* = 0.5", "three", 0.5),
        Scattering("*p* = 0, *D* = *d*, *R* = 0.3", "four", 0.0, THICKNESSES * NANOMETRE, 0.3),
    ]
    for film in _films(subject):
        stated = (film.specularity, film.grain_size, film.grain_reflection)
        if all(value is not None for value in stated):
            return [*cases, Scattering("as stated for one", "two", *(value.si for value in stated))]
    return cases


def _curve(subject: Subject, scattering: Scattering) -> Curve:
    # Without grains the single integral gives the same at a fraction of the time.
    grains = np.isfinite(scattering.reflection)
    resistivity = subject.curve(
        "film_resistivity" if grains else "film_resistivity_surface",
        specimen_thickness=THICKNESSES * NANOMETRE,
        specimen_specularity=np.full(len(THICKNESSES), scattering.specularity),
        specimen_grain_size=np.broadcast_to(scattering.grain_size, len(THICKNESSES)),
        specimen_grain_reflection=np.full(len(THICKNESSES), scattering.reflection),
        reference_resistivity=subject.reference_resistivity.si,
    )
    return Curve(scattering.name, THICKNESSES, resistivity / MICROOHM_CENTIMETRE, scattering.look)


def _fermi_energies(subject: Subject, end: float) -> tuple:
    level = subject.si("fermi_energy")
    thickness = np.linspace(0.5 * subject.si("fermi_wavelength"), end * NANOMETRE, 301)
    hard = subject.curve("film_fermi_energy", specimen_thickness=thickness) / level
    neutral = subject.curve("film_fermi_energy_neutral", specimen_thickness=thickness) / level
    return (
        Rule("", y=1.0, look="edge"),
        Curve("hard walls", thickness / NANOMETRE, hard, "one"),
        Curve("neutral surfaces", thickness / NANOMETRE, neutral, "three"),
    )


def _words(subject: Subject) -> str:
    films = [film for film in _films(subject) if film.resistivity is not None]
    text = (
        f"Resistivity of films of {subject.phrase} against thickness for rough and half smooth surfaces and for grains "
        "as wide as the film is thick, with "
        f"{number(subject.reference_resistivity.si / MICROOHM_CENTIMETRE)} microohm centimetre in the "
        f"bulk and a mean free path of {number(subject.si('mean_free_path') / NANOMETRE)} nanometre"
    )
    text += f"; {len(films)} specimens of the group as points." if films else "."
    return (
        f"{text} Below, the Fermi energy of a film at the density of the bulk, between hard walls and with neutral "
        "surfaces."
    )
