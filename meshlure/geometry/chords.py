"""Chords: the extent of a plane section across a direction in its plane, from one side of it to the other."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Floats
from meshlure.geometry.waterplane import Cut

ROWS = 81

_INSET = 1e-4
"""Share of the depth by which the outermost chords stand inside, so that a flat face shows its width."""


@dataclass(frozen=True, eq=False)
class Chords:
    """A section's extent across the flow, along the flow.

    Attributes
    ----------
    x : (n,) array, m
        From where the section begins, closer together near both sides, within 0 to `depth`.
    width : (n,) array, m
        From the outermost edge on one side to that on the other: what lies hollow between counts as full.
    depth : float, m
        Extent along the flow.
    """

    x: Floats
    width: Floats
    depth: float


def chords(cut: Cut, towards: Floats, rows: int = ROWS) -> Chords | None:
    """Return a section's chords, or None where it has no extent.

    Parameters
    ----------
    cut : Cut
    towards : (3,) array
        Unit vector in the cut's plane along which the section moves: the chords are counted from the side that leads.
    """
    if not len(cut.start):
        return None
    across = np.cross(cut.normal, towards)
    along = [-(points @ towards) for points in (cut.start, cut.end)]
    aside = [points @ across for points in (cut.start, cut.end)]
    low = float(along[0].min())
    depth = float(along[0].max()) - low
    if depth <= 0:
        return None
    turn = np.linspace(0, np.pi, rows)
    x = depth * (_INSET + (1 - 2 * _INSET) * (1 - np.cos(turn)) / 2)
    a, b = along[0] - low, along[1] - low
    first, last = np.searchsorted(x, np.minimum(a, b)), np.searchsorted(x, np.maximum(a, b))
    count = last - first
    segment = np.repeat(np.arange(len(a)), count)
    row = np.arange(len(segment)) - np.repeat(np.cumsum(count) - count, count) + first[segment]
    share = (x[row] - a[segment]) / (b[segment] - a[segment])
    at = aside[0][segment] + share * (aside[1][segment] - aside[0][segment])
    high, deep = np.full(rows, -np.inf), np.full(rows, np.inf)
    np.maximum.at(high, row, at)
    np.minimum.at(deep, row, at)
    return Chords(x, np.where(np.isfinite(high), high - deep, 0.0), depth)
