"""Flight: which end of a thrown bait leads, whether it flies steadily, and how far."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Final

import numpy as np

from meshlure.geometry.moments import Moments
from meshlure.geometry.surface import Floats
from meshlure.physics.loads import Glider
from meshlure.physics.posture import spread_directions
from meshlure.physics.trajectory import Throw, Trajectory, trajectory
from meshlure.physics.trim import OURS, STEP, Bearing, Limits, MomentCurve, bearing, leading

PLANES: Final = ("pitch", "yaw")
OFF_END: Final = np.radians(15.0)
"""rad off the leading end at which the centre of pressure is taken: at a trim its margin is zero by definition."""

DIRECTIONS: Final = 400
"""Directions over which a tumbling bait's drag is averaged."""

_NUDGE: Final = 0.02
_HEAVY: Final = 0.85
_ROUNDS: Final = (12, 60)
_STILL: Final = 3e-4
"""The search for a trim in both planes: how far off its balance it starts (rad), the share of its step that it keeps
to the next, its least and most steps, and the step (rad) that ends it."""

ANGLES: Final = np.radians(np.arange(5, 80, 5))
"""Launch angles of the curve of distance."""


@dataclass(frozen=True, eq=False)
class Air:
    """The air and the throw that a flight is in.

    Attributes
    ----------
    density : float, kg/m3
    throw : Throw
    tie : (3,) array or None, m
        Where the line pulls; None leaves its moment out.
    limits : Limits
        What separates the verdicts.
    """

    density: float
    throw: Throw
    tie: Floats | None
    limits: Limits = OURS


@dataclass(frozen=True, eq=False)
class Flight:
    """How a bait flies.

    Attributes
    ----------
    bearing : Bearing
        Of the end that leads.
    other : Bearing
        Of the other end.
    curves : tuple of MomentCurve
        pitch and yaw.
    towards : (3,) array
        Direction of motion, in mesh coordinates, at the leading end's trim; along the end itself where it tumbles.
    swing_hz : float or None
        Of the slower plane about the leading end's trim; None where it has none.
    pressure_margin : float or None, m
        By how much the centre of gravity lies ahead of the centre of pressure, 15 degrees off the leading end, in the
        worse plane.
    drag_area : float, m2
        At the trim, or the mean over all directions where it tumbles.
    path, farthest, nearest : Trajectory
        With that drag area, and with those at the ends of its band.
    """

    bearing: Bearing
    other: Bearing
    curves: tuple[MomentCurve, ...]
    towards: Floats
    swing_hz: float | None
    pressure_margin: float | None
    drag_area: float
    path: Trajectory
    farthest: Trajectory
    nearest: Trajectory


def plane_axes(glider: Glider) -> dict[str, Floats]:
    """Return the lateral direction of each plane: pitch sees the plan area, yaw the side area."""
    return {"pitch": glider.frame.back, "yaw": glider.frame.side}


def moment_curves(glider: Glider, mass: Moments, air: Air) -> tuple[MomentCurve, ...]:
    """Return the turning moments about the centre of gravity in both planes at the speed of the throw.

    Parameters
    ----------
    glider : Glider
        For air at that speed.
    mass : Moments, kg
    air : Air
    """
    angle = np.arange(-np.pi, np.pi + STEP / 2, STEP)
    nose = glider.frame.nose
    curves = []
    for plane, lateral in plane_axes(glider).items():
        towards = np.cos(angle)[:, None] * nose + np.sin(angle)[:, None] * lateral
        hinge = np.cross(nose, lateral)
        force, moment = _acting(glider, mass, air, towards)
        curves.append(MomentCurve(plane, angle, moment @ hinge, float(hinge @ mass.inertia @ hinge), force @ lateral))
    return tuple(curves)


def _acting(glider: Glider, mass: Moments, air: Air, towards: Floats) -> tuple[Floats, Floats]:
    """Forces, and moments about the centre of gravity, of air and line for directions of motion, (n, 3) arrays."""
    pressure, loads = air.density * air.throw.speed**2 / 2, glider.loads(towards)
    force, moment = pressure * loads.force, pressure * loads.about(mass.centre)
    if air.tie is not None and air.throw.pull:
        pull = -air.throw.pull * towards
        force, moment = force + pull, moment + np.cross(air.tie - mass.centre, pull)
    return force, moment


