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
    front = np.flatnonzero(surface.double_areas @ axis > 0)
    height = surface.vertices @ axis
    plane = np.column_stack([surface.vertices @ right, surface.vertices @ up])
    low, high = (end(plane[surface.faces[front].reshape(-1)], axis=0) for end in (np.min, np.max))
    step = float((high - low).max()) / cells
    shape = np.ceil((high - low) / step - 1e-9).astype(np.intp)
    # Middles of the cells lie at whole numbers.
    plane = (plane - (low + high) / 2) / step + (shape - 1) / 2
    top = float(height[surface.faces[front]].max())
    corners = plane[surface.faces[front]]
    first = np.maximum(np.ceil(corners.min(axis=1) - 1e-9), 0).astype(np.intp)
    last = np.minimum(np.floor(corners.max(axis=1) + 1e-9), shape - 1).astype(np.intp)
    wide = np.maximum(last - first + 1, 0)
    count = wide[:, 0] * wide[:, 1]
    asked = np.flatnonzero(count)
    depth = np.full(shape, np.inf)
    ends = np.cumsum(count[asked])
    at = 0
    while at < len(asked):
        taken = int(np.searchsorted(ends, (ends[at - 1] if at else 0) + _AT_ONCE, side="right"))
        rows = asked[at : max(taken, at + 1)]
        _drop(depth, corners[rows], top - height[surface.faces[front[rows]]], first[rows], wide[rows], count[rows])
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
