"""Balls in their chamber: where a row of them lies against either end wall."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.bait.hollows import Space
from meshlure.bait.pieces import Balls, Frame
from meshlure.errors import Fault, InputError
from meshlure.findings import Finding, Level
from meshlure.geometry.clearance import Boxes
from meshlure.geometry.moments import NOTHING, Moments, ball_moments, solid_moments
from meshlure.geometry.shells import winding_number
from meshlure.geometry.surface import Floats, Surface

ENDS = ("nose", "tail")

LEAST_PLAY = 0.1e-3
"""m. Play of a ball in its bore below which a coat of paint or a burr jams it; common practice, no source."""

_STEPS = 128
"""Points along a chamber's axis at which its room is asked before the ends are narrowed down."""

_HALVINGS = 32

_ALIKE = 0.02
"""Share of the greatest moment of inertia by which two are told apart: below it a chamber has no one long axis."""

_FACETED = 0.01
"""Share of a ball's radius by which the facets of a bore may come nearer than the bore drawn."""


@dataclass(frozen=True, eq=False)
class BallRow:
    """A row of balls in its chamber.

    Attributes
    ----------
    balls : Balls
    axis : (3,) array
        Unit vector along the chamber towards the bait's nose.
    places : dict of (n, 3) arrays, m
        Centres of the balls at the nose and at the tail end.
    flooded : bool
        Whether the chamber fills with water, so that the balls displace some.
    findings : tuple of Finding
    """

    balls: Balls
    axis: Floats
    places: dict[str, Floats]
    flooded: bool
    findings: tuple[Finding, ...] = ()

    def volume(self, end: str) -> Moments:
        """Return the balls' volume, m3, with its moments."""
        total = NOTHING
        for centre in self.places[end]:
            total = total + ball_moments(self.balls.diameter, centre)
        return total

    def mass(self, end: str) -> Moments:
        """Return the balls' mass, kg, with its moments."""
        return self.volume(end) * self.balls.substance.density


def ball_row(balls: Balls, drawn: Surface, hollow: Space, frame: Frame) -> BallRow:
    """Return the two places of a row of balls in a chamber.

    Parameters
    ----------
    balls : Balls
    drawn : Surface
        The chamber as drawn.
    hollow : Space
        What of it is left hollow.
    frame : Frame
        The bait's; the chamber's nose end is the one farther along the nose.

    Raises
    ------
    InputError
        Where the balls do not fit.

    Notes
    -----
    The row lies on the chamber's axis through its centroid, the first ball as far out as its radius keeps clear of
    every wall, whatever the wall's shape. The axis is the one of least moment of inertia; where several are alike, as
    in a cube, the one nearest to the nose. A bore's play, by which the balls lie lower than its axis, is left out: half
    of some tenths of a millimetre.
    """
    middle, axis = _axis(drawn, frame)
    along = (drawn.vertices - middle) @ axis
    low, high = float(along.min()), float(along.max())
    surface, radius = hollow.solid.surface(), balls.diameter / 2
    if hollow.solid.empty or winding_number(surface, middle) < 0.5:
        raise InputError(_no_room(balls, "something solid lies in the chamber's middle"))
    walls = Boxes.of(surface)
    places = np.sort(np.append(np.linspace(low, high, _STEPS), 0.0))
    room = _room(walls, middle, axis, places)
    widest = float(room.max())
    least = min(radius, widest) * (1 - 1e-9)
    if widest < radius * (1 - _FACETED) or room[np.searchsorted(places, 0.0)] < least:
        raise InputError(_no_room(balls, f"a bore of {2 * widest * 1e3:.4g} mm"))
    ends = _reach(walls, middle, axis, places, room, least)
    row = balls.count * balls.diameter
    length = ends[1] - ends[0] + balls.diameter
    if row > length * (1 + 1e-6):
        raise InputError(_no_room(balls, f"a row of {length * 1e3:.4g} mm"))
    steps = np.arange(balls.count) * balls.diameter
    return BallRow(
        balls=balls,
        axis=axis,
        places={"nose": middle + np.outer(ends[1] - steps, axis), "tail": middle + np.outer(ends[0] + steps, axis)},
        flooded=hollow.flooded,
        findings=_tight(balls, 2 * (widest - radius)),
    )


def _axis(drawn: Surface, frame: Frame) -> tuple[Floats, Floats]:
    """Centroid of a chamber and its long axis, towards the nose."""
    moments = solid_moments(drawn)
    values, vectors = np.linalg.eigh(moments.inertia)
    alike = vectors[:, values - values[0] <= _ALIKE * values[2]]
    axis = alike[:, 0]
    for towards in (frame.nose, frame.side, frame.back):
        flat = alike @ (alike.T @ towards)
        length = float(np.linalg.norm(flat))
        # A chamber across the bait has its "nose end" to the left, so that the choice never hangs on rounding.
        if length > 1e-6:
            axis = flat / length
            break
    return moments.centre, axis


def _room(walls: Boxes, middle: Floats, axis: Floats, places: Floats) -> Floats:
    """Distance from places along the axis to the nearest wall, m."""
    return walls.nearest(middle + np.outer(places, axis)).distance


def _reach(
    walls: Boxes, middle: Floats, axis: Floats, places: Floats, room: Floats, least: float
) -> tuple[float, float]:
    """How far either way along the axis there is room enough, m."""
    start = int(np.searchsorted(places, 0.0))
    wide = room >= least
    first, last = start, start
    while first > 0 and wide[first - 1]:
        first -= 1
    while last < len(places) - 1 and wide[last + 1]:
        last += 1
    inner = np.array([places[first], places[last]])
    outer = np.array([places[max(first - 1, 0)], places[min(last + 1, len(places) - 1)]])
    for _ in range(_HALVINGS):
        tried = (inner + outer) / 2
        fits = _room(walls, middle, axis, tried) >= least
        inner, outer = np.where(fits, tried, inner), np.where(fits, outer, tried)
    return float(inner[0]), float(inner[1])


def _no_room(balls: Balls, allowed: str) -> Fault:
    row = balls.count * balls.diameter
    return Fault(
        what=f"the balls do not fit into '{balls.chamber}'",
        where=f"balls in '{balls.chamber}'",
        found=f"{balls.count} of {balls.diameter * 1e3:.4g} mm, a row of {row * 1e3:.4g} mm",
        allowed=allowed,
        next_step="take fewer or smaller balls, or draw the chamber larger",
    )


def _tight(balls: Balls, play: float) -> tuple[Finding, ...]:
    if play >= LEAST_PLAY:
        return ()
    return (
        Finding(
            code="balls-tight",
            level=Level.WARNING,
            piece=balls.chamber,
            message=f"the balls of {balls.diameter * 1e3:.4g} mm have {max(play, 0.0) * 1e3:.2f} mm of play in their "
            "bore: they may jam",
            advice="draw the bore some tenths of a millimetre wider",
        ),
    )
