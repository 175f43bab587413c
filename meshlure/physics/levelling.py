"""Levelling: which small change brings a bait's resting posture to a wanted angle."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.bait.composition import Part
from meshlure.bait.pieces import Role
from meshlure.geometry.surface import Floats
from meshlure.physics.posture import horizontal
from meshlure.physics.repose import Ends, Vessel

_ROUNDS: Final = 8
_ACROSS: Final = 0.1
"""Share of a direction that must lie along the water: ballast that moves straight up levels nothing."""
_DENSE: Final = 4000.0
"""kg/m3. A piece at least so dense is ballast: it is what a maker would move."""


@dataclass(frozen=True)
class Move:
    """A piece of ballast moved.

    Attributes
    ----------
    piece : str
    by : float, m
        Along the direction asked for, negative against it.
    """

    piece: str
    by: float


@dataclass(frozen=True)
class Weight:
    """A weight added.

    Attributes
    ----------
    net : float, kg
        Its mass less that of the water or of the body that it takes the place of.
    along : float, m
        Of its place along the nose direction.
    reserve : float, kg
        That is left with it.
    """

    net: float
    along: float
    reserve: float


def ballast_move(vessel: Vessel, ends: Ends, up: Floats, direction: Floats) -> Move | None:
    """Return how far the ballast must move in a direction for a wanted posture; None without ballast.

    Parameters
    ----------
    vessel : Vessel
    ends : dict
        Where balls lie.
    up : (3,) array
        Up in the posture wanted.
    direction : (3,) array
        Unit vector: out of the nose to mend nose_up, to the side to mend lean.

    Notes
    -----
    The mass stays, so that the draught in the wanted posture is known, and with it how far the centre of gravity is off
    the vertical through that of buoyancy; the ballast makes up for it. The body's material fills the place it leaves.
    """
    ballast = _ballast(vessel)
    if ballast is None:
        return None
    mass = vessel.composition.mass(ends)
    ahead = horizontal(direction, up)
    lever = float((_buoyancy(vessel, ends, up, mass.amount) - mass.centre) @ ahead)
    body = vessel.composition.parts[0].substance
    net = ballast.mass.amount - ballast.volume * (0.0 if body is None else body.density)
    along = float(direction @ ahead)
    return Move(ballast.name, lever * mass.amount / (net * along)) if net > 0 and along > _ACROSS else None


def weight_for_level(vessel: Vessel, ends: Ends, up: Floats, places: tuple[float, float]) -> Weight | None:
    """Return the weight at one of two places along the bait that brings it to a wanted posture; None where it sinks it.

    Parameters
    ----------
    vessel : Vessel
    ends : dict
    up : (3,) array
    places : (float, float), m
        Along the nose direction, at the height of the centre of gravity: near the nose and near the tail.
    """
    mass, frame = vessel.composition.mass(ends), vessel.frame
    whole = vessel.hull(ends).volume * vessel.water
    ahead = horizontal(frame.nose, up)
    for along in places:
        place = mass.centre + (along - float(mass.centre @ frame.nose)) * frame.nose
        net = 0.0
        for _ in range(_ROUNDS):
            if not 0 <= net < whole - mass.amount:
                break
            centre = _buoyancy(vessel, ends, up, mass.amount + net)
            arm = float((place - centre) @ ahead)
            if arm == 0:
                break
            net = mass.amount * float((centre - mass.centre) @ ahead) / arm
        if 0 < net < whole - mass.amount:
            return Weight(net, along, whole - mass.amount - net)
    return None


def _ballast(vessel: Vessel) -> Part | None:
    dense = [
        part
        for part in vessel.composition.parts
        if part.role is Role.INSERT and part.substance is not None and part.substance.density >= _DENSE
    ]
    loose = [part for part in dense if part.volume > 0]
    return max(loose, key=lambda part: _compact(part), default=None)


def _compact(part: Part) -> float:
    """Mass over its spread: a wire through the whole bait is no ballast to be moved."""
    return part.mass.amount / (1e-3 + float(np.sqrt(np.trace(part.mass.second) / part.mass.amount)))


def _buoyancy(vessel: Vessel, ends: Ends, up: Floats, mass: float) -> Floats:
    hull = vessel.hull(ends)
    volume = mass / vessel.water
    return hull.centre if volume >= hull.volume else hull.settled(up, volume, close=1e-9).centre
