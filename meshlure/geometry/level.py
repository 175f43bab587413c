"""The level at one depth under a closed skin, by a lattice of depths whose crossings are brought to the exact depth."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.crossing import self_crossings
from meshlure.geometry.field import DIAGONAL, filled
from meshlure.geometry.lattice import Skin, skin
from meshlure.geometry.proximity import Proximity
from meshlure.geometry.surface import Bools, Floats, Ints, Surface

CLOSE: Final = 1e-5
"""Share of the depth to which every vertex is brought, or left deeper."""

_ROUNDS: Final = 6
"""Times that a vertex is moved along its way to the nearest place; one is mostly enough."""

_SUPPORT: Final = 1.5
"""Pitches from what lies well within the level to the thinnest that is drawn."""

_NEEDLE: Final = 0.02
"""Share of a lattice edge within which of a node a face is too thin to tell which way it looks."""

_UNTANGLINGS: Final = 3
"""Times that faces which cross are taken back to the lattice."""

_MOST_CROSSED: Final = 1_000_000
"""Faces beyond which nobody looks whether they cross."""

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
        deeper, where it is hollow less deep, by up to a tenth of pitch squared over its radius.

        What is thinner than about a pitch the lattice would make lace of. It is left out: nodes farther than one and a
        half pitches from every node that lies half a pitch within the level, so that edges of forty degrees or more
        stay. There alone the skin lies deeper than the level. Faces do not cross, but for a pair or two that may be
        left at the sharp end of something about a pitch thin.
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
        thin = self._thin(values, step)
        values[thin] = -step
        cut = skin(values)
        if not len(cut.faces):
            return None
        return self._settled(cut, origin, step, thin[tuple(cut.outer.T)])

    @staticmethod
    def _thin(values: Floats, step: float) -> Bools:
        """Nodes within the level, of which none about them lies well within."""
        from scipy.ndimage import distance_transform_edt

        core = (values >= step) & _nodes(values.shape)
        if not core.any():
            return np.asarray(values > 0)
        return np.asarray((values > 0) & (distance_transform_edt(~core) > 2 * _SUPPORT))

    def _rough(self, origin: Floats, step: float, shape: tuple[int, ...]) -> Floats:
        """Distances from the middles of voxels to the next that holds a spot of the skin."""
        from scipy.ndimage import distance_transform_edt

        clear = np.ones(shape, dtype=np.bool_)
        clear[tuple(np.round((self.proximity.tree.data - origin) / step).astype(np.intp).T)] = False
        return np.asarray(distance_transform_edt(clear, sampling=step))

    def _settled(self, cut: Skin, origin: Floats, step: float, cut_off: Bools) -> Surface:
        """Bring the vertices of a cut lattice to their depth, or deeper, where something thin is cut off."""
        points, left = self._moved(origin + step * cut.places, step, cut_off)
        inner, outer = origin + step * cut.inner, origin + step * cut.outer
        points[left] = self._sought(inner[left], outer[left])
        # Where ways lead past each other faces turn over or cross. On their lattice edges vertices cannot.
        flat = inner + (outer - inner) * np.clip(cut.share, _NEEDLE, 1 - _NEEDLE)[:, None]
        over = np.einsum("ij,ij->i", _normals(flat, cut.faces), _normals(points, cut.faces)) < 0
        bad = cut.faces[over]
        for _ in range(_UNTANGLINGS):
            back = np.unique(bad)
            back = back[~cut_off[back]]
            points[back] = self._sought(inner[back], outer[back])
            crossed = self_crossings(Surface(points.copy(), cut.faces), 0.0, most=_MOST_CROSSED)
            if crossed is None or not len(crossed):
                break
            bad = cut.faces[crossed]
        return Surface(points, cut.faces)

    def _moved(self, points: Floats, step: float, cut_off: Bools) -> tuple[Floats, Ints]:
        """Points on their way to the nearest places as deep as wanted, and which of them would not come there."""
        start, left = points.copy(), np.arange(len(points))
        for _ in range(_ROUNDS):
            found = self.proximity.nearest(points[left])
            deeper = found.distance - self.depth
            off = (np.abs(deeper) > CLOSE * self.depth) & ~(cut_off[left] & (deeper > 0))
            left, place, apart = left[off], found.place[off], found.distance[off, None]
            if not len(left):
                break
            points[left] = place + (points[left] - place) * (self.depth / np.where(apart > 0, apart, np.inf))
            strayed = np.linalg.norm(points[left] - start[left], axis=1) > 2 * step
            points[left[strayed]] = start[left[strayed]]
        return points, left

    def _sought(self, inner: Floats, outer: Floats) -> Floats:
        """Places between nodes that lie deeper than the level and others, by halving; never less deep."""
        for _ in range(_HALVINGS):
            middle = (inner + outer) / 2
            deep = (self.proximity.nearest(middle).distance >= self.depth)[:, None]
            inner, outer = np.where(deep, middle, inner), np.where(deep, outer, middle)
        return inner


def _normals(points: Floats, faces: Ints) -> Floats:
    a, b, c = points[faces].transpose(1, 0, 2)
    return np.asarray(np.cross(b - a, c - a))


def _nodes(shape: tuple[int, ...]) -> Bools:
    """Which places of a grid belong to the lattice: all indices even, or all odd."""
    i, j, k = np.ogrid[tuple(slice(size) for size in shape)]
    return np.asarray(((i + j) % 2 == 0) & ((j + k) % 2 == 0))
