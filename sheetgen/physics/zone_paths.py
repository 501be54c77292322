"""Lines of high symmetry through the Brillouin zone, lattice by lattice.

The labels and coordinates of the special points are those of W. Setyawan and S. Curtarolo, Computational
Materials Science 49, 299 (2010), restated on the axes of the conventional cell where that is simpler.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import cos, tan

import numpy as np

from sheetgen.physics.crystals import reciprocal_basis
from sheetgen.physics.polyhedra import zone_polyhedron

_TOLERANCE = 1e-6  # of cell lengths and cosines, within which a cell has the symmetry of its system
_IDENTITY = np.eye(3)
_OBVERSE = np.array([[2, 1, 1], [-1, 1, 1], [-1, -2, 1]]) / 3
_BODY = np.array([[-1, 1, 1], [1, -1, 1], [1, 1, -1]]) / 2


@dataclass(frozen=True)
class Path:
    """A path through special points: where its labels stand, and the points that sample it.

    `ticks` are distances along the path at the labels, `distances` (P,) those of `points` (P, 3), all in 1/m.
    A label such as "U|K" marks a jump; the points on both its sides have one distance.
    """

    lattice: str
    labels: tuple[str, ...]
    ticks: np.ndarray
    points: np.ndarray
    distances: np.ndarray


@dataclass(frozen=True)
class SpecialPoints:
    """Labelled points (3,) in 1/m and the legs of the path, each a list of labels."""

    lattice: str
    points: dict[str, np.ndarray]
    legs: tuple[tuple[str, ...], ...]


def standard_path(cell: np.ndarray, primitive: np.ndarray, samples: int = 240) -> Path:
    """Path along the lines of high symmetry of the lattice, with about that many points.

    A lattice that has no path of its own here (monoclinic, triclinic, face-centred orthorhombic, cells larger
    than they need be) gets one from Γ to the nearest faces of its zone and their corners.
    """
    special = special_points(cell, primitive)
    lines = [list(zip(leg[:-1], leg[1:], strict=True)) for leg in special.legs]
    length = sum(_length(special, *line) for leg in lines for line in leg)
    labels, ticks, points, distances = [], [], [], []
    start = 0.0
    for leg in lines:
        first = leg[0][0]
        labels[-1:] = [f"{labels[-1]}|{first}"] if labels else [first]
        ticks[-1:] = [start]
        for line in leg:
            end = start + _length(special, *line)
            parts = np.linspace(0, 1, 2 + int(samples * (end - start) / length))[:, None]
            points.append(special.points[line[0]] * (1 - parts) + special.points[line[1]] * parts)
            distances.append(start + (end - start) * parts[:, 0])
            start = end
            labels.append(line[1])
            ticks.append(end)
    return Path(
        special.lattice, tuple(labels), np.array(ticks), np.concatenate(points), np.concatenate(distances)
    )


def special_points(cell: np.ndarray, primitive: np.ndarray) -> SpecialPoints:
    """The labelled points of the lattice and the legs of its standard path."""
    cell, primitive = np.asarray(cell, float), np.asarray(primitive, float)
    rule = _RULES.get((_system(cell), _centring(primitive)))
    if rule is None:
        return _face_centres(cell, primitive)
    lattice, axes, coordinates, path = rule(cell)
    basis = reciprocal_basis(axes @ cell)
    points = {
        label: np.array(fractions) @ basis for label, fractions in {"Γ": (0, 0, 0), **coordinates}.items()
    }
    return SpecialPoints(lattice, points, tuple(tuple(leg.split("-")) for leg in path.split(" ")))


def _length(special: SpecialPoints, first: str, second: str) -> float:
    return float(np.linalg.norm(special.points[second] - special.points[first]))


def _shape(cell: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Lengths of the axes and cosines of alpha, beta, gamma."""
    lengths = np.linalg.norm(cell, axis=1)
    directions = cell / lengths[:, None]
    return lengths, (directions[[1, 2, 0]] * directions[[2, 0, 1]]).sum(axis=1)


