"""Proximity: exact distances to a surface from very many points that lie off it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from meshlure.geometry.clearance import Boxes, Nearest, closest_places
from meshlure.geometry.surface import Floats, Ints, Surface

if TYPE_CHECKING:
    from scipy.spatial import cKDTree

_FIRST: Final = 32
"""Spots asked for at first; of points with more within reach eight times as many, and again."""

_MOST: Final = 2048
"""Spots beyond which a point is asked for by boxes instead: one in the middle of something round."""

_SPOTS: Final = 300_000
"""Spots on faces beyond which it is not worth having them closer."""

_AT_ONCE: Final = 32768
"""Points worked on at a time."""

_HAIR: Final = 1e-12
"""Share of a distance that rounding may cost."""


@dataclass(frozen=True, eq=False)
class Proximity:
    """Spots all over a surface's faces, edges and corners, each with a triangle that holds it.

    Attributes
    ----------
    boxes : Boxes
        Of the same surface.
    corners : (m, 3, 3) array, m
        Of its triangles.
    owner : (n,) array
        Triangle of each spot.
    cover : float, m
        No place of a face or an edge is farther than this from a spot on the same face or edge.
    tree : cKDTree
        Of the spots.

    Notes
    -----
    At the place q nearest to a point p, the way to p is square to the face or the edge that q lies in, so that a spot
    there, at most c = `cover` from q, is within sqrt(d^2 + c^2) of p; or q is a corner, and a spot itself. With any
    place's distance in hand, only triangles of spots within that reach need be looked at: for points at a depth of
    several c, a handful. Points close to the surface gain nothing.
    """

    boxes: Boxes
    corners: Floats
    owner: Ints
    cover: float
    tree: cKDTree[None]

    @classmethod
    def of(cls, surface: Surface, depth: float) -> Proximity:
        """Return the spots of a surface, so close together that points at a depth are soon answered for.

        Parameters
        ----------
        surface : Surface
        depth : float, m
            Positive; how far most points that will be asked for lie from the surface.
        """
        facet = 1.2 * np.sqrt(surface.area / len(surface.faces))
        return cls.spaced(surface, float(max(min(facet, depth / 3), np.sqrt(surface.area / _SPOTS))))

    @classmethod
    def spaced(cls, surface: Surface, spacing: float) -> Proximity:
        """Return the spots of a surface, faces and edges longer than a spacing, m, being halved until they are not."""
        from scipy.spatial import cKDTree

        corners = surface.corners
        used, first = np.unique(surface.faces, return_index=True)
        middles, faces, reach = _face_spots(corners, spacing)
        halves, sides, half = _edge_spots(surface, spacing)
        spots = np.concatenate([surface.vertices[used], halves, middles])
        owner = np.concatenate([first // 3, sides, faces])
        tree = cKDTree(spots, balanced_tree=False, compact_nodes=False)
        return cls(Boxes.of(surface), corners, owner, max(reach, half), tree)

    def near(self, points: Floats) -> Floats:
        """Return distances, (n,), m: exact or a little too great, never by more than `cover` squared over twice that.

        Parameters
        ----------
        points : (n, 3) array, m
        """
        spot = np.asarray(self.tree.query(points)[1])
        return _length(closest_places(points, self.corners[self.owner[spot]]) - points)

    def nearest(self, points: Floats) -> Nearest:
        """Return the distance from each of (n, 3) points, m, with the nearest place; as `Boxes.nearest`."""
        points = np.asarray(points, dtype=np.float64).reshape(-1, 3)
        distance, place = np.empty(len(points)), np.empty((len(points), 3))
        for at in range(0, len(points), _AT_ONCE):
            piece = slice(at, at + _AT_ONCE)
            distance[piece], place[piece] = self._nearest(points[piece])
        return Nearest(distance, place)

    def _nearest(self, points: Floats) -> tuple[Floats, Floats]:
        distance, place = np.full(len(points), np.inf), np.zeros((len(points), 3))
        left, count = np.arange(len(points)), _FIRST
        while len(left) and count <= _MOST:
            some = points[left]
            apart, spot = (np.asarray(answer) for answer in self.tree.query(some, min(count, self.tree.n)))
            best = closest_places(some, self.corners[self.owner[spot[:, 0]]])
            reach = np.sqrt(((best - some) ** 2).sum(axis=1) + self.cover**2) * (1 + _HAIR)
            # Most spots within reach share a few triangles.
            owner = np.sort(np.where(apart <= reach[:, None], self.owner[spot], -1), axis=1)
            row, column = np.nonzero(np.diff(owner, axis=1, prepend=-1))
            found = closest_places(some[row], self.corners[owner[row, column]])
            off = _length(found - some[row])
            # Of each row's places the nearest is written last.
            order = np.lexsort((-off, row))
            distance[left[row[order]]], place[left[row[order]]] = off[order], found[order]
            left = left[(apart[:, -1] <= reach) & (count < self.tree.n)]
            count *= 8
        if len(left):
            rest = self.boxes.nearest(points[left])
            distance[left], place[left] = rest.distance, rest.place
        return distance, place


def _face_spots(corners: Floats, spacing: float) -> tuple[Floats, Ints, float]:
    """Middles of faces cut up, their faces, and the greatest way from a middle to a corner."""
    owner = np.arange(len(corners))
    done, owners = [], []
    while len(corners):
        sides = corners[:, [1, 2, 0]] - corners
        square = np.einsum("nki,nki->nk", sides, sides)
        longest, long = square.argmax(axis=1), square.max(axis=1) > spacing**2
        done.append(corners[~long])
        owners.append(owner[~long])
        row = np.flatnonzero(long)
        start, end, other = (corners[row, (longest[row] + turn) % 3] for turn in range(3))
        middle = (start + end) / 2
        corners = np.concatenate([np.stack([start, middle, other], axis=1), np.stack([middle, end, other], axis=1)])
        owner = np.tile(owner[row], 2)
    pieces = np.concatenate(done)
    middles = pieces.mean(axis=1)
    toward = pieces - middles[:, None]
    reach = float(np.sqrt(np.einsum("nki,nki->nk", toward, toward).max(initial=0.0)))
    return middles, np.concatenate(owners), reach


def _edge_spots(surface: Surface, spacing: float) -> tuple[Floats, Ints, float]:
    """Middles of edges cut up, a face beside each, and the greatest way from a middle to an end."""
    ends = surface.faces[:, [[0, 1], [1, 2], [2, 0]]].reshape(-1, 2)
    low, high = ends.min(axis=1), ends.max(axis=1)
    _, first = np.unique(low * len(surface.vertices) + high, return_index=True)
    start, way = surface.vertices[low[first]], surface.vertices[high[first]] - surface.vertices[low[first]]
    length = _length(way)
    cuts = np.maximum(np.ceil(length / spacing).astype(np.intp), 1)
    of = np.repeat(np.arange(len(first)), cuts)
    begins = np.cumsum(cuts) - cuts
    share = (np.arange(len(of)) - begins[of] + 0.5) / cuts[of]
    return start[of] + share[:, None] * way[of], first[of] // 3, float((length / cuts).max(initial=0.0)) / 2


def _length(vectors: Floats) -> Floats:
    return np.asarray(np.sqrt(np.einsum("...i,...i->...", vectors, vectors)))
