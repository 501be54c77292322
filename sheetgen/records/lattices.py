"""The named lattices: crystal system, centring, and the basis that a name implies."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

Point = tuple[float, float, float]


def _points(*texts: str) -> tuple[Point, ...]:
    return tuple(tuple(float(Fraction(number)) for number in text.split()) for text in texts)


CENTRINGS: dict[str, tuple[Point, ...]] = {
    "P": _points("0 0 0"),
    "A": _points("0 0 0", "0 1/2 1/2"),
    "B": _points("0 0 0", "1/2 0 1/2"),
    "C": _points("0 0 0", "1/2 1/2 0"),
    "I": _points("0 0 0", "1/2 1/2 1/2"),
    "F": _points("0 0 0", "0 1/2 1/2", "1/2 0 1/2", "1/2 1/2 0"),
    "R": _points("0 0 0", "2/3 1/3 1/3", "1/3 2/3 2/3"),
}
ORIGIN = _points("0 0 0")


@dataclass(frozen=True, slots=True)
class Lattice:
    """A named lattice; `basis` holds one tuple of positions for each element, in the order of the formula."""

    system: str
    centring: str
    basis: tuple[tuple[Point, ...], ...] = (ORIGIN,)


LATTICES: dict[str, Lattice] = {
    "sc": Lattice("cubic", "P"),
    "bcc": Lattice("cubic", "I"),
    "fcc": Lattice("cubic", "F"),
    "hcp": Lattice("hexagonal", "P", (_points("1/3 2/3 1/4", "2/3 1/3 3/4"),)),
    "diamond": Lattice("cubic", "F", (_points("0 0 0", "1/4 1/4 1/4"),)),
    "zincblende": Lattice("cubic", "F", (ORIGIN, _points("1/4 1/4 1/4"))),
    "rocksalt": Lattice("cubic", "F", (ORIGIN, _points("1/2 1/2 1/2"))),
    "cscl": Lattice("cubic", "P", (ORIGIN, _points("1/2 1/2 1/2"))),
    "bct": Lattice("tetragonal", "I"),
    "tetragonal": Lattice("tetragonal", "P"),
    "hexagonal": Lattice("hexagonal", "P"),
    "rhombohedral": Lattice("rhombohedral", "P"),
    "orthorhombic": Lattice("orthorhombic", "P"),
    "base-centred-orthorhombic": Lattice("orthorhombic", "C"),
    "body-centred-orthorhombic": Lattice("orthorhombic", "I"),
    "face-centred-orthorhombic": Lattice("orthorhombic", "F"),
    "monoclinic": Lattice("monoclinic", "P"),
    "base-centred-monoclinic": Lattice("monoclinic", "C"),
    "triclinic": Lattice("triclinic", "P"),
}


@dataclass(frozen=True, slots=True)
class CellShape:
    """Which constants of a cell are free, which are needed, and the angles (degrees) that the system fixes.

    `either` lists groups of constants of which one and only one is given; `angles_tied` makes beta and gamma alpha.
    """

    needed: tuple[str, ...]
    either: tuple[tuple[str, ...], ...] = ()
    angles: tuple[float | None, float | None, float | None] = (90.0, 90.0, 90.0)
    angles_tied: bool = False

    @property
    def groups(self) -> tuple[tuple[str, ...], ...]:
        """Groups of constants, of each of which one and only one is given."""
        return (*((key,) for key in self.needed), *self.either)

    @property
    def read(self) -> tuple[str, ...]:
        """Every constant that may be given."""
        return tuple(key for group in self.groups for key in group)


SHAPES: dict[str, CellShape] = {
    "cubic": CellShape(("a",)),
    "tetragonal": CellShape(("a",), (("c", "c_over_a"),)),
    "hexagonal": CellShape(("a",), (("c", "c_over_a"),), (90.0, 90.0, 120.0)),
    "orthorhombic": CellShape(("a", "b"), (("c", "c_over_a"),)),
    "rhombohedral": CellShape(("a", "alpha"), (), (None, None, None), angles_tied=True),
    "monoclinic": CellShape(("a", "b", "beta"), (("c", "c_over_a"),), (90.0, None, 90.0)),
    "triclinic": CellShape(("a", "b", "alpha", "beta", "gamma"), (("c", "c_over_a"),), (None, None, None)),
}
IDEAL_RATIO = (8 / 3) ** 0.5


def lattice_name(system: str, centring: str) -> str:
    """The name here of the Bravais lattice that a system (by its axes) and a centring make.

    A centring that adds nothing new to a system, such as I of a triclinic cell, leaves the system's own name.
    """
    special = {
        ("cubic", "P"): "sc",
        ("cubic", "I"): "bcc",
        ("cubic", "F"): "fcc",
        ("tetragonal", "I"): "bct",
        ("tetragonal", "F"): "bct",
        ("hexagonal", "R"): "rhombohedral",
        # Body and face centring of a monoclinic cell are base centring on other axes.
        ("monoclinic", "I"): "base-centred-monoclinic",
        ("monoclinic", "F"): "base-centred-monoclinic",
    }
    prefix = {"A": "base", "B": "base", "C": "base", "I": "body", "F": "face"}.get(centring, "")
    name = special.get((system, centring)) or f"{prefix}-centred-{system}"
    return name if name in LATTICES else system
