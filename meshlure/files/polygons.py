"""Polygons of a mesh file, cut into triangles between their own corners."""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

from meshlure.geometry.ears import ears_of
from meshlure.geometry.surface import Floats, Ints

FLAT: Final = 1e-3
"""Share of a polygon's size by which a corner may lie off its plane before it is told; rounding to text stays below."""

_STRAIGHT: Final = 1e-6
"""Sine of a corner's turn, and share of the squared size for a triangle's area, below which they count as none."""

_POINTLESS: Final = 1e-12
"""Share of its squared size below which a polygon has no area: its corners lie on a line."""


MOST_CORNERS: Final = 100_000
"""Of one polygon: the lid of a fine turned part has some thousands."""

AT_ONCE: Final = 500_000
"""Words of a text taken apart at a time: each costs twenty times its length in memory until it is a number."""

LONGEST: Final = 120.0
"""s. About how long polygons that are neither convex nor quadrangles may take to cut, all in all."""

_EACH: Final = 3e-4
"""s. Of one such polygon."""

_CORNERS: Final = 5e-8
"""s. Of one pair of its corners, where it crosses itself throughout."""


class TooLongError(Exception):
    """Polygons are too large or too many to be cut.

    Parameters
    ----------
    first : int
        Number of one of them.
    polygons, corners : int
        How many there are of its kind, and how many corners each has.
    """

    def __init__(self, first: int, polygons: int, corners: int) -> None:
        self.first = first
        self.polygons = polygons
        self.corners = corners
        super().__init__(f"{polygons} polygons of {corners} corners")


def batches(counts: Ints) -> list[slice]:
    """Return runs of rows that hold about `AT_ONCE` words each, or one row that holds more.

    Parameters
    ----------
    counts : (k,) array
        Words of each row.
    """
    batch = np.cumsum(counts) // AT_ONCE
    starts = [0, *(np.flatnonzero(np.diff(batch)) + 1).tolist(), len(counts)]
    return [slice(start, stop) for start, stop in itertools.pairwise(starts) if stop > start]


@dataclass(frozen=True, eq=False)
class Polygons:
    """Polygons over a table of vertices.

    Attributes
    ----------
    corners : (c,) array
        Vertex indices of all polygons, one after another.
    counts : (k,) array
        How many of them each polygon has, three or more.
    """

    corners: Ints
    counts: Ints


@dataclass(frozen=True, eq=False)
class Cut:
    """Triangles cut from polygons.

    Attributes
    ----------
    faces : (m, 3) array of vertex indices
        In the polygons' order, turning the same way as they.
    owners : (m,) array of polygon numbers
        Of which polygon each triangle is a piece, ascending.
    bent : (b,) array of polygon numbers
        Polygons that are not flat: another program may cut them along another diagonal.
    bend : float, unit of the vertices
        Farthest that a corner of these lies from its polygon's plane.
    crossing : (x,) array of polygon numbers
        Polygons whose outline crosses itself, so that no cutting is the right one.
    """

    faces: Ints
    owners: Ints
    bent: Ints
    bend: float
    crossing: Ints


