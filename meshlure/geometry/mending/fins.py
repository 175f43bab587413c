"""Fins: pieces of skin with a free edge that stand on an otherwise whole surface, taken away."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.mending.edges import edge_numbers, shared_edges
from meshlure.geometry.mending.steps import Step
from meshlure.geometry.phrasing import counted, places, places_text
from meshlure.geometry.surface import Surface


def without_fins(surface: Surface) -> Step | None:
    """Return the surface without its fins, None where there are none.

    Notes
    -----
    A fin has an open edge, hangs together by edges of two faces, and stands on edges of more than two faces; without it
    every one of these has an even number. A wall with no free edge is another matter: which of the skins that meet
    along its rim is the wall cannot be told from how they hang together.
    """
    from scipy.sparse import csr_array
    from scipy.sparse.csgraph import connected_components

    count = len(surface.faces)
    edges = shared_edges(surface)
    links = csr_array((np.ones(len(edges.first), dtype=np.int8), (edges.first, edges.second)), shape=(count, count))
    found, part = connected_components(links, directed=False)
    if found < 2:
        return None
    numbers = edge_numbers(surface)
    uses = np.bincount(numbers.ravel())
    open_parts = np.unique(part[(uses[numbers] == 1).any(axis=1)])
    kept = np.ones(count, dtype=np.bool_)
    for one in open_parts.tolist():
        own = part == one
        mine = np.bincount(numbers[own].ravel(), minlength=len(uses))
        crowded = (mine > 0) & (uses > 2)
        if crowded.any() and ((uses - mine)[crowded] % 2 == 0).all():
            kept &= ~own
            uses = uses - mine
    gone = np.flatnonzero(~kept)
    if not len(gone):
        return None
    middles = surface.corners[gone].mean(axis=1)
    did = f"took away {counted(len(gone), 'face')} that stood on the skin as fins, at {places_text(middles)}"
    return Step("fins", did, Surface(surface.vertices, surface.faces[kept]), len(gone), 0.0, places(middles))
