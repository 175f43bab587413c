"""Balls in their chamber: where a row of them lies against either end wall."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.bait.pieces import Balls, Frame, MeshPiece
from meshlure.errors import Fault, InputError
from meshlure.geometry.moments import NOTHING, Moments, ball_moments, solid_moments
from meshlure.geometry.surface import Floats

ENDS = ("nose", "tail")


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
    """

    balls: Balls
    axis: Floats
    places: dict[str, Floats]
    flooded: bool

    def volume(self, end: str) -> Moments:
        """Return the balls' volume, m3, with its moments."""
        total = NOTHING
        for centre in self.places[end]:
            total = total + ball_moments(self.balls.diameter, centre)
        return total

    def mass(self, end: str) -> Moments:
        """Return the balls' mass, kg, with its moments."""
        return self.volume(end) * self.balls.substance.density


def ball_row(balls: Balls, chamber: MeshPiece, frame: Frame) -> BallRow:
    """Return the two places of a row of balls in a chamber.

    Parameters
    ----------
    balls : Balls
    chamber : MeshPiece
        A void; its long axis is the one about which its volume has the least moment of inertia.
    frame : Frame
        The bait's; the chamber's nose end is the one farther along the nose.

    Raises
    ------
    InputError
        Where the balls do not fit.

    Notes
    -----
    The row lies on the chamber's axis, the first ball against the end wall. A bore's play, by which the balls
    lie lower than its axis, is left out: half of some tenths of a millimetre.
    """
    moments = solid_moments(chamber.surface)
    _, vectors = np.linalg.eigh(moments.inertia)
    axis = vectors[:, 0]
    # A chamber across the bait has its "nose end" to the left, so that the choice never hangs on rounding.
    along = axis @ frame.nose if abs(axis @ frame.nose) > 1e-6 else axis @ frame.side
    axis = axis if along >= 0 else -axis
    offsets = (chamber.surface.vertices - moments.centre) @ np.column_stack([axis, vectors[:, 1], vectors[:, 2]])
    low, high = offsets.min(axis=0), offsets.max(axis=0)
    length, bore = high[0] - low[0], float((high - low)[1:].min())
    row = balls.count * balls.diameter
    if row > length * (1 + 1e-9) or balls.diameter > bore * (1 + 1e-9):
        raise InputError(Fault(
            what=f"the balls do not fit into '{balls.chamber}'",
            where=f"balls in '{balls.chamber}'",
            found=f"{balls.count} of {balls.diameter * 1e3:.4g} mm, a row of {row * 1e3:.4g} mm",
            allowed=f"a bore of {bore * 1e3:.4g} mm and a length of {length * 1e3:.4g} mm",
            next_step="take fewer or smaller balls, or draw the chamber larger",
        ))
    steps = (np.arange(balls.count) + 0.5) * balls.diameter
    return BallRow(
        balls=balls,
        axis=axis,
        places={
            "nose": moments.centre + np.outer(high[0] - steps, axis),
            "tail": moments.centre + np.outer(low[0] + steps, axis),
        },
        flooded=chamber.flooded,
    )
