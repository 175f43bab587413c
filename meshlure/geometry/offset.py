"""A surface moved face by face; outward, so that a part fits its pocket with a gap."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.crossing import self_crossings
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats, Surface

_STEEPEST = 0.35
"""Cosine between a corner's step and one of its faces' normals below which a mitred corner would stick out too far."""

_ALIKE = 0.03
"""Share of the normals' common weight below which they count as one direction: they differ by some ten degrees."""


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
    Edges stay mitred where `mitred` can; where it cannot, or the skin would cross itself, the Minkowski sum with a ball
    is taken on a copy simplified to a tenth of the distance, which is slower and leaves a gap up to a fifth wider.
    """
    if distance == 0:
        return surface
    moved = mitred(surface, distance)
    if moved is not None:
        crossed = self_crossings(moved, 0.0)
        if crossed is not None and not len(crossed):
            return moved
    slack = distance / 10
    return Solid.of(surface).simplified(slack).grown(distance + slack, 8).surface()


def mitred(surface: Surface, distance: float) -> Surface | None:
    """Return a closed surface with every face moved by at least a distance, edges mitred; None where it cannot be.

    Parameters
    ----------
    surface : Surface
        Closed, outward.
    distance : float, m
        Outward; inward where negative.

    Returns
    -------
    Surface or None
        Of the same faces, not asked whether they turn over or cross. None where a corner would move more than about
        three times the distance.

    Notes
    -----
    Each vertex moves along the angle-weighted mean of its faces' normals, so far that it clears every one of them by
    the distance: faces move in parallel, a box grows to a box.

    References
    ----------
    G. Thuermer and C. A. Wuethrich (1998), Computing vertex normals from polygonal facets, J. Graphics Tools 3(1).
    """
    normals = surface.double_areas
    length = np.linalg.norm(normals, axis=1)
    unit = normals / np.where(length > 0, length, 1.0)[:, None]
    angles = _corner_angles(surface, length)
    count = len(surface.vertices)
    pull, spread = np.zeros((count, 3)), np.zeros((count, 3, 3))
    for corner in range(3):
        at = surface.faces[:, corner]
        for i in range(3):
            pull[:, i] += np.bincount(at, angles[corner] * unit[:, i], count)
            for j in range(i, 3):
                spread[:, i, j] += np.bincount(at, angles[corner] * unit[:, i] * unit[:, j], count)
                spread[:, j, i] = spread[:, i, j]
    # Each vertex goes where its faces' planes, all moved by one, meet; a direction in which they hardly differ is left.
    values, vectors = np.linalg.eigh(spread)
    told = values > _ALIKE * values[:, 2:]
    along = np.einsum("nij,ni->nj", vectors, pull) / np.where(told, values, 1.0)
    step = np.einsum("nij,nj->ni", vectors, np.where(told, along, 0.0))
    clears = _least_cosine(surface, unit, length, step)
    if (clears <= 0).any() or (np.linalg.norm(step, axis=1) > clears / _STEEPEST).any():
        return None
    return Surface(surface.vertices + step * (distance / clears)[:, None], surface.faces)


def _corner_angles(surface: Surface, length: Floats) -> list[Floats]:
    """Angles of every face at each of its three corners, rad."""
    corners, angles = surface.corners, []
    for corner in range(3):
        ahead = corners[:, (corner + 1) % 3] - corners[:, corner]
        behind = corners[:, (corner + 2) % 3] - corners[:, corner]
        angles.append(np.arctan2(length, np.einsum("ij,ij->i", ahead, behind)))
    return angles


def _least_cosine(surface: Surface, unit: Floats, length: Floats, step: Floats) -> Floats:
    """Least advance of each vertex's step square to its faces; faces without area have none."""
    least = np.full(len(surface.vertices), np.inf)
    for corner in range(3):
        at = surface.faces[:, corner]
        np.minimum.at(least, at, np.where(length > 0, np.einsum("ij,ij->i", unit, step[at]), np.inf))
    return np.where(np.isfinite(least), least, 1.0)
