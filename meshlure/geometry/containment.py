"""Containment: which of many points lie inside a closed surface."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.clearance import Boxes
from meshlure.geometry.stretches import stretches
from meshlure.geometry.surface import Bools, Floats

_PAIRS = 1 << 20
"""Pairs of a point and a box, or of a point and a triangle, looked at in one go."""


def inside(boxes: Boxes, points: Floats) -> Bools:
    """Return which of (n, 3) points, m, lie inside a closed surface, (n,) array.

    Parameters
    ----------
    boxes : Boxes
        Of a surface that is closed, consistently wound and outward, its cavities inward; shells may overlap.
    points : (n, 3) array, m

    Notes
    -----
    A point is inside where the surface winds round it more than zero times: the faces that the line from it along the
    body's least extent leaves through, less those it enters through. A line through a vertex or along an edge is
    counted right. A point on the surface itself, to rounding, may fall to either side.
    """
    points = np.asarray(points, dtype=np.float64).reshape(-1, 3)
    extent = boxes.high.max(axis=0) - boxes.low.min(axis=0)
    along = int(np.argmin(extent))
    axes = [(along + 2) % 3, (along + 1) % 3, along]
    turned = points[:, axes]
    wound = np.empty(len(points))
    step = max(1, _PAIRS // len(boxes.low))
    for at in range(0, len(points), step):
        wound[at : at + step] = _wound(boxes, axes, turned[at : at + step])
    return wound > 0


def _wound(boxes: Boxes, axes: list[int], points: Floats) -> Floats:
    """How many times the surface winds round points given as row, column and height."""
    low, high = boxes.low[:, axes], boxes.high[:, axes]
    hit = points[:, 2, None] < high[:, 2]
    for k in range(2):
        hit &= (low[:, k] <= points[:, k, None]) & (points[:, k, None] <= high[:, k])
    point, box = np.nonzero(hit)
    own = _own(boxes)
    wound = np.zeros(len(points))
    step = _PAIRS // own.shape[1]
    for at in range(0, len(point), step):
        there = box[at : at + step]
        corners = boxes.corners[there][..., axes]
        above = (corners[..., 0] > points[point[at : at + step], 0, None, None]).sum(axis=2)
        which, member = np.nonzero((above > 0) & (above < 3) & own[there])
        owner = point[at : at + step][which]
        row, column, height = points[owner].T
        met = stretches(corners[which, member], row)
        through = np.flatnonzero((met.start <= column) & (column < met.stop))
        through = through[met.heights(through, column[through]) > height[through]]
        wound += np.bincount(owner[through], np.where(met.up[through], 1.0, -1.0), len(points))
    return wound


def _own(boxes: Boxes) -> Bools:
    """Which triangles of the boxes are the surface's own, and not there to fill up the last box."""
    own = np.ones(boxes.corners.shape[:2], dtype=np.bool_)
    last = boxes.corners[-1]
    other = np.flatnonzero((last != last[-1]).any(axis=(1, 2)))
    own[-1, (other[-1] + 2 if len(other) else 1) :] = False
    return own
