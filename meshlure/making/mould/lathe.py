"""Round and straight parts of a mould as closed surfaces: what is turned about an axis, and blocks."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final

import numpy as np

from meshlure.geometry.surface import Floats, Surface

SIDES: Final = 48


def turned(profile: Sequence[tuple[float, float]], origin: Floats, axis: Floats, sides: int = SIDES) -> Surface:
    """Return what is turned about an axis, closed by flat ends.

    Parameters
    ----------
    profile : sequence of (float, float), m
        Way along the axis, ascending, and radius there, above 0.
    origin : (3,) array, m
    axis : (3,) array
        Unit vector.
    sides : int
        Of the polygon that stands for the circle; it has the circle's area.
    """
    pole = np.eye(3)[np.abs(axis).argmin()]
    one = np.cross(axis, pole)
    one = one / np.linalg.norm(one)
    angle = 2 * np.pi * (np.arange(sides) + 0.5) / sides
    circle = np.outer(np.cos(angle), one) + np.outer(np.sin(angle), np.cross(axis, one))
    reach = np.sqrt(2 * np.pi / sides / np.sin(2 * np.pi / sides))
    rings = [origin + s * axis + r * reach * circle for s, r in profile]
    ends = [origin + profile[0][0] * axis, origin + profile[-1][0] * axis]
    k = np.arange(sides)
    after = (k + 1) % sides
    last = (len(rings) - 1) * sides
    bottom, top = len(rings) * sides, len(rings) * sides + 1
    faces = [
        np.column_stack([np.full(sides, bottom), after, k]),
        np.column_stack([np.full(sides, top), last + k, last + after]),
    ]
    for ring in range(len(rings) - 1):
        low, high = ring * sides, (ring + 1) * sides
        faces.append(np.column_stack([low + k, low + after, high + after]))
        faces.append(np.column_stack([low + k, high + after, high + k]))
    return Surface(np.vstack([*rings, ends]), np.concatenate(faces))


def block(low: Sequence[float] | Floats, high: Sequence[float] | Floats) -> Surface:
    """Return the box between two corners, m."""
    ends = np.array([low, high], dtype=np.float64)
    corners = np.array([[ends[i, 0], ends[j, 1], ends[k, 2]] for i in (0, 1) for j in (0, 1) for k in (0, 1)])
    quads = [(0, 1, 3, 2), (4, 6, 7, 5), (0, 4, 5, 1), (2, 3, 7, 6), (0, 2, 6, 4), (1, 5, 7, 3)]
    faces = [face for a, b, c, d in quads for face in ((a, b, c), (a, c, d))]
    return Surface(corners, np.array(faces))
