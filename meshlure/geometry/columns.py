"""Columns: where parallel lines on a grid go through a surface's faces."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Floats, Ints, Surface


@dataclass(frozen=True, eq=False)
class Crossings:
    """Where columns go through faces, (n,) arrays in no order.

    Attributes
    ----------
    row, column : int arrays
        The column's place in the grid.
    height : array
        Along the column from the grid's origin, in pitches.
    sign : int array
        1 where the column goes into the solid, -1 where it comes out.
    face : int array
        Number of the face.
    """

    row: Ints
    column: Ints
    height: Floats
    sign: Ints
    face: Ints


def crossings(surface: Surface, origin: Floats, pitch: float, order: tuple[int, int, int]) -> Crossings:
    """Return where every column of a grid goes through a surface.

    Parameters
    ----------
    surface : Surface
    origin : (3,) array, m
        A place on the grid's first column, from which heights count.
    pitch : float, m
        Between columns.
    order : three int
        The axes of rows, columns and heights, so that columns, rows, heights are right-handed.

    Notes
    -----
    A row of columns meets a face in the stretch between two of its edges, lower end included. Where a row crosses an
    edge is worked out from the same end whichever face asks, so that the stretches of neighbours join without gap or
    overlap, and a column through an edge or a corner is counted as if it passed beside it.
    """
    rows, columns, heights = (np.ascontiguousarray((surface.vertices[:, k] - origin[k]) / pitch) for k in order)
    # An edge is crossed by the whole rows from its lower end, rounded up, to before its upper end, rounded up.
    first_row, first_column = np.ceil(rows).astype(np.int32), np.ceil(columns).astype(np.int32)
    a, b, c = surface.faces.T
    lowest, highest = _range(first_row[a], first_row[b], first_row[c])
    left, right = _range(first_column[a], first_column[b], first_column[c])
    some = np.flatnonzero((lowest < highest) & (left < right))
    face, row = _spread(lowest[some], highest[some])
    corners = surface.faces[some[face]]
    # Of three corners one lies alone on its side of the row.
    above = first_row[corners] > row[:, None]
    upward = above.sum(axis=1) == 1
    alone = np.where(upward, above.argmax(axis=1), above.argmin(axis=1))
    each = np.arange(len(face))
    apex, after, before = (corners[each, (alone + turn) % 3] for turn in range(3))
    ends = []
    for other in (after, before):
        low, high = np.where(upward, other, apex), np.where(upward, apex, other)
        share = (row - rows[low]) / (rows[high] - rows[low])
        ends.append([along[low] + share * (along[high] - along[low]) for along in (columns, heights)])
    (one, one_height), (two, two_height) = ends
    start, stop = np.ceil(np.minimum(one, two)).astype(np.int32), np.ceil(np.maximum(one, two)).astype(np.int32)
    meets, column = _spread(start, stop)
    share = (column - one[meets]) / (two[meets] - one[meets])
    height = one_height[meets] + share * (two_height[meets] - one_height[meets])
    # Seen from above, faces that look up go round against the clock: left of the row's stretch is what goes down.
    looks_up = (one < two) == upward
    sign = np.where(looks_up[meets], -1, 1).astype(np.int32)
    return Crossings(row[meets], column, height, sign, some[face[meets]])


def _range(a: Ints, b: Ints, c: Ints) -> tuple[Ints, Ints]:
    return np.minimum(np.minimum(a, b), c), np.maximum(np.maximum(a, b), c)


def _spread(start: Ints, stop: Ints) -> tuple[Ints, Ints]:
    """Every whole number from starts to before stops: which range it is of, and the number."""
    counts = (stop - start).astype(np.intp)
    of = np.repeat(np.arange(len(counts)), counts)
    begins = np.cumsum(counts) - counts
    return of, np.arange(len(of)) - begins[of] + start[of]
