"""A coarse copy of a closed surface, for searches that need many cuts and few digits."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.moments import solid_moments
from meshlure.geometry.surface import Floats, Surface


def coarse(surface: Surface, triangles: int = 3000) -> Surface:
    """Return a copy of about the given number of triangles, its vertices clustered in the cells of a grid.

    Parameters
    ----------
    surface : Surface
        Closed; the copy is closed too, since merging vertices sends a closed chain of faces to a closed one.
    triangles : int
        About how many to keep; a surface of fewer is returned as it is.

    Notes
    -----
    Each cluster stands at the mean of its vertices. The grid's cells lie alike on both sides of the middle, so that a
    symmetric body has a symmetric copy. A curved body loses a percent or so of its volume; `matched` makes it good.

    References
    ----------
    J. Rossignac and P. Borrel (1993), Multi-resolution 3D approximations for rendering complex scenes.
    """
    if len(surface.faces) <= triangles:
        return surface
    low, high = surface.bounds
    # A surface crosses about area / cell^2 cells, and a triangulation has two triangles a vertex.
    cell = float(np.sqrt(2 * surface.area / triangles))
    reach = np.rint((high - low) / (2 * cell)).astype(np.int64)
    counts = 2 * reach + 3
    place = np.rint((surface.vertices - (low + high) / 2) / cell).astype(np.int64) + reach + 1
    key = (place[:, 0] * counts[1] + place[:, 1]) * counts[2] + place[:, 2]
    _, cluster, size = np.unique(key, return_inverse=True, return_counts=True)
    vertices = np.column_stack([np.bincount(cluster, surface.vertices[:, i]) for i in range(3)]) / size[:, None]
    faces = cluster[surface.faces]
    kept = (faces[:, 0] != faces[:, 1]) & (faces[:, 1] != faces[:, 2]) & (faces[:, 2] != faces[:, 0])
    return Surface(vertices, faces[kept])


def matched(copy: Surface, volume: float, centre: Floats) -> Surface:
    """Return a copy scaled and shifted so that it encloses a volume, m3, about a centroid, (3,) array, m."""
    own = solid_moments(copy)
    scale = (volume / own.amount) ** (1 / 3)
    return copy.moved(shift=centre - scale * own.centre, scale=scale)
