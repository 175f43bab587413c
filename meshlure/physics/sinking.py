"""Sinking: how fast a bait wholly under water sinks or rises, at which attitude and along which path."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Final

import numpy as np

from meshlure.physics import buoyancy
from meshlure.physics.course import Course, course, free_fall_speed, holds, steady_motion
from meshlure.physics.glider import glider
from meshlure.physics.passage import LEADS, Passage
from meshlure.physics.repose import Vessel
from meshlure.physics.submerged import ALONG, UP, Submerged, added_mass
from meshlure.tolerances import GRAVITY

DEPTHS: Final = (1.0, 3.0)
"""m. Ways down or up that are timed."""

_SAME_PITCH: Final = np.radians(3.0)
_SAME_SPEED: Final = 0.03
"""Pitch (rad) and share of the speed within which two motions are the same."""

FIRST_GUESS: Final = 0.2
"""m/s. Speed for whose Reynolds number the drag is worked out first."""

_CLOSE: Final = 0.05
"""Share within which the speed found must be that of the drag."""

_FAR: Final = 0.25
"""Share by which the motion followed may differ from that speed before it is followed again with its own drag."""

_ROUNDS: Final = 4


@dataclass(frozen=True)
class Sinking:
    """How a bait sinks or rises.

    Attributes
    ----------
    suspends : bool
        Then the speed is only what weight less buoyancy gives straight up or down in the hanging posture, and no way
        is timed.
    speed, speed_low, speed_high : float, m/s
        Downward, negative where it rises, with the band that the body's drag gives; low is the one nearer to zero.
        Weight and buoyancy are taken as exact.
    nose_up : float, rad
    overturned : bool
        Whether its belly is up.
    glide : float, rad
        Of the path from the vertical, positive where it leads to the side that the nose points to.
    seconds : tuple of float or None, s
        To 1 m and to 3 m; None where it suspends or takes longer than ten minutes.
    settles : bool
        Whether the motion becomes steady.
    courses : tuple of Course
        From the hanging posture, where it has one, and from level; none where it suspends. All numbers above are of the
        first.
    same : bool
        Whether all starts end alike.
    """

    suspends: bool
    speed: float
    speed_low: float
    speed_high: float
    nose_up: float
    overturned: bool
    glide: float
    seconds: tuple[float | None, ...]
    settles: bool
    courses: tuple[Course, ...]
    same: bool


def submerged(vessel: Vessel, ends: Mapping[str, str], way: Passage, viscosity: float) -> Submerged:
    """Return a bait ready to move under water.

    Parameters
    ----------
    vessel : Vessel
    ends : mapping
        Where the balls lie.
    way : Passage
    viscosity : float, m2/s
        Kinematic, of the water.
    """
    hull, mass = vessel.hull(ends), vessel.composition.mass(ends)
    wings = glider(way, vessel.composition.skin, vessel.hardware, vessel.frame, FIRST_GUESS, vessel.water, viscosity)
    added = added_mass(way.stations, wings.fineness, float(hull.centre @ vessel.frame.nose), vessel.water)
    return Submerged(vessel.frame, mass, hull.volume, hull.centre, vessel.water, wings, way.stations, added)


def sinking(body: Submerged, way: Passage, viscosity: float, suspends_within: float | None = None) -> Sinking:
    """Return how a bait sinks or rises, wholly under water.

    Parameters
    ----------
    body : Submerged
    way : Passage
        For its drag at the speed found.
    viscosity : float, m2/s
        Kinematic, of the water.
    suspends_within : float or None, kg
        Reserve within which it suspends; two thousandths of what it displaces where left out.

    Notes
    -----
    Motion in the plane of nose and back alone, from rest, once from the hanging posture and once from level, with
    added mass and turning resistance (`Submerged`), its end settled by a root solve and tried for stability by its
    linear modes. The balls stay where they are. Left out are lean and roll, the sway that shed vortices drive, water
    that runs in hollows, and the line.
    """
    limit = buoyancy.suspends_within(body.density * body.volume, suspends_within)
    hanging = body.hanging()
    pitch = 0.0 if hanging is None else hanging
    body, speed = _at_its_speed(body, way, viscosity, pitch)
    if abs(body.net) <= limit * GRAVITY:
        return _suspended(body, way, viscosity, pitch)
    starts = {"level": 0.0} if hanging is None else {"hanging": hanging, "level": 0.0}
    courses = tuple(course(body, start, angle, DEPTHS) for start, angle in starts.items())
    if abs(courses[0].through - speed) > _FAR * speed:
        body = _with_drag(body, way, viscosity, courses[0].through)
        courses = tuple(course(body, start, angle, DEPTHS) for start, angle in starts.items())
    first = courses[0]
    low, high = _band(body, way, viscosity, first.towards, first.through)
    return Sinking(
        suspends=False,
        speed=first.speed,
        speed_low=first.speed * low,
        speed_high=first.speed * high,
        nose_up=first.nose_up,
        overturned=first.overturned,
        glide=first.glide,
        seconds=first.seconds,
        settles=first.settles,
        courses=courses,
        same=all(_alike(first, other) for other in courses[1:]),
    )


def _suspended(body: Submerged, way: Passage, viscosity: float, pitch: float) -> Sinking:
    sign = 1.0 if body.net < 0 else -1.0
    speed = free_fall_speed(body, pitch)
    down = -sign * (np.sin(pitch) * body.frame.nose + np.cos(pitch) * body.frame.back)
    low, high = _band(body, way, viscosity, tuple(down), speed) if speed > 0 else (1.0, 1.0)
    return Sinking(
        suspends=True,
        speed=sign * speed,
        speed_low=sign * speed * low,
        speed_high=sign * speed * high,
        nose_up=float(np.arcsin(np.sin(pitch))),
        overturned=bool(np.cos(pitch) < 0),
        glide=0.0,
        seconds=(None,) * len(DEPTHS),
        settles=True,
        courses=(),
        same=True,
    )


def _at_its_speed(body: Submerged, way: Passage, viscosity: float, pitch: float) -> tuple[Submerged, float]:
    """The bait with the drag of its steady motion, or of a straight fall where it has none, and that speed."""
    speed = FIRST_GUESS
    if body.net == 0:
        return body, speed
    for _ in range(_ROUNDS):
        found = _likely_speed(body, pitch)
        if abs(found - speed) <= _CLOSE * speed:
            break
        speed = found
        body = _with_drag(body, way, viscosity, speed)
    return body, speed


def _likely_speed(body: Submerged, pitch: float) -> float:
    """Speed of the steady motion that holds near the hanging posture, else near level, else of a straight fall, m/s."""
    for near in (pitch, 0.0):
        fall = free_fall_speed(body, near) * float(np.sign(-body.net))
        state = steady_motion(body, np.array([near, -fall * np.sin(near), -fall * np.cos(near), 0.0]))
        if state is not None and holds(body, state):
            return float(np.hypot(state[ALONG], state[UP]))
    return free_fall_speed(body, pitch)


def _with_drag(body: Submerged, way: Passage, viscosity: float, speed: float) -> Submerged:
    wings = body.glider
    axial = {end: way.drag(end, speed, body.density, viscosity, None).parts.body for end in LEADS}
    wings = replace(
        wings,
        nose_first=replace(wings.nose_first, axial=axial["nose"]),
        tail_first=replace(wings.tail_first, axial=axial["tail"]),
    )
    return replace(body, glider=wings)


def _band(
    body: Submerged, way: Passage, viscosity: float, towards: tuple[float, ...], speed: float
) -> tuple[float, float]:
    """Shares of the speed at the ends of the body's drag band: all that it meets along its path strays alike."""
    direction = np.array(towards)
    drag = way.drag("nose" if direction @ body.frame.nose >= 0 else "tail", speed, body.density, viscosity, None)
    whole = float(-(body.glider.loads(direction).force[0] @ direction))
    alone = float(body.glider.body_area(direction)[0])
    shares = [np.sqrt(whole / (whole + alone * (cd / drag.cd - 1))) for cd in (drag.cd_high, drag.cd_low)]
    return float(shares[0]), float(shares[1])


def _alike(one: Course, other: Course) -> bool:
    return (
        one.settles == other.settles
        and one.overturned == other.overturned
        and abs(one.nose_up - other.nose_up) <= _SAME_PITCH
        and abs(one.speed - other.speed) <= _SAME_SPEED * max(abs(one.speed), abs(other.speed))
    )
