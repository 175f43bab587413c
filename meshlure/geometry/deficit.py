"""Facet deficit: the volume between a surface's plane facets and the smooth skin they stand for."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.geometry.normals import SkinNormals, facets, skin_normals
from meshlure.geometry.runouts import run_out
from meshlure.geometry.surface import Bools, Floats, Ints, Surface
from meshlure.geometry.topology import EdgePairs, Ints32, next_corner

UNEVEN: Final = 4.0
"""How many times the lesser of an edge's two slopes its mean may be; one end of a straight edge can be an apex."""


_CHUNK = 32768


def facet_deficit(surface: Surface, pairs: EdgePairs) -> float:
    """Volume, m3, that the facets leave out of the smooth part they stand for; negative where they add to it.

    Parameters
    ----------
    surface : Surface
        Closed and consistently wound.
    pairs : EdgePairs
        Its edges.

    Notes
    -----
    The skin stands over the middle of an edge from p to q at the height (n_q . d - n_p . d) / 8, d = q - p, of the
    cubic with those end slopes; over a face, a paraboloid through its corners and three such heights encloses a third
    of the area times their sum. Vertex normals come from `normals.skin_normals`, split at edges sharper than
    `tolerances.SHARP_EDGE`, and corrected by `runouts.run_out`. Faces that were drawn flat leave nothing out.

    Two guards keep straight edges straight. Where the slopes at the two ends of an edge differ much, or in sign, the
    lesser decides: at the apex of a cone only one end slopes. Where one end lies at a sharp edge, its normal knows the
    skin on one side only, and the slope at the other end counts for both.

    The error is of higher order than the deficit. On balls, spheroids, rings and cylinders it is within 5% of the
    deficit from some hundred faces on, on fillets run out into planes or cylinders likewise; on irregular meshes, and
    where curvature changes in steps, up to a fifth. A cone meshed from apex to rim in one facet gets three quarters of
    its deficit. Arcs of fewer facets than one per 30 degrees are taken for drawn edges and get none.
    """
    plain = facets(surface)
    skin = run_out(surface, pairs, plain, skin_normals(surface, pairs, plain))
    third = np.where(skin.flat, 0.0, plain.areas / 3)
    trusted = _trusted(skin, pairs)
    vertices = np.ascontiguousarray(surface.vertices.T)
    split = skin.normals.shape[1] > len(surface.vertices)
    total = 0.0
    for at in range(0, len(pairs.start), _CHUNK):
        piece = slice(at, at + _CHUNK)
        ends, sharp = (pairs.start[piece], pairs.end[piece]), skin.sharp[piece]
        ahead, back = pairs.forward[piece], pairs.backward[piece]
        shares = third[pairs.forward_face[piece]], third[pairs.backward_face[piece]]
        # Both sides of a smooth edge share their normals, so that only sharp edges are looked at from either side.
        numbers = (skin.groups[ahead], skin.groups[next_corner(ahead)]) if split else ends
        both = _heights(skin, vertices, ends, numbers, trusted)
        total += float((both * np.where(sharp, shares[0], shares[0] + shares[1])).sum())
        if sharp.any():
            ends, back = (ends[0][sharp], ends[1][sharp]), back[sharp]
            other = _heights(skin, vertices, ends, (skin.groups[next_corner(back)], skin.groups[back]), trusted)
            total += float((other * shares[1][sharp]).sum())
    return total


def _heights(
    skin: SkinNormals,
    vertices: Floats,
    ends: tuple[Ints32, Ints32],
    numbers: tuple[Ints | Ints32, Ints | Ints32],
    trusted: Bools,
) -> Floats:
    """Height, m, of the skin over the middle of each edge, whose ends have the normals of these numbers."""
    start, end = numbers
    first, last = np.zeros(len(start)), np.zeros(len(end))
    for axis in range(3):
        span = vertices[axis, ends[1]] - vertices[axis, ends[0]]
        first -= skin.normals[axis, start] * span
        last += skin.normals[axis, end] * span
    mean = (first + last) / 2
    least = UNEVEN * np.minimum(np.abs(first), np.abs(last))
    bend = np.where(first * last > 0, np.clip(mean, -least, least), 0.0)
    if not trusted.all():
        one, other = trusted[start], trusted[end]
        bend = np.where(one & ~other, first, np.where(other & ~one, last, bend))
    return bend / 4


def _trusted(skin: SkinNormals, pairs: EdgePairs) -> Bools:
    """Which normals know the skin all round, and have a neighbour that does.

    The apex of a cone whose facets reach from it to a sharp rim has no such neighbour, and nothing to tell it from the
    top of a dome.
    """
    whole = ~skin.one_sided
    if whole.all():
        return whole
    start, end = skin.groups[pairs.forward], skin.groups[next_corner(pairs.forward)]
    backed = np.zeros(len(whole), dtype=np.bool_)
    backed[start[whole[end]]] = True
    backed[end[whole[start]]] = True
    return backed & whole
