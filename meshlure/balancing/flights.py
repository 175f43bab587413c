"""Flights of a bait with different ballast."""

from __future__ import annotations

from functools import cached_property
from math import degrees
from typing import Any

from meshlure import flying
from meshlure.bait.pieces import Bait
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.stations import stations
from meshlure.making.balance.ground import Ground
from meshlure.physics.passage import Passage, passage
from meshlure.physics.repose import Vessel

Tree = dict[str, Any]


class Flights:
    """Flights of a bait with different ballast: its skin, and so its passage through the air, is always the same."""

    def __init__(self, ground: Ground, bait: Bait) -> None:
        self._ground = ground
        self._bait = bait

    @cached_property
    def way(self) -> Passage:
        """How the bait passes through air and water."""
        ground = self._ground
        skin, frame = ground.composition.skin, ground.frame
        index = ground.vessel.index if skin.outer is skin.surface else BlockIndex.build(skin.outer)
        cuts = stations(index, frame.nose, (frame.side, frame.back))
        return passage(skin, ground.bait.hardware, frame, cuts, index)

    @cached_property
    def _before(self) -> float:
        """How far the bait flies as the bait file has it, m."""
        return flying.reference(self._bait)[1]

    def of(self, vessel: Vessel) -> Tree:
        """Return flight and distance ratio, to the bait as the bait file has it, of one way."""
        main = flying.headline(flying.flown(self._ground.bait, vessel.composition, self.way))
        bearing = main.flight.bearing
        return {
            "flight": {
                "leads": bearing.end,
                "verdict": bearing.verdict,
                "trim_deg": None if bearing.trim is None else degrees(bearing.trim),
                "distance_m": main.flight.path.distance,
            },
            "distance_ratio": main.flight.path.distance / self._before,
        }
