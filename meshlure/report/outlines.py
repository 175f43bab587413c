"""Plane outlines: a point inside, points too fine to draw left out, lines and polygons cut."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from meshlure.results import DrawnPiece

Floats = NDArray[np.float64]


def inner_point(piece: DrawnPiece) -> tuple[float, float]:
    """Return a point inside a piece's outline: its largest ring's centroid, or the middle of its widest upright cut."""
    ring = max(piece.rings, key=lambda r: abs(signed_area(r)))
    x0, y0 = ring[0]
    p, q = ring - ring[0], np.roll(ring, -1, axis=0) - ring[0]
    cross = p[:, 0] * q[:, 1] - q[:, 0] * p[:, 1]
    total = cross.sum()
    middle = (
        ring.mean(axis=0) if total == 0 else np.array([x0, y0]) + ((p + q) * cross[:, None]).sum(axis=0) / (3 * total)
    )
    a, b = ring, np.roll(ring, -1, axis=0)
    crossing = (a[:, 0] <= middle[0]) != (b[:, 0] <= middle[0])
    a, b = a[crossing], b[crossing]
    cuts = np.sort(a[:, 1] + (middle[0] - a[:, 0]) * (b[:, 1] - a[:, 1]) / (b[:, 0] - a[:, 0]))
    if len(cuts) < 2:
        return float(middle[0]), float(middle[1])
    pairs = list(zip(cuts[0::2], cuts[1::2], strict=False))
    if any(low <= middle[1] <= high for low, high in pairs):
        return float(middle[0]), float(middle[1])
    low, high = max(pairs, key=lambda pair: pair[1] - pair[0])
    return float(middle[0]), float((low + high) / 2)


def signed_area(ring: Floats) -> float:
    """Return a ring's area, positive where it runs anticlockwise."""
    x, y = ring[:, 0], ring[:, 1]
    return float(np.sum(x * np.roll(y, -1) - np.roll(x, -1) * y)) / 2


def thinned(ring: Floats, step: float) -> Floats:
    """Return a ring without the points that lie within a step of the last one kept: finer than a pen draws."""
    if len(ring) < 200:
        return ring
    walked = np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(ring, axis=0).T))])
    keep = np.concatenate([[True], np.diff(np.floor(walked / step)) > 0])
    return ring[keep] if keep.sum() > 2 else ring


def within(
    start: Floats, along: Floats, box: tuple[tuple[float, float], tuple[float, float]]
) -> tuple[Floats, Floats] | None:
    """Return the part of a line inside a box, or None (Liang & Barsky 1984)."""
    enter, leave = -np.inf, np.inf
    for axis in (0, 1):
        low, high = box[axis]
        if abs(along[axis]) < 1e-12:
            if not low <= start[axis] <= high:
                return None
            continue
        first, last = sorted(((low - start[axis]) / along[axis], (high - start[axis]) / along[axis]))
        enter, leave = max(enter, first), min(leave, last)
    return None if leave <= enter else (start + enter * along, start + leave * along)


def below(corners: Floats, normal: Floats, level: float) -> Floats:
    """Return a convex polygon's part under a line (Sutherland & Hodgman 1974)."""
    kept: list[Floats] = []
    for p, q in zip(corners, np.roll(corners, -1, axis=0), strict=True):
        a, b = float(p @ normal) - level, float(q @ normal) - level
        if a <= 0:
            kept.append(p)
        if (a < 0 < b) or (b < 0 < a):
            kept.append(p + (q - p) * a / (a - b))
    return np.array(kept)
