"""The outline that a closed surface shows along a direction: exact silhouette area, centroid, perimeter and rings."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.solids import Filled, filled
from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.geometry.topology import EdgePairs


@dataclass(frozen=True, eq=False)
class Outline:
    """What a solid covers seen along one direction.

    Attributes
    ----------
    axis : (3,) array
        Unit vector from the solid towards the eye.
    right, up : (3,) arrays
        Unit vectors of the drawing plane; right x up = axis.
    region : Filled
        In m, in (right, up) coordinates of the mesh.
    depth : float, m
        Height of the middle between the solid's two ends along the axis, so that its centre can be placed in space.
    """

    axis: Floats
    right: Floats
    up: Floats
    region: Filled
    depth: float

    @property
    def area(self) -> float:
        """Silhouette area, m2."""
        return self.region.area

    @property
    def perimeter(self) -> float:
        """Length of the silhouette's boundaries, m."""
        return self.region.perimeter

    @property
    def centre(self) -> Floats:
        """Centroid of the silhouette in mesh coordinates, (3,) array, m."""
        flat = self.region.centre
        return np.asarray(flat[0] * self.right + flat[1] * self.up + self.depth * self.axis)


def drawing_axes(axis: Floats, up: Floats | None = None) -> tuple[Floats, Floats]:
    """Return unit vectors right and up of the plane seen along ``axis``, with right x up = axis.

    Parameters
    ----------
    axis : (3,) array
        Unit vector towards the eye.
    up : (3,) array, optional
        Direction to draw upright as far as it can be; the coordinate axis least along the view where left out.
    """
    wish = np.eye(3)[np.abs(axis).argmin()] if up is None else np.asarray(up, dtype=np.float64)
    upright = wish - (wish @ axis) * axis
    length = float(np.linalg.norm(upright))
    if length < 1e-9:
        return drawing_axes(axis)
    upright = upright / length
    return np.cross(upright, axis), upright


def outline(surface: Surface, pairs: EdgePairs, axis: Floats, up: Floats | None = None) -> Outline:
    """Return the silhouette of a closed surface along a direction.

    Parameters
    ----------
    surface : Surface
        Closed and consistently wound.
    pairs : EdgePairs
        Its edges, from `topology.paired`.
    axis : (3,) array
        Unit vector from the solid towards the eye.
    up : (3,) array, optional
        See `drawing_axes`.

    Notes
    -----
    Faces turned to the eye all project with the same turn, so round any point of the drawing plane the
    edges between them and the faces turned away wind once for every layer of faces there. Filling those
    few loops by the non-zero rule is therefore the union of all projected faces, exactly, for a
    few thousand edges instead of a million faces.
    """
    n = np.asarray(axis, dtype=np.float64)
    right, upright = drawing_axes(n, up)
    frame = np.column_stack([right, upright])
    loops = [surface.vertices[ring] @ frame for ring in rims(surface, pairs, n)]
    heights = surface.vertices @ n
    return Outline(n, right, upright, filled(loops), float(heights.min() + heights.max()) / 2)


def rims(surface: Surface, pairs: EdgePairs, axis: Floats) -> list[Ints]:
    """Return the closed rings of vertices between faces turned to the eye and all others.

    Parameters
    ----------
    surface : Surface
        Closed and consistently wound.
    pairs : EdgePairs
        Its edges.
    axis : (3,) array
        Vector towards the eye; a face seen edge-on is not turned to it.
    """
    front = surface.double_areas @ axis > 0
    ahead, behind = front.take(pairs.forward_face), front.take(pairs.backward_face)
    rim = np.flatnonzero(ahead != behind)
    forward = ahead[rim]
    start = np.where(forward, pairs.start[rim], pairs.end[rim]).astype(np.intp)
    end = np.where(forward, pairs.end[rim], pairs.start[rim]).astype(np.intp)
    return _rings(start, end)


def _rings(start: Ints, end: Ints) -> list[Ints]:
    """Chain directed edges, as many into every vertex as out of it, into closed rings of vertices."""
    order = np.argsort(start, kind="stable")
    start, end = start[order], end[order]
    # Row of the edge that leaves each edge's end: the r-th edge into a vertex goes on with the r-th out of it.
    into = np.argsort(end, kind="stable")
    following = np.empty_like(order)
    following[into] = np.arange(len(order))
    chain = following.tolist()
    ends = end.tolist()
    seen = bytearray(len(chain))
    rings: list[Ints] = []
    for first in range(len(chain)):
        if seen[first]:
            continue
        ring = []
        edge = first
        while not seen[edge]:
            seen[edge] = 1
            ring.append(ends[edge])
            edge = chain[edge]
        rings.append(np.array(ring, dtype=np.intp))
    return rings
