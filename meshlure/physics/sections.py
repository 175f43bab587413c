"""Sections: a body cut along one axis as the drag reads it: profiles both ways, hollow faces, chords across a flow."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Final

import numpy as np

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.outline import Outline, outline
from meshlure.geometry.refinement import refined
from meshlure.geometry.relief import relief
from meshlure.geometry.stations import Stations, dense_positions, stations_of
from meshlure.geometry.steepness import facing_ahead
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import EdgePairs
from meshlure.geometry.waterplane import Cut
from meshlure.physics.cup import cup_depth, held_volume
from meshlure.physics.layer import ramp
from meshlure.physics.profile import Profile

PIERCED_FROM: Final = 0.02
PIERCED_WHOLLY: Final = 0.15
"""Share of the silhouette's outer boundary that is seen right through: from where on hollows of the sections count less
as filled, and where they no longer do. Ours: a hole for a line does not make a body a ring."""


FINE: Final = 12_000
"""Faces from which a mesh is cut as it is; a coarser one is first split along its smooth skin, twice at most."""


def smooth(surface: Surface, pairs: EdgePairs) -> tuple[Surface, EdgePairs]:
    """Return a surface as it is cut for the drag, so that a coarse export of a body gives what a fine one does."""
    for _ in range(2):
        if len(surface.faces) < FINE:
            surface, pairs = refined(surface, pairs)
    return surface, pairs


@dataclass(frozen=True, eq=False)
class Sections:
    """A body's sections along one axis.

    Attributes
    ----------
    surface : Surface
        Closed, outward.
    cuts : tuple of Cut
        Ascending along the axis, closer together near both ends.
    stations : Stations
        Of these cuts.
    silhouette : Outline
        Along the axis.
    """

    surface: Surface
    cuts: tuple[Cut, ...]
    stations: Stations
    silhouette: Outline

    @classmethod
    def of(
        cls, surface: Surface, pairs: EdgePairs, index: BlockIndex, axis: Floats, lateral: Sequence[Floats]
    ) -> Sections:
        """Return the sections of a closed surface.

        Parameters
        ----------
        surface, pairs, index : Surface, EdgePairs, BlockIndex
        axis : (3,) array
            Unit vector.
        lateral : two (3,) arrays
            Unit vectors along which width and depth are measured.
        """
        low, high = index.reach(axis)
        cuts = tuple(index.cut(axis, float(height)) for height in dense_positions(low, high))
        return cls(surface, cuts, stations_of(cuts, lateral, low, high), outline(surface, pairs, axis))

    @property
    def axis(self) -> Floats:
        """Unit vector along which the sections stand."""
        return self.stations.axis

    @cached_property
    def filled(self) -> float:
        """Share to which hollows of the sections count as filled: 1 unless much is seen right through."""
        seen = self.silhouette.area
        rings = self.silhouette.region.rings
        through = sum(-area for area in map(_ring_area, rings) if area < 0)
        return 1 - ramp(through / (seen + through), PIERCED_FROM, PIERCED_WHOLLY)

    def profile(self, leads: Floats) -> Profile:
        """Return the sections counted from the end that leads in a direction."""
        return self._high if leads @ self.axis > 0 else self._low

    @cached_property
    def _low(self) -> Profile:
        return self._counted_from(-self.axis, low=True)

    @cached_property
    def _high(self) -> Profile:
        return self._counted_from(self.axis, low=False)

    def _counted_from(self, end: Floats, *, low: bool) -> Profile:
        return Profile.from_stations(
            self.stations,
            leads_low=low,
            filled=self.filled,
            facing=lambda x: facing_ahead(self.surface, end, x),
        )

    def cup(self, leads: Floats) -> float:
        """Return how hollow the end is that leads in a direction, 0 to 1."""
        towards = self.axis if leads @ self.axis > 0 else -self.axis
        return cup_depth(held_volume(relief(self.surface, towards)), self.profile(leads).greatest_area)


def _ring_area(ring: Floats) -> float:
    x, y = (ring - ring[0]).T
    return float((x * np.roll(y, -1) - np.roll(x, -1) * y).sum() / 2)
