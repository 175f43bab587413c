"""Flights of a bait with different ballast."""

from __future__ import annotations

from functools import cached_property
from math import degrees
from typing import Any

from meshlure import flying
from meshlure.bait.composition import Skin
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.stations import stations
from meshlure.making.balance.ground import Ground
from meshlure.physics.passage import Passage, passage
from meshlure.physics.repose import Vessel

Tree = dict[str, Any]


class Flights:
    """Flights of a bait with different ballast: its skin, and so its passage through the air, is always the same."""

    def __init__(self, ground: Ground) -> None:
        self._ground = ground

    @cached_property
    def way(self) -> Passage:
        """How the bait passes through air and water."""
        return self._way(self._ground.vessel)

    def _way(self, vessel: Vessel) -> Passage:
        skin, frame = vessel.composition.skin, vessel.frame
        index = vessel.index if skin.outer is skin.surface else BlockIndex.build(skin.outer)
        cuts = stations(index, frame.nose, (frame.side, frame.back))
        return passage(skin, vessel.hardware, frame, cuts, index)

    def _flown(self, vessel: Vessel, way: Passage) -> flying.Flown:
        return flying.headline(flying.flown(self._ground.bait, vessel.composition, way))

    @cached_property
    def _before(self) -> float:
        """How far the bait flies as the bait file has it, m."""
        stated = self._ground.stated
        same: Skin = self._ground.composition.skin
        way = self.way if stated.composition.skin is same else self._way(stated)
        return self._flown(stated, way).flight.path.distance

    def of(self, vessel: Vessel) -> Tree:
        """Return flight and distance ratio, to the bait as the bait file has it, of one way."""
        flight = self._flown(vessel, self.way).flight
        bearing = flight.bearing
        return {
            "flight": {
                "leads": bearing.end,
                "verdict": bearing.verdict,
                "trim_deg": None if bearing.trim is None else degrees(bearing.trim),
                "distance_m": flight.path.distance,
            },
            "distance_ratio": flight.path.distance / self._before,
        }