def _system(cell: np.ndarray) -> str:
    """Crystal system of the shape of the conventional cell in its usual setting, else "general"."""
    (a, b, c), cosines = _shape(cell)

    def same(first: float, second: float) -> bool:
        return abs(first - second) <= _TOLERANCE * first

    if np.all(np.abs(cosines) <= _TOLERANCE):
        return ("cubic" if same(a, c) else "tetragonal") if same(a, b) else "orthorhombic"
    if same(a, b) and np.allclose(cosines, [0, 0, -0.5], atol=_TOLERANCE, rtol=0):
        return "hexagonal"
    if same(a, b) and same(a, c) and np.ptp(cosines) <= _TOLERANCE:
        return "rhombohedral"
    return "general"


def _centring(primitive: np.ndarray) -> str:
    """Letter of the centring of the conventional cell, or "other"."""
    points = round(1 / abs(np.linalg.det(primitive)))
    centrings = {
        "P": (1, [0, 0, 0]),
        "I": (2, [1 / 2, 1 / 2, 1 / 2]),
        "A": (2, [0, 1 / 2, 1 / 2]),
        "B": (2, [1 / 2, 0, 1 / 2]),
        "C": (2, [1 / 2, 1 / 2, 0]),
        "R": (3, [2 / 3, 1 / 3, 1 / 3]),
        "F": (4, [1 / 2, 1 / 2, 0]),
    }
    to_primitive = np.linalg.inv(primitive)
    for letter, (number, vector) in centrings.items():
        coefficients = np.array(vector) @ to_primitive
        if number == points and np.allclose(coefficients, np.round(coefficients), atol=1e-6):
            return letter
    return "other"


def _face_centres(cell: np.ndarray, primitive: np.ndarray) -> SpecialPoints:
    """Γ, the centres F of the three nearest pairs of faces, and a corner V of each."""
    zone = zone_polyhedron(cell, primitive)
    points, legs = {"Γ": np.zeros(3)}, ["Γ"]
    taken: list[np.ndarray] = []
    for number in np.argsort(zone.distances, kind="stable"):
        normal = zone.normals[number]
        if len(taken) == 3 or any(abs(normal @ other) > 1 - 1e-9 for other in taken):
            continue
        taken.append(normal)
        face, corner = f"F{len(taken)}", f"V{len(taken)}"
        points[face] = normal * zone.distances[number]
        points[corner] = zone.vertices[zone.faces[number][0]]
        legs += [face, corner, "Γ"]
    return SpecialPoints("general", points, (tuple(legs),))


_Rule = tuple[str, np.ndarray, dict[str, tuple[float, float, float]], str]


def _simple_cubic(cell: np.ndarray) -> _Rule:
    points = {"X": (0, 1 / 2, 0), "M": (1 / 2, 1 / 2, 0), "R": (1 / 2, 1 / 2, 1 / 2)}
    return "simple cubic", _IDENTITY, points, "Γ-X-M-Γ-R-X M-R"


def _face_centred_cubic(cell: np.ndarray) -> _Rule:
    points = {
        "X": (0, 1, 0),
        "W": (1 / 2, 1, 0),
        "K": (3 / 4, 3 / 4, 0),
        "L": (1 / 2, 1 / 2, 1 / 2),
        "U": (1 / 4, 1, 1 / 4),
    }
    return "face-centred cubic", _IDENTITY, points, "Γ-X-W-K-Γ-L-U-W-L-K U-X"


def _body_centred_cubic(cell: np.ndarray) -> _Rule:
    points = {"H": (0, 1, 0), "N": (1 / 2, 1 / 2, 0), "P": (1 / 2, 1 / 2, 1 / 2)}
    return "body-centred cubic", _IDENTITY, points, "Γ-H-N-Γ-P-H P-N"


