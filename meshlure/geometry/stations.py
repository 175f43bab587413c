"""Stations: the area, girth, width and depth of a solid's cross-sections along one direction."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.contours import outer_contours
from meshlure.geometry.surface import Floats
from meshlure.geometry.waterplane import Cut, Section

STATIONS = 121
"""Enough that area and girth of a bait are followed to a thousandth between neighbours."""

END_INSET = 1e-4
"""Share of the length by which the outermost stations stand inside the ends, so that a flat face shows its area."""

END_STATIONS = 16
END_REACH = 0.05
"""Further stations near each end, and the share of the length over which they thin out: eight of them stand within an
edge rounded to a tenth of the diameter of a body eight diameters long."""


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
    filled, girth : (n,) arrays, m2 and m
        Area within the outer boundaries of each section, its holes filled, and the length of those boundaries.
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
    filled: Floats
    girth: Floats

    @property
    def length(self) -> float:
        """Length along the axis, m."""
        return self.high - self.low

    def even(self, count: int = STATIONS) -> Stations:
        """Return the evenly spread ones among stations that stand closer together near both ends."""
        kept = np.isin(self.position, station_positions(self.low, self.high, count))
        arrays = {name: value[kept] for name, value in vars(self).items() if name not in ("axis", "low", "high")}
        return replace(self, **arrays)


def station_positions(low: float, high: float, count: int = STATIONS) -> Floats:
    """Return evenly spread plane positions from just inside one end to just inside the other, (count,) array, m."""
    inset = END_INSET * (high - low)
    return np.linspace(low + inset, high - inset, count)


def dense_positions(low: float, high: float, count: int = STATIONS) -> Floats:
    """Return plane positions that stand closer together near both ends, (count + 2 END_STATIONS,) array, m.

    Notes
    -----
    The evenly spread ones, and near each end further ones at distances that grow with the square of their number.
    """
    near = END_INSET + END_REACH * ((np.arange(END_STATIONS) + 0.5) / END_STATIONS) ** 2
    along = (high - low) * near
    return np.sort(np.concatenate([station_positions(low, high, count), low + along, high - along]))


def stations(
    index: BlockIndex,
    axis: Floats,
    lateral: Sequence[Floats],
    count: int = STATIONS,
    *,
    dense: bool = False,
) -> Stations:
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
        Number of planes, evenly spread.
    dense : bool
        Whether further planes stand near both ends.
    """
    low, high = index.reach(axis)
    position = (dense_positions if dense else station_positions)(low, high, count)
    return stations_of([index.cut(axis, float(height)) for height in position], lateral, low, high)


def stations_of(cuts: Sequence[Cut], lateral: Sequence[Floats], low: float, high: float) -> Stations:
    """Return the cross-sections that cuts along one axis make.

    Parameters
    ----------
    cuts : sequence of Cut
        Of one direction, ascending.
    lateral : two (3,) arrays
        Unit vectors along which width and depth are measured.
    low, high : float, m
        The solid's ends along the axis.
    """
    sections = [cut.bare_section for cut in cuts]
    extents = np.array([cut.extents(*lateral) for cut in cuts])
    filled, girth = outer_contours(cuts)
    return Stations(
        axis=cuts[0].normal,
        position=np.array([cut.height for cut in cuts]),
        area=np.array([section.area for section in sections]),
        perimeter=np.array([section.perimeter for section in sections]),
        width=extents[:, 0],
        depth=extents[:, 1],
        spread=np.array([[_spread(section, direction) for direction in lateral] for section in sections]),
        centre=np.array([section.centre for section in sections]),
        low=low,
        high=high,
        filled=filled,
        girth=girth,
    )


def _spread(section: Section, direction: Floats) -> float:
    """Axis along a direction of the ellipse with the section's second moment: four radii of gyration, m."""
    if section.area <= 0:
        return 0.0
    second = float(direction @ section.second @ direction)
    return 4 * float(np.sqrt(max(second, 0.0) / section.area))
