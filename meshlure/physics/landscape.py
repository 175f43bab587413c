"""The potential over all up-directions at once, on a small copy of the hull."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.clusters import coarse, matched
from meshlure.geometry.surface import Floats, Surface
from meshlure.physics.potential import Potential

TRIANGLES = 500
"""Triangles of the small copy."""

_ROUNDS = 12
_CLOSE = 4e-3
"""Share of the volume that a draught may leave missing; the energy is corrected for it, to a micrometre or less."""

_CHUNK = 16_000
"""Triangles times directions worked on at a time, so that the arrays stay in the processor's cache."""

_TINY = np.finfo(np.float64).tiny


@dataclass(frozen=True, eq=False)
class Landscape:
    """A floating body's potential, to be evaluated in many directions at once.

    Attributes
    ----------
    surface : Surface
        Small closed copy of the hull's skin, about the middle of its bounds.
    centre : (3,) array, m
        Centre of gravity, about the same point.
    share : float
        Of the copy's volume under water.
    point_volume : float, m3
    point_moment : (3,) array, m4
        Of points that are always under water, about the same point.
    """

    surface: Surface
    centre: Floats
    share: float
    point_volume: float
    point_moment: Floats

    @classmethod
    def of(cls, potential: Potential, triangles: int = TRIANGLES) -> Landscape:
        """Return the landscape of a potential on a small copy of its hull at the same submerged share.

        Parameters
        ----------
        potential : Potential
            Of a hull of a few thousand triangles.
        triangles : int
            About how many the copy is to have.
        """
        hull = potential.hull
        index = hull.index
        corners = index.triangles[:, :9].transpose(0, 2, 1).reshape(-1, 3, 3)
        # The index's last blocks are filled up with triangles of no size.
        corners = corners[(corners[:, 0] != corners[:, 1]).any(axis=1)].reshape(-1, 3)
        soup = Surface(corners, np.arange(len(corners)).reshape(-1, 3))
        small = matched(coarse(soup, triangles), index.volume, index.moment / index.volume - index.origin)
        share = (potential.volume - hull.point_volume) / (hull.volume - hull.point_volume)
        return cls(
            small,
            potential.centre - index.origin,
            share,
            hull.point_volume,
            hull.point_moment - hull.point_volume * index.origin,
        )

    def energies(self, directions: Floats) -> Floats:
        """Return the height of the centre of gravity over that of buoyancy for each up-direction, (n,) array, m.

        Parameters
        ----------
        directions : (n, 3) array
            Unit vectors.
        """
        chunk = max(1, _CHUNK // len(self.surface.faces))
        parts = [self._energies(directions[k : k + chunk]) for k in range(0, len(directions), chunk)]
        return np.concatenate(parts) if parts else np.empty(0)

    def _energies(self, directions: Floats) -> Floats:
        heights = self.surface.vertices @ directions.T
        faces = self.surface.faces
        slices = _Slices.of(
            heights[faces[:, 0]],
            heights[faces[:, 1]],
            heights[faces[:, 2]],
            self.surface.double_areas @ directions.T / 2,
        )
        low, high = heights.min(axis=0), heights.max(axis=0)
        solid = float(np.einsum("ij,ij->", self.surface.corners[:, 0], self.surface.double_areas) / 6) * self.share
        level = low + self.share * (high - low)
        for _ in range(_ROUNDS):
            area, volume, moment = slices.below(level)
            missing = solid - volume
            if (np.abs(missing) <= _CLOSE * solid).all():
                break
            low, high = np.where(missing > 0, level, low), np.where(missing > 0, high, level)
            wished = level + missing / np.maximum(area, _TINY)
            level = np.where((wished > low) & (wished < high), wished, (low + high) / 2)
        else:
            area, volume, moment = slices.below(level)
            missing = solid - volume
        # What is missing lies in a thin layer at the water's surface.
        first = moment + volume * level + missing * level
        points = directions @ self.point_moment
        return np.asarray(directions @ self.centre - (first + points) / (solid + self.point_volume))


@dataclass(frozen=True, eq=False)
class _Slices:
    """Triangles by the heights of their corners over many directions, (t, d) arrays.

    lowest, middle, highest : heights of the corners; area : projected on the water, signed by the way the face looks.
    below_tip, above_tip : products of the heights' differences, by which a tip's share follows from its height.
    """

    lowest: Floats
    middle: Floats
    highest: Floats
    area: Floats
    below_tip: Floats
    above_tip: Floats

    @classmethod
    def of(cls, a: Floats, b: Floats, c: Floats, area: Floats) -> _Slices:
        lowest, highest = np.minimum(np.minimum(a, b), c), np.maximum(np.maximum(a, b), c)
        middle = np.maximum(np.minimum(a, b), np.minimum(np.maximum(a, b), c))
        span = highest - lowest
        return cls(
            lowest,
            middle,
            highest,
            area,
            np.maximum((middle - lowest) * span, _TINY),
            np.maximum((highest - middle) * span, _TINY),
        )

    def below(self, level: Floats) -> tuple[Floats, Floats, Floats]:
        """Return waterplane area, volume below each level and its first moment about the level, (d,) arrays.

        Notes
        -----
        By Gauss's theorem with fields along the vertical that vanish on the water, so that it needs no cap: the
        wet part of each face counts with 1, u and u^2/2, u the height over the water. A face with one corner under
        water is a tip; with two, the whole less a tip.
        """
        lowest, highest = self.lowest - level, self.highest - level
        middle = self.middle - level
        mostly = middle < 0
        tip = np.where(mostly, np.maximum(highest, 0.0), np.minimum(lowest, 0.0))
        share = tip * tip / np.where(mostly, -self.above_tip, self.below_tip)
        weight = self.area * share
        whole = np.where(mostly, self.area, 0.0)
        total = lowest + middle + highest
        squares = lowest * lowest + middle * middle + highest * highest + total * total
        area = -(whole + weight).sum(axis=0)
        volume = (whole * total + weight * tip).sum(axis=0) / 3
        moment = (whole * squares / 12 + weight * tip * tip / 6).sum(axis=0) / 2
        return area, volume, moment
