"""A coarse copy of a closed surface, for searches that need many cuts and few digits."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.surface import Surface


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
    Each cluster stands at the mean of its vertices. A curved body loses a percent or so of its volume.

    References
    ----------
    J. Rossignac and P. Borrel (1993), Multi-resolution 3D approximations for rendering complex scenes.
    """
    if len(surface.faces) <= triangles:
        return surface
    low, high = surface.bounds
    # A surface crosses about area / cell^2 cells, and a triangulation has two triangles a vertex.
    cell = float(np.sqrt(2 * surface.area / triangles))
    counts = np.maximum(np.ceil((high - low) / cell).astype(np.int64), 1) + 1
    place = ((surface.vertices - low) / cell).astype(np.int64)
    key = (place[:, 0] * counts[1] + place[:, 1]) * counts[2] + place[:, 2]
    _, cluster, size = np.unique(key, return_inverse=True, return_counts=True)
    vertices = np.column_stack([np.bincount(cluster, surface.vertices[:, i]) for i in range(3)]) / size[:, None]
    faces = cluster[surface.faces]
    kept = (faces[:, 0] != faces[:, 1]) & (faces[:, 1] != faces[:, 2]) & (faces[:, 2] != faces[:, 0])
    return Surface(vertices, faces[kept])
