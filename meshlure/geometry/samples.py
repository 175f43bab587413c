"""Points spread over a surface, for quick answers about distances to it."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.surface import Floats, Surface


def spread(surface: Surface, spacing: float) -> Floats:
    """Return points on a surface of which one is near every place of it, (n, 3) array, m.

    Parameters
    ----------
    surface : Surface
    spacing : float, m
        No place of the surface is farther than this from a point.

    Notes
    -----
    All vertices, and the corners of every face halved along its longest side until that is no longer than the spacing:
    any place of a triangle is within its longest side of a corner.
    """
    if not spacing > 0:
        raise ValueError(f"points cannot be {spacing} m apart")
    found = [surface.vertices]
    corners = surface.corners
    while True:
        sides = np.linalg.norm(np.roll(corners, -1, axis=1) - corners, axis=2)
        longest = sides.argmax(axis=1)
        row = np.flatnonzero(sides.max(axis=1, initial=0.0) > spacing)
        if not len(row):
            return np.concatenate(found)
        corners, first = corners[row], longest[row]
        each = np.arange(len(row))
        start, end, other = (corners[each, (first + step) % 3] for step in range(3))
        middle = (start + end) / 2
        found.append(middle)
        corners = np.concatenate([np.stack([start, middle, other], axis=1), np.stack([middle, end, other], axis=1)])


def scattered(surface: Surface, count: int) -> Floats:
    """Return points drawn by lot from a surface, each area of it as likely as any other, (count, 3) array, m.

    Parameters
    ----------
    surface : Surface
    count : int

    Notes
    -----
    The same surface gives the same points.
    """
    draw = np.random.default_rng(count)
    areas = np.linalg.norm(surface.double_areas, axis=1)
    corners = surface.corners[draw.choice(len(areas), count, p=areas / areas.sum())]
    u, v = draw.random((2, count, 1))
    beyond = u + v > 1
    u, v = np.where(beyond, 1 - u, u), np.where(beyond, 1 - v, v)
    return np.asarray(corners[:, 0] + u * (corners[:, 1] - corners[:, 0]) + v * (corners[:, 2] - corners[:, 0]))
