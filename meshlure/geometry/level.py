"""The level at one depth under a closed skin, by a lattice of depths whose crossings are brought to the exact depth."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.field import DIAGONAL, filled
from meshlure.geometry.lattice import Skin, skin
from meshlure.geometry.proximity import Proximity
from meshlure.geometry.surface import Bools, Floats, Surface

CLOSE: Final = 1e-5
"""Share of the depth to which every vertex is brought, or left deeper."""

_ROUNDS: Final = 6
"""Times that a vertex is moved along its way to the nearest place; one is mostly enough."""

_HALVINGS: Final = 24
"""Times that the lattice edge of a vertex that would not come to its depth is halved."""


@dataclass(frozen=True, eq=False)
class Level:
    """Where a closed skin's inside is just so deep, to any fineness.

    Attributes
    ----------
    surface : Surface
        Closed, outward, cavities inward.
    depth : float, m
        Positive.
    proximity : Proximity
        Of the surface.
    """

    surface: Surface
    depth: float
    proximity: Proximity

    @classmethod
    def of(cls, surface: Surface, depth: float) -> Level:
        """Return a level, not yet drawn."""
        return cls(surface, depth, Proximity.of(surface, depth))

    def drawn(self, pitch: float) -> Surface | None:
        """Return the level as a closed, outward surface; None where nothing is so deep.

        Parameters
        ----------
        pitch : float, m
            Step of the lattice, positive and at most the depth, so that no lattice edge goes through the skin and on.

        Raises
        ------
        ValueError
            Where the pitch is neither, or needs more memory than there may be.

        Notes
        -----
        Distances are known to half a diagonal from a transform between voxels of half a pitch, and near the level from
        the mesh; the lattice is cut by `lattice.skin`. Then each vertex moves along its way to the nearest place of the
        mesh until it is as deep as wanted, and what does not come there is sought along its lattice edge. No vertex is
        less deep than the depth less `CLOSE` of it. Faces are chords of the level: where it bulges their middles lie
        deeper, where it is hollow less deep, by up to a tenth of pitch squared over its radius. A part that no node
        of the lattice lies in is missed.
        """
        if not 0 < pitch <= self.depth:
            raise ValueError(f"a level {self.depth} m deep takes a pitch of that or less, not {pitch} m")
        step = pitch / 2
        origin, inside = filled(self.surface, step)
        # The lattice ends on the same kind of node as it begins.
        inside = np.pad(inside, [(0, 1 - size % 2) for size in inside.shape])
        rough = self._rough(origin, step, inside.shape)
        values = np.where(inside, rough, -rough) - self.depth
        slack = step * DIAGONAL / 2 + np.hypot(self.depth, self.proximity.cover) - self.depth
        near = inside & _nodes(inside.shape) & (np.abs(values) <= slack)
        values[near] = self.proximity.near(origin + step * np.argwhere(near)) - self.depth
        cut = skin(values)
        return Surface(self._settled(cut, origin, step), cut.faces) if len(cut.faces) else None

    def _rough(self, origin: Floats, step: float, shape: tuple[int, ...]) -> Floats:
        """Distances from the middles of voxels to the next that holds a spot of the skin."""
        from scipy.ndimage import distance_transform_edt

        clear = np.ones(shape, dtype=np.bool_)
        clear[tuple(np.round((self.proximity.tree.data - origin) / step).astype(np.intp).T)] = False
        return np.asarray(distance_transform_edt(clear, sampling=step))

    def _settled(self, cut: Skin, origin: Floats, step: float) -> Floats:
        """Vertices of a cut lattice at their depth, (n, 3) array, m."""
        points = origin + step * cut.places
        start = points.copy()
        left = np.arange(len(points))
        for _ in range(_ROUNDS):
            found = self.proximity.nearest(points[left])
            off = np.abs(found.distance - self.depth) > CLOSE * self.depth
            left, place, apart = left[off], found.place[off], found.distance[off, None]
            if not len(left):
                return points
            points[left] = place + (points[left] - place) * (self.depth / np.where(apart > 0, apart, np.inf))
            strayed = np.linalg.norm(points[left] - start[left], axis=1) > 2 * step
            points[left[strayed]] = start[left[strayed]]
        points[left] = self._sought(origin + step * cut.inner[left], origin + step * cut.outer[left])
        return points

    def _sought(self, inner: Floats, outer: Floats) -> Floats:
        """Places between nodes that lie deeper than the level and others, by halving; never less deep."""
        for _ in range(_HALVINGS):
            middle = (inner + outer) / 2
            deep = (self.proximity.nearest(middle).distance >= self.depth)[:, None]
            inner, outer = np.where(deep, middle, inner), np.where(deep, outer, middle)
        return inner


def _nodes(shape: tuple[int, ...]) -> Bools:
    """Which places of a grid belong to the lattice: all indices even, or all odd."""
    i, j, k = np.ogrid[tuple(slice(size) for size in shape)]
    return np.asarray(((i + j) % 2 == 0) & ((j + k) % 2 == 0))
