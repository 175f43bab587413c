"""Planes: which faces of a surface were drawn flat, and do not stand for something curved."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.geometry.surface import Bools, Floats, Surface
from meshlure.geometry.topology import EdgePairs

COPLANAR: Final = 1e-3
"""rad. Neighbours whose normals differ by less lie in one plane: that much is rounding to four-byte coordinates."""

WIDER: Final = 6.0
"""A plane so many times wider than the facets beside it was drawn flat; a facet of a curved skin is about as wide."""


def drawn_flat(
    surface: Surface, pairs: EdgePairs, areas: Floats, cosines: Floats, sharp: Bools, unknown: Bools
) -> Bools:
    """Faces, (m,) bool, of planes that are much wider than the facets that join them smoothly.

    Parameters
    ----------
    surface : Surface
    pairs : EdgePairs
        Its edges, e of them.
    areas : (m,) array, m2
        Of the faces.
    cosines : (e,) array
        Of the angles between the faces along each edge.
    sharp, unknown : (e,) bool arrays
        Edges that are sharp, and those beside a face too thin to have a normal.

    Notes
    -----
    The width of a plane is its area over half its rim, which for a strip is its width and for a disc its radius. The
    facets beside it are measured likewise, as planes of their own. A plane between sharp edges alone is not asked
    about: nothing can take it for curved.
    """
    from scipy.sparse import csr_array
    from scipy.sparse.csgraph import connected_components

    count = len(surface.faces)
    level = (cosines > 1 - COPLANAR**2 / 2) | unknown
    if not level.any():
        return np.zeros(count, dtype=np.bool_)
    links = np.ones(int(np.count_nonzero(level)), dtype=np.int8)
    joined = csr_array((links, (pairs.forward_face[level], pairs.backward_face[level])), shape=(count, count))
    planes, member = connected_components(joined, directed=False)
    rim = np.flatnonzero(~level)
    one, other = member[pairs.forward_face[rim]], member[pairs.backward_face[rim]]
    span = surface.vertices[pairs.end[rim]] - surface.vertices[pairs.start[rim]]
    length = np.sqrt((span * span).sum(axis=1))
    rim_length = np.bincount(one, length, planes) + np.bincount(other, length, planes)
    width = 2 * np.bincount(member, areas, planes) / np.where(rim_length == 0, np.inf, rim_length)
    smooth = np.where(sharp[rim], 0.0, length)
    joins = np.bincount(one, smooth, planes) + np.bincount(other, smooth, planes)
    beside = np.bincount(one, smooth * width[other], planes) + np.bincount(other, smooth * width[one], planes)
    # A plane of one face is no plane: any facet would be.
    wide = (joins > 0) & (width * joins > WIDER * beside) & (np.bincount(member, minlength=planes) > 1)
    return np.asarray(wide[member])
