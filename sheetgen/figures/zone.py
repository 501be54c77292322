"""The Fermi sphere and the first Brillouin zone: a view, two sections at right angles, and what fills the zones."""

from __future__ import annotations

import numpy as np

from sheetgen.figures.bands import PER_NANOMETRE, lattice_of
from sheetgen.figures.plot import Area, Axis, Curve, Figure, Key, Layer, Note, Panel, Plot, Shape
from sheetgen.figures.scales import snap_up
from sheetgen.figures.stamp import stamp
from sheetgen.figures.style import WIDTH
from sheetgen.figures.subject import Subject
from sheetgen.figures.words import number
from sheetgen.physics.zones import Polyhedron, zone_polyhedron

HALF_STEPS = (1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8)
SIDE = 84.0
ROWS = (28.0, 154.0)
HEIGHT = ROWS[1] + SIDE + 34
TURN = np.linspace(0.0, 2 * np.pi, 361)
VIEW = np.array([1.0, 0.42, 0.38])
KEYS = (
    Key("first zone", "line", "edge"),
    Key("Fermi sphere", "line", "two"),
    Key("beyond the zone", "area", "two"),
)
MOST_BARS = 8


def draw(subject: Subject) -> Figure | None:
    """Sphere and zone of one crystal whose electrons are given by valence, unless they fill zones without number."""
    stated = subject.has("fermi_wavevector", "fermi_to_zone_ratio") and subject.sheet.entries("zone_occupation")
    return stamp(plot(subject)) if stated else None


def plot(subject: Subject) -> Plot:
    """Four panels: the body, the filled parts of the zones, and the sections."""
    body = zone_polyhedron(*lattice_of(subject))
    radius = subject.si("fermi_wavevector")
    reach = 1.08 * max(radius, np.linalg.norm(body.vertices, axis=1).max()) / PER_NANOMETRE
    end = snap_up(reach, HALF_STEPS)
    upright, across = _section_axes(body)
    right = WIDTH - 9 - SIDE
    ratio = Note(f"*k*_{{F}}/*k*_{{zone}} = {number(subject.si('fermi_to_zone_ratio'))}", 0, -reach, "middle", dy=-6)
    panels = (
        _bare_panel((8, ROWS[1], SIDE + 14, SIDE + 14), reach, (*_view(body, radius), ratio)),
        _section_panel((right, ROWS[1], SIDE, SIDE), end, ("*k*_{x}", "*k*_{y}"), _section(body, radius, *_PLANE)),
        _bars((38, ROWS[0], SIDE - 18, SIDE), subject.sheet.entries("zone_occupation")[0]["value"]),
        _section_panel(
            (right, ROWS[0], SIDE, SIDE), end, ("*k*_{∥}", "*k*_{z}"), _section(body, radius, across, upright)
        ),
    )
    title = f"Fermi sphere and first zone: {subject.name}"
    return Plot("zone", subject.slug, title, _words(subject), panels, HEIGHT)


_PLANE = (np.array([1.0, 0.0, 0.0]), np.array([0.0, 1.0, 0.0]))


def _section_axes(body: Polyhedron) -> tuple[np.ndarray, np.ndarray]:
    """z, and the direction at right angles to it in the plane that holds z and the nearest face off the z axis."""
    upright = np.array([0.0, 0.0, 1.0])
    for index in np.argsort(body.distances, kind="stable"):
        flat = body.normals[index] * (1, 1, 0)
        if np.linalg.norm(flat) > 1e-6:
            return upright, flat / np.linalg.norm(flat)
    raise ValueError("every face of the zone is at right angles to z")


def _bare_panel(box, reach: float, layers: tuple[Layer, ...]) -> Panel:
    axis = Axis("", -reach, reach, bare=True)
    return Panel(box, axis, axis, layers, KEYS, 3, spines="none")


def _section_panel(box, end: float, names: tuple[str, str], layers: tuple[Layer, ...]) -> Panel:
    x, y = (Axis(f"{name} / nm⁻¹", -end, end) for name in names)
    return Panel(box, x, y, layers)


# ---------------------------------------------------------------- sections


def _section(body: Polyhedron, radius: float, across: np.ndarray, upright: np.ndarray) -> tuple[Layer, ...]:
    """The cut through the middle that two directions span, in 1/nm."""
    half_planes = np.column_stack((body.normals @ across, body.normals @ upright, body.distances / PER_NANOMETRE))
    size = 4 * body.distances.max() / PER_NANOMETRE
    outline = clipped(np.array([(-size, -size), (size, -size), (size, size), (-size, size)]), half_planes)
    circle = radius / PER_NANOMETRE * np.column_stack((np.cos(TURN), np.sin(TURN)))
    filled = clipped(circle, half_planes)
    outline = np.vstack((outline, outline[:1]))
    return (
        Shape("", *circle.T, "two"),
        Shape("", *outline.T, "ground"),
        Shape("", *filled.T, "one"),
        Curve("Fermi sphere", *circle.T, "two"),
        Curve("first zone", *outline.T, "edge"),
    )


