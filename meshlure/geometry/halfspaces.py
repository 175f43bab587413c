"""Convex solids by the planes of their faces: the planes of a surface, and the solid that lies below all planes."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import next_corner, paired

_DENT: Final = 1e-6
"""Share of the greatest dimension by which an edge may be folded inward, and of the volume by which the hull may be
greater: what rounding to four-byte coordinates does to a flat or round skin."""

_ALIKE: Final = 1e-9
"""Planes whose normals and heights differ by less, on a solid of size 1, are one."""


def planes_of(surface: Surface) -> Floats | None:
    """Return the planes of a convex surface's faces, (n, 4) array: outward unit normal, height along it, m.

    Parameters
    ----------
    surface : Surface
        Closed, outward.

    Returns
    -------
    (n, 4) array or None
        None where the surface is not convex, or so flat that it has no hull.
    """
    from scipy.spatial import ConvexHull, QhullError

    middle, size = _scale(surface.vertices)
    unit = surface.moved(shift=-middle).moved(scale=1 / size)
    if _dents(unit):
        return None
    try:
        hull = ConvexHull(unit.vertices)
    except QhullError:
        return None
    if abs(hull.volume - enclosed_volume(unit)) > _DENT * hull.volume:
        return None
    planes = hull.equations[np.unique(np.round(hull.equations / _ALIKE), axis=0, return_index=True)[1]]
    normals = planes[:, :3]
    return np.column_stack([normals, normals @ middle - planes[:, 3] * size])


def solid_below(planes: Floats) -> Surface | None:
    """Return the solid that lies below all planes, None where there is none.

    Parameters
    ----------
    planes : (n, 4) array
        Unit normal, and height along it, m; together they close off a space.

    Notes
    -----
    The deepest point is found by a linear programme; about it the planes are turned into points, whose convex hull is
    the dual of the solid.

    References
    ----------
    F. P. Preparata, D. E. Muller (1979), Finding the intersection of n half-spaces in time O(n log n), Theoretical
    Computer Science 8(1): the dual.
    """
    from scipy.optimize import linprog
    from scipy.spatial import ConvexHull, HalfspaceIntersection

    normals, heights = planes[:, :3], planes[:, 3]
    size = float(np.abs(heights).max())
    deepest = linprog(
        [0, 0, 0, -1], np.column_stack([normals, np.ones(len(planes))]), heights / size, bounds=[(None, None)] * 4
    )
    if deepest.x is None or deepest.x[3] <= _ALIKE:
        return None
    centre, depth = deepest.x[:3] * size, deepest.x[3] * size
    # About the deepest point, as deep as 1: the dual is then as round as it can be.
    bars = np.column_stack([normals, (normals @ centre - heights) / depth])
    corners = HalfspaceIntersection(bars, np.zeros(3)).intersections
    corners = corners[np.unique(np.round(corners / _ALIKE), axis=0, return_index=True)[1]]
    hull = ConvexHull(corners)
    faces = hull.simplices.astype(np.intp)
    a, b, c = corners[faces].transpose(1, 0, 2)
    inward = np.einsum("ij,ij->i", np.cross(b - a, c - a), hull.equations[:, :3]) < 0
    faces[inward] = faces[inward][:, ::-1]
    used, numbers = np.unique(faces, return_inverse=True)
    return Surface(corners[used] * depth + centre, numbers.reshape(-1, 3))


def _dents(unit: Surface) -> bool:
    """Whether any edge of a surface of size 1 is folded inward, or belongs to other than two faces."""
    pairs = paired(unit)
    if len(pairs.irregular.ends):
        return True
    normals = (
        unit.double_areas / np.maximum(np.linalg.norm(unit.double_areas, axis=1), np.finfo(np.float64).tiny)[:, None]
    )
    apex = unit.vertices[unit.faces.reshape(-1)[next_corner(next_corner(pairs.backward))]]
    rise = np.einsum("ij,ij->i", normals[pairs.forward_face], apex - unit.vertices[pairs.start])
    return bool((rise > _DENT).any())


def _scale(points: Floats) -> tuple[Floats, float]:
    low, high = points.min(axis=0), points.max(axis=0)
    return (low + high) / 2, float((high - low).max())
