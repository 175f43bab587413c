"""A surface moved outward: every face by at least a distance, so that a part fits its pocket with a gap."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.crossing import self_crossings
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats, Surface

_STEEPEST = 0.35
"""Cosine between a corner's direction and one of its faces below which a mitred corner would stick out too far."""


def grown(surface: Surface, distance: float) -> Surface:
    """Return a closed surface moved outward.

    Parameters
    ----------
    surface : Surface
        Closed, outward.
    distance : float, m
        0 or more.

    Notes
    -----
    Each vertex moves along the angle-weighted mean of its faces' normals, so far that it clears every one of them by
    the distance: faces move in parallel, edges stay mitred, a box grows to a box. Where that would make the skin cross
    itself or a corner stick out more than about three times the distance, the Minkowski sum with a ball is taken on a
    copy simplified to a tenth of the distance, which is slower and leaves a gap up to a fifth wider.

    References
    ----------
    G. Thuermer and C. A. Wuethrich (1998), Computing vertex normals from polygonal facets, J. Graphics Tools 3(1).
    """
    if distance == 0:
        return surface
    mitred = _mitred(surface, distance)
    if mitred is not None:
        crossed = self_crossings(mitred, 0.0)
        if crossed is not None and not len(crossed):
            return mitred
    slack = distance / 10
    return Solid.of(surface).simplified(slack).grown(distance + slack, 8).surface()


def _mitred(surface: Surface, distance: float) -> Surface | None:
    normals = surface.double_areas
    length = np.linalg.norm(normals, axis=1)
    unit = normals / np.where(length > 0, length, 1.0)[:, None]
    corners = surface.corners
    mean = np.zeros_like(surface.vertices)
    for corner in range(3):
        ahead = corners[:, (corner + 1) % 3] - corners[:, corner]
        behind = corners[:, (corner + 2) % 3] - corners[:, corner]
        angle = np.arctan2(length, np.einsum("ij,ij->i", ahead, behind))
        for axis in range(3):
            mean[:, axis] += np.bincount(surface.faces[:, corner], angle * unit[:, axis], len(surface.vertices))
    size = np.linalg.norm(mean, axis=1)
    direction = mean / np.where(size > 0, size, 1.0)[:, None]
    clears = _least_cosine(surface, unit, length, direction)
    if (clears < _STEEPEST).any():
        return None
    return Surface(surface.vertices + direction * (distance / clears)[:, None], surface.faces)


def _least_cosine(surface: Surface, unit: Floats, length: Floats, direction: Floats) -> Floats:
    """Least cosine between each vertex's direction and its faces' normals; faces without area have none."""
    least = np.ones(len(surface.vertices))
    for corner in range(3):
        at = surface.faces[:, corner]
        cosine = np.where(length > 0, np.einsum("ij,ij->i", unit, direction[at]), 1.0)
        np.minimum.at(least, at, cosine)
    return least
