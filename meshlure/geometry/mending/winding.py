"""Faces turned so that neighbours look to the same side."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.mending.edges import shared_edges
from meshlure.geometry.mending.steps import Left, Step
from meshlure.geometry.phrasing import counted, places, places_text
from meshlure.geometry.surface import Surface


def consistent(surface: Surface) -> tuple[Step | None, Left | None]:
    """Return the surface with neighbouring faces wound alike, and what has no two sides.

    Notes
    -----
    Every face stands twice in a graph, as it is and turned; an edge of two faces links the pairs that agree. Faces that
    reach their own turned selves lie on a skin with one side only, such as a Moebius strip, and are left. Of every
    other part the lesser number of faces is turned; which side of it is out is asked of the whole later.
    """
    from scipy.sparse import csr_array
    from scipy.sparse.csgraph import connected_components

    count = len(surface.faces)
    edges = shared_edges(surface)
    if not edges.against.any():
        return None, None
    turned_too = np.where(edges.against, count, 0)
    one = np.concatenate([edges.first, edges.first + count])
    other = np.concatenate([edges.second + turned_too, (edges.second + count + turned_too) % (2 * count)])
    links = csr_array((np.ones(len(one), dtype=np.int8), (one, other)), shape=(2 * count, 2 * count))
    _, labels = connected_components(links, directed=False)
    as_is, turned = labels[:count], labels[count:]
    twisted = as_is == turned
    # A part's two copies are told from each other by the copy that holds more faces as they are.
    sizes = np.bincount(as_is, minlength=int(labels.max()) + 1)
    part = np.maximum(as_is, turned)
    fewer = (sizes[as_is] < sizes[turned]) | ((sizes[as_is] == sizes[turned]) & (as_is == part))
    wrong = np.flatnonzero(fewer & ~twisted)
    left = None
    if twisted.any():
        middles = surface.corners[twisted].mean(axis=1)
        left = Left(
            f"{counted(int(twisted.sum()), 'face')} on a skin that has one side only, so that no side is out, "
            f"at {places_text(middles)}",
            places(middles),
            "Redraw that surface in CAD as the skin of a solid.",
        )
    if not len(wrong):
        return None, left
    faces = surface.faces.copy()
    faces[wrong] = faces[wrong][:, ::-1]
    middles = surface.corners[wrong].mean(axis=1)
    did = f"turned {counted(len(wrong), 'face')} that looked against their neighbours, at {places_text(middles)}"
    return Step("winding", did, Surface(surface.vertices, faces), len(wrong), 0.0, places(middles)), left
