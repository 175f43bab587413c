"""Undercuts: the places where a half holds the rubber, how large each is and how far it reaches under."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.samples import spread
from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.geometry.topology import paired
from meshlure.making.mould.cover import covered
from meshlure.making.mould.draft import Draft

SHALLOW: Final = 0.02e-3
"""m. What reaches under by less is rounding, or a facet across the parting line."""

MOST: Final = 12
"""Undercuts that are told, the deepest first."""

_POINTS: Final = 3000
"""Places at most, under and along the rims, between which distances are taken."""


@dataclass(frozen=True, eq=False)
class Undercut:
    """One place that holds the rubber.

    Attributes
    ----------
    area : float, m2
        Of its hidden faces, which hang together.
    depth : float, m
        How far its deepest place lies, square to the pull, behind the nearest edge that the rubber must come round.
    at : (3,) array, m
        That place, in the coordinates of its half.
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
    The edges that the rubber must come round are those between faces that look to the pull and faces that do not,
    where nothing stands above them; for a place under them only those at its own height or higher count.
    """
    under = np.flatnonzero(found.hidden > 0.5)
    if not len(under):
        return []
    corners = found.corners[under]
    label = _together(corners)
    rim = _rim(surface, found)
    if not len(rim):
        return []
    area = np.bincount(label, found.area[under])
    made = []
    for number in np.argsort(-area)[: 4 * MOST]:
        places = _spread(corners[label == number])
        depth = _behind(places, rim)
        deepest = int(depth.argmax())
        if depth[deepest] >= SHALLOW:
            made.append(Undercut(float(area[number]), float(depth[deepest]), places[deepest]))
    return sorted(made, key=lambda one: -one.depth)[:MOST]


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


def _rim(surface: Surface, found: Draft) -> Floats:
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
    falls = np.einsum("ij,ij->i", beyond, normals[one]) <= 0
    start, end = start[falls], end[falls]
    length = np.sqrt(((end - start) ** 2).sum(axis=1))
    step = float(length.sum()) / _POINTS
    count = np.maximum(np.ceil(length / step).astype(np.intp), 1) if step else np.ones(len(start), dtype=np.intp)
    each = np.repeat(np.arange(len(start)), count)
    share = (np.arange(len(each)) - np.repeat(np.cumsum(count) - count, count)) / count[each]
    places = start[each] + share[:, None] * (end - start)[each]
    places = _thinned(places[places[:, 2] >= 0], 2 * _POINTS)
    hair = 1e-5 * float(np.ptp(surface.bounds, axis=0).max())
    return places[~covered(places, found.corners[found.away], hair)]


def _spread(corners: Floats) -> Floats:
    """Places all over triangles, their corners among them, (n, 3) array, m."""
    double = np.cross(corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0])
    spacing = np.sqrt(np.sqrt((double**2).sum(axis=1)).sum() / _POINTS)
    shape = Surface(corners.reshape(-1, 3), np.arange(3 * len(corners)).reshape(-1, 3))
    return _thinned(np.unique(spread(shape, float(spacing)), axis=0), _POINTS) if spacing else corners[0]


def _behind(places: Floats, rim: Floats) -> Floats:
    """Distance square to the pull from each place to the nearest rim at its height or above, m; 0 without one."""
    hair = 1e-6 * float(np.ptp(rim, axis=0).max())
    least = np.empty(len(places))
    for at in range(0, len(places), 256):
        some = places[at : at + 256]
        apart = ((some[:, None, :2] - rim[None, :, :2]) ** 2).sum(axis=-1)
        least[at : at + 256] = np.where(rim[:, 2] >= some[:, None, 2] - hair, apart, np.inf).min(axis=1)
    return np.asarray(np.sqrt(np.where(np.isfinite(least), least, 0.0)))


def _thinned(points: Floats, most: int) -> Floats:
    """Every so many-th of points, so that about ``most`` are left."""
    return points[:: max(1, -(-len(points) // most))]
