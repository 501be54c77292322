"""How a sphere of electrons fills the Brillouin zones, from the exact geometry of the planes that cut it.

A point k lies in zone c + 1 when c Bragg planes lie between it and the origin (L. Brillouin, Wave Propagation
in Periodic Structures, 1946). The volume of the points of the sphere with at least c planes before them is
a third of the integral of k·dA over its surface, which consists of pieces of planes and of the sphere.
Green's theorem gives the areas in the planes from the chords in which planes meet, and areas on the sphere
follow from its arcs: closed forms throughout, nothing is sampled and nothing iterated.
"""

from __future__ import annotations

from functools import lru_cache

import numpy as np

from sheetgen.physics.crystals import reciprocal_basis
from sheetgen.physics.lattices import vectors_within

# In symmetric lattices many planes share a line. A tiny shift of each, its own, removes the coincidences.
_NUDGE = 1e-11
_PARALLEL = 1e-10  # of the squared sine between normals
LARGEST_FILLING = 100  # zones' worth of electrons; the time grows as the cube, to some seconds here
_SNAP = 1e-8  # fillings this near to 0 or 1 are 0 or 1: the nudges move a filling by far less
_ENTRIES = 2_000_000  # of the table of crossings held at once


def zone_occupation(cell: np.ndarray, primitive: np.ndarray, fermi_wavevector: float) -> np.ndarray:
    """Filled parts (Z,) of zone 1, 2, …, up to the last above zero; they add up to the sphere.

    The error is about 1e-10. A sphere of up to 4 electrons per primitive cell takes a millisecond, one of 50 a
    tenth of a second. Empty for NaN, for no electrons and beyond LARGEST_FILLING zones.
    """
    basis = reciprocal_basis(np.asarray(primitive, float) @ np.asarray(cell, float))
    unit = np.cbrt(abs(np.linalg.det(basis)))
    radius = fermi_wavevector / unit
    if not 0 < 4 * np.pi / 3 * radius**3 <= LARGEST_FILLING:
        return np.empty(0)
    return _occupation(tuple(np.round(basis / unit, 14).ravel().tolist()), round(float(radius), 14)).copy()


# Metals of one structure and valence fill their zones alike, whatever their lattice constant.
@lru_cache(maxsize=1024)
def _occupation(shape: tuple[float, ...], radius: float) -> np.ndarray:
    """Filled parts for a reciprocal basis (9 numbers) of unit volume."""
    basis = np.array(shape).reshape(3, 3)
    indices = vectors_within(basis, 2 * radius)[1:]
    one_of_each_pair = indices[[tuple(index) > (0, 0, 0) for index in indices.tolist()]] @ basis
    parts = layer_volumes(one_of_each_pair / radius) * radius**3
    parts = np.where(np.abs(parts - 1) < _SNAP, 1.0, np.where(parts < _SNAP, 0.0, parts))
    return parts[: np.flatnonzero(parts)[-1] + 1]


def layer_volumes(vectors: np.ndarray) -> np.ndarray:
    """Volumes of the parts of the unit ball with 0, 1, 2, … of the planes k·(±G) = G²/2 before them."""
    lengths = np.linalg.norm(vectors, axis=1)
    cutting = lengths < 2 * (1 - 2 * _NUDGE)
    if not cutting.any():
        return np.array([4 * np.pi / 3])
    normals = vectors[cutting] / lengths[cutting, None]
    nudges = _NUDGE * (np.arange(len(normals)) * 0.6180339887498949 % 1)
    planes = _Planes(normals, lengths[cutting] / 2 * (1 + nudges))
    moments = planes.disc_moments()
    solid_angles = planes.solid_angles()
    beyond = (solid_angles[1:] - (moments[:-1] - moments[1:])) / 3
    return -np.diff(np.concatenate([[4 * np.pi / 3], beyond, [0.0]]))