def _hexagonal(cell: np.ndarray) -> _Rule:
    points = {
        "M": (1 / 2, 0, 0),
        "K": (1 / 3, 1 / 3, 0),
        "A": (0, 0, 1 / 2),
        "L": (1 / 2, 0, 1 / 2),
        "H": (1 / 3, 1 / 3, 1 / 2),
    }
    return "hexagonal", _IDENTITY, points, "Γ-M-K-Γ-A-L-H-A L-M K-H"


def _simple_tetragonal(cell: np.ndarray) -> _Rule:
    points = {
        "X": (0, 1 / 2, 0),
        "M": (1 / 2, 1 / 2, 0),
        "Z": (0, 0, 1 / 2),
        "R": (0, 1 / 2, 1 / 2),
        "A": (1 / 2, 1 / 2, 1 / 2),
    }
    return "tetragonal", _IDENTITY, points, "Γ-X-M-Γ-Z-R-A-Z X-R M-A"


def _body_centred_tetragonal(cell: np.ndarray) -> _Rule:
    (a, _, c), _ = _shape(cell)
    common = {"X": (1 / 2, 1 / 2, 0), "N": (1 / 2, 0, 1 / 2), "P": (1 / 2, 1 / 2, 1 / 2)}
    if c <= a:
        z = (1 + (c / a) ** 2) / 2
        points = {"M": (1, 0, 0), "Z": (0, 0, z), "Z1": (1, 0, 1 - z)}
        return "body-centred tetragonal", _IDENTITY, common | points, "Γ-X-M-Γ-Z-P-N-Z1-M X-P"
    sigma, shift = (1 + (a / c) ** 2) / 2, (a / c) ** 2 / 2
    points = {
        "Z": (0, 0, 1),
        "Σ": (sigma, 0, 0),
        "Σ1": (1 - sigma, 0, 1),
        "Y": (1 / 2 + shift, 1 / 2 - shift, 0),
        "Y1": (1 / 2 - shift, 1 / 2 - shift, 1),
    }
    return "body-centred tetragonal", _IDENTITY, common | points, "Γ-X-Y-Σ-Γ-Z-Σ1-N-P-Y1-Z X-P"


def _simple_orthorhombic(cell: np.ndarray) -> _Rule:
    points = {
        "X": (1 / 2, 0, 0),
        "Y": (0, 1 / 2, 0),
        "Z": (0, 0, 1 / 2),
        "S": (1 / 2, 1 / 2, 0),
        "T": (0, 1 / 2, 1 / 2),
        "U": (1 / 2, 0, 1 / 2),
        "R": (1 / 2, 1 / 2, 1 / 2),
    }
    return "orthorhombic", _IDENTITY, points, "Γ-X-S-Y-Γ-Z-U-R-T-Z Y-T U-X S-R"


def _base_centred_orthorhombic(first: int) -> Callable[[np.ndarray], _Rule]:
    """The rule where the two axes from `first` on, in cyclic order, span the centred face."""

    def rule(cell: np.ndarray) -> _Rule:
        axes = np.roll(_IDENTITY, -first, axis=0)
        short, long = np.linalg.norm(axes[:2] @ cell, axis=1)
        if short > long:  # the points are stated for the shorter axis first
            axes, short, long = np.array([axes[1], -axes[0], axes[2]]), long, short
        z = (1 + (short / long) ** 2) / 2
        points = {  # on the axes of the centred cell
            "X": (z, 0, 0),
            "X1": (1 - z, 1, 0),
            "A": (z, 0, 1 / 2),
            "A1": (1 - z, 1, 1 / 2),
            "Y": (0, 1, 0),
            "T": (0, 1, 1 / 2),
            "S": (1 / 2, 1 / 2, 0),
            "R": (1 / 2, 1 / 2, 1 / 2),
            "Z": (0, 0, 1 / 2),
        }
        return "base-centred orthorhombic", axes, points, "Γ-X-S-R-A-Z-Γ-Y-X1-A1-T-Y Z-T"

    return rule