def clipped(polygon: np.ndarray, half_planes: np.ndarray) -> np.ndarray:
    """The part of a polygon (n, 2) where a·x + b·y ≤ c for every row (a, b, c): Sutherland and Hodgman 1974."""
    for a, b, c in half_planes:
        over = polygon @ (a, b) - c
        if not len(polygon) or (over <= 0).all():
            continue
        following, over_next = np.roll(polygon, -1, axis=0), np.roll(over, -1)
        pieces = []
        for point, after, here, there in zip(polygon, following, over, over_next, strict=True):
            if here <= 0:
                pieces.append(point)
            if (here < 0 < there) or (there < 0 < here):
                pieces.append(point + here / (here - there) * (after - point))
        polygon = np.array(pieces).reshape(-1, 2)
    return polygon


# ---------------------------------------------------------------- view


def _view(body: Polyhedron, radius: float) -> tuple[Layer, ...]:
    """The body seen from afar, hidden edges dashed; where the sphere passes a face, the disc that it cuts out."""
    scaled = body.vertices / PER_NANOMETRE
    towards, screen = _screen()
    seen = [float(normal @ towards) > 1e-9 for normal in body.normals]
    flat = scaled @ screen.T
    circle = radius / PER_NANOMETRE * np.column_stack((np.cos(TURN), np.sin(TURN)))
    layers: list[Layer] = [Shape("", *circle.T, "one"), *_edges(body, flat, seen, False)]
    layers += [Curve("", *circle.T, "two", unlisted=True)]
    for index in np.flatnonzero(seen):
        disc = _disc_on_face(body, int(index), radius)
        if len(disc):
            layers.append(Shape("", *(disc / PER_NANOMETRE @ screen.T).T, "two"))
    return (*layers, *_edges(body, flat, seen, True))


def _screen() -> tuple[np.ndarray, np.ndarray]:
    """The direction towards the eye, and the two unit vectors of the picture."""
    towards = VIEW / np.linalg.norm(VIEW)
    right = np.cross((0.0, 0.0, 1.0), towards)
    right /= np.linalg.norm(right)
    return towards, np.array((right, np.cross(towards, right)))


def _edges(body: Polyhedron, flat: np.ndarray, seen: list[bool], front: bool) -> list[Curve]:
    """Edges with a face towards the eye (front) or without one, as one broken line."""
    shown = {frozenset(edge) for ring, ahead in zip(body.faces, seen, strict=True) if ahead for edge in _sides(ring)}
    every = {frozenset(edge) for ring in body.faces for edge in _sides(ring)}
    chosen = sorted(tuple(sorted(edge)) for edge in (shown if front else every - shown))
    points = np.full((3 * len(chosen), 2), np.nan)
    points[0::3], points[1::3] = flat[[a for a, _ in chosen]], flat[[b for _, b in chosen]]
    return [Curve("", *points.T, "edge" if front else "hidden", unlisted=True)]


def _sides(ring: tuple[int, ...]) -> list[tuple[int, int]]:
    return list(zip(ring, (*ring[1:], ring[0]), strict=True))


def _disc_on_face(body: Polyhedron, index: int, radius: float) -> np.ndarray:
    """Outline (n, 3) of the part of a face that lies inside the sphere; empty where the sphere does not reach it."""
    distance, normal = body.distances[index], body.normals[index]
    if radius <= distance:
        return np.empty((0, 3))
    corners = body.vertices[list(body.faces[index])]
    first = (corners[0] - normal * distance) / np.linalg.norm(corners[0] - normal * distance)
    second = np.cross(normal, first)
    inward = np.cross(np.roll(corners, -1, axis=0) - corners, normal)
    half_planes = np.column_stack(
        (inward @ first, inward @ second, ((corners - normal * distance) * inward).sum(axis=1))
    )
    circle = np.sqrt(radius**2 - distance**2) * np.column_stack((np.cos(TURN), np.sin(TURN)))
    inside = clipped(circle, half_planes)
    return normal * distance + inside[:, :1] * first + inside[:, 1:] * second


# ---------------------------------------------------------------- filled parts


def _bars(box, fractions: list[float]) -> Panel:
    """The filled part of each zone as a bar."""
    shown = fractions[:MOST_BARS]
    layers: list[Layer] = []
    for zone, filled in enumerate(shown, start=1):
        sides = np.array([zone - 0.36, zone + 0.36])
        layers.append(Area("", sides, np.zeros(2), np.full(2, filled), "one", unlisted=True))
        outline = np.array([(sides[0], 0), (sides[0], filled), (sides[1], filled), (sides[1], 0)])
        layers.append(Curve(f"zone {zone}", *outline.T, "thin"))
    ticks = tuple((float(zone), str(zone)) for zone in range(1, len(shown) + 1))
    x = Axis("zone", 0.4, max(len(shown), 4) + 0.6, ticks=ticks)
    return Panel(box, x, Axis("filled part", 0, 1.05), tuple(layers))


def _words(subject: Subject) -> str:
    ratio = subject.si("fermi_to_zone_ratio")
    filled = subject.sheet.entries("zone_occupation")[0]["value"]
    reaching = "reaches beyond" if ratio > 1 else "stays inside"
    return (
        f"First Brillouin zone of {subject.phrase} with the Fermi sphere, seen from outside and in two sections at "
        f"right angles; the sphere's radius is {number(ratio)} of the distance of the nearest diffracting face and "
        f"{reaching} it. Filled part of zone 1, 2, and so on: {', '.join(number(part) for part in filled)}."
    )
