"""Stations: the area, girth, width and depth of a solid's cross-sections along one direction."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.surface import Floats
from meshlure.geometry.waterplane import Section

STATIONS = 121
"""Enough that area and girth of a bait are followed to a thousandth between neighbours."""

END_INSET = 1e-4
"""Share of the length by which the outermost stations stand inside the ends, so that a flat face shows its area."""


@dataclass(frozen=True, eq=False)
class Stations:
    """Cross-sections by planes normal to one axis.

    Attributes
    ----------
    axis : (3,) array
        Unit vector.
    position : (n,) array, m
        Height of each plane along the axis, mesh coordinates, ascending.
    area : (n,) array, m2
    perimeter : (n,) array, m
        Length of all boundaries of the section.
    width, depth : (n,) arrays, m
        Extent along the two lateral directions given.
    spread : (n, 2) array, m
        Axes, along the two lateral directions, of the ellipse with the section's second moments: an eye or a wire that
        stands out widens the extent, but hardly this.
    centre : (n, 3) array, m
        Centroids of the sections, mesh coordinates.
    low, high : float, m
        The solid's ends along the axis.
    """

    axis: Floats
    position: Floats
    area: Floats
    perimeter: Floats
    width: Floats
    depth: Floats
    spread: Floats
    centre: Floats
    low: float
    high: float

    @property
    def length(self) -> float:
        """Length along the axis, m."""
        return self.high - self.low


def station_positions(low: float, high: float, count: int = STATIONS) -> Floats:
    """Return evenly spread plane positions from just inside one end to just inside the other, (count,) array, m."""
    inset = END_INSET * (high - low)
    return np.linspace(low + inset, high - inset, count)


def stations(index: BlockIndex, axis: Floats, lateral: Sequence[Floats], count: int = STATIONS) -> Stations:
    """Return a solid's cross-sections along an axis.

    Parameters
    ----------
    index : BlockIndex
        Of the solid, without regard to its coat.
    axis : (3,) array
        Unit vector.
    lateral : two (3,) arrays
        Unit vectors along which width and depth are measured.
    count : int
        Number of planes.
    """
    low, high = index.reach(axis)
    position = station_positions(low, high, count)
    cuts = [index.cut(axis, float(height)) for height in position]
    sections = [cut.bare_section for cut in cuts]
    extents = np.array([cut.extents(*lateral) for cut in cuts])
    return Stations(
        axis=np.asarray(axis, dtype=np.float64),
        position=position,
        area=np.array([section.area for section in sections]),
        perimeter=np.array([section.perimeter for section in sections]),
        width=extents[:, 0],
        depth=extents[:, 1],
        spread=np.array([[_spread(section, direction) for direction in lateral] for section in sections]),
        centre=np.array([section.centre for section in sections]),
        low=low,
        high=high,
    )


def _spread(section: Section, direction: Floats) -> float:
    """Axis along a direction of the ellipse with the section's second moment: four radii of gyration, m."""
    if section.area <= 0:
        return 0.0
    second = float(direction @ section.second @ direction)
    return 4 * float(np.sqrt(max(second, 0.0) / section.area))
