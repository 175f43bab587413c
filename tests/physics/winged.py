"""Simple bodies made ready for their loads in air or water, through the code that serves baits."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapes import revolved

from meshlure.bait.composition import Skin
from meshlure.bait.pieces import Frame, Hardware
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.moments import Moments, solid_moments
from meshlure.geometry.stations import Stations, stations
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import paired
from meshlure.physics.glider import glider
from meshlure.physics.loads import Glider
from meshlure.physics.passage import Passage, passage
from meshlure.physics.sinking import FIRST_GUESS
from meshlure.physics.submerged import Submerged, added_mass

AIR = (1.225, 1.4607e-5)
"""kg/m3 and m2/s; ISO 2533 at sea level."""

WATER = (1000.0, 1.0e-6)

FRAME = Frame.of(np.array([0.0, 0.0, 1.0]), np.array([0.0, 1.0, 0.0]))
"""Solids of revolution stand on their tails: nose up z, back along y."""


def hook(name: str, area: float, at: Sequence[float] | Floats, mass: float = 0.0) -> Hardware:
    """A hook of a drag area, m2, and no bulk."""
    place = np.asarray(at, dtype=np.float64)
    return Hardware(name, mass, mass, mass, place, True, 0.0, None, None, "test", False, drag_area=area)


def turned(half: Callable[[Floats], Floats], length: float, around: int = 96, along: int = 160) -> Surface:
    """Solid of revolution about z with its tail at 0, from its radius over the distance from the tail."""
    z = length * (1 - np.cos(np.linspace(0, np.pi, along + 1))) / 2
    return revolved(half(z), z, around)


def spheroid(length: float, diameter: float) -> Surface:
    return turned(lambda z: diameter / 2 * np.sqrt(np.maximum(1 - (2 * z / length - 1) ** 2, 0.0)), length)


@dataclass(frozen=True, eq=False)
class Winged:
    """A body with hooks and lips."""

    surface: Surface
    hooks: Sequence[Hardware] = ()
    frame: Frame = FRAME
    lips: Mapping[str, Surface] | None = None

    @cached_property
    def skin(self) -> Skin:
        bare = self.surface
        pairs = paired(bare)
        lips = dict(self.lips or {})
        return Skin(
            surface=bare,
            thickness=np.zeros(len(bare.faces)),
            own=np.ones(len(bare.faces), dtype=np.bool_),
            outer=bare,
            outer_pairs=pairs,
            bare=bare,
            lips=lips,
            painted=1.0,
        )

    @cached_property
    def cuts(self) -> Stations:
        index = BlockIndex.build(self.surface)
        return stations(index, self.frame.nose, (self.frame.side, self.frame.back))

    @cached_property
    def way(self) -> Passage:
        return passage(self.skin, self.hooks, self.frame, self.cuts, BlockIndex.build(self.surface))

    def wings(self, speed: float = 25.0, fluid: tuple[float, float] = AIR) -> Glider:
        return glider(self.way, self.skin, self.hooks, self.frame, speed, *fluid)

    @cached_property
    def bulk(self) -> Moments:
        """Volume with its moments."""
        return solid_moments(self.surface)

    def weighed(self, mass: float, ahead: float = 0.0, above: float = 0.0) -> Moments:
        """The body's mass spread evenly, then shifted towards the nose and the back, m."""
        even = self.bulk * (mass / self.bulk.amount)
        return Moments(mass, even.first + mass * (ahead * self.frame.nose + above * self.frame.back), even.second)

    def sunk(self, mass: Moments, wings: Glider | None = None) -> Submerged:
        wings = self.wings(FIRST_GUESS, WATER) if wings is None else wings
        added = added_mass(self.way.stations, wings.fineness, float(self.bulk.centre @ self.frame.nose), WATER[0])
        return Submerged(
            self.frame, mass, self.bulk.amount, self.bulk.centre, WATER[0], wings, self.way.stations, added
        )
