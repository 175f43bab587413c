"""The search: every way to bring the ballast in, each settled in its place, weighed and put to rest."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from typing import Final

import numpy as np

from meshlure.bait.pieces import Substance
from meshlure.bait.substances import substance
from meshlure.errors import Fault, InputError
from meshlure.files.sections.ballast import BallastSection
from meshlure.files.sections.substance import Substance as Stated
from meshlure.geometry.surface import Floats
from meshlure.making.balance.aim import Aim, Line, Lines
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
_LIFT: Final = 0.25e-3
"""m. Steps in which a place on the line is tried."""
_TRIED: Final = 12
"""Places tried exactly before a kind is given up."""
_HALVINGS: Final = 6
_SHORTER: Final = (0.99, 0.93, 0.85)
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
    stated : BallastSection
    room : Room
    lines : Lines
    options : list of Option
    cramped : dict of float
        By kind of rod that would have to be longer than there is room for: the longest that has room, m.
    """

    ground: Ground
    goal: Aim
    stated: BallastSection
    room: Room
    lines: Lines
    options: list[Option] = field(default_factory=list)
    cramped: dict[Kind, float] = field(default_factory=dict)

    @classmethod
    def of(cls, ground: Ground, goal: Aim, stated: BallastSection, room: Room | None = None) -> Search:
        """Return a search that has not begun; a room made before is taken as it is."""
        room = room or Room(ground, stated.cover, stated.keep_clear, stated.between)
        return cls(ground, goal, stated, room, Lines(ground, goal))

    def run(self, tell: Callable[[str], None] = lambda _: None) -> None:
        """Settle every kind of ballast that can give the reserve wanted."""
        net = self.lines.net
        if net <= 0:
            return
        for substance_ in metals(self.stated):
            tell(f"trying {substance_.name}")
            for kind in self._kinds(substance_, net):
                option = self._settled(kind, net)
                if option is not None:
                    self.options.append(option)
        if not self.options:
            # Nothing has the mass that is wanted: what comes nearest is the most that has room.
            for kind, longest in self.cramped.items():
                option = self._shortened(kind, longest)
                if option is not None:
                    self.options.append(option)

    def _kinds(self, metal: Substance, net: float) -> Iterator[Kind]:
        glue = self._glue()
        name = metal.name or ""
        body = self.ground.body_density
        if ROD in self.stated.shapes:
            for diameter in rod_diameters(name):
                yield Kind(metal, ROD, diameter, 1, self.stated.pocket, self.stated.fit, glue)
        if BALL in self.stated.shapes:
            rows = [
                Kind(metal, BALL, diameter, count, self.stated.pocket, self.stated.fit, glue)
                for diameter in ball_diameters(name)
                for count in range(1, MOST_BALLS + 1)
            ]
            missed = {row: abs(row.net(0.0, body) - net) for row in rows if row.net(0.0, body) > 0}
            for count in range(1, MOST_BALLS + 1):
                near = sorted((row for row in missed if row.count == count), key=missed.__getitem__)[:2]
                yield from (row for row in near if missed[row] <= _BALLS_OFF)

    def _glue(self) -> Substance | None:
        return None if self.stated.glue is None else substance(Stated(material=self.stated.glue), "ballast.glue")

    def _settled(self, kind: Kind, net: float) -> Option | None:
        """The best place for one kind, None where it has none."""
        body, axis = self.ground.body_density, self._axis(kind)
        if kind.shape == ROD:
            length = kind.length_for(net, body)
            if length < max(_SHORTEST, _FLATTEST * kind.diameter):
                return None
            ballast = Ballast(kind, length, np.zeros(3), axis)
        else:
            ballast = Ballast.balls(kind, np.zeros(3), axis)
            net = kind.net(0.0, body)
        places = self.room.places(ballast)
        if not len(places):
            if kind.shape == ROD:
                self.cramped[kind] = min(self.room.longest(ballast), ballast.length)
            return None
        placed = self._place(ballast, net, places)
        return None if placed is None else Option(placed, self.outcome_of(placed))

    def _shortened(self, kind: Kind, longest: float) -> Option | None:
        """The longest rod of a kind that has room, in its best place."""
        for share in _SHORTER:
            length = share * longest
            net = kind.net(length, self.ground.body_density) if length > 0 else 0.0
            if length < max(_SHORTEST, _FLATTEST * kind.diameter) or net <= 0:
                return None
            ballast = Ballast(kind, length, np.zeros(3), self._axis(kind))
            places = self.room.places(ballast)
            placed = self._place(ballast, net, places) if len(places) else None
            if placed is not None:
                return Option(placed, self.outcome_of(placed))
        return None

    def _axis(self, kind: Kind) -> Floats:
        return self.ground.frame.back if kind.pocket == FROM_BELLY else self.ground.frame.nose

    def outcome_of(self, ballast: Ballast) -> Outcome:
        """Return how the bait behaves with ballast in a place."""
        return outcome(self.ground.with_ballast(ballast), self.goal, self.lines.ends)

    def _place(self, ballast: Ballast, net: float, places: Floats) -> Ballast | None:
        line = self.lines.line(net)
        off = line.off(places)
        heights = places @ line.up
        tilts = self.lines.tilts(net, places)
        near = (np.linalg.norm(off, axis=1) <= self.room.depths.pitch * _HALF_DIAGONAL) & (tilts < np.pi)
        if near.any():
            steps = np.unique(np.round(heights[near] / _LIFT))[:_TRIED]
            for tried in (ballast.at(line.at(float(step) * _LIFT)) for step in steps):
                if self.room.holds(tried):
                    return tried
        # Else the place that misses the posture least; of alike ones the lowest. The grid has no voxels on the line's
        # own lengthwise plane, on which a bait alike on both sides wants its weight.
        side = self.ground.frame.side
        aside = (off @ side)[:, None] * side
        for number in np.lexsort((heights, np.round(tilts / _ALIKE)))[:_TRIED]:
            for place in (places[number] - aside[number], places[number]):
                if self.room.holds(ballast.at(place)):
                    return self._drawn(self._drawn(ballast.at(place), line, side), line, None)
        return None

    def _drawn(self, ballast: Ballast, line: Line, along: Floats | None) -> Ballast:
        """Ballast drawn as near to a line as there is room on the way, in one direction or straight."""
        start = ballast.middle
        way = -line.off(start)
        if along is not None:
            way = (way @ along) * along
        near, far = 0.0, 1.0
        for _ in range(_HALVINGS):
            share = (near + far) / 2
            if self.room.holds(ballast.at(start + share * way)):
                near = share
            else:
                far = share
        whole = ballast.at(start + way)
        return whole if self.room.holds(whole) else ballast.at(start + near * way)


def metals(stated: BallastSection) -> tuple[Substance, ...]:
    """Return what ballast may be made of.

    Raises
    ------
    InputError
        With every name that the stock does not know.
    """
    found: list[Substance] = []
    faults: list[Fault] = []
    for number, name in enumerate(stated.materials, 1):
        try:
            found.append(substance(Stated(material=name), f"ballast.materials[{number}]"))
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return tuple(found)
