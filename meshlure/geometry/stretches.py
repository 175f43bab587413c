"""Stretches: what rows of columns cut out of triangles, counted so that neighbours leave no gap between them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Bools, Floats, Ints


@dataclass(frozen=True, eq=False)
class Stretches:
    """What a row cuts out of each of n triangles, in the triangles' coordinates.

    Attributes
    ----------
    one, two : (n, 2) arrays
        Column and height at the ends, in either order.
    up : (n,) array
        Whether the triangle looks up; means nothing where the stretch has no width.
    """

    one: Floats
    two: Floats
    up: Bools

    @property
    def start(self) -> Floats:
        """The least column, (n,) array; it is met."""
        return np.minimum(self.one[:, 0], self.two[:, 0])

    @property
    def stop(self) -> Floats:
        """The greatest column, (n,) array; it is not met."""
        return np.maximum(self.one[:, 0], self.two[:, 0])

    def heights(self, which: Ints, column: Floats | Ints) -> Floats:
        """Return the heights of some stretches at columns that meet them."""
        one, two = self.one[which], self.two[which]
        share = (column - one[:, 0]) / (two[:, 0] - one[:, 0])
        return np.asarray(one[:, 1] + share * (two[:, 1] - one[:, 1]))


def stretches(corners: Floats, row: Floats) -> Stretches:
    """Return the stretch of each triangle that a row goes through.

    Parameters
    ----------
    corners : (n, 3, 3) array
        Triangle, corner, and row, column, height; these are right-handed as column, row, height.
    row : (n,) array
        At or above one corner or two, and below the others.

    Notes
    -----
    Where a row crosses a side is worked out from the side's lower end, whichever triangle asks, so that the stretches
    of neighbours join without gap or overlap: a column through a side or a corner counts as if it passed beside it, and
    of a closed surface every column leaves as often as it enters.
    """
    above = corners[:, :, 0] > row[:, None]
    lone = above.sum(axis=1) == 1
    # Of three corners one lies alone on its side of the row.
    alone = np.where(lone, above.argmax(axis=1), above.argmin(axis=1))
    each = np.arange(len(corners))
    apex, after, before = (corners[each, (alone + turn) % 3] for turn in range(3))
    ends = []
    for other in (after, before):
        low, high = np.where(lone[:, None], other, apex), np.where(lone[:, None], apex, other)
        share = (row - low[:, 0]) / (high[:, 0] - low[:, 0])
        ends.append(low[:, 1:] + share[:, None] * (high[:, 1:] - low[:, 1:]))
    # Seen from above, what looks up goes round against the clock: at its left side downward.
    return Stretches(ends[0], ends[1], (ends[0][:, 0] < ends[1][:, 0]) == lone)
