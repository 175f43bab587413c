"""Edges by their faces, whichever way these run along them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Bools, Ints, Surface


@dataclass(frozen=True, eq=False)
class SharedEdges:
    """Edges of exactly two faces.

    Attributes
    ----------
    first, second : (k,) arrays
        Their faces.
    against : (k,) bool array
        Whether both faces run along the edge the same way, so that they are wound against each other.
    """

    first: Ints
    second: Ints
    against: Bools


def shared_edges(surface: Surface) -> SharedEdges:
    """Return the edges that exactly two faces of a surface share."""
    source = surface.faces.ravel()
    target = np.roll(surface.faces, -1, axis=1).ravel()
    low, high = np.minimum(source, target), np.maximum(source, target)
    words = low.astype(np.int64) * len(surface.vertices) + high
    order = np.argsort(words, kind="stable")
    ordered = words[order]
    begins = np.flatnonzero(np.concatenate(([True], ordered[1:] != ordered[:-1]))) if len(order) else order
    sizes = np.diff(begins, append=len(order))
    two = begins[sizes == 2]
    one, other = order[two], order[two + 1]
    return SharedEdges(one // 3, other // 3, source[one] == source[other])


def edge_numbers(surface: Surface) -> Ints:
    """Return the number of the edge at each side of each face, (m, 3) array; side i runs from corner i to the next."""
    source, target = surface.faces, np.roll(surface.faces, -1, axis=1)
    words = np.minimum(source, target).astype(np.int64) * len(surface.vertices) + np.maximum(source, target)
    return np.asarray(np.unique(words, return_inverse=True)[1].reshape(words.shape), dtype=np.intp)


def bodies(surface: Surface) -> tuple[int, Ints]:
    """Return how many parts of a surface hang together by edges, and the part of each face, (m,) array."""
    from scipy.sparse import csr_array
    from scipy.sparse.csgraph import connected_components

    count = len(surface.faces)
    source = surface.faces.ravel()
    target = np.roll(surface.faces, -1, axis=1).ravel()
    words = np.minimum(source, target).astype(np.int64) * len(surface.vertices) + np.maximum(source, target)
    order = np.argsort(words, kind="stable")
    same = np.flatnonzero(words[order][1:] == words[order][:-1])
    links = (np.ones(len(same), dtype=np.int8), (order[same] // 3, order[same + 1] // 3))
    found, labels = connected_components(csr_array(links, shape=(count, count)), directed=False)
    return int(found), labels.astype(np.intp)
