"""Vicinity: what of a solid lies in another or within a distance of it, summed on a grid."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.field import occupied
from meshlure.geometry.moments import NOTHING, Moments
from meshlure.geometry.proximity import Proximity
from meshlure.geometry.samples import spread
from meshlure.geometry.surface import Bools, Floats, Ints, Surface

_STEPS: Final = 4.0
"""Steps of the grid that a distance is divided into, where the memory allows."""

_MOST: Final = 6e6
"""Voxels beyond which the grid is made coarser."""

_BORDER: Final = 3
"""Voxels along each side beyond the bounds."""

_SPOTS: Final = 300_000
"""Spots on a skin from which distances are taken."""


@dataclass(frozen=True, eq=False)
class Vicinity:
    """What of a solid lies in another, or nearer to it than a distance.

    Attributes
    ----------
    volume : Moments, m3
    face : float, m2
        Of its skin, what lies inside the solid: at the distance from the other.
    covered : float, m2
        Of the solid's skin, what bounds it.
    """

    volume: Moments
    face: float
    covered: float


def vicinity(parts: Sequence[Surface], other: Surface, reach: float) -> Vicinity:
    """Return what of a solid lies in another or within a distance of it.

    Parameters
    ----------
    parts : sequence of Surface
        The solid: closed and outward, cavities inward, one for each part that hangs together.
    other : Surface
        Closed and outward, cavities inward.
    reach : float, m
        Positive.

    Notes
    -----
    Every voxel near a skin counts by the share that a plane at its middle's distance would cut off, and one at both
    skins by what these shares have in common at least, so that bodies that touch share nothing. The error falls with
    the square of the pitch, a quarter of the distance or what six million voxels allow: some thousandths of the volume,
    up to a hundredth round what is thin.
    """
    bounds = np.array([surface.bounds for surface in (*parts, other)])
    low, high = bounds[:, 0].min(axis=0), bounds[:, 1].max(axis=0)
    pitch = max(reach / _STEPS, float((np.prod(high - low) / _MOST) ** (1 / 3)))
    shape = np.ceil((high - low) / pitch).astype(np.intp) + 2 * _BORDER
    origin = (low + high) / 2 - (shape - 1) * (pitch / 2)
    inner, within = occupied(parts, origin, pitch, shape), occupied([other], origin, pitch, shape)
    far = _far(within, np.rint((spread(other, pitch) - origin) / pitch).astype(np.intp), pitch)
    edge = _edge(inner)
    near = (inner | edge) & (far < reach + 2 * pitch)
    if not near.any():
        return Vicinity(NOTHING, 0.0, 0.0)
    points, far = origin + pitch * np.argwhere(near), far[near]
    solid = np.full(len(points), pitch)
    asked = edge[near]
    solid[asked] = np.where(inner[near][asked], 1, -1) * _distances(parts, points[asked], pitch)
    apart = reach - far
    asked = np.abs(apart) < 2 * pitch
    apart[asked] = reach - np.where(within[near][asked], -1, 1) * _distances([other], points[asked], pitch / 2)
    shares = [np.clip(0.5 + depth / pitch, 0.0, 1.0) for depth in (solid, apart)]
    weights = np.maximum(shares[0] + shares[1] - 1.0, 0.0) * pitch**3
    # The share of a volume changes with the distance by the area at that distance.
    face, covered = (
        float((share * (np.abs(depth) < pitch / 2)).sum() * pitch**2)
        for share, depth in ((shares[0], apart), (shares[1], solid))
    )
    return Vicinity(_moments(points, weights, pitch), face, covered)


def _far(within: Bools, skin: Ints, pitch: float) -> Floats:
    """Distance of every voxel's middle from a solid to about a pitch, m; skin are the voxels that its skin runs in."""
    from scipy.ndimage import distance_transform_edt

    held = within.copy()
    held[tuple(skin.T)] = True  # what is thinner than a voxel may hold no middle
    return np.asarray(distance_transform_edt(~held, sampling=pitch))


def _edge(inner: Bools) -> Bools:
    """Voxels within one step of a skin."""
    from scipy.ndimage import binary_dilation, binary_erosion

    block = np.ones((3, 3, 3), dtype=np.bool_)
    return np.asarray(binary_dilation(inner, block) & ~binary_erosion(inner, block))


def _distances(parts: Sequence[Surface], points: Floats, spacing: float) -> Floats:
    """Distances of points from the nearest of some skins, m, taken from spots on them so far apart, m, or farther."""
    found = np.full(len(points), np.inf)
    for part in parts:
        spots = Proximity.spaced(part, max(spacing, float(np.sqrt(part.area / _SPOTS))))
        found = np.minimum(found, spots.near(points))
    return found


def _moments(points: Floats, weights: Floats, pitch: float) -> Moments:
    amount = float(weights.sum())
    if amount == 0:
        return NOTHING
    first = weights @ points
    off = points - first / amount
    second = (off * weights[:, None]).T @ off + np.eye(3) * (amount * pitch**2 / 12)
    return Moments(amount, first, second)
