"""High points of a cavity: where air stays when it fills from below."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.geometry.topology import paired


@dataclass(frozen=True, eq=False)
class Peak:
    """A local high point.

    Attributes
    ----------
    at : (3,) array, m
    height : float, m
        Along the direction that is up.
    prominence : float, m
        How far one must go down from it before one can go up to a higher one; infinite for the highest.
    """

    at: Floats
    height: float
    prominence: float


def peaks(surface: Surface, up: Floats, least: float) -> list[Peak]:
    """Return the local high points of a closed surface, the highest first.

    Parameters
    ----------
    surface : Surface
    up : (3,) array
        Unit vector.
    least : float, m
        Less prominent ones are left out: facets and texture make many.

    Notes
    -----
    Every vertex flows to its highest neighbour, and so to a peak. Peaks grow together, from the top down, where edges
    join their flows; what then belongs to a lower peak ends with the prominence that it has there. A flat top counts
    as one peak, at the middle of its corners.
    """
    pairs = paired(surface)
    height = surface.vertices @ up
    # Equal heights are told apart by the vertices' numbers, so that there are no ties.
    rank = np.empty(len(height), dtype=np.intp)
    rank[np.argsort(height, kind="stable")] = np.arange(len(height))
    start, end = pairs.start.astype(np.intp), pairs.end.astype(np.intp)
    peak = _flowed(start, end, rank)
    over = np.minimum(rank[start], rank[end])
    crosses = peak[start] != peak[end]
    merged: dict[int, int] = {}
    ends: dict[int, float] = {}
    by_rank = np.argsort(rank)

    def root(number: int) -> int:
        while number in merged:
            number = merged[number]
        return number

    order = np.flatnonzero(crosses)[np.argsort(over[crosses])[::-1]]
    for edge in order.tolist():
        one, other = root(int(peak[start[edge]])), root(int(peak[end[edge]]))
        if one == other:
            continue
        low, high = (one, other) if rank[one] < rank[other] else (other, one)
        merged[low] = high
        ends[low] = float(height[low] - height[by_rank[over[edge]]])
    named = np.zeros(len(height), dtype=np.bool_)
    named[surface.faces] = True
    found = []
    for number in np.unique(peak[named]).tolist():
        prominence = ends.get(number, np.inf)
        if prominence >= least:
            found.append(Peak(_flat_top(surface, height, number, start, end), float(height[number]), prominence))
    return sorted(found, key=lambda each: -each.height)


def _flowed(start: Ints, end: Ints, rank: Ints) -> Ints:
    """Number of the peak that each vertex flows to."""
    target = np.arange(len(rank))
    best = rank.copy()
    np.maximum.at(best, start, rank[end])
    np.maximum.at(best, end, rank[start])
    by_rank = np.empty(len(rank), dtype=np.intp)
    by_rank[rank] = np.arange(len(rank))
    target = by_rank[best]
    while True:
        further = target[target]
        if (further == target).all():
            return target
        target = further


def _flat_top(surface: Surface, height: Floats, number: int, start: Ints, end: Ints) -> Floats:
    """Middle of the corners that lie as high as a peak and hang together with it."""
    hair = 1e-5 * float(np.ptp(height))
    level = height >= height[number] - hair
    kept = level[start] & level[end]
    one, other = start[kept], end[kept]
    held = {number}
    while True:
        some = np.fromiter(held, dtype=np.intp)
        touching = np.isin(one, some) | np.isin(other, some)
        more = held | set(one[touching].tolist()) | set(other[touching].tolist())
        if len(more) == len(held):
            break
        held = more
    corners = surface.vertices[np.fromiter(held, dtype=np.intp)]
    return np.asarray((corners.min(axis=0) + corners.max(axis=0)) / 2)
