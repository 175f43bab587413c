"""Relief: how far behind its foremost point a solid begins, seen along a direction on a grid."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.outline import drawing_axes
from meshlure.geometry.surface import Floats, Ints, Surface

CELLS = 48
"""Grid cells across the greater extent of what is seen."""

_AT_ONCE = 1 << 18
"""Pairs of a face and a grid point looked at together."""


@dataclass(frozen=True, eq=False)
class Relief:
    """Depths of the first surface met by rays along one direction.

    Attributes
    ----------
    depth : (r, c) array, m
        Behind the foremost point of the solid, at the cells' middles; infinite where the ray misses.
    step : float, m
        Width of a cell.
    """

    depth: Floats
    step: float


def relief(surface: Surface, axis: Floats, cells: int = CELLS) -> Relief:
    """Return the relief of a closed surface seen along a direction.

    Parameters
    ----------
    surface : Surface
        Outward.
    axis : (3,) array
        Unit vector from the solid towards the eye.
    cells : int
        Across the greater extent.

    Notes
    -----
    Every face that looks towards the eye is asked at the middles of the cells that its box covers.
    """
    right, up = drawing_axes(axis)
    faces = surface.faces.take(np.flatnonzero(surface.double_areas @ axis > 0), axis=0)
    seen = np.zeros(len(surface.vertices), dtype=np.bool_)
    seen[faces] = True
    height = surface.vertices @ axis
    plane = [surface.vertices @ right, surface.vertices @ up]
    low, high = (np.array([end(along[seen]) for along in plane]) for end in (np.min, np.max))
    step = float((high - low).max()) / cells
    shape = np.ceil((high - low) / step - 1e-9).astype(np.intp)
    # Middles of the cells lie at whole numbers.
    plane = [(plane[k] - (low[k] + high[k]) / 2) / step + (shape[k] - 1) / 2 for k in range(2)]
    top = float(height[seen].max())
    first, last = np.empty((len(faces), 2), dtype=np.intp), np.empty((len(faces), 2), dtype=np.intp)
    for k in range(2):
        a, b, c = plane[k].take(faces.T)
        first[:, k] = np.maximum(np.ceil(np.minimum(np.minimum(a, b), c) - 1e-9), 0)
        last[:, k] = np.minimum(np.floor(np.maximum(np.maximum(a, b), c) + 1e-9), shape[k] - 1)
    flat = np.column_stack(plane)
    wide = np.maximum(last - first + 1, 0)
    count = wide[:, 0] * wide[:, 1]
    asked = np.flatnonzero(count)
    depth = np.full(shape, np.inf)
    ends = np.cumsum(count[asked])
    at = 0
    while at < len(asked):
        taken = int(np.searchsorted(ends, (ends[at - 1] if at else 0) + _AT_ONCE, side="right"))
        rows = asked[at : max(taken, at + 1)]
        named = faces[rows]
        _drop(depth, flat[named], top - height[named], first[rows], wide[rows], count[rows])
        at += len(rows)
    return Relief(depth.T, step)


def _drop(depth: Floats, corners: Floats, below: Floats, first: Ints, wide: Ints, count: Ints) -> None:
    """Put the least depth of some faces into the grid."""
    face = np.repeat(np.arange(len(corners)), count)
    place = np.arange(len(face)) - np.repeat(np.cumsum(count) - count, count)
    cell = first[face] + np.column_stack([place // wide[face, 1], place % wide[face, 1]])
    a, b, c = (corners[face, k] - cell for k in range(3))
    weights = np.stack([_cross(b, c), _cross(c, a), _cross(a, b)])
    total = weights.sum(axis=0)
    kept = (weights >= -1e-9 * total).all(axis=0) & (total > 0)
    cell, weights, face = cell[kept], weights[:, kept] / total[kept], face[kept]
    np.minimum.at(depth, (cell[:, 0], cell[:, 1]), np.einsum("ki,ik->i", weights, below[face]))


def _cross(u: Floats, v: Floats) -> Floats:
    return np.asarray(u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0])
