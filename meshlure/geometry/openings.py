"""Openings: the rims along which a surface is not closed, their place, length and shape."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import combinations

import numpy as np

from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import Ints32

FLAT_SHARE = 1e-3
"""A rim is flat when it keeps within this share of its length of one plane; exports round their corners."""

CRACK_SHARE = 1e-4
"""A rim is a crack when it surrounds less than this share of its length squared; a round hole surrounds 0.08."""


_COMPARED = 20


@dataclass(frozen=True, eq=False)
class Opening:
    """A connected rim of open edges.

    Attributes
    ----------
    edges : int
    length : float
        m.
    centre : (3,) array
        Centroid of the rim, m.
    area : float
        Area of the rim's shadow along its own axis, m2: that of the hole, where it is flat.
    axis : (3,) array
        Unit normal of the hole, zero where it has none.
    bounds : (2, 3) array
        m.
    flat : bool
    """

    edges: int
    length: float
    centre: Floats
    area: float
    axis: Floats
    bounds: Floats
    flat: bool

    @property
    def crack(self) -> bool:
        """Whether the two sides of the rim lie against each other."""
        return self.area < CRACK_SHARE * self.length**2

    @property
    def plane(self) -> tuple[int, float] | None:
        """Coordinate axis (0, 1, 2) that a flat hole is square to, and its place on it, m; None for any other hole."""
        if not self.flat or self.crack:
            return None
        axis = int(np.abs(self.axis).argmax())
        if abs(self.axis[axis]) < 1 - FLAT_SHARE**2:
            return None
        return axis, float(self.centre[axis])


def openings(surface: Surface, edges: Ints32) -> tuple[Opening, ...]:
    """Rims of the openings of a surface, the longest first.

    Parameters
    ----------
    surface : Surface
    edges : (k, 2) array
        Its open edges, each in the direction in which its face runs along it.

    Notes
    -----
    Edges that share a vertex belong to one rim, so that two holes which touch at a corner count as one opening. The
    axis is the rim's vector area, half the sum of p x q over its edges.
    """
    from scipy.sparse import csr_array
    from scipy.sparse.csgraph import connected_components

    if not len(edges):
        return ()
    vertices, local = np.unique(edges, return_inverse=True)
    local = local.reshape(-1, 2)
    links = csr_array((np.ones(len(local), dtype=np.int8), local.T), shape=(len(vertices), len(vertices)))
    count, labels = connected_components(links, directed=False)
    label = labels[local[:, 0]]
    order = np.argsort(label, kind="stable")
    rims = np.split(edges[order], np.cumsum(np.bincount(label, minlength=count))[:-1])
    found = [_opening(surface.vertices[rim[:, 0]], surface.vertices[rim[:, 1]]) for rim in rims]
    return tuple(sorted(found, key=lambda opening: -opening.length))


def seam(found: tuple[Opening, ...]) -> float | None:
    """Distance, m, between two rims that lie on each other, None where there are none among the longest ones."""
    for one, other in combinations(found[:_COMPARED], 2):
        gap = float(np.abs(one.bounds - other.bounds).max())
        if gap <= FLAT_SHARE * one.length and abs(one.length - other.length) <= FLAT_SHARE * one.length:
            return gap
    return None


def _opening(start: Floats, end: Floats) -> Opening:
    lengths = np.linalg.norm(end - start, axis=1)
    length = float(lengths.sum())
    centre = ((start + end) / 2 * lengths[:, None]).sum(axis=0) / length if length else start.mean(axis=0)
    vector_area = np.cross(start - centre, end - centre).sum(axis=0) / 2
    area = float(np.linalg.norm(vector_area))
    axis = vector_area / area if area else np.zeros(3)
    points = np.concatenate([start, end])
    return Opening(
        edges=len(start),
        length=length,
        centre=centre,
        area=area,
        axis=axis,
        bounds=np.array([points.min(axis=0), points.max(axis=0)]),
        flat=bool(area > 0 and np.abs((points - centre) @ axis).max() <= FLAT_SHARE * length),
    )
