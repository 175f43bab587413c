"""The parting curve: where a solid's skin turns from one half's pull to the other's."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.geometry.outline import rims
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import paired

SHORTEST: Final = 0.02
"""Share of the longest ring's length below which a ring is a facet or a speck of texture, and is left out."""

STRAIGHT: Final = 0.02e-3
"""m. Points of a ring that lie closer than this to the line of those that are kept are left out."""


def parting(solid: Surface) -> list[Floats]:
    """Return the rings in space at which a solid turns from one half's pull to the other's, the longest first.

    Parameters
    ----------
    solid : Surface
        Closed, on the bench, the pull along z.

    Returns
    -------
    list of (n, 3) arrays, m
        Closed rings without the repeated first point.

    Notes
    -----
    The edges between faces that look along the pull and all others; a wall along the pull parts at its upper edge,
    though any line round it would do.
    """
    rings = [solid.vertices[ring] for ring in rims(solid, paired(solid), np.array([0.0, 0.0, 1.0]))]
    lengths = [float(np.linalg.norm(np.roll(ring, -1, axis=0) - ring, axis=1).sum()) for ring in rings]
    if not rings:
        return []
    order = np.argsort(lengths)[::-1]
    return [straightened(rings[i], STRAIGHT) for i in order if lengths[i] >= SHORTEST * lengths[order[0]]]


def straightened(ring: Floats, slack: float) -> Floats:
    """Return a closed ring without the points that stray by less than ``slack``, m, from a line between others.

    Parameters
    ----------
    ring : (n, d) array, m

    References
    ----------
    D. H. Douglas and T. K. Peucker (1973), Algorithms for the reduction of the number of points required to represent
    a digitized line or its caricature, Cartographica 10(2).
    """
    if len(ring) < 4:
        return ring
    far = int(np.linalg.norm(ring - ring[0], axis=1).argmax())
    closed = np.vstack([ring, ring[:1]])
    kept = np.zeros(len(closed), dtype=np.bool_)
    kept[[0, far, len(ring)]] = True
    spans = [(0, far), (far, len(ring))]
    while spans:
        first, last = spans.pop()
        if last - first < 2:
            continue
        stray = _stray(closed[first + 1 : last], closed[first], closed[last])
        worst = int(stray.argmax())
        if stray[worst] > slack:
            middle = first + 1 + worst
            kept[middle] = True
            spans += [(first, middle), (middle, last)]
    return np.asarray(closed[:-1][kept[:-1]])


def _stray(points: Floats, start: Floats, end: Floats) -> Floats:
    """Distance of points from the line between two others, m."""
    along = end - start
    length = float(along @ along)
    share = np.clip((points - start) @ along / length, 0.0, 1.0) if length else np.zeros(len(points))
    return np.asarray(np.linalg.norm(points - start - share[:, None] * along, axis=1))
