"""Fans: the faces that hang together round a vertex, each given a vertex of its own where several meet in one."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import EdgePairs, Ints32


def parted(surface: Surface, pairs: EdgePairs) -> Surface:
    """Return the same faces with one vertex for every fan.

    Parameters
    ----------
    surface : Surface
        Closed.
    pairs : EdgePairs
        Its edges.

    Notes
    -----
    A fan is what is reached round a vertex from face to face over paired edges. Solids that touch along an edge or in a
    point share vertices there; parted, every edge has its two faces.
    """
    from scipy.sparse import csr_array
    from scipy.sparse.csgraph import connected_components

    # A forward half-edge begins at its edge's start, where the backward one ends.
    one = np.concatenate([pairs.forward, _next(pairs.forward)])
    other = np.concatenate([_next(pairs.backward), pairs.backward])
    count = 3 * len(surface.faces)
    links = csr_array((np.ones(len(one), dtype=np.int8), (one, other)), shape=(count, count))
    fans, labels = connected_components(links, directed=False)
    vertex = np.empty(fans, dtype=np.intp)
    vertex[labels] = surface.faces.ravel()
    return Surface(surface.vertices[vertex], labels.astype(np.intp).reshape(-1, 3))


def _next(half: Ints32) -> Ints32:
    """Corner at which a half-edge ends, as 3 * face + corner."""
    return np.asarray(np.where(half % 3 == 2, half - np.int32(2), half + np.int32(1)))
