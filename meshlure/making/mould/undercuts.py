"""Undercuts: the places where a half holds the rubber, how large each is and how far it reaches under."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.geometry.topology import paired
from meshlure.making.mould.cover import covered
from meshlure.making.mould.draft import Draft, lattice
from meshlure.making.mould.shadow import Shadow

MOST: Final = 12
"""Undercuts that are told, the deepest first."""

COLUMNS: Final = 500
"""Columns along the half's greatest extent; what reaches under by less than their pitch is not told."""

_PLACES: Final = 6000
"""Places under at most that are asked how far they lie under."""

_CLOSE: Final = 3.0
"""Pitches by which the grid may misjudge a depth."""

_ASKED: Final = 3000
"""Places at most whose distance to the edges is taken."""

_EDGES: Final = 3000
"""Places along the edges that the rubber must come round."""

_LEVELS: Final = 16
_MOST_ROWS: Final = 40


@dataclass(frozen=True, eq=False)
class Undercut:
    """One place that holds the rubber.

    Attributes
    ----------
    area : float, m2
        Of its hidden faces, which hang together.
    depth : float, m
        How far its deepest place lies, square to the pull, from the nearest place that the pull leaves open.
    at : (3,) array, m
        That deepest place, in the coordinates of its half.
    """

    area: float
    depth: float
    at: Floats


