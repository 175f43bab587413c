"""Flaws of edges and faces: where a surface is not closed, not wound alike or not one skin, as findings."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from meshlure.findings import Finding, Level
from meshlure.geometry.openings import Opening, openings, seam
from meshlure.geometry.phrasing import MOST_PLACES, counted, millimetres, place_text, places, places_text
from meshlure.geometry.shells import extent
from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.geometry.topology import EdgePairs, Ints32

STL_STEP = 2.0**-23
"""Share of a coordinate that is one step of a four-byte number, the resolution of a binary STL."""


def edge_flaws(surface: Surface, pairs: EdgePairs, piece: str) -> Iterator[Finding]:
    """Report the edges that are not shared by exactly two faces wound alike."""
    irregular = pairs.irregular
    if len(irregular.open):
        yield _open_edges(surface, irregular.open, piece)
    if len(irregular.miswound):
        yield _mixed_winding(surface, pairs, piece)
    crowded = irregular.crowded
    if len(crowded):
        balanced = irregular.balanced
        middles = _middles(surface, crowded)
        yield Finding(
            "crowded-edges",
            Level.WARNING if balanced else Level.FAULT,
            f"{counted(len(crowded), 'edge')} shared by more than two faces, at {places_text(middles)}"
            + ("; the surface is closed all the same" if balanced else ""),
            piece,
            len(crowded),
            places(middles),
            "Join the solids that touch there, or keep them a little apart."
            if balanced
            else "Remove the inner wall, fin or second copy of the skin that ends there, and export again.",
            stops=not balanced,
        )


def face_flaws(surface: Surface, pairs: EdgePairs, areas: Floats, piece: str) -> Iterator[Finding]:
    """Report the faces that occur twice or have no area.

    Parameters
    ----------
    areas : (m,) array, m2
        Of the faces.
    """
    twice = _duplicates(surface, pairs)
    if len(twice):
        balanced = pairs.closed
        middles = surface.vertices[surface.faces[twice]].mean(axis=1)
        yield Finding(
            "duplicate-faces",
            Level.WARNING if balanced else Level.FAULT,
            f"{counted(len(twice), 'face')} with the corners of another face, at {places_text(middles)}",
            piece,
            len(twice),
            places(middles),
            "Delete the second copies, or the wall between two solids, and export again.",
            stops=not balanced,
        )
    thin = without_area(surface, areas)
    if len(thin):
        middles = surface.vertices[surface.faces[thin]].mean(axis=1)
        yield Finding(
            "zero-area-faces",
            Level.NOTE,
            f"{counted(len(thin), 'face')} without area (thinner than an STL resolves) at {places_text(middles)}",
            piece,
            len(thin),
            places(middles),
            "Harmless here: they add nothing to volume or area.",
        )


def _open_edges(surface: Surface, edges: Ints32, piece: str) -> Finding:
    found = openings(surface, edges)
    listed = "; ".join(_opening_text(opening) for opening in found[:MOST_PLACES])
    more = f"; and {len(found) - MOST_PLACES:,} more" if len(found) > MOST_PLACES else ""
    return Finding(
        "open-edges",
        Level.FAULT,
        f"{counted(len(edges), 'open edge')} in {counted(len(found), 'rim')}: {listed}{more}",
        piece,
        len(edges),
        places(opening.centre for opening in found),
        _opening_advice(surface, found),
        stops=True,
    )


def _opening_text(opening: Opening) -> str:
    kind = "crack" if opening.crack else "hole"
    if opening.plane:
        kind = f"flat hole at {'xyz'[opening.plane[0]]} = {millimetres(opening.plane[1])}"
    elif opening.flat and not opening.crack:
        kind = "flat hole"
    edges = counted(opening.edges, "edge")
    return f"{kind} of {edges}, {millimetres(opening.length)} round, about {place_text(opening.centre)}"


def _opening_advice(surface: Surface, found: tuple[Opening, ...]) -> str:
    gap = seam(found)
    if gap is not None:
        return f"Two rims lie on each other, {millimetres(gap)} apart: sew the two parts into one solid in CAD."
    reach = float(np.ptp(surface.bounds, axis=0).max())
    for opening in found:
        if opening.plane is None:
            continue
        axis, height = opening.plane
        if np.abs(surface.bounds[:, axis] - height).min() <= 1e-3 * reach:
            return (
                f"The body ends at {'xyz'[axis]} = {millimetres(height)} in a flat opening: is it half a body, or one "
                "without its end face? Mirror and join the half, or close the face, and export a closed solid."
            )
    if sum(opening.crack for opening in found) > len(found) / 2:
        return "The two sides of a crack nearly meet: sew the faces into one solid in CAD and export that."
    return "Close the holes in CAD and export a closed solid."


def _mixed_winding(surface: Surface, pairs: EdgePairs, piece: str) -> Finding:
    edges = pairs.irregular.miswound
    middles = _middles(surface, edges)
    return Finding(
        "mixed-winding",
        Level.FAULT,
        f"{counted(len(edges), 'edge')} where the faces on both sides are wound against each other, "
        f"at {places_text(middles)}",
        piece,
        len(edges),
        places(middles),
        "Turn the faces that look inwards (in CAD or a mesh editor: make normals consistent) and export again.",
        stops=True,
    )


def _middles(surface: Surface, edges: Ints32) -> Floats:
    return np.asarray(surface.vertices[edges].mean(axis=1))


def _duplicates(surface: Surface, pairs: EdgePairs) -> Ints:
    """Faces that have the same three corners as an earlier one, whichever way they are wound."""
    # All edges of a face and its copy are irregular, unless the two are wound against each other and share no edge with
    # a third face; then both sides of an edge have the same third corner.
    if not len(pairs.irregular.ends):
        ahead, back = pairs.forward, pairs.backward
        corners = surface.faces.ravel()
        third = _third(ahead), _third(back)
        if not (corners[third[0]] == corners[third[1]]).any():
            return np.empty(0, dtype=np.intp)
    triples = np.sort(surface.faces, axis=1)
    order = np.lexsort(triples.T)
    ordered = triples[order]
    same = (ordered[1:] == ordered[:-1]).all(axis=1)
    return np.asarray(np.sort(order[1:][same]))


def _third(half: Ints32) -> Ints32:
    """Place, in the list of all corners, of the corner that faces each half-edge."""
    slot = half % np.int32(3)
    return np.asarray(half - slot + (slot + np.int32(2)) % np.int32(3))


def without_area(surface: Surface, areas: Floats) -> Ints:
    """Return the faces thinner than the resolution of an STL.

    Parameters
    ----------
    surface : Surface
    areas : (m,) array, m2
        Of its faces.
    """
    if not len(areas):
        return np.empty(0, dtype=np.intp)
    reach = float(np.linalg.norm(np.ptp(extent(surface.vertices), axis=0)))
    # A body that stands far off its origin is not thin for it: other formats than STL keep its digits.
    step = STL_STEP * min(float(np.abs(surface.vertices).max()), 10 * reach)
    # A face is no longer than the whole; only those thin at that length are measured.
    thin = np.flatnonzero(2 * areas <= step * reach)
    corners = surface.vertices[surface.faces[thin]]
    longest = np.linalg.norm(corners - np.roll(corners, 1, axis=1), axis=2).max(axis=1)
    return np.asarray(thin[2 * areas[thin] <= step * longest])
