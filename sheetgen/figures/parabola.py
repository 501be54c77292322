"""Energy against wavevector: the free-electron parabola with the filled part and the nearest diffracting zone face."""

from __future__ import annotations

import numpy as np

from sheetgen.figures.layout import single
from sheetgen.figures.plot import Axis, Curve, Figure, Note, Panel, Plot, Rule, keys_of
from sheetgen.figures.scales import FINE_STEPS, snap_up
from sheetgen.figures.stamp import stamp
from sheetgen.figures.subject import Subject
from sheetgen.figures.words import energy, energy_unit, number

NANOMETRE = 1e-9


def draw(subject: Subject) -> Figure | None:
    """The parabola of one material."""
    return stamp(plot(subject)) if subject.has("fermi_energy", "fermi_wavevector") else None


def plot(subject: Subject) -> Plot:
    """E(k) over both signs of k, drawn strong where the states are filled."""
    filled_to, level = subject.si("fermi_wavevector") * NANOMETRE, subject.si("fermi_energy")
    joules, unit = energy_unit(level)
    level /= joules
    face = subject.si("nearest_diffracting_face") * NANOMETRE
    shows_face = subject.has("fermi_to_zone_ratio")
    reach = snap_up(1.12 * (max(filled_to, face) if shows_face else filled_to), (1, 1.5, 2, 3, 5, 7))
    top = snap_up(1.2 * level, FINE_STEPS)
    layers = [
        _parabola(subject, "all states", reach, joules, "thin"),
        Rule("Fermi level", y=level, look="level"),
        _parabola(subject, "filled", filled_to, joules, "one"),
    ]
    if shows_face:
        layers += [Rule("zone face", x=sign * face) for sign in (-1, 1)]
        layers.append(_face_note(face, reach))
    layers.append(Note(f"*E*_{{F}} = {number(level)} {unit}", 0, level, "middle", dy=3, ink="two"))
    layers.append(Note(f"*k*_{{F}} = {number(filled_to)} nm⁻¹", 0, 0, "middle", dy=_note_height(level, top)))
    x = Axis("*k* / nm⁻¹", -reach, reach)
    y = Axis(f"*E* / {unit}", 0, top)
    panel = Panel(single(1), x, y, tuple(layers), keys_of(tuple(layers)), 4)
    return Plot("parabola", subject.slug, f"Energy against wavevector: {subject.name}", _words(subject), (panel,))


def _parabola(subject: Subject, name: str, reach: float, joules: float, look: str) -> Curve:
    wavevector = np.linspace(-reach, reach, 121)
    energies = subject.curve("fermi_energy", fermi_wavevector=wavevector / NANOMETRE)
    return Curve(name, wavevector, energies / joules, look)


def _face_note(face: float, reach: float) -> Note:
    """The name of the zone face at its foot: outside, under the parabola, where the axis goes on far enough."""
    outside = (reach - face) / (2 * reach) * single(1)[2] > 26
    anchor, shift = ("start", 2.5) if outside else ("end", -2.5)
    return Note("*k*_{zone}", face, 0, anchor, dx=shift, dy=3.5)


def _note_height(level: float, top: float) -> float:
    """Below the Fermi level, within the bowl, where the parabola leaves room for words."""
    return 0.62 * level / top * single(1)[3]


def _words(subject: Subject) -> str:
    text = (
        f"Free-electron parabola of {subject.phrase}, filled up to the Fermi energy of "
        f"{energy(subject.si('fermi_energy'))} at the Fermi wavevector of "
        f"{number(subject.si('fermi_wavevector') * NANOMETRE)} per nanometre."
    )
    if subject.record.electrons.charge == "hole":
        text += " The carriers are holes: energies count downwards from the top of their band."
    if not subject.has("fermi_to_zone_ratio"):
        return text
    ratio = subject.si("fermi_to_zone_ratio")
    return text + (
        f" The nearest diffracting zone face stands at {number(subject.si('nearest_diffracting_face') * NANOMETRE)}"
        f" per nanometre; the Fermi wavevector is {number(ratio)} of it"
        + (", so that the face cuts the Fermi sphere." if ratio > 1 else ".")
    )
