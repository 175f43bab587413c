"""What lies under what: which points have a triangle above them."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.surface import Bools, Floats, Ints

_PAIRS = 1 << 20
"""Pairs of a point and a triangle looked at in one go."""

_EDGE = 1e-9
"""Share of a triangle's area by which a point may miss it: two that share an edge leave no slit between them."""


def covered(points: Floats, triangles: Floats, hair: float) -> Bools:
    """Return whether each point has a triangle straight above it, (n,) array.

    Parameters
    ----------
    points : (n, 3) array, m
    triangles : (m, 3, 3) array, m
    hair : float, m
        A triangle closer above a point than this does not count.

    Notes
    -----
    Points and triangles meet in the cells of a grid in the plane, so that each point is held against its cell's
    triangles alone; there the answer is exact.
    """
    found = np.zeros(len(points), dtype=np.bool_)
    if not len(points) or not len(triangles):
        return found
    flat = triangles[:, :, :2]
    low, high = flat.min(axis=1), flat.max(axis=1)
    origin, reach = low.min(axis=0), high.max(axis=0)
    size = _cell_size(low, high, reach - origin)
    shape = np.floor((reach - origin) / size).astype(np.intp) + 1
    cells = np.floor((points[:, :2] - origin) / size).astype(np.intp)
    near = np.flatnonzero(((cells >= 0) & (cells < shape)).all(axis=1))
    cell = cells[near, 0] * shape[1] + cells[near, 1]
    starts, held = _binned(np.floor((low - origin) / size), np.floor((high - origin) / size), shape)
    # A point below every triangle's top is asked about, no other.
    count = (starts[1:] - starts[:-1])[cell]
    ends = np.cumsum(count)
    at = 0
    while at < len(near):
        stop = max(at + 1, int(np.searchsorted(ends, (ends[at - 1] if at else 0) + _PAIRS, side="right")))
        some = np.arange(at, min(stop, len(near)))
        each = np.repeat(some, count[some])
        begins = np.cumsum(count[some]) - count[some]
        number = starts[cell[each]] + np.arange(len(each)) - np.repeat(begins, count[some])
        hit = _above(points[near[each]], triangles[held[number]], hair)
        found[near[each[hit]]] = True
        at = int(some[-1]) + 1
    return found


def _cell_size(low: Floats, high: Floats, span: Floats) -> float:
    """Side of the cells, m: about as wide as the triangles, and no more than some millions of them."""
    usual = float(np.median((high - low).max(axis=1)))
    return max(usual, float(span.max()) / 2000, 1e-12)


def _binned(first: Floats, last: Floats, shape: Ints) -> tuple[Ints, Ints]:
    """Triangles of each cell: where the cell's begin, (cells + 1,) array, and their numbers, cell after cell."""
    low, high = first.astype(np.intp), np.minimum(last.astype(np.intp), shape - 1)
    wide = high - low + 1
    count = wide[:, 0] * wide[:, 1]
    owner = np.repeat(np.arange(len(count)), count)
    step = np.arange(len(owner)) - np.repeat(np.cumsum(count) - count, count)
    i, j = low[owner, 0] + step // wide[owner, 1], low[owner, 1] + step % wide[owner, 1]
    cell = i * shape[1] + j
    order = np.argsort(cell, kind="stable")
    starts = np.concatenate([[0], np.cumsum(np.bincount(cell, minlength=int(np.prod(shape))))])
    return starts, owner[order]


def _above(points: Floats, triangles: Floats, hair: float) -> Bools:
    """Whether each triangle stands straight above its point, (k,) array."""
    a, b, c = triangles[:, 0], triangles[:, 1], triangles[:, 2]
    weights = [_turn(b, c, points), _turn(c, a, points), _turn(a, b, points)]
    whole = weights[0] + weights[1] + weights[2]
    sign = np.sign(whole)
    slack = -_EDGE * np.abs(whole)
    inside = (whole != 0) & (weights[0] * sign >= slack) & (weights[1] * sign >= slack) & (weights[2] * sign >= slack)
    height = weights[0] * a[:, 2] + weights[1] * b[:, 2] + weights[2] * c[:, 2]
    return np.asarray(inside & (height * sign > (points[:, 2] + hair) * np.abs(whole)))


def _turn(p: Floats, q: Floats, r: Floats) -> Floats:
    """Twice the area in the plane of the triangles p, q, r, positive anticlockwise."""
    return np.asarray((q[:, 0] - p[:, 0]) * (r[:, 1] - p[:, 1]) - (q[:, 1] - p[:, 1]) * (r[:, 0] - p[:, 0]))
