"""Rims: open edges strung into loops, as a lid would run along them."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from meshlure.geometry.openings import FLAT_SHARE
from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.geometry.topology import Ints32


@dataclass(frozen=True, eq=False)
class Rim:
    """A loop of open edges.

    Attributes
    ----------
    vertices : (n,) array
        In the order in which a lid runs along them: against the faces that end there.
    points : (n, 3) array, m
    """

    vertices: Ints
    points: Floats

    @cached_property
    def length(self) -> float:
        """Length round, m."""
        return float(np.linalg.norm(np.roll(self.points, -1, axis=0) - self.points, axis=1).sum())

    @cached_property
    def centre(self) -> Floats:
        """Mean of the corners, (3,) array, m."""
        return np.asarray(self.points.mean(axis=0))

    @cached_property
    def vector_area(self) -> Floats:
        """Half the sum of p x q over the edges, (3,) array, m2: out of a lid, as long as its area where it is flat."""
        local = self.points - self.centre
        return np.asarray(np.cross(local, np.roll(local, -1, axis=0)).sum(axis=0) / 2)

    @cached_property
    def area(self) -> float:
        """Area, m2, of its shadow along its own axis."""
        return float(np.linalg.norm(self.vector_area))

    @cached_property
    def bend(self) -> float:
        """How far a corner lies off the loop's plane, m."""
        area = self.area
        if area == 0:
            return 0.0
        return float(np.abs((self.points - self.centre) @ (self.vector_area / area)).max())

    @cached_property
    def flat(self) -> bool:
        """Whether it lies in a plane, as far as exports round."""
        return self.area > 0 and self.bend <= FLAT_SHARE * self.length


def rims(surface: Surface, edges: Ints32) -> tuple[list[Rim], int]:
    """Loops of a surface's open edges, and how many edges are in none.

    Parameters
    ----------
    surface : Surface
    edges : (k, 2) array
        Its open edges, each in the direction in which its face runs along it.

    Notes
    -----
    Where a walk along the edges comes back to a vertex it has passed, a loop is cut off there, so that holes which
    touch at a corner are told apart.
    """
    following: dict[int, list[int]] = {}
    for end, start in edges.tolist():
        following.setdefault(start, []).append(end)
    loops: list[list[int]] = []
    strung = 0
    for first in list(following):
        while following.get(first):
            path, places = [first], {first: 0}
            while following.get(path[-1]):
                step = following[path[-1]].pop()
                if step in places:
                    loop = path[places[step] :]
                    loops.append(loop)
                    strung += len(loop)
                    for vertex in loop[1:]:
                        del places[vertex]
                    path = path[: places[step] + 1]
                    if len(path) == 1:
                        break
                else:
                    places[step] = len(path)
                    path.append(step)
    found = [Rim(np.array(loop, dtype=np.intp), surface.vertices[loop]) for loop in loops if len(loop) > 2]
    return sorted(found, key=lambda rim: -rim.length), len(edges) - strung
