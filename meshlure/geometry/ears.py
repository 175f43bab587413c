"""Ears: a flat polygon of any shape cut into triangles between its own corners."""

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import NDArray

from meshlure.geometry.surface import Floats, Ints

_STRAIGHT: Final = 1e-6
"""Share of the polygon's size for a triangle's height below which it counts as none."""

_SAME_AREA: Final = 1e-6

_FEW: Final = 300
"""Corners up to which the quick cutter is used."""

_TURNS: Final = 2_000_000
"""Triangles looked at, all in all, while a polygon's needles are turned: some seconds."""


def ears_of(corners: Floats, normal: Floats) -> tuple[Ints, bool]:
    """Triangles of one polygon by ear cutting, and whether they cover it as it is drawn.

    Parameters
    ----------
    corners : (n, 3) array, any unit
    normal : (3,) array
        Unit vector; seen against it the polygon runs anticlockwise.

    Returns
    -------
    (m, 3) array of corner numbers, bool
        Turning as the polygon does. A corner written twice in a row is one corner.
    """
    # Imported here: only a concave polygon needs it.
    from mapbox_earcut import triangulate_float64

    # A corner written twice in a row is one corner; the ear cutter drops it, so it is dropped before the count.
    apart = np.flatnonzero((corners != np.roll(corners, 1, axis=0)).any(axis=1))
    flat = in_plane(corners[apart] - corners.mean(axis=0), normal)
    if len(flat) <= _FEW:
        order = triangulate_float64(np.ascontiguousarray(flat), np.array([len(flat)], dtype=np.uint32))
        ears: Ints = order.astype(np.intp).reshape(-1, 3)
    else:
        from meshlure.geometry.solids import triangulated

        # The quick cutter's time can go with the cube of the corners, where they lie on each other.
        ears = triangulated(flat)
    areas = _signed_areas(flat[ears])
    around = np.roll(flat, -1, axis=0)
    area = float((flat[:, 0] * around[:, 1] - around[:, 0] * flat[:, 1]).sum()) / 2
    whole = len(ears) == len(flat) - 2 and bool(abs(np.abs(areas).sum() - area) <= _SAME_AREA * abs(area))
    return apart[_without_needles(ears, flat)], whole


def in_plane(points: Floats, normal: Floats) -> Floats:
    """Coordinates of (n, 3) points along two axes of a plane, (n, 2), anticlockwise seen against the normal."""
    right = np.cross(np.eye(3)[int(np.abs(normal).argmin())], normal)
    right = right / np.linalg.norm(right)
    return np.asarray(points @ np.stack([right, np.cross(normal, right)], axis=1))


def _without_needles(ears: Ints, flat: Floats) -> Ints:
    """Turn the long edge of a triangle without height the other way between it and its neighbour.

    Corners that were drawn on one line stand beside it by a rounding, so the cutter may take three of them for an ear.
    """
    ears = ears.copy()
    least = _STRAIGHT * float(np.linalg.norm(np.ptp(flat, axis=0)))
    # Every turn settles a needle or moves two of them apart; an outline that crosses itself may keep some, and one of
    # very many corners is not worth the time: needles do no harm.
    for _ in range(min(4 * len(ears), _TURNS // max(len(ears), 1))):
        sides = np.linalg.norm(flat[np.roll(ears, -1, axis=1)] - flat[ears], axis=2)
        longest = sides.argmax(axis=1)
        needles = 2 * _signed_areas(flat[ears]) <= least * sides.max(axis=1)
        pair = _pair(ears, longest, needles)
        if pair is None:
            break
        needle, other = pair
        a, c, b = np.roll(ears[needle], -longest[needle])
        (d,) = set(ears[other].tolist()) - {int(a), int(c)}
        ears[needle], ears[other] = (a, d, b), (d, c, b)
    return ears


def _pair(ears: Ints, longest: Ints, needles: NDArray[np.bool_]) -> tuple[int, int] | None:
    """Needle, and the triangle across its long edge: one with height, else a needle whose long edge it is as well."""
    holders = {(int(ear[k]), int(ear[k - 2])): (row, k) for row, ear in enumerate(ears) for k in range(3)}
    mutual: tuple[int, int] | None = None
    for needle in np.flatnonzero(needles).tolist():
        k = int(longest[needle])
        other = holders.get((int(ears[needle][k - 2]), int(ears[needle][k])))
        if other is None:
            continue
        if not needles[other[0]]:
            return needle, other[0]
        if longest[other[0]] == other[1]:
            mutual = needle, other[0]
    return mutual


def _signed_areas(triangles: Floats) -> Floats:
    a, b, c = triangles[:, 0], triangles[:, 1], triangles[:, 2]
    areas: Floats = ((b - a)[:, 0] * (c - a)[:, 1] - (b - a)[:, 1] * (c - a)[:, 0]) / 2
    return areas
