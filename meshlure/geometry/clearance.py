"""Clearance: the exact distance from points to a surface's triangles."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from meshlure.geometry.blocks import curve_order
from meshlure.geometry.surface import Floats, Ints, Surface

_BOX = 128
"""Triangles in a box of the tree."""


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
    An R-tree of boxes of neighbouring triangles gives the box nearest to a point; the exact distance to that box's
    triangles bounds the search, and every box within it is looked at. Point to triangle by the regions of
    C. Ericson (2005), Real-Time Collision Detection, section 5.1.5.
    """
    from rtree import index as rtree
    from trimesh.triangles import closest_point

    corners, groups, low, high = _boxes(surface)

    def rows() -> Iterator[tuple[int, tuple[float, ...], None]]:
        for number, box in enumerate(np.hstack([low, high]).tolist()):
            yield number, tuple(box), None

    tree = rtree.Index(rows(), properties=rtree.Property(dimension=3))
    distance = np.empty(len(points))
    place = np.empty((len(points), 3))

    def settled(point: Floats, boxes: list[int]) -> tuple[float, Floats]:
        triangles = np.concatenate([corners[groups[box] : groups[box + 1]] for box in boxes])
        found: Floats = closest_point(triangles, np.broadcast_to(point, (len(triangles), 3)))  # type: ignore[no-untyped-call]
        apart = np.linalg.norm(found - point, axis=1)
        best = int(apart.argmin())
        return float(apart[best]), found[best]

    for row, point in enumerate(np.asarray(points, dtype=np.float64)):
        first = next(iter(tree.nearest(tuple(np.tile(point, 2)), 1)))
        bound, _ = settled(point, [first])
        # A hair wider, so that rounding of the boxes loses nothing.
        reach = bound * (1 + 1e-12) + 1e-15
        near = list(tree.intersection(tuple(np.concatenate([point - reach, point + reach]))))
        distance[row], place[row] = settled(point, near or [first])
    return Nearest(distance, place)


def _boxes(surface: Surface) -> tuple[Floats, Ints, Floats, Floats]:
    """Triangles sorted into boxes: corners, first triangle of each box with the end, and the boxes' bounds."""
    corners = surface.corners[curve_order(surface.corners.sum(axis=1))]
    first = np.append(np.arange(0, len(corners), _BOX), len(corners))
    low = np.minimum.reduceat(corners.min(axis=1), first[:-1])
    high = np.maximum.reduceat(corners.max(axis=1), first[:-1])
    return corners, first, low, high
