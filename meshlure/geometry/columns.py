"""Columns: where parallel lines on a grid go through a surface's faces."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.stretches import stretches
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
    A row of columns meets a face in the stretch between two of its edges, lower end included; see `stretches`.
    """
    scaled = np.column_stack([(surface.vertices[:, axis] - origin[axis]) / pitch for axis in order])
    # An edge is crossed by the whole rows from its lower end, rounded up, to before its upper end, rounded up.
    first_row, first_column = (np.ceil(scaled[:, k]).astype(np.intp) for k in range(2))
    a, b, c = surface.faces.T
    lowest, highest = _range(first_row[a], first_row[b], first_row[c])
    left, right = _range(first_column[a], first_column[b], first_column[c])
    some = np.flatnonzero((lowest < highest) & (left < right))
    face, row = _spread(lowest[some], highest[some])
    met = stretches(scaled[surface.faces[some[face]]], row.astype(np.float64))
    start, stop = (np.ceil(end).astype(np.intp) for end in (met.start, met.stop))
    which, column = _spread(start, stop)
    sign = np.where(met.up[which], -1, 1)
    return Crossings(row[which], column, met.heights(which, column), sign, some[face[which]])


def _range(a: Ints, b: Ints, c: Ints) -> tuple[Ints, Ints]:
    return np.minimum(np.minimum(a, b), c), np.maximum(np.maximum(a, b), c)


def _spread(start: Ints, stop: Ints) -> tuple[Ints, Ints]:
    """Every whole number from starts to before stops: which range it is of, and the number."""
    counts = (stop - start).astype(np.intp)
    of = np.repeat(np.arange(len(counts)), counts)
    begins = np.cumsum(counts) - counts
    return of, np.arange(len(of)) - begins[of] + start[of]