def cut(vertices: Floats, polygons: Polygons) -> Cut:
    """Triangles of polygons, without a new corner.

    Parameters
    ----------
    vertices : (n, 3) array
        Finite.
    polygons : Polygons

    Returns
    -------
    Cut

    Raises
    ------
    TooLongError
        Cutting would take longer than `LONGEST`.

    Notes
    -----
    A polygon's plane goes through the mean of its corners, along the normal of Newell's sums (sum over the edges of
    p x q, which is twice the area whatever the shape). A polygon that turns left at every corner, once round, is fanned
    from its first corner. A quadrangle that does not is cut along the diagonal that leaves both halves as they turn,
    where there is one. Any other is cut by ears in its plane, and the triangles held against it: n - 2 of them, none
    turned over, together of the polygon's area. Corners on a straight edge are kept, for a neighbour may end there.
    """
    starts = np.cumsum(polygons.counts) - polygons.counts
    faces: list[Ints] = []
    owners: list[Ints] = []
    bent: list[Ints] = []
    crossing: list[int] = []
    bend = work = 0.0
    for count in np.unique(polygons.counts).tolist():
        numbers = np.flatnonzero(polygons.counts == count)
        corners = polygons.corners[starts[numbers, None] + np.arange(count)]
        fans = np.stack([np.zeros(count - 2, dtype=np.intp), np.arange(1, count - 1), np.arange(2, count)], axis=1)
        if count == 3:
            faces.append(corners)
            owners.append(numbers)
            continue
        shape = _Shape(vertices[corners])
        off = shape.bend > FLAT * shape.size
        bent.append(numbers[off])
        bend = max(bend, float(shape.bend[off].max(initial=0.0)))
        fanned = shape.convex | ~shape.spread
        if count == 4:
            halves, halved = _halves(vertices[corners], shape.normal)
            halved &= ~fanned
            faces.append(np.take_along_axis(corners[halved], halves[halved].reshape(-1, 6), axis=1).reshape(-1, 3))
            owners.append(np.repeat(numbers[halved], 2))
        else:
            halved = np.zeros_like(fanned)
        faces.append(corners[fanned][:, fans].reshape(-1, 3))
        owners.append(np.repeat(numbers[fanned], count - 2))
        left = np.flatnonzero(~(fanned | halved))
        work += len(left) * (_EACH + _CORNERS * count**2)
        if work > LONGEST and len(left):
            raise TooLongError(int(numbers[left[0]]), len(left), count)
        for row in left:
            ears, whole = ears_of(vertices[corners[row]], shape.normal[row])
            faces.append(corners[row][ears])
            owners.append(np.full(len(ears), numbers[row]))
            if not whole:
                crossing.append(int(numbers[row]))
    owner = np.concatenate(owners)
    order = np.argsort(owner, kind="stable")
    return Cut(
        np.concatenate(faces)[order],
        owner[order],
        np.sort(np.concatenate([np.empty(0, dtype=np.intp), *bent])),
        bend,
        np.array(sorted(crossing), dtype=np.intp),
    )


class _Shape:
    """Normals, sizes and turns of polygons with the same count of corners.

    Parameters
    ----------
    corners : (k, n, 3) array
    """

    def __init__(self, corners: Floats) -> None:
        local = corners - corners.mean(axis=1, keepdims=True)
        self.size: Floats = np.linalg.norm(np.ptp(corners, axis=1), axis=1)
        squared = self.size**2
        newell = np.cross(local, np.roll(local, -1, axis=1)).sum(axis=1)
        length = np.linalg.norm(newell, axis=1)
        edges = np.roll(corners, -1, axis=1) - corners
        before = np.roll(edges, 1, axis=1)
        turns = np.cross(before, edges)
        # A bow tie's two halves cancel in Newell's sums, though its corners spread over a plane as a line's do not.
        steepest = np.linalg.norm(turns, axis=2).argmax(axis=1)
        steep = np.take_along_axis(turns, steepest[:, None, None], axis=1)[:, 0]
        empty = length <= _POINTLESS * squared
        self.normal: Floats = np.where(empty[:, None], steep, newell)
        norms = np.linalg.norm(self.normal, axis=1)
        self.spread = norms > _POINTLESS * squared
        self.normal = np.divide(self.normal, norms[:, None], out=np.zeros_like(newell), where=self.spread[:, None])
        self.bend: Floats = np.abs(np.einsum("knj,kj->kn", local, self.normal)).max(axis=1)
        left = np.einsum("knj,kj->kn", turns, self.normal)
        angles = np.arctan2(left, np.einsum("knj,knj->kn", before, edges)).sum(axis=1)
        # Left at every corner but twice round is a five-pointed star.
        strict = left > _STRAIGHT * np.linalg.norm(before, axis=2) * np.linalg.norm(edges, axis=2)
        self.convex = ~empty & strict.all(axis=1) & (np.abs(angles - 2 * np.pi) < 1.0)


def _halves(corners: Floats, normal: Floats) -> tuple[Ints, NDArray[np.bool_]]:
    """Two triangles (k, 2, 3) of each quadrangle, along the better diagonal, and whether neither is turned over.

    A quadrangle with one corner that points inwards or is straight has one such diagonal; one that crosses itself none.
    """
    ways = np.array([[[0, 1, 2], [0, 2, 3]], [[0, 1, 3], [1, 2, 3]]])
    a, b, c = (corners[:, ways[..., corner]] for corner in range(3))
    heights = np.einsum("kwtj,kj->kwt", np.cross(b - a, c - a), normal)
    least = heights.min(axis=2)
    best = least.argmax(axis=1)
    size = np.linalg.norm(np.ptp(corners, axis=1), axis=1)
    return ways[best], least.max(axis=1) > _STRAIGHT * size**2