def undercuts(surface: Surface, found: Draft) -> list[Undercut]:
    """Return the undercuts of a half, the deepest first.

    Parameters
    ----------
    surface : Surface
        The closed solid that the half is cut from, in the half's coordinates.
    found : Draft
        Of its faces.

    Notes
    -----
    A place is open at a height where nothing of the half stands higher. The distance is taken to the edges between
    faces that look to the pull and faces that fall away beyond, which is exact for the mesh, and to the columns of a
    grid that are open at the place's height, which is never too short; the lesser counts.
    """
    under = np.flatnonzero(found.hidden > 0.5)
    if not len(under):
        return []
    corners, label = found.corners[under], _together(found.corners[under])
    places, owner = _places(corners, found.area[under])
    shadow = Shadow.of(surface, float(np.ptp(surface.bounds, axis=0).max()) / COLUMNS)
    depth = _from_open(places, shadow)
    of = label[owner]
    # Only what the grid finds about as deep as the deepest of its part can be the deepest of it.
    deepest = np.zeros(int(label.max()) + 1)
    np.maximum.at(deepest, of, depth)
    asked = np.flatnonzero((depth >= shadow.pitch) & (depth >= deepest[of] - _CLOSE * shadow.pitch))
    asked = asked[:: max(1, len(asked) // _ASKED)]
    exact = np.zeros(len(places))
    if len(asked):
        exact[asked] = np.minimum(depth[asked], _behind_edges(places[asked], _edges(surface, found)))
    depth = exact
    area = np.bincount(label, found.area[under])
    # The deepest place of every part: the last one once sorted by part and depth.
    order = np.lexsort((depth, of))
    last = order[np.flatnonzero(np.diff(of[order], append=-1))]
    told = last[depth[last] >= shadow.pitch]
    told = told[np.argsort(-depth[told], kind="stable")][:MOST]
    return [Undercut(float(area[of[k]]), float(depth[k]), places[k]) for k in told]


def _together(corners: Floats) -> Ints:
    """Number of the part that each triangle belongs to; triangles that share a corner hang together."""
    from scipy.sparse import coo_array
    from scipy.sparse.csgraph import connected_components

    points, number = np.unique(corners.reshape(-1, 3), axis=0, return_inverse=True)
    faces = number.reshape(-1, 3)
    links = np.concatenate([faces[:, :2], faces[:, 1:]])
    ones = np.ones(len(links), dtype=np.int8)
    count = len(points)
    _, part = connected_components(coo_array((ones, (links[:, 0], links[:, 1])), shape=(count, count)), directed=False)
    _, label = np.unique(part[faces[:, 0]], return_inverse=True)
    return np.asarray(label, dtype=np.intp)


def _places(corners: Floats, area: Floats) -> tuple[Floats, Ints]:
    """Places all over triangles, their corners among them, (n, 3) array, m; and the triangle of each."""
    spacing = float(np.sqrt(area.sum() / _PLACES))
    rows = np.clip(np.ceil(np.sqrt(area) / spacing), 1, _MOST_ROWS) if spacing else np.ones(len(area))
    found, owner = [corners.reshape(-1, 3)], [np.repeat(np.arange(len(corners)), 3)]
    for count in np.unique(rows):
        some = np.flatnonzero(rows == count)
        inner = np.einsum("pk,fkx->fpx", lattice(int(count)), corners[some])
        found.append(inner.reshape(-1, 3))
        owner.append(np.repeat(some, inner.shape[1]))
    places, owners = np.concatenate(found), np.concatenate(owner)
    step = max(1, len(places) // (2 * _PLACES))
    return places[::step], owners[::step]


def _edges(surface: Surface, found: Draft) -> Floats:
    """Places along the edges above the plane that the rubber must come round, (n, 3) array, m."""
    pairs = paired(surface)
    normals = surface.double_areas
    front = normals[:, 2] > 0
    ahead, behind = front[pairs.forward_face], front[pairs.backward_face]
    edge = np.flatnonzero(ahead != behind)
    # Where the face beyond falls away from the one that looks up; where it rises from it nothing needs to come round.
    one = np.where(ahead[edge], pairs.forward_face[edge], pairs.backward_face[edge])
    other = np.where(ahead[edge], pairs.backward_face[edge], pairs.forward_face[edge])
    start, end = surface.vertices[pairs.start[edge]], surface.vertices[pairs.end[edge]]
    beyond = surface.corners[other].sum(axis=1) - 3 * start
    kept = (np.einsum("ij,ij->i", beyond, normals[one]) <= 0) & (np.maximum(start[:, 2], end[:, 2]) >= 0)
    start, end = start[kept], end[kept]
    length = np.sqrt(((end - start) ** 2).sum(axis=1))
    step = float(length.sum()) / _EDGES
    count = np.maximum(np.ceil(length / step).astype(np.intp), 1) if step else np.ones(len(start), dtype=np.intp)
    each = np.repeat(np.arange(len(start)), count)
    share = (np.arange(len(each)) - np.repeat(np.cumsum(count) - count, count)) / count[each]
    places = start[each] + share[:, None] * (end - start)[each]
    places = places[places[:, 2] >= 0][:: max(1, len(places) // _EDGES)]
    hair = 1e-5 * float(np.ptp(surface.bounds, axis=0).max())
    return np.asarray(places[~covered(places, found.corners[found.away], hair)])


def _behind_edges(places: Floats, edges: Floats) -> Floats:
    """Distance square to the pull from each place to the nearest edge at its height or above, m; infinite without."""
    least = np.full(len(places), np.inf)
    if not len(edges):
        return least
    hair = 1e-6 * float(np.ptp(edges, axis=0).max())
    for at in range(0, len(places), 256):
        some = places[at : at + 256]
        apart = np.square(some[:, 0, None] - edges[:, 0])
        apart += np.square(some[:, 1, None] - edges[:, 1])
        least[at : at + 256] = np.where(edges[:, 2] >= some[:, None, 2] - hair, apart, np.inf).min(axis=1)
    return np.asarray(np.sqrt(least))


def _from_open(places: Floats, shadow: Shadow) -> Floats:
    """Distance square to the pull from each place to the nearest column that is open at its height, m."""
    from scipy.ndimage import distance_transform_edt

    top = np.full(shadow.shape[0] * shadow.shape[1], -np.inf)
    top[shadow.cell] = shadow.top
    top = top.reshape(shadow.shape)
    cells = shadow.cells_of(places[:, :2])
    centres = shadow.origin + cells * shadow.pitch
    aside = np.linalg.norm(places[:, :2] - centres, axis=1)
    levels = np.unique(np.quantile(places[:, 2], np.linspace(0.0, 1.0, _LEVELS)))
    level = np.clip(np.searchsorted(levels, places[:, 2], side="right") - 1, 0, len(levels) - 1)
    hair = 1e-3 * shadow.pitch
    found = np.empty(len(places))
    for number, height in enumerate(levels):
        some = level == number
        if some.any():
            # A level's lowest height leaves the fewest columns open.
            away = np.asarray(distance_transform_edt(top > height + hair, sampling=shadow.pitch))
            found[some] = away[cells[some, 0], cells[some, 1]] + aside[some]
    return found
