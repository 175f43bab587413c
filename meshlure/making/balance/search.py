"""The search: every way to bring the ballast in, each settled in its place, weighed and put to rest."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from typing import Final

import numpy as np

from meshlure.bait.pieces import Substance
from meshlure.making.balance.aim import Aim, Lines
from meshlure.making.balance.asked import Asked
from meshlure.making.balance.ballast import BALL, ROD, Ballast, Kind
from meshlure.making.balance.ground import Ground
from meshlure.making.balance.outcome import Outcome, outcome
from meshlure.making.balance.placing import Placing
from meshlure.making.balance.room import Room
from meshlure.stock.balls import ball_diameters
from meshlure.stock.rods import rod_diameters

MOST_BALLS: Final = 5
_BALLS_OFF: Final = 0.3e-3
"""kg. Balls come in sizes: rows whose mass misses by more than this are left out, unless nothing comes closer."""
_OF_A_COUNT: Final = 2
"""Sizes of balls that are tried for each number of them."""
_ENOUGH: Final = 5
"""Ways that are to be offered at least, if they miss the posture, or add less mass than is wanted."""

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
    placing : Placing
    options : list of Option
    cramped : list of Kind
        That would add the mass wanted, but have no room.
    """

    ground: Ground
    goal: Aim
    asked: Asked
    room: Room
    lines: Lines
    placing: Placing
    options: list[Option] = field(default_factory=list)
    cramped: list[Kind] = field(default_factory=list)

    @classmethod
    def of(cls, ground: Ground, goal: Aim, asked: Asked, room: Room) -> Search:
        """Return a search that has not begun."""
        lines = Lines(ground, goal)
        return cls(ground, goal, asked, room, lines, Placing(ground, room, lines))

    def run(self, tell: Callable[[str], None] = lambda _: None) -> None:
        """Settle every kind of ballast that can give the reserve wanted.

        Notes
        -----
        Where few kinds have room in the posture wanted, the others are put as near to it as they can be; where few have
        room at all, rods as long as there is room for.
        """
        net = self.lines.net
        if net <= 0:
            return
        elsewhere: list[Kind] = []
        for metal in self.asked.metals:
            tell(f"placing {metal.name}")
            for kind in self._kinds(metal, net):
                ballast = self.placing.on_line(kind, net)
                if ballast is None:
                    elsewhere.append(kind)
                else:
                    self.options.append(self._option(ballast))
        if len(self.options) >= _ENOUGH:
            return
        for kind in elsewhere:
            tell(f"placing {kind.substance.name} beside")
            ballast = self.placing.beside(kind, net)
            if ballast is None:
                self.cramped.append(kind)
            else:
                self.options.append(self._option(ballast))
        if len(self.options) < _ENOUGH:
            longest = (self.longest(kind) for kind in self.cramped)
            self.options += [self._option(rod) for rod in longest if rod is not None]

    def longest(self, kind: Kind) -> Ballast | None:
        """Return the longest rod of a cramped kind that has room; None where none has, and for balls."""
        return None if kind.shape == BALL else self.placing.longest(kind, self.lines.net)

    def _kinds(self, metal: Substance, net: float) -> Iterator[Kind]:
        """Kinds of a metal that can add a net mass, kg."""
        stated, glue = self.asked.stated, self.asked.glue
        name, body = metal.name or "", self.ground.body_density
        if ROD in stated.shapes:
            for diameter in rod_diameters(name):
                kind = Kind(metal, ROD, diameter, 1, stated.pocket, stated.fit, glue)
                if self.placing.is_piece(kind, net):
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

    def _option(self, ballast: Ballast) -> Option:
        return Option(ballast, outcome(self.ground.with_ballast(ballast), self.goal, self.lines.ends))
