"""What becomes of a bait with given ballast: its reserve, how it rests or hangs, how stiffly."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from meshlure.bait.composition import Part
from meshlure.bait.pieces import Role
from meshlure.geometry.moments import NOTHING, Moments
from meshlure.geometry.surface import Floats
from meshlure.making.altered import altered
from meshlure.making.balance.aim import Aim
from meshlure.making.balance.ground import Ground
from meshlure.physics.passage import Passage
from meshlure.physics.posture import Attitude, attitude, horizontal, nose_is_vertical
from meshlure.physics.repose import Ends, Vessel
from meshlure.physics.sinking import sinking, submerged

_BELOW = 2e-3
"""m. Of the centre of gravity below that of buoyancy in a bait that sinks, to begin with."""
_SPEED_ROUNDS = 6
_SPEED_CLOSE = 0.02
_AFLOAT = 1e-6
"""kg. With less reserve a bait is as good as under water."""
_TILT_MEETS = np.cos(np.radians(1.0))
"""Two postures closer than this are one."""


@dataclass(frozen=True, eq=False)
class Metacentric:
    """Metacentric heights, m; fore_aft and sideways None with the nose near the vertical.

    Under water every height is the distance between the two centres.
    """

    fore_aft: float | None
    sideways: float | None
    least: float


@dataclass(frozen=True, eq=False)
class Outcome:
    """How a bait with ballast behaves.

    Attributes
    ----------
    ends : dict
        Where balls of its chambers lie.
    reserve : float, kg
    up : (3,) array or None
        None where it has no preferred attitude under water.
    angles : Attitude or None
    metacentric : Metacentric
    """

    ends: Ends
    reserve: float
    up: Floats | None
    angles: Attitude | None
    metacentric: Metacentric

    def off(self, goal: Aim) -> tuple[float, float]:
        """Return by how much nose_up and lean miss an aim, rad; half a turn where there is no attitude."""
        if self.angles is None:
            return float(np.pi), float(np.pi)
        lean = 0.0 if self.angles.lean is None else self.angles.lean - goal.lean
        turned = (lean + np.pi) % (2 * np.pi) - np.pi
        return self.angles.nose_up - goal.nose_up, float(turned)


def outcome(vessel: Vessel, goal: Aim, ends: Ends) -> Outcome:
    """Return how a bait behaves, as reached from the posture wanted.

    Parameters
    ----------
    vessel : Vessel
    goal : Aim
    ends : dict
        Where its balls lie in the posture wanted; where they do not stay there in the one that is reached, the ends at
        which they do are taken.
    """
    settings = [ends, *(other for other in vessel.settings() if other != ends)]
    first: Outcome | None = None
    for setting in settings:
        found, held = _outcome(vessel, goal, setting)
        if held:
            return found
        first = first or found
    assert first is not None
    return first


def _outcome(vessel: Vessel, goal: Aim, ends: Ends) -> tuple[Outcome, bool]:
    """How it behaves with its balls at some ends, and whether they stay there."""
    frame, mass = vessel.frame, vessel.composition.mass(ends)
    reserve = vessel.hull(ends).volume * vessel.water - mass.amount
    repose = vessel.reposed(ends, goal.up) if reserve > _AFLOAT else None
    if repose is None:
        dangle = vessel.dangle(ends)
        hang = dangle.hang
        heights = Metacentric(hang.stiffness, hang.stiffness, hang.stiffness)
        angles = None if hang.up is None else attitude(hang.up, frame.nose, frame.back, frame.side)
        return Outcome(ends, reserve, hang.up, angles, heights), dangle.held
    state = repose.rest.state
    angles = attitude(state.up, frame.nose, frame.back, frame.side)
    least = float(state.modes()[0][0])
    fore_aft = sideways = None
    if not nose_is_vertical(state.up, frame.nose):
        ahead = horizontal(frame.nose, state.up)
        fore_aft = state.metacentric(ahead)
        sideways = state.metacentric(np.cross(state.up, ahead))
    return Outcome(ends, reserve, state.up, angles, Metacentric(fore_aft, sideways, least)), repose.held


def lands_upright(vessel: Vessel, found: Outcome, goal: Aim) -> bool:
    """Tell whether a floating bait comes to rest in its posture from back up, as after a good landing."""
    if not goal.floats or found.up is None:
        return True
    repose = vessel.landed(found.ends)
    return repose is not None and bool(repose.rest.state.up @ found.up > _TILT_MEETS)


def sinking_speed(vessel: Vessel, ends: Ends, way: Passage, viscosity: float) -> float:
    """Return how fast a bait sinks, m/s; negative where it rises."""
    return sinking(submerged(vessel, ends, way, viscosity), way, viscosity).speed


def reserve_for_speed(ground: Ground, goal: Aim, way: Passage) -> float:
    """Return about the reserve with which a bait sinks at the speed of an aim, kg, whatever makes it so heavy.

    Notes
    -----
    The mass is taken as lying straight below the centre of buoyancy, as far as ballast low in a body brings it; drag
    that grows with the square of the speed gives the next guess.
    """
    assert goal.sink is not None
    ends = ground.ends(goal.up)
    hull, base = ground.vessel.hull(ends), ground.mass(ends)
    displaced = hull.volume * ground.vessel.water
    reserve = goal.reserve
    for _ in range(_SPEED_ROUNDS):
        mass = displaced - reserve
        wanted = Moments(mass, mass * (hull.centre - _BELOW * goal.up), base.second)
        part = Part("ballast", Role.INSERT, None, 0.0, wanted - base, hull.centre)
        vessel = replace(ground.vessel, composition=altered(ground.composition, NOTHING, [part]))
        speed = sinking_speed(vessel, ends, way, ground.bait.water.viscosity)
        if speed <= 0 or abs(speed / goal.sink - 1) <= _SPEED_CLOSE:
            break
        reserve *= (goal.sink / speed) ** 2
    return reserve
