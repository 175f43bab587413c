"""Shells and named parts of a mesh that are not wanted, left out."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.mending.edges import bodies
from meshlure.geometry.mending.steps import Step
from meshlure.geometry.phrasing import counted, millimetres, places, places_text
from meshlure.geometry.surface import Ints, Surface


def without_small(surface: Surface, size: float) -> Step | None:
    """Return the surface without the shells that are nowhere longer than a size, m; None where there are none.

    Notes
    -----
    A shell here is what hangs together by edges, closed or not. The largest one always stays.
    """
    count, labels = bodies(surface)
    if count < 2 or size <= 0:
        return None
    low, high = np.full((count, 3), np.inf), np.full((count, 3), -np.inf)
    for corner in range(3):
        np.minimum.at(low, labels, surface.corners[:, corner])
        np.maximum.at(high, labels, surface.corners[:, corner])
    length = (high - low).max(axis=1)
    small = length <= size
    small[length.argmax()] = False
    if not small.any():
        return None
    middles = ((low + high) / 2)[small]
    shells = counted(int(small.sum()), "shell")
    did = f"left out {shells} nowhere longer than {millimetres(size)}, at {places_text(middles)}"
    made = Surface(surface.vertices, surface.faces[~small[labels]])
    return Step("drop-small", did, made, int(small.sum()), 0.0, places(middles))


def without_part(surface: Surface, faces: Ints, name: str) -> Step:
    """Return the surface without the faces of a part, (m,) array, named by the file."""
    kept = np.ones(len(surface.faces), dtype=np.bool_)
    kept[faces] = False
    middle = surface.corners[faces].reshape(-1, 3).mean(axis=0)
    did = f"left out the part '{name}' of {counted(len(faces), 'face')}, at {places_text(middle[None])}"
    return Step("drop-part", did, Surface(surface.vertices, surface.faces[kept]), 1, 0.0, places([middle]))
