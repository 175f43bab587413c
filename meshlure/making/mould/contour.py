"""The contour that the parting plane cuts out of a solid: its outermost places, its normals, its chords."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats

_LEVEL: Final = 1e-4
"""Share of the contour's extent within which places lie equally far out."""


@dataclass(frozen=True, eq=False)
class Contour:
    """Closed rings in the parting plane.

    Attributes
    ----------
    rings : tuple of (n, 2) arrays, m
        Outer ones anticlockwise, holes clockwise.
    """

    rings: tuple[Floats, ...]

    @classmethod
    def of(cls, solid: Solid) -> Contour:
        """Return the contour of a solid at z = 0."""
        return cls(solid.level(0.0).rings)

    @property
    def points(self) -> Floats:
        """Corners of all rings, (n, 2) array, m."""
        return np.concatenate(self.rings)

    @property
    def extent(self) -> float:
        """Greatest side of the bounds, m."""
        return float(np.ptp(self.points, axis=0).max())

    def outermost(self, direction: Floats) -> Floats:
        """Return the place that lies farthest in a direction, (2,) array, m: the middle of a flat end.

        Parameters
        ----------
        direction : (2,) array
        """
        ring = max(self.rings, key=lambda each: float((each @ direction).max()))
        far = ring @ direction
        level = far >= far.max() - _LEVEL * self.extent
        if level.all():
            return np.asarray(ring.mean(axis=0))
        # The flat end is the run of corners about the farthest one.
        peak = int(far.argmax())
        count = len(ring)
        ahead = next(step for step in range(1, count) if not level[(peak + step) % count]) - 1
        behind = next(step for step in range(1, count) if not level[(peak - step) % count]) - 1
        return np.asarray((ring[(peak + ahead) % count] + ring[(peak - behind) % count]) / 2)

    def nearest(self, point: Floats) -> Floats:
        """Return the place of the contour nearest to a point, (2,) array, m."""
        start, end = self._sides()
        along = end - start
        length = (along**2).sum(axis=1)
        share = np.clip(((point - start) * along).sum(axis=1) / np.where(length > 0, length, 1.0), 0.0, 1.0)
        places = start + share[:, None] * along
        return np.asarray(places[((places - point) ** 2).sum(axis=1).argmin()])

    def outward(self, point: Floats, reach: float) -> Floats:
        """Return the unit vector out of the solid at a place of the contour, (2,) array.

        Parameters
        ----------
        point : (2,) array, m
        reach : float, m
            The normals of the contour within this of the place are averaged.
        """
        start, end = self._sides()
        along = end - start
        steps = np.linalg.norm(along, axis=1)
        count = max(1, int(np.ceil(steps.max(initial=0.0) / (reach / 4)))) if reach else 1
        share = (np.arange(count) + 0.5) / count
        middles = start[:, None] + share[:, None] * along[:, None]
        weight = (((middles - point) ** 2).sum(axis=-1) <= reach**2).sum(axis=1) / count
        sum_ = (weight[:, None] * np.column_stack([along[:, 1], -along[:, 0]])).sum(axis=0)
        length = float(np.linalg.norm(sum_))
        if length == 0:
            away = point - self.points.mean(axis=0)
            return np.asarray(away / np.linalg.norm(away))
        return np.asarray(sum_ / length)

    def chord(self, point: Floats, along: Floats) -> float:
        """Return the length of the chord through a point of the solid along a direction, m; 0 outside the solid."""
        at = self._met(point, along)
        ahead, behind = at[at > 0], at[at <= 0]
        if len(ahead) % 2 == 0 or len(behind) % 2 == 0:
            return 0.0
        return float(ahead.min() - behind.max())

    def way_out(self, point: Floats, along: Floats) -> float:
        """Return how far it is from a point of the solid to the contour along a direction, m; 0 outside the solid."""
        at = self._met(point, along)
        ahead = at[at > 0]
        return float(ahead.min()) if len(ahead) % 2 else 0.0

    def walked(self, point: Floats, reach: float, step: float) -> Floats:
        """Return places of the contour within ``reach`` of a point, the nearest first, about ``step`` apart, (n, 2)."""
        start, end = self._sides()
        length = np.linalg.norm(end - start, axis=1)
        count = np.maximum(np.ceil(length / step).astype(np.intp), 1)
        each = np.repeat(np.arange(len(start)), count)
        share = (np.arange(len(each)) - np.repeat(np.cumsum(count) - count, count)) / count[each]
        places = start[each] + share[:, None] * (end - start)[each]
        apart = np.linalg.norm(places - point, axis=1)
        order = np.argsort(apart, kind="stable")
        return np.asarray(places[order][apart[order] <= reach])

    def _met(self, point: Floats, along: Floats) -> Floats:
        """How far along a line through a point each crossing with the contour lies, m."""
        across = np.array([-along[1], along[0]])
        start, end = ((each - point) @ np.column_stack([along, across]) for each in self._sides())
        crossed = (start[:, 1] > 0) != (end[:, 1] > 0)
        a, b = start[crossed], end[crossed]
        return np.asarray(a[:, 0] + a[:, 1] / (a[:, 1] - b[:, 1]) * (b[:, 0] - a[:, 0]))

    def _sides(self) -> tuple[Floats, Floats]:
        return self.points, np.concatenate([np.roll(ring, -1, axis=0) for ring in self.rings])
