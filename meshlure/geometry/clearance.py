"""Clearance: the exact distance from points to a surface's triangles."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from meshlure.geometry.blocks import curve_order
from meshlure.geometry.surface import Floats, Ints, Surface

if TYPE_CHECKING:
    from scipy.spatial import cKDTree

_BOX = 32
"""Triangles in a box."""

_IN_TREE = 100_000
"""Triangles whose middles are kept to bound a distance; more would bound it no better."""

_PAIRS = 1 << 21
"""Pairs of a point and a box looked at in one go, and pairs of a point and a triangle: some tens of megabytes."""


@dataclass(frozen=True, eq=False)
class Nearest:
    """The places of a surface nearest to points.

    Attributes
    ----------
    distance : (n,) array, m
    place : (n, 3) array, m
    """

    distance: Floats
    place: Floats


def nearest(surface: Surface, points: Floats) -> Nearest:
    """Return the distance from each point to a surface, with the nearest place on it.

    Parameters
    ----------
    surface : Surface
        Closed or not.
    points : (n, 3) array, m

    Notes
    -----
    Neighbouring triangles share a box. The distance to the nearest middle of a triangle bounds the search, and every
    box within that bound is looked at.
    """
    return Boxes.of(surface).nearest(points)


@dataclass(frozen=True, eq=False)
class Boxes:
    """Triangles of a surface by boxes of neighbours, to be asked for distances more than once.

    Attributes
    ----------
    corners : (b, k, 3, 3) array, m
        Box, triangle, corner, coordinate; the last box is filled up with its last triangle.
    low, high : (b, 3) arrays, m
        Bounds of the boxes.
    middle, radius : (b, k, 3) and (b, k) arrays, m
        Of a ball round each triangle.
    tree : cKDTree
        Of the middles of some, which bound the distance from above.
    """

    corners: Floats
    low: Floats
    high: Floats
    middle: Floats
    radius: Floats
    tree: cKDTree[None]

    @classmethod
    def of(cls, surface: Surface) -> Boxes:
        """Return the boxes of a surface's triangles."""
        order = curve_order(surface.corners.sum(axis=1))
        order = np.append(order, np.repeat(order[-1:], -len(order) % _BOX))
        corners = surface.corners[order].reshape(-1, _BOX, 3, 3)
        middle = corners.mean(axis=2)
        radius = np.sqrt(((corners - middle[:, :, None]) ** 2).sum(axis=-1).max(axis=-1))
        some = middle.reshape(-1, 3)[:: max(1, len(order) // _IN_TREE)]
        from scipy.spatial import cKDTree

        return cls(corners, corners.min(axis=(1, 2)), corners.max(axis=(1, 2)), middle, radius, cKDTree(some))

    def nearest(self, points: Floats) -> Nearest:
        """Return the distance from each of (n, 3) points, m, with the nearest place; as the function of this name."""
        points = np.asarray(points, dtype=np.float64).reshape(-1, 3)
        distance, place = np.empty(len(points)), np.empty((len(points), 3))
        step = max(1, _PAIRS // len(self.low))
        for at in range(0, len(points), step):
            piece = slice(at, at + step)
            distance[piece], place[piece] = self._nearest(points[piece])
        return Nearest(distance, place)

    def _nearest(self, points: Floats) -> tuple[Floats, Floats]:
        apart = np.zeros((len(points), len(self.low)))
        for axis in range(3):
            p = points[:, axis, None]
            apart += np.maximum(np.maximum(self.low[:, axis] - p, p - self.high[:, axis]), 0.0) ** 2
        # A hair wider, so that rounding of the boxes loses nothing.
        bound = np.asarray(self.tree.query(points)[0]) * (1 + 1e-12) + 1e-15
        rows, boxes = np.nonzero(np.sqrt(apart) <= bound[:, None])
        return self._within(points, rows, boxes, bound)

    def _within(self, points: Floats, rows: Ints, boxes: Ints, bound: Floats) -> tuple[Floats, Floats]:
        """Distance and nearest place of every point among the triangles of its boxes; rows name every point."""
        found, of, place = [], [], []
        step = _PAIRS // (4 * _BOX)
        for at in range(0, len(rows), step):
            row, box = rows[at : at + step], boxes[at : at + step]
            toward = self.middle[box] - points[row, None]
            pair, triangle = np.nonzero(np.sqrt(_dot(toward, toward)) - self.radius[box] <= bound[row, None])
            p = points[row[pair]]
            on = closest_places(p, self.corners[box[pair], triangle])
            found.append(np.sqrt(_dot(on - p, on - p)))
            of.append(row[pair])
            place.append(on)
        distance, owner, places = np.concatenate(found), np.concatenate(of), np.concatenate(place)
        order = np.lexsort((distance, owner))
        leads = order[np.flatnonzero(np.diff(owner[order], prepend=-1))]
        return distance[leads], places[leads]


def closest_places(points: Floats, corners: Floats) -> Floats:
    """Return the place of each triangle that is closest to a point, (..., 3) array, m.

    Parameters
    ----------
    points : (..., 3) array, m
    corners : (..., 3, 3) array, m
        Triangle, corner, coordinate; one without area counts as its longest side.

    Notes
    -----
    The foot of the perpendicular where it falls into the triangle (barycentric coordinates by the Gram matrix of two
    sides), else the closest place of the three sides. Nothing here depends on the unit: the general mesh library's own
    answer is a corner where a small triangle is given in metres.
    """
    a, b, c = corners[..., 0, :], corners[..., 1, :], corners[..., 2, :]
    ab, ac, ap = b - a, c - a, points - a
    aa, bb, mixed = _dot(ab, ab), _dot(ac, ac), _dot(ab, ac)
    pa, pb = _dot(ap, ab), _dot(ap, ac)
    det = aa * bb - mixed * mixed
    u, v = bb * pa - mixed * pb, aa * pb - mixed * pa
    inside = (u >= 0) & (v >= 0) & (u + v <= det) & (det > 0)
    over = np.where(inside, det, 1.0)
    foot = a + (u / over)[..., None] * ab + (v / over)[..., None] * ac
    place, least = _on_side(points, a, b)
    for one, other in ((b, c), (c, a)):
        there, apart = _on_side(points, one, other)
        nearer = apart < least
        place, least = np.where(nearer[..., None], there, place), np.where(nearer, apart, least)
    return np.asarray(np.where(inside[..., None], foot, place))


def _on_side(points: Floats, start: Floats, end: Floats) -> tuple[Floats, Floats]:
    """Closest place of a straight line between two corners, and its squared distance."""
    along = end - start
    length = _dot(along, along)
    share = np.clip(_dot(points - start, along) / np.where(length > 0, length, 1.0), 0.0, 1.0)
    place = start + share[..., None] * along
    return place, _dot(points - place, points - place)


def _dot(u: Floats, v: Floats) -> Floats:
    return np.asarray(np.einsum("...i,...i->...", u, v))
