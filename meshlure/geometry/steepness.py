"""Steepness: how squarely the faces that a body turns ahead meet a flow along an axis, slice by slice."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.surface import Floats, Surface

_AT_ONCE = 1 << 15
"""Faces worked on at a time."""


def facing_ahead(surface: Surface, towards: Floats, bounds: Floats) -> tuple[Floats, Floats]:
    """Area that faces turn ahead, m2, and the same weighted by steepness, ahead of each of some planes, (n,) arrays.

    Parameters
    ----------
    surface : Surface
        Outward.
    towards : (3,) array
        Unit vector along which the body moves.
    bounds : (n,) array, m
        Distances of planes behind the foremost point, ascending.

    Notes
    -----
    Both are sums over the parts of the faces ahead of the plane: the area projected on the plane, and that times
    sin^2 of the angle between face and flow. Exact for the facets.
    """
    height = surface.vertices @ towards
    facing = surface.double_areas @ towards / 2
    front = np.flatnonzero(facing > 0)
    size = np.sqrt(np.einsum("ij,ij->i", surface.double_areas[front], surface.double_areas[front])) / 2
    shown = facing[front]
    steep = shown * (shown / size) ** 2
    behind = height[surface.faces].max() - height
    # What lies wholly ahead of a plane, plus the parts of the faces that planes cross.
    plain, weighted = np.zeros(len(bounds) + 1), np.zeros(len(bounds) + 1)
    for at in range(0, len(front), _AT_ONCE):
        piece = slice(at, at + _AT_ONCE)
        corners = np.sort(behind[surface.faces[front[piece]]], axis=1)
        first, last = np.searchsorted(bounds, corners[:, 0], side="right"), np.searchsorted(bounds, corners[:, 2])
        whole = np.minimum(np.maximum(last, first), len(bounds))
        count = np.maximum(last - first, 0)
        face = np.repeat(np.arange(len(corners)), count)
        plane = np.arange(len(face)) - np.repeat(np.cumsum(count) - count, count) + first[face]
        share = _share_ahead(corners[face], bounds[plane])
        for sums, amount in ((plain, shown[piece]), (weighted, steep[piece])):
            part = share * amount[face]
            sums += np.bincount(whole, amount, len(sums))
            sums += np.bincount(plane, part, len(sums)) - np.bincount(plane + 1, part, len(sums))
    return np.cumsum(plain)[:-1], np.cumsum(weighted)[:-1]


def _share_ahead(corners: Floats, x: Floats) -> Floats:
    """Share of triangles that lies ahead of planes through them, (k,) array; corners ascending, (k, 3)."""
    a, b, c = corners.T
    with np.errstate(divide="ignore", invalid="ignore"):
        fore = (x - a) ** 2 / ((b - a) * (c - a))
        aft = 1 - (c - x) ** 2 / ((c - b) * (c - a))
    return np.where(x < b, fore, np.where(c > b, aft, 1.0))
