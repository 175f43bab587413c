"""One kind of ballast put in its best place: on the line that gives the posture, else as near to it as can be."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from typing import Final

import numpy as np

from meshlure.geometry.surface import Floats
from meshlure.making.balance.aim import Line, Lines
from meshlure.making.balance.ballast import BALL, FROM_BELLY, Ballast, Kind
from meshlure.making.balance.ground import Ground
from meshlure.making.balance.room import Room

_SHORTEST: Final = 1.5e-3
"""m. A shorter rod is a slice that nobody can cut or hold; ours."""
_FLATTEST: Final = 0.3
"""Length over diameter below which a rod is a coin; ours."""
_TRIED: Final = 6
"""Places tried before a kind is given up."""
_FINE: Final = 30e-6
"""m. How closely a place is settled between one that has room and one that has none."""
_SHORTER: Final = (1.0, 0.9, 0.8, 0.65, 0.5)
"""Shares of the longest rod by the grid that are tried where that is all there is room for."""
_HALF_DIAGONAL: Final = float(np.sqrt(3) / 2)
_ALIKE: Final = float(np.radians(0.05))
"""rad. Places whose postures differ by less are alike."""
_BEYOND: Final = 4
"""Voxels within which a place that surely has room comes to one that has none."""


@dataclass
class Placing:
    """Ballast put in its place, for one aim.

    Attributes
    ----------
    ground : Ground
    room : Room
    lines : Lines
    """

    ground: Ground
    room: Room
    lines: Lines
    _longest: dict[tuple[Kind, float], Ballast | None] = field(default_factory=dict)

    def is_piece(self, kind: Kind, net: float) -> bool:
        """Tell whether a rod that adds a net mass, kg, is long enough to be cut and held."""
        return kind.length_for(net, self.ground.body_density) >= max(_SHORTEST, _FLATTEST * kind.diameter)

    def drawn(self, kind: Kind, net: float) -> Ballast:
        """Return ballast of a kind about the origin of the drawing: a rod that adds a net mass, kg, or its balls."""
        axis = self.ground.frame.back if kind.pocket == FROM_BELLY else self.ground.frame.nose
        if kind.shape == BALL:
            return Ballast.balls(kind, np.zeros(3), axis)
        return Ballast(kind, kind.length_for(net, self.ground.body_density), np.zeros(3), axis)

    def adds(self, kind: Kind, net: float) -> float:
        """Return what a kind adds, kg: balls their own, a rod the net mass that is asked of it."""
        return kind.net(0.0, self.ground.body_density) if kind.shape == BALL else net

    def on_line(self, kind: Kind, net: float) -> Ballast | None:
        """Return ballast of a kind in the lowest place that gives the posture; None where that has no room.

        Parameters
        ----------
        kind : Kind
        net : float, kg
            That a rod must add; balls add what they add.
        """
        return self._on_line(self.drawn(kind, net), self.adds(kind, net))

    def beside(self, kind: Kind, net: float) -> Ballast | None:
        """Return ballast of a kind in the place that misses the posture least; None where it has no room at all.

        Takes what `on_line` takes.
        """
        ballast, net = self.drawn(kind, net), self.adds(kind, net)
        placed = self._beside(ballast, net)
        if placed is not None or kind.shape == BALL:
            return placed
        # In a tight body the grid may miss the one place that there is.
        if self.room.longest(ballast) < ballast.length:
            return None
        longest = self.longest(kind, net)
        if longest is None or longest.length < ballast.length:
            return None
        return self._near(longest, self.lines.line(net))

    def longest(self, kind: Kind, net: float) -> Ballast | None:
        """Return the longest rod of a kind that has room and adds no more than a net mass, kg, in its best place."""
        if (kind, net) not in self._longest:
            self._longest[kind, net] = self._found_longest(kind, net)
        return self._longest[kind, net]

    def _found_longest(self, kind: Kind, net: float) -> Ballast | None:
        rod, body = self.drawn(kind, net), self.ground.body_density
        for sure in (True, False):
            longest = min(self.room.longest(rod, sure), rod.length)
            for share in _SHORTER:
                length = share * longest
                adds = kind.net(length, body) if length > 0 else 0.0
                if length < max(_SHORTEST, _FLATTEST * kind.diameter) or adds <= 0:
                    break
                some = replace(rod, length=length)
                placed = self._on_line(some, adds) or self._beside(some, adds)
                if placed is not None:
                    return self._stretched(self._stretched(placed, rod.length, 1), rod.length, -1)
        return None

    def _stretched(self, rod: Ballast, most: float, end: int) -> Ballast:
        """A rod made longer at one end as far as there is room, up to a length, m."""

        def longer(by: float) -> Ballast:
            return replace(rod, length=rod.length + by, middle=rod.middle + end * by / 2 * rod.axis)

        if most - rod.length <= _FINE:
            return rod
        if self.room.holds(longer(most - rod.length)):
            return longer(most - rod.length)
        short, long = 0.0, most - rod.length
        while long - short > _FINE:
            by = (short + long) / 2
            short, long = (by, long) if self.room.holds(longer(by)) else (short, by)
        return longer(short)

    def _on_line(self, ballast: Ballast, net: float) -> Ballast | None:
        """The lowest place on the line that has room."""
        line = self.lines.line(net)
        heights = self._heights(line, net, self.room.places(ballast))
        if not len(heights):
            return None
        # The next voxel below has no room by the grid, which errs by about one.
        low = heights[0] - self.room.depths.pitch
        for height in heights[:: max(1, len(heights) // _TRIED)]:
            if self.room.holds(ballast.at(line.at(height))):
                return ballast.at(line.at(self._lowest(ballast, line, low, height)))
            low = height
        return None

    def _heights(self, line: Line, net: float, places: Floats) -> Floats:
        """Heights at which places lie on a line, by the grid, and the posture there is stable, ascending, m."""
        near = np.linalg.norm(line.off(places), axis=1) <= self.room.depths.pitch * _HALF_DIAGONAL
        return np.unique(places[near & (self.lines.tilts(net, places) < np.pi)] @ line.up)

    def _lowest(self, ballast: Ballast, line: Line, low: float, high: float) -> float:
        """The lowest height with room above one without."""
        while high - low > _FINE:
            middle = (low + high) / 2
            low, high = (low, middle) if self.room.holds(ballast.at(line.at(middle))) else (middle, high)
        return high

    def _beside(self, ballast: Ballast, net: float) -> Ballast | None:
        """The place that misses the posture least; of alike ones the lowest."""
        line, side = self.lines.line(net), self.ground.frame.side
        for sure in (True, False):
            some = self.room.places(ballast, sure)
            # The grid has no voxels on the line's own lengthwise plane, on which a bait alike on both sides wants its
            # weight.
            aside = (line.off(some) @ side)[:, None] * side
            order = np.lexsort((some @ line.up, np.round(self.lines.tilts(net, some) / _ALIKE)))
            for number in order[:_TRIED]:
                for place in (some[number] - aside[number], some[number]):
                    if self.room.holds(ballast.at(place)):
                        return self._near(ballast.at(place), line)
        return None

    def _near(self, ballast: Ballast, line: Line) -> Ballast:
        """Ballast drawn as near to a line as there is room, sideways first."""
        return self._drawn(self._drawn(ballast, line, self.ground.frame.side), line, None)

    def _drawn(self, ballast: Ballast, line: Line, along: Floats | None) -> Ballast:
        """Ballast drawn as near to a line as there is room on the way, in one direction or straight."""
        start = ballast.middle
        way = -line.off(start)
        if along is not None:
            way = (way @ along) * along
        length = float(np.linalg.norm(way))
        if length <= _FINE:
            return ballast
        if self.room.holds(ballast.at(start + way)):
            return ballast.at(start + way)
        near, far = 0.0, min(1.0, _BEYOND * self.room.depths.pitch / length)
        while (far - near) * length > _FINE:
            share = (near + far) / 2
            near, far = (share, far) if self.room.holds(ballast.at(start + share * way)) else (near, share)
        return ballast.at(start + near * way)