def fly(
    glider: Glider, mass: Moments, air: Air, band: Mapping[str, tuple[float, float]], end: str | None = None
) -> Flight:
    """Return how a bait flies with the end that leads, or with a given one.

    Parameters
    ----------
    glider : Glider
        For air at the speed of the throw.
    mass : Moments, kg
    air : Air
    band : mapping
        By end: ends of the body's drag as shares of it.
    end : str, optional
        nose or tail, to be taken for the leading one.

    Notes
    -----
    The trim is that at the speed of the throw and is kept all the way. A line that pulls as hard when the bait has
    slowed down would straighten it (a stick that trims at 47 degrees then reaches a quarter farther); but what it
    pulls falls with the speed too, and how much is not known. The lift at the trim is left out: the bait rolls and
    swings, and it shows no one side to the air for long.
    """
    curves = moment_curves(glider, mass, air)
    lead = leading(curves, air.limits) if end is None else bearing(curves, end, air.limits)
    other = bearing(curves, "tail" if lead.end == "nose" else "nose", air.limits)
    towards = _towards(glider, mass, air, curves, lead)
    everywhere = spread_directions(DIRECTIONS) if lead.verdict == "tumbles" else towards[None, :]
    whole = float(-np.einsum("ij,ij->i", glider.loads(everywhere).force, everywhere).mean())
    body = float(glider.body_area(everywhere).mean())
    low, high = band[lead.end]
    paths = [
        trajectory(mass.amount, max(whole + body * (share - 1), 1e-9), air.throw, air.density)
        for share in (1.0, low, high)
    ]
    return Flight(
        bearing=lead,
        other=other,
        curves=curves,
        towards=towards,
        swing_hz=_swing(curves, lead),
        pressure_margin=_pressure_margin(glider, mass, lead.end),
        drag_area=whole,
        path=paths[0],
        farthest=paths[1],
        nearest=paths[2],
    )


def _towards(glider: Glider, mass: Moments, air: Air, curves: tuple[MomentCurve, ...], lead: Bearing) -> Floats:
    """Direction of motion in which the bait, leading end first, comes to rest in both planes at once.

    Notes
    -----
    From the trim of the plane that is farther off the bait is let turn as its moments bid, without inertia. Adding the
    trims of both planes up would count the angle of a round bait's trim, which lies on a cone, twice.
    """
    nose = glider.frame.nose
    direction = nose if lead.end == "nose" else -nose
    if lead.verdict == "tumbles":
        return np.asarray(direction)
    offs = []
    for curve, lateral in zip(curves, plane_axes(glider).values(), strict=True):
        trim = curve.nearest_trim(lead.end)
        away = 0.0 if trim is None else abs(trim.from_end(lead.end))
        # From the tail, the angle grows the other way round: a positive one still leans towards the lateral side.
        side = 0.0 if trim is None else np.sign(np.sin(trim.angle))
        offs.append((away, np.cos(away) * direction + side * np.sin(away) * lateral))
    towards = max(offs, key=lambda off: off[0])[1] + _NUDGE * glider.frame.back + _NUDGE * glider.frame.side
    towards = towards / np.linalg.norm(towards)
    stiffest = max(float(np.abs(np.diff(curve.moment)).max()) for curve in curves) / STEP
    step = np.zeros(3)
    for number in range(_ROUNDS[1]):
        moment = _acting(glider, mass, air, towards[None, :])[1][0]
        # The bait turns by the moment, so that the motion turns the other way in its own frame; roll is left out.
        step = _HEAVY * step + np.cross(towards, moment - (moment @ nose) * nose) / stiffest
        towards = towards + step
        towards = towards / np.linalg.norm(towards)
        if number >= _ROUNDS[0] and float(np.linalg.norm(step)) < _STILL:
            break
    return np.asarray(towards)


def _swing(curves: tuple[MomentCurve, ...], lead: Bearing) -> float | None:
    found = []
    for curve in curves:
        trim = curve.nearest_trim(lead.end)
        if trim is None:
            return None
        found.append(float(np.sqrt(trim.slope / curve.inertia)) / (2 * np.pi))
    return min(found)


def _pressure_margin(glider: Glider, mass: Moments, end: str) -> float | None:
    """Lever of the lateral force behind the centre of gravity, the lesser of both planes and sides."""
    sign = 1.0 if end == "nose" else -1.0
    levers = []
    for lateral in plane_axes(glider).values():
        for side in (-1.0, 1.0):
            towards = sign * np.cos(OFF_END) * glider.frame.nose + side * np.sin(OFF_END) * lateral
            loads = glider.loads(towards)
            force = float(loads.force[0] @ lateral) * -side
            if force <= 0:
                return None
            turning = float(loads.about(mass.centre)[0] @ np.cross(sign * glider.frame.nose, lateral)) * side
            levers.append(turning / force)
    return min(levers)


def distances(mass: float, drag_area: float, air: Air) -> Floats:
    """Return the distance over the launch angles, (n,) array, m."""
    throw = air.throw
    return np.array(
        [trajectory(mass, drag_area, replace(throw, angle=float(angle)), air.density, 2).distance for angle in ANGLES]
    )
