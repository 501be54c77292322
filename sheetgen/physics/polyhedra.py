"""The first Brillouin zone as a body."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import lru_cache

import numpy as np

from sheetgen.physics.crystals import reciprocal_basis
from sheetgen.physics.lattices import reduced_basis, vectors_within


@dataclass(frozen=True)
class Polyhedron:
    """A convex body: vertices (V, 3), faces as rings of vertex indices, and the outward unit normal of each.

    Rings run anticlockwise seen from outside. `distances` are those of the faces from the origin.
    """

    vertices: np.ndarray
    faces: tuple[tuple[int, ...], ...]
    normals: np.ndarray
    distances: np.ndarray

    @property
    def volume(self) -> float:
        """A third of the sum of face areas times distances."""
        return float(sum(self.face_area(number) * d for number, d in enumerate(self.distances)) / 3)

    def face_area(self, number: int) -> float:
        """Area of one face."""
        ring = self.vertices[list(self.faces[number])]
        return float(np.cross(ring, np.roll(ring, -1, axis=0)).sum(axis=0) @ self.normals[number] / 2)


def zone_polyhedron(cell: np.ndarray, primitive: np.ndarray) -> Polyhedron:
    """First Brillouin zone of the primitive lattice, in 1/m.

    No point of it is farther from Γ than half the root of the summed squares of the edges of a reduced cell,
    so the planes up to there are all that can bound it.
    """
    basis = reduced_basis(reciprocal_basis(np.asarray(primitive, float) @ np.asarray(cell, float)))
    unit = np.linalg.norm(basis[0])
    zone = _zone_of_shape(tuple(np.round(basis / unit, 14).ravel().tolist()))
    return replace(zone, vertices=zone.vertices * unit, distances=zone.distances * unit)


@lru_cache(maxsize=256)
def _zone_of_shape(shape: tuple[float, ...]) -> Polyhedron:
    """The zone of a reduced reciprocal basis (9 numbers) whose shortest vector has length 1."""
    from scipy.spatial import HalfspaceIntersection  # here: its import costs more than most runs need

    basis = np.array(shape).reshape(3, 3)
    vectors = vectors_within(basis, np.sqrt((basis**2).sum()))[1:] @ basis
    lengths = np.linalg.norm(vectors, axis=1)
    normals, distances = vectors / lengths[:, None], lengths / 2
    corners = HalfspaceIntersection(np.column_stack([normals, -distances]), np.zeros(3)).intersections
    vertices = _distinct(corners)
    faces = [_ring(vertices, normal, distance) for normal, distance in zip(normals, distances, strict=True)]
    real = [number for number, ring in enumerate(faces) if len(ring) > 2]
    return Polyhedron(vertices, tuple(faces[number] for number in real), normals[real], distances[real])


def _distinct(points: np.ndarray) -> np.ndarray:
    """The points, each once."""
    kept: list[np.ndarray] = []
    for point in points:
        if all(np.linalg.norm(point - other) > 1e-7 for other in kept):
            kept.append(point)
    return np.array(kept)


def _ring(vertices: np.ndarray, normal: np.ndarray, distance: float) -> tuple[int, ...]:
    """Indices of the vertices on a plane in anticlockwise order about its normal."""
    on_plane = np.flatnonzero(np.abs(vertices @ normal - distance) < 1e-7)
    if len(on_plane) < 3:
        return ()
    spokes = vertices[on_plane] - vertices[on_plane].mean(axis=0)
    along = spokes[0] / np.linalg.norm(spokes[0])
    angles = np.arctan2(spokes @ np.cross(normal, along), spokes @ along)
    return tuple(int(index) for index in on_plane[np.argsort(angles)])
