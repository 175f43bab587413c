"""The faces of one half: triangles cut at the parting plane, the half's own pull upwards."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.surface import Floats, Surface
from meshlure.making.mould.bench import FLIP

HALVES = ("A", "B")
"""A is pulled along the pull, B against it."""


def half(surface: Surface, name: str) -> Floats:
    """Return the faces of a half, (n, 3, 3) array, m: face, corner, coordinate, with z from the plane along its pull.

    Parameters
    ----------
    surface : Surface
        On the bench.
    name : str
        A or B.
    """
    corners = surface.corners if name == HALVES[0] else surface.corners @ FLIP
    return above(corners)


def above(corners: Floats) -> Floats:
    """Return what of triangles lies above z = 0, as triangles, (n, 3, 3) array, m.

    Parameters
    ----------
    corners : (m, 3, 3) array, m
    """
    up = corners[:, :, 2] > 0
    count = up.sum(axis=1)
    found = [corners[count == 3]]
    for lone in (1, 2):
        some = corners[count == lone]
        inside = up[count == lone]
        # Turned so that the corner alone on its side comes first, the face's own turn kept.
        first = (inside if lone == 1 else ~inside).argmax(axis=1)
        each = np.arange(len(some))
        a, b, c = (some[each, (first + turn) % 3] for turn in range(3))
        ab, ac = _crossed(a, b), _crossed(a, c)
        if lone == 1:
            found.append(np.stack([a, ab, ac], axis=1))
        else:
            found += [np.stack([ab, b, c], axis=1), np.stack([ab, c, ac], axis=1)]
    return np.concatenate(found)


def _crossed(start: Floats, end: Floats) -> Floats:
    """Where edges meet z = 0."""
    share = start[:, 2] / (start[:, 2] - end[:, 2])
    place = start + share[:, None] * (end - start)
    place[:, 2] = 0.0
    return place
