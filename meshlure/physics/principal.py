"""Principal axes: the box that has a solid's second moments, and which of a solid's axes is its long one."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.moments import Moments
from meshlure.geometry.surface import Floats

TIE: Final = 0.02
"""Share of the mean moment of inertia within which two differences between moments count as equal: what coarse facets
leave of a sphere's or a cube's equality."""


@dataclass(frozen=True, eq=False)
class Box:
    """The box that has a solid's second moments.

    Attributes
    ----------
    axes : (3, 3) array
        Unit vectors along its edges in rows, the shortest edge first.
    extents : (3,) array, m
        Of its edges, ascending.
    """

    axes: Floats
    extents: Floats

    @classmethod
    def of(cls, moments: Moments) -> Box:
        """Return the box of a solid's moments."""
        values, vectors = np.linalg.eigh(moments.second / moments.amount)
        return cls(np.asarray(vectors.T), np.sqrt(12 * np.maximum(values, 0.0)))

    @property
    def thinness(self) -> float:
        """Shortest edge over the middle one."""
        return float(self.extents[0] / self.extents[1])

    def extent(self, direction: Floats) -> float:
        """Return its extent along a direction in the plane of its two longer edges, m."""
        return float(np.linalg.norm(self.extents[1:] * (self.axes[1:] @ direction)))


def long_axis(moments: Moments, leads: Floats) -> Floats:
    """Principal axis whose moment of inertia stands apart most from the other two, unit vector.

    Parameters
    ----------
    moments : Moments
        Of the solid.
    leads : (3,) array
        Unit vector that decides a tie: where all three moments are equal it is the axis itself, where the least and the
        greatest stand equally far from the middle one it takes the nearer of their axes.
    """
    values, vectors = np.linalg.eigh(moments.inertia)
    below, above = values[1] - values[0], values[2] - values[1]
    least = TIE * float(values.mean())
    first, last = vectors[:, 0], vectors[:, 2]
    if max(below, above) < least:
        return leads
    if abs(below - above) < least:
        return np.asarray(first if abs(first @ leads) > abs(last @ leads) else last)
    return np.asarray(first if below > above else last)
