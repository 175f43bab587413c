"""A grid of directions over the whole sphere, with neighbours; low and saddle-shaped places of values on it."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Floats, Ints

CELLS = 16
"""Cells along a quarter of a great circle; neighbours stand six to eight degrees apart."""

_MOST = 6


@dataclass(frozen=True, eq=False)
class DirectionGrid:
    """Directions all over the sphere with their neighbours.

    Attributes
    ----------
    directions : (n, 3) array
        Unit vectors.
    ring : (n, 6) array
        Each direction's neighbours in turn round it; where there are only four, the last is repeated.
    """

    directions: Floats
    ring: Ints

    @property
    def edges(self) -> Ints:
        """Pairs of neighbours, each once, (k, 2) array."""
        here = np.repeat(np.arange(len(self.ring)), _MOST)
        pairs = np.column_stack([here, self.ring.reshape(-1)])
        return np.unique(pairs[pairs[:, 0] < pairs[:, 1]], axis=0)

    def minima(self, values: Floats) -> Ints:
        """Return the directions whose value is below that of every neighbour, the lowest first.

        Parameters
        ----------
        values : (n,) array
            Equal ones count as ascending in their order, so that a flat stretch has one lowest place.
        """
        low = self._above(values).all(axis=1)
        return _ascending(np.flatnonzero(low), values)

    def saddles(self, values: Floats) -> Ints:
        """Return the directions round which the values rise and fall at least twice, the lowest first.

        Parameters
        ----------
        values : (n,) array

        References
        ----------
        T. F. Banchoff (1970), Critical points and curvature for embedded polyhedral surfaces, American
        Mathematical Monthly 77(5).
        """
        above = self._above(values)
        turns = (above != np.roll(above, 1, axis=1)).sum(axis=1)
        return _ascending(np.flatnonzero(turns >= 4), values)

    def _above(self, values: Floats) -> Ints:
        rank = np.empty(len(values), dtype=np.intp)
        rank[np.argsort(values, kind="stable")] = np.arange(len(values))
        return np.asarray(rank[self.ring] > rank[:, None])


def _ascending(places: Ints, values: Floats) -> Ints:
    return np.asarray(places[np.argsort(values[places], kind="stable")])


def direction_grid(frame: Floats, cells: int = CELLS) -> DirectionGrid:
    """Return the corners of an octahedron whose faces are cut in ``cells`` squared triangles, spread on the sphere.

    Parameters
    ----------
    frame : (3, 3) array
        Unit vectors at right angles, one a row; the great circles through any two of them are lines of the grid,
        so that a valley along one of these is followed without steps.
    cells : int
        Along each edge of the octahedron, 2 or more.

    Notes
    -----
    Corners are the whole-number points with ``abs(i) + abs(j) + abs(k) = cells``; neighbours differ by one in two
    of the three.
    """
    span = np.arange(-cells, cells + 1)
    i, j = (grid.reshape(-1) for grid in np.meshgrid(span, span, indexing="ij"))
    rest = cells - np.abs(i) - np.abs(j)
    points = np.vstack([np.column_stack([i, j, rest])[rest >= 0], np.column_stack([i, j, -rest])[rest > 0]])
    # The sine spreads the corners more evenly than the flat faces would.
    spread = np.sin(points * (np.pi / (2 * cells)))
    directions = spread / np.linalg.norm(spread, axis=1)[:, None]
    return DirectionGrid(directions @ np.asarray(frame, dtype=np.float64), _rings(points, directions, cells))


def _rings(points: Ints, directions: Floats, cells: int) -> Ints:
    number = np.full((2 * cells + 3,) * 3, -1, dtype=np.intp)
    number[tuple((points + cells + 1).T)] = np.arange(len(points))
    steps = [step for step in np.ndindex(3, 3, 3) if sorted(map(abs, np.subtract(step, 1))) == [0, 1, 1]]
    near = np.stack([number[tuple((points + np.subtract(step, 1) + cells + 1).T)] for step in steps], axis=1)
    # Turn round each direction, measured in its own tangent plane; places without a neighbour go to the end.
    pole = np.eye(3)[np.abs(directions).argmin(axis=1)]
    east = np.cross(pole, directions)
    north = np.cross(directions, east)
    away = directions[near]
    angle = np.arctan2(np.einsum("nkj,nj->nk", away, north), np.einsum("nkj,nj->nk", away, east))
    order = np.argsort(np.where(near < 0, np.inf, angle), axis=1)[:, :_MOST]
    ring = np.take_along_axis(near, order, axis=1)
    count = (ring >= 0).sum(axis=1)
    last = np.take_along_axis(ring, count[:, None] - 1, axis=1)
    return np.asarray(np.where(ring < 0, last, ring))
