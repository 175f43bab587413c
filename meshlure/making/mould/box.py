"""The box that the rubber is poured into: its rectangle in the parting plane."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Floats


@dataclass(frozen=True, eq=False)
class Box:
    """A rectangle along the bench's x and y.

    Attributes
    ----------
    low, high : (2,) arrays, m
    """

    low: Floats
    high: Floats

    @classmethod
    def round_about(cls, bounds: Floats, wall: float, widened: float = 0.0) -> Box:
        """Return the box that leaves ``wall + widened`` (m) round a solid's bounds, (2, 3) array, m."""
        margin = wall + widened
        return cls(bounds[0, :2] - margin, bounds[1, :2] + margin)

    @property
    def size(self) -> Floats:
        """Sides, (2,) array, m."""
        return np.asarray(self.high - self.low)

    @property
    def middle(self) -> Floats:
        """Middle, (2,) array, m."""
        return np.asarray((self.low + self.high) / 2)

    def way_out(self, point: Floats, direction: Floats) -> float:
        """Return how far it is from a point inside to the edge along a (2,) unit vector, m."""
        with np.errstate(divide="ignore"):
            ways = np.where(direction > 0, (self.high - point) / direction, (self.low - point) / direction)
        return float(np.where(direction == 0, np.inf, ways).min())
