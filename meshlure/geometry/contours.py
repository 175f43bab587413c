"""Contours: what lies within the outer boundaries of plane sections, their holes filled."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from meshlure.geometry.surface import Bools, Floats, Ints
from meshlure.geometry.waterplane import Cut

_GRAIN = 1e-7
"""Share of the sections' greatest extent within which ends of segments count as one point."""


def outer_contours(cuts: Sequence[Cut]) -> tuple[Floats, Floats]:
    """Area, m2, and length, m, of the outer boundaries of sections, two (n,) arrays.

    Parameters
    ----------
    cuts : sequence of Cut
        Of one closed surface by planes of one direction, so that every outer boundary runs anticlockwise.

    Notes
    -----
    The segments of a section are gathered into closed loops by the points that they share. A loop with a negative area
    is a hole and left out; so is what lies in a hole.
    """
    count = len(cuts)
    owner = np.repeat(np.arange(count), [len(cut.start) for cut in cuts])
    if not len(owner):
        return np.zeros(count), np.zeros(count)
    right, up = _lateral(cuts[0].normal)
    start, end = (np.concatenate([getattr(cut, end) for cut in cuts]) for end in ("start", "end"))
    p, q = (np.column_stack([points @ right, points @ up]) for points in (start, end))
    low = np.minimum(p.min(axis=0), q.min(axis=0))
    p, q = p - low, q - low
    loop = _loops(p, q, owner)
    loops = int(loop.max()) + 1
    weight = (p[:, 0] * q[:, 1] - p[:, 1] * q[:, 0]) / 2
    area = np.bincount(loop, weight, loops)
    length = np.bincount(loop, np.hypot(*(q - p).T), loops)
    of = np.empty(loops, dtype=np.intp)
    of[loop] = owner
    outer = area > 0
    # Only where a section has both a hole and a second outer loop may the one lie in the other.
    holes, outers = (np.bincount(of[kind], minlength=count) for kind in (area < 0, outer))
    for section in np.flatnonzero((holes > 0) & (outers > 1)):
        own = np.flatnonzero(outer & (of == section))
        outer[own[_enclosed(p, q, loop, own)]] = False
    kept = (np.asarray(np.bincount(of[outer], values[outer], count), dtype=np.float64) for values in (area, length))
    return next(kept), next(kept)


def _lateral(normal: Floats) -> tuple[Floats, Floats]:
    """Unit vectors right and up in a plane, with right x up along its normal."""
    wish = np.eye(3)[np.abs(normal).argmin()]
    right = np.cross(wish, normal)
    right = right / np.linalg.norm(right)
    return right, np.cross(normal, right)


def _loops(p: Floats, q: Floats, owner: Ints) -> Ints:
    """Number of the loop that every segment belongs to, (k,) array."""
    from scipy.sparse import coo_array
    from scipy.sparse.csgraph import connected_components

    grain = _GRAIN * max(float(p.max()), float(q.max()), np.finfo(np.float64).tiny)
    steps = np.rint(np.concatenate([p, q]) / grain).astype(np.int64)
    width = np.int64(round(1 / _GRAIN) + 2)
    keys = (np.concatenate([owner, owner]) * width + steps[:, 0]) * width + steps[:, 1]
    points, number = np.unique(keys, return_inverse=True)
    first, last = number[: len(p)], number[len(p) :]
    links = coo_array((np.ones(len(p), dtype=np.int8), (first, last)), shape=(len(points), len(points)))
    _, component = connected_components(links, directed=False)
    _, loop = np.unique(component[first], return_inverse=True)
    return np.asarray(loop, dtype=np.intp)


def _enclosed(p: Floats, q: Floats, loop: Ints, own: Ints) -> Bools:
    """Whether each of a section's outer loops lies inside another of them, by a ray from one of its points."""
    inside = np.zeros(len(own), dtype=np.bool_)
    for place, number in enumerate(own):
        x, y = p[np.argmax(loop == number)]
        for other in own[own != number]:
            (ax, ay), (bx, by) = p[loop == other].T, q[loop == other].T
            crossed = (ay > y) != (by > y)
            at = ax[crossed] + (y - ay[crossed]) / (by[crossed] - ay[crossed]) * (bx[crossed] - ax[crossed])
            inside[place] |= bool(np.count_nonzero(at > x) % 2)
    return inside
