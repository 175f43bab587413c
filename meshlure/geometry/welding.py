"""Welding: which corners of loose triangles are the same vertex."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from meshlure.geometry.surface import Floats, Ints, Surface

_ODD = tuple(np.uint64(k) for k in (0x9E3779B97F4A7C15, 0xBF58476D1CE4E5B9, 0x94D049BB133111EB))
_HALF = np.uint64(32)
_AT_ONCE = 16384
"""Corners worked on at a time, so that they stay in the processor's cache and no second copy of all of them is made."""
_SALTS = tuple(np.uint64(k) for k in (0x0, 0xD1B54A32D192ED03, 0x8CB92BA72F3D8DD7))


@dataclass(frozen=True, eq=False)
class Welded:
    """A surface made of loose triangles.

    Attributes
    ----------
    surface : Surface
    collapsed : int
        Faces left out because two of their corners are the same point.
    kept : (k,) array or None
        Which triangles, ascending, are the surface's faces; None where all are.
    """

    surface: Surface
    collapsed: int
    kept: Ints | None = None


def weld(corners: Floats) -> Welded:
    """Surface, m, of loose triangles whose equal corners become one vertex.

    Parameters
    ----------
    corners : (m, 3, 3) array, m
        Face, corner, coordinate.

    Returns
    -------
    Welded
        Vertices stand in the order in which the faces first name them, so the same file gives the same surface.

    Raises
    ------
    ValueError
        A coordinate is not finite, or the array has another shape.

    Notes
    -----
    Corners are equal when all three coordinates are the same number (-0.0 is 0.0); there is no tolerance. Each corner's
    bits are mixed into one word that also holds the corner's place in the array, so that one sort of integers brings
    equal corners together and every group's first corner to its head. A group is then compared with its head, number by
    number; should two different points share a hash, other salts are tried, and at last a sort by coordinates.
    """
    if corners.ndim != 3 or corners.shape[1:] != (3, 3):
        raise ValueError(f"welding takes (m, 3, 3) corners, not {corners.shape}")
    if not np.isfinite(corners).all():
        raise ValueError("welding takes finite corners")
    points = np.asarray(corners, dtype=np.float64).reshape(-1, 3)
    heads = _heads(points)
    first = np.zeros(len(points), dtype=np.bool_)
    first[heads] = True
    numbers = np.cumsum(first, dtype=np.intp)
    numbers -= 1
    faces = numbers[heads].reshape(-1, 3)
    vertices = points.take(np.flatnonzero(first), axis=0) + 0.0
    a, b, c = faces.T
    whole = (a != b) & (b != c) & (c != a)
    collapsed = len(faces) - int(np.count_nonzero(whole))
    if collapsed:
        vertices, faces = _used(vertices, faces[whole])
    return Welded(Surface(vertices, faces), collapsed, np.flatnonzero(whole) if collapsed else None)


def _used(vertices: Floats, faces: Ints) -> tuple[Floats, Ints]:
    """Leave out the vertices that no face names."""
    named = np.zeros(len(vertices), dtype=np.bool_)
    named[faces.ravel()] = True
    return vertices[named], (np.cumsum(named, dtype=np.intp) - 1)[faces]


def _heads(points: Floats) -> Ints:
    """For every point the first point equal to it."""
    for salt in _SALTS:
        heads = _heads_by_hash(points, salt)
        if heads is not None:
            return heads
    return _heads_by_coordinates(points)


def _heads_by_hash(points: Floats, salt: np.uint64) -> Ints | None:
    """For every point the first point equal to it, None where two different points share a hash."""
    count = len(points)
    low = np.uint64(max(count - 1, 1).bit_length())
    place = np.uint64((1 << int(low)) - 1)
    words = _mixed(points, salt)
    words &= ~place
    words |= np.arange(count, dtype=np.uint64)
    words.sort()
    order = (words & place).astype(np.intp)
    words >>= low
    starts = np.ones(count, dtype=np.bool_)
    np.not_equal(words[1:], words[:-1], out=starts[1:])
    heads = np.empty(count, dtype=np.intp)
    heads[order] = _spread(order, starts)
    for at in range(0, count, _AT_ONCE):
        piece = slice(at, at + _AT_ONCE)
        if (points[piece] != points.take(heads[piece], axis=0)).any():
            return None
    return heads


def _heads_by_coordinates(points: Floats) -> Ints:
    """For every point the first point equal to it, by sorting whole coordinates."""
    # lexsort is stable, so the first of a group is also the one that stands first in the array.
    order = np.lexsort(points.T)
    ordered = points[order]
    starts = np.ones(len(points), dtype=np.bool_)
    starts[1:] = (ordered[1:] != ordered[:-1]).any(axis=1)
    heads = np.empty(len(points), dtype=np.intp)
    heads[order] = _spread(order, starts)
    return heads


def _spread(order: Ints, starts: NDArray[np.bool_]) -> Ints:
    """Give every member of a sorted group the group's first member."""
    heads: Ints = order[starts][np.cumsum(starts) - 1]
    return heads


def _mixed(points: Floats, salt: np.uint64) -> NDArray[np.uint64]:
    """Mix each point's 192 bits into one word (multiply, fold, xor)."""
    words = np.full(len(points), salt, dtype=np.uint64)
    for at in range(0, len(points), _AT_ONCE):
        # Adding zero turns -0.0 into 0.0, whose bits are the ones hashed.
        bits = (points[at : at + _AT_ONCE] + 0.0).view(np.uint64)
        some = words[at : at + _AT_ONCE]
        for axis, odd in enumerate(_ODD):
            some ^= bits[:, axis]
            some *= odd
            some ^= some >> _HALF
        some *= _ODD[0]
    return words