def _body_centred_orthorhombic(cell: np.ndarray) -> _Rule:
    lengths, _ = _shape(cell)
    order = np.argsort(lengths, kind="stable")
    axes = _IDENTITY[order] * np.array([1, 1, np.linalg.det(_IDENTITY[order])])[:, None]
    a, b, c = lengths[order]
    zeta, eta = (1 + (a / c) ** 2) / 4, (1 + (b / c) ** 2) / 4
    delta, mu = (b * b - a * a) / (4 * c * c), (a * a + b * b) / (4 * c * c)
    points = {
        "L": (-mu, mu, 1 / 2 - delta),
        "L1": (mu, -mu, 1 / 2 + delta),
        "L2": (1 / 2 - delta, 1 / 2 + delta, -mu),
        "R": (0, 1 / 2, 0),
        "S": (1 / 2, 0, 0),
        "T": (0, 0, 1 / 2),
        "W": (1 / 4, 1 / 4, 1 / 4),
        "X": (-zeta, zeta, zeta),
        "X1": (zeta, 1 - zeta, -zeta),
        "Y": (eta, -eta, eta),
        "Y1": (1 - eta, eta, -eta),
        "Z": (1 / 2, 1 / 2, -1 / 2),
    }
    return "body-centred orthorhombic", _BODY @ axes, points, "Γ-X-L-T-W-R-X1-Z-Γ-Y-S-W L1-Y Y1-Z"


def _rhombohedral(axes: np.ndarray) -> Callable[[np.ndarray], _Rule]:
    """The rule on the three equal axes, rows of `axes` in units of the conventional ones."""

    def rule(cell: np.ndarray) -> _Rule:
        _, (cosine, _, _) = _shape(axes @ cell)
        alpha = float(np.arccos(cosine))
        if cosine > 0:
            eta = (1 + 4 * cos(alpha)) / (2 + 4 * cos(alpha))
            nu = 3 / 4 - eta / 2
            points = {
                "B": (eta, 1 / 2, 1 - eta),
                "B1": (1 / 2, 1 - eta, eta - 1),
                "F": (1 / 2, 1 / 2, 0),
                "L": (1 / 2, 0, 0),
                "P": (eta, nu, nu),
                "P1": (1 - nu, 1 - nu, 1 - eta),
                "Q": (1 - nu, nu, 0),
                "X": (nu, 0, -nu),
                "Z": (1 / 2, 1 / 2, 1 / 2),
            }
            return "rhombohedral", axes, points, "Γ-L-B1 B-Z-Γ-X Q-F-P1-Z L-P"
        eta = 1 / (2 * tan(alpha / 2) ** 2)
        nu = 3 / 4 - eta / 2
        points = {
            "F": (1 / 2, -1 / 2, 0),
            "L": (1 / 2, 0, 0),
            "P": (1 - nu, -nu, 1 - nu),
            "P1": (nu, nu - 1, nu - 1),
            "Q": (eta, eta, eta),
            "Q1": (1 - eta, -eta, -eta),
            "Z": (1 / 2, -1 / 2, 1 / 2),
        }
        return "rhombohedral", axes, points, "Γ-P-Z-Q-Γ-F-P1-Q1-L-Z"

    return rule


_RULES: dict[tuple[str, str], Callable[[np.ndarray], _Rule]] = {
    ("cubic", "P"): _simple_cubic,
    ("cubic", "F"): _face_centred_cubic,
    ("cubic", "I"): _body_centred_cubic,
    ("hexagonal", "P"): _hexagonal,
    ("hexagonal", "R"): _rhombohedral(_OBVERSE),
    ("rhombohedral", "P"): _rhombohedral(_IDENTITY),
    ("tetragonal", "P"): _simple_tetragonal,
    ("tetragonal", "I"): _body_centred_tetragonal,
    ("orthorhombic", "P"): _simple_orthorhombic,
    ("orthorhombic", "A"): _base_centred_orthorhombic(1),
    ("orthorhombic", "B"): _base_centred_orthorhombic(2),
    ("orthorhombic", "C"): _base_centred_orthorhombic(0),
    ("orthorhombic", "I"): _body_centred_orthorhombic,
}