class _Planes:
    """Planes ±n·k = d that cut the unit ball; one covers the points that it parts from the origin."""

    def __init__(self, normals: np.ndarray, distances: np.ndarray) -> None:
        self.normals = normals = np.concatenate([normals, -normals])
        self.distances = distances = np.concatenate([distances, distances])
        self.count = len(distances)
        self.cosines = normals @ normals.T
        squared_sines = 1 - self.cosines**2
        self.crossing = squared_sines > _PARALLEL
        self.sines = np.sqrt(np.where(self.crossing, squared_sines, 1.0))
        # Distance, in plane i, of its line with plane j from the foot of the normal.
        self.offsets = (distances[None, :] - self.cosines * distances[:, None]) / self.sines
        self.radii = np.sqrt(1 - distances**2)
        self.arcs = self._arcs()

    def disc_moments(self) -> np.ndarray:
        """Σ_i d_i × area of plane i in the ball with at least 0, 1, … other planes before it."""
        arc_circle, _, arc_length, arc_cover = self.arcs
        weights = self.distances[arc_circle] * self.radii[arc_circle] ** 2 * arc_length
        circular = _at_least(np.bincount(arc_cover, weights, self.count + 1))
        straight = np.zeros(self.count + 1)
        # The pair of −G and −G′ is the image of that of G and G′: count one of the two, twice.
        half = self.count // 2
        meeting = (self.crossing & (np.abs(self.offsets) < self.radii[:, None]))[:half]
        first, second = np.nonzero(np.hstack([np.triu(meeting[:, :half]), np.triu(meeting[:, half:])]))
        rows = max(_ENTRIES // self.count, 1)
        for start in range(0, len(first), rows):
            chunk = slice(start, start + rows)
            straight[1:] += 2 * self._chord_moments(first[chunk], second[chunk])[:-1]
        return (circular - straight) / 2

    def solid_angles(self) -> np.ndarray:
        """Solid angle of the sphere covered by at least 0, 1, … planes."""
        circle, start, length, cover = self.arcs
        swept = (1 - self.distances[circle]) * length
        swept += self._from_pole(circle, start) - self._from_pole(circle, start + length)
        angles = np.bincount(cover + 1, swept, self.count + 1)
        # Areas on a sphere are known modulo 4π; a coarse sample tells which of the equal values is meant.
        sample = (_spread_points(256) @ self.normals.T > self.distances).sum(axis=1)
        estimate = 4 * np.pi * _at_least(np.bincount(sample, minlength=self.count + 1)) / len(sample)
        angles += 4 * np.pi * np.round((estimate - angles) / (4 * np.pi))
        levels = np.arange(self.count + 1)
        lowest, highest = cover.min(), cover.max() + 1
        return np.where(levels <= lowest, 4 * np.pi, np.where(levels > highest, 0.0, angles))

    def _chord_moments(self, first: np.ndarray, second: np.ndarray) -> np.ndarray:
        """Σ (d_i e_ij + d_j e_ji) × length over the chords of pairs of planes, by the cover by others."""
        cosine, sine = self.cosines[first, second], self.sines[first, second]
        one, other = self.normals[first], self.normals[second]
        d_one, d_other = self.distances[first], self.distances[second]
        foot = ((d_one - cosine * d_other) / sine**2)[:, None] * one
        foot += ((d_other - cosine * d_one) / sine**2)[:, None] * other
        half = np.sqrt(np.maximum(1 - (foot**2).sum(axis=1), 0.0))[:, None]
        slopes = (np.cross(one, other) / sine[:, None]) @ self.normals.T
        heights = foot @ self.normals.T - self.distances
        rows = np.arange(len(first))
        for own in (first, second):
            slopes[rows, own], heights[rows, own] = 0.0, -1.0
        sloping = np.abs(slopes) > 1e-13
        crossings = np.divide(-heights, slopes, out=np.ones_like(slopes), where=sloping)
        covered = (heights - half * slopes > 0).sum(axis=1)
        inside = sloping & (np.abs(crossings) < half)
        steps = np.where(inside, np.sign(slopes), 0.0)
        crossings = np.where(inside, crossings, half)
        lengths, covers = _segments(crossings, steps, -half, half, covered)
        weights = d_one * self.offsets[first, second] + d_other * self.offsets[second, first]
        return np.bincount(covers.ravel(), (weights[:, None] * lengths).ravel(), self.count + 1)

    def _arcs(self) -> tuple[np.ndarray, np.ndarray, np.ndarray, np.ndarray]:
        """Circle, start, length and cover by other planes of the arcs that circles cut from each other."""
        reach = self.offsets / self.radii[:, None]
        cut = self.crossing & (np.abs(reach) < 1)
        half = np.arccos(np.where(cut, reach, 0.0))
        across, along = self._frames()
        centre = np.arctan2(along @ self.normals.T, across @ self.normals.T)
        # A plane that does not cut the circle covers all of it or nothing.
        behind = (self.cosines > 0) & (self.distances[:, None] > self.distances)
        whole = np.where(self.crossing, reach <= -1, behind)
        np.fill_diagonal(whole, False)
        begin, end = (centre - half) % (2 * np.pi), (centre + half) % (2 * np.pi)
        covered = (whole | (cut & (begin > end))).sum(axis=1)
        events = np.concatenate([np.where(cut, begin, 2 * np.pi), np.where(cut, end, 2 * np.pi)], axis=1)
        steps = np.concatenate([np.where(cut, 1.0, 0.0), np.where(cut, -1.0, 0.0)], axis=1)
        zero, turn = np.zeros((self.count, 1)), np.full((self.count, 1), 2 * np.pi)
        lengths, covers = _segments(events, steps, zero, turn, covered)
        starts = np.concatenate([zero, np.sort(events, axis=1)], axis=1)
        circle = np.broadcast_to(np.arange(self.count)[:, None], lengths.shape)
        kept = lengths > 0
        return circle[kept], starts[kept], lengths[kept], covers[kept]

    def _frames(self) -> tuple[np.ndarray, np.ndarray]:
        """Two unit vectors in each plane that form a right-handed frame with its normal."""
        helper = np.eye(3)[np.argmin(np.abs(self.normals), axis=1)]
        across = np.cross(helper, self.normals)
        across /= np.linalg.norm(across, axis=1)[:, None]
        return across, np.cross(self.normals, across)

    def _from_pole(self, circle: np.ndarray, angle: np.ndarray) -> np.ndarray:
        """Signed area of the spherical triangle of a pole, a point of a circle and the circle's centre.

        A. van Oosterom and J. Strackee, IEEE Transactions on Biomedical Engineering 30, 125 (1983).
        """
        across, along = self._frames()
        centre = self.normals[circle]
        rim = np.cos(angle)[:, None] * across[circle] + np.sin(angle)[:, None] * along[circle]
        point = self.distances[circle, None] * centre + self.radii[circle, None] * rim
        pole = np.array([0.36, 0.48, 0.8])
        numerator = np.cross(point, centre) @ pole
        denominator = 1 + point @ pole + (point * centre).sum(axis=1) + centre @ pole
        return 2 * np.arctan2(numerator, denominator)


def _segments(
    crossings: np.ndarray, steps: np.ndarray, start: np.ndarray, end: np.ndarray, covered: np.ndarray
) -> tuple[np.ndarray, np.ndarray]:
    """Lengths and covers of the segments between sorted crossings, row by row."""
    order = np.argsort(crossings, axis=1)
    marks = np.concatenate([start, np.take_along_axis(crossings, order, axis=1), end], axis=1)
    jumps = np.cumsum(np.take_along_axis(steps, order, axis=1), axis=1)
    covers = covered[:, None] + np.concatenate([np.zeros_like(start), jumps], axis=1).astype(int)
    return np.diff(marks, axis=1), covers


def _at_least(histogram: np.ndarray) -> np.ndarray:
    return np.cumsum(histogram[::-1])[::-1]


def _spread_points(count: int) -> np.ndarray:
    """Points that cover the unit sphere evenly, on a spiral."""
    index = np.arange(count)
    height = 1 - (2 * index + 1) / count
    azimuth = index * np.pi * (3 - np.sqrt(5))
    ring = np.sqrt(1 - height**2)
    return np.stack([ring * np.cos(azimuth), ring * np.sin(azimuth), height], axis=1)
