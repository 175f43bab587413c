"""The search: every way to bring the ballast in, each settled in its place, weighed and put to rest."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field, replace
from typing import Final

import numpy as np

from meshlure.bait.pieces import Substance
from meshlure.geometry.surface import Floats
from meshlure.making.balance.aim import Aim, Line, Lines
from meshlure.making.balance.asked import Asked
from meshlure.making.balance.ballast import BALL, FROM_BELLY, ROD, Ballast, Kind
from meshlure.making.balance.ground import Ground
from meshlure.making.balance.outcome import Outcome, outcome
from meshlure.making.balance.room import Room
from meshlure.stock.balls import ball_diameters
from meshlure.stock.rods import rod_diameters

MOST_BALLS: Final = 5
_SHORTEST: Final = 1.5e-3
"""m. A shorter rod is a slice that nobody can cut or hold; ours."""
_FLATTEST: Final = 0.3
"""Length over diameter below which a rod is a coin; ours."""
_BALLS_OFF: Final = 0.3e-3
"""kg. Balls come in sizes: rows whose mass misses by more than this are left out, unless nothing comes closer."""
_OF_A_COUNT: Final = 2
"""Sizes of balls that are tried for each number of them."""
_TRIED: Final = 6
"""Places tried before a kind is given up."""
_FINE: Final = 30e-6
"""m. How closely a place is settled between one that has room and one that has none."""
_SHORTER: Final = (1.0, 0.97, 0.94, 0.9, 0.85, 0.8, 0.7, 0.6)
"""Shares of the longest rod by the grid that are tried where that is all there is room for."""
_HALF_DIAGONAL: Final = float(np.sqrt(3) / 2)
_ALIKE: Final = float(np.radians(0.05))
"""rad. Places whose postures differ by less are alike."""

REACHED_RESERVE: Final = 0.02e-3
"""kg. The reserve wanted counts as reached within this."""
REACHED_ANGLE: Final = float(np.radians(0.2))
"""rad. An angle wanted counts as reached within this."""


@dataclass(frozen=True, eq=False)
class Option:
    """One way to bring the ballast in.

    Attributes
    ----------
    ballast : Ballast
    outcome : Outcome
    upright : bool
        Whether the bait comes to rest so from back up.
    """

    ballast: Ballast
    outcome: Outcome
    upright: bool = True

    def reaches(self, goal: Aim) -> bool:
        """Tell whether the target is met."""
        off = self.outcome.off(goal)
        return (
            self.upright
            and abs(self.outcome.reserve - goal.reserve) <= REACHED_RESERVE
            and max(map(abs, off)) <= REACHED_ANGLE
        )


@dataclass
class Search:
    """A search for ballast, with what was found and what was in the way.

    Attributes
    ----------
    ground : Ground
    goal : Aim
    asked : Asked
    room : Room
    lines : Lines
    options : list of Option
    cramped : dict of Ballast or None
        By kind that would add the mass wanted but has no room: the longest rod that has; None where none has.
    """

    ground: Ground
    goal: Aim
    asked: Asked
    room: Room
    lines: Lines
    options: list[Option] = field(default_factory=list)
    cramped: dict[Kind, Ballast | None] = field(default_factory=dict)

    @classmethod
    def of(cls, ground: Ground, goal: Aim, asked: Asked, room: Room) -> Search:
        """Return a search that has not begun."""
        return cls(ground, goal, asked, room, Lines(ground, goal))

    def run(self, tell: Callable[[str], None] = lambda _: None) -> None:
        """Settle every kind of ballast that can give the reserve wanted; where none can, the most that has room."""
        net = self.lines.net
        if net <= 0:
            return
        for metal in self.asked.metals:
            tell(f"trying {metal.name}")
            for kind in self._kinds(metal, net):
                ballast = self.settled(kind, net)
                if ballast is None:
                    self.cramped[kind] = self._longest(kind) if kind.shape == ROD else None
                else:
                    self.options.append(Option(ballast, self.outcome_of(ballast)))
        if not self.options:
            self.options += [Option(most, self.outcome_of(most)) for most in self.cramped.values() if most is not None]

    def _kinds(self, metal: Substance, net: float) -> Iterator[Kind]:
        """Kinds of a metal that can add a net mass, kg."""
        stated, glue = self.asked.stated, self.asked.glue
        name, body = metal.name or "", self.ground.body_density
        if ROD in stated.shapes:
            for diameter in rod_diameters(name):
                kind = Kind(metal, ROD, diameter, 1, stated.pocket, stated.fit, glue)
                if self.is_piece(kind, net):
                    yield kind
        if BALL in stated.shapes:
            rows = [
                Kind(metal, BALL, diameter, count, stated.pocket, stated.fit, glue)
                for diameter in ball_diameters(name)
                for count in range(1, MOST_BALLS + 1)
            ]
            missed = {row: abs(row.net(0.0, body) - net) for row in rows if row.net(0.0, body) > 0}
            within = max(_BALLS_OFF, 0.0 if ROD in stated.shapes else min(missed.values(), default=0.0))
            for count in range(1, MOST_BALLS + 1):
                near = sorted((row for row in missed if row.count == count), key=missed.__getitem__)[:_OF_A_COUNT]
                yield from (row for row in near if missed[row] <= within)

    def settled(self, kind: Kind, net: float) -> Ballast | None:
        """Return ballast of a kind in the best place; None where it has no room.

        Parameters
        ----------
        kind : Kind
        net : float, kg
            That a rod must add; balls add what they add.
        """
        if kind.shape == BALL:
            net = kind.net(0.0, self.ground.body_density)
        return self._placed(self.drawn(kind, net), net)

    def is_piece(self, kind: Kind, net: float) -> bool:
        """Tell whether a rod that adds a net mass, kg, is long enough to be cut and held."""
        return kind.length_for(net, self.ground.body_density) >= max(_SHORTEST, _FLATTEST * kind.diameter)

    def drawn(self, kind: Kind, net: float) -> Ballast:
        """Return ballast of a kind about the origin of the drawing: a rod that adds a net mass, kg, or its balls."""
        axis = self.ground.frame.back if kind.pocket == FROM_BELLY else self.ground.frame.nose
        if kind.shape == BALL:
            return Ballast.balls(kind, np.zeros(3), axis)
        return Ballast(kind, kind.length_for(net, self.ground.body_density), np.zeros(3), axis)

    def _longest(self, kind: Kind) -> Ballast | None:
        """The longest rod of a kind that has room, in its best place."""
        rod, body = self.drawn(kind, self.lines.net), self.ground.body_density
        longest = min(self.room.longest(rod), rod.length)
        for share in _SHORTER:
            length = share * longest
            net = kind.net(length, body) if length > 0 else 0.0
            if length < max(_SHORTEST, _FLATTEST * kind.diameter) or net <= 0:
                return None
            placed = self._placed(replace(rod, length=length), net)
            if placed is not None:
                return placed
        return None

    def outcome_of(self, ballast: Ballast) -> Outcome:
        """Return how the bait behaves with ballast in a place."""
        return outcome(self.ground.with_ballast(ballast), self.goal, self.lines.ends)

    def _placed(self, ballast: Ballast, net: float) -> Ballast | None:
        """Ballast in the lowest place that gives the posture, else in the one that misses it least."""
        places = self.room.places(ballast)
        if not len(places):
            return None
        line = self.lines.line(net)
        sure = self.room.places(ballast, sure=True)
        found = self._on_line(ballast, line, net, places, sure)
        return self._beside(ballast, line, net, places, sure) if found is None else found

    def _on_line(self, ballast: Ballast, line: Line, net: float, places: Floats, sure: Floats) -> Ballast | None:
        """The lowest place on the line that has room."""
        heights = self._heights(line, net, places)
        if not len(heights):
            return None
        tried = [heights[0], *self._heights(line, net, sure)[:1], *heights[:: max(1, len(heights) // _TRIED)][1:]]
        low = heights[0]
        for height in sorted(tried):
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

    def _beside(self, ballast: Ballast, line: Line, net: float, places: Floats, sure: Floats) -> Ballast | None:
        """The place that misses the posture least; of alike ones the lowest."""
        side = self.ground.frame.side
        for some in (sure, places):
            # The grid has no voxels on the line's own lengthwise plane, on which a bait alike on both sides wants its
            # weight.
            aside = (line.off(some) @ side)[:, None] * side
            order = np.lexsort((some @ line.up, np.round(self.lines.tilts(net, some) / _ALIKE)))
            for number in order[:_TRIED]:
                for place in (some[number] - aside[number], some[number]):
                    if self.room.holds(ballast.at(place)):
                        return self._drawn(self._drawn(ballast.at(place), line, side), line, None)
        return None

    def _drawn(self, ballast: Ballast, line: Line, along: Floats | None) -> Ballast:
        """Ballast drawn as near to a line as there is room on the way, in one direction or straight."""
        start = ballast.middle
        way = -line.off(start)
        if along is not None:
            way = (way @ along) * along
        length = float(np.linalg.norm(way))
        if length <= _FINE or self.room.holds(ballast.at(start + way)):
            return ballast.at(start + way) if length > _FINE else ballast
        near, far = 0.0, min(1.0, 4 * self.room.depths.pitch / length)
        while (far - near) * length > _FINE:
            share = (near + far) / 2
            near, far = (share, far) if self.room.holds(ballast.at(start + share * way)) else (near, share)
        return ballast.at(start + near * way)
