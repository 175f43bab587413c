"""The skin of a region that is known by numbers at the nodes of a lattice: always closed, every edge of two faces."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.surface import Bools, Floats, Ints

MARGIN: Final = 0.15
"""Share of a lattice edge that a vertex keeps from either node, so that no face shrinks to a needle."""

_CORNERS: Final = np.array([[0.0, 0, 0], [0, 0, 1], [0.5, -0.5, 0.5], [0.5, 0.5, 0.5]])
"""A cell's nodes, in the order in which `_cells` gives them."""


@dataclass(frozen=True, eq=False)
class Skin:
    """Faces between nodes with positive and other values.

    Attributes
    ----------
    inner, outer : (n, 3) int arrays
        The two nodes of the lattice edge that each vertex lies on, in half steps of the lattice; the inner positive.
    share : (n,) array
        How far along it the vertex lies from the inner node, by the values.
    faces : (m, 3) array
        Outward.
    """

    inner: Ints
    outer: Ints
    share: Floats
    faces: Ints

    @property
    def places(self) -> Floats:
        """Vertices, (n, 3) array, in half steps of the lattice, kept from the nodes."""
        share = np.clip(self.share, MARGIN, 1 - MARGIN)[:, None]
        return self.inner * (1 - share) + self.outer * share


def skin(values: Floats) -> Skin:
    """Return the faces between the positive nodes and the others of a body-centred cubic lattice.

    Parameters
    ----------
    values : (i, j, k) array
        On a cubic grid of half the lattice's step, at odd sizes; only nodes of which all indices are even or all are
        odd count. None of the outermost two on any side is positive.

    Notes
    -----
    Marching tetrahedra: the cells are congruent tetrahedra, each with a long edge between two nodes of either kind; a
    cell is cut into one or two triangles between its positive nodes and the others. Neighbouring cells share the edges
    that are cut, so that the result is closed and every edge has two faces.

    References
    ----------
    A. Doi, A. Koide (1991), An efficient method of triangulating equi-valued surfaces by using tetrahedral cells, IEICE
    Trans. E74(1). G. M. Treece, R. W. Prager, A. H. Gee (1999), Regularised marching tetrahedra: improved iso-surface
    extraction, Computers and Graphics 23(4): this lattice. Both from memory.
    """
    flat = values.reshape(-1)
    positive = values > 0
    cells = np.concatenate([_cells(positive, axis) for axis in range(3)])
    kind = (flat[cells] > 0) @ (1 << np.arange(4))
    pairs = _TABLE[kind].reshape(-1, 3, 2)
    which = np.repeat(np.arange(len(cells)), 2)[pairs[:, 0, 0] >= 0]
    pairs = pairs[pairs[:, 0, 0] >= 0]
    inner, outer = (cells[which[:, None], pairs[:, :, side]] for side in range(2))
    edges, faces = np.unique(inner.astype(np.int64) * flat.size + outer, return_inverse=True)
    one, other = edges // flat.size, edges % flat.size
    share = flat[one] / (flat[one] - flat[other])
    nodes = [np.stack(np.unravel_index(number, values.shape), axis=1) for number in (one, other)]
    return Skin(nodes[0], nodes[1], share, faces.reshape(-1, 3))


def _cells(positive: Bools, axis: int) -> Ints:
    """Cells with their long edge along an axis whose nodes are not all alike, (n, 4) array of numbers of nodes."""
    along, right, up = (np.eye(3, dtype=np.intp)[(axis + turn) % 3] for turn in range(3))
    strides = np.array([positive.shape[1] * positive.shape[2], positive.shape[2], 1])
    flat = positive.reshape(-1)
    # The long edge's lower node, of the odd kind: each cell has one long edge of either.
    sides = [np.arange(1, size - (3 if at == axis else 1), 2) for at, size in enumerate(positive.shape)]
    low = (sides[0][:, None, None] * strides[0] + sides[1][:, None] * strides[1] + sides[2]).reshape(-1)
    ring = [along - right - up, along + right - up, along + right + up, along - right + up]
    around = [low + int(step @ strides) for step in ring]
    high = low + int(2 * along @ strides)
    count = flat[low].astype(np.int8) + flat[high] + sum(flat[node].astype(np.int8) for node in around)
    mixed = np.flatnonzero((count > 0) & (count < 6))
    corners = [(low, high, around[k], around[(k + 1) % 4]) for k in range(4)]
    cells = np.concatenate([np.stack([node[mixed] for node in cell], axis=1) for cell in corners])
    count = flat[cells].sum(axis=1)
    return np.asarray(cells[(count > 0) & (count < 4)])


def _table() -> Ints:
    """Triangles of each of sixteen kinds of cell, (16, 2, 3, 2): kind, triangle, vertex, positive node and other."""
    table = np.full((16, 2, 3, 2), -1, dtype=np.intp)
    for kind in range(1, 15):
        ins = [node for node in range(4) if kind >> node & 1]
        outs = [node for node in range(4) if not kind >> node & 1]
        if len(ins) == 2:
            (a, b), (c, d) = ins, outs
            triangles = [[(a, c), (a, d), (b, d)], [(a, c), (b, d), (b, c)]]
        else:
            triangles = [[(i, o) for i in ins for o in outs]]
        outward = _CORNERS[outs].mean(axis=0) - _CORNERS[ins].mean(axis=0)
        for number, triangle in enumerate(triangles):
            a, b, c = (_CORNERS[list(pair)].mean(axis=0) for pair in triangle)
            table[kind, number] = triangle if np.cross(b - a, c - a) @ outward > 0 else triangle[::-1]
    return table


_TABLE: Final = _table()
