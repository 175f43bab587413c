"""Trajectory: the flight of a thrown body through air, with drag, wind and the pull of the line."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.surface import Floats
from meshlure.tolerances import GRAVITY

LONGEST: Final = 60.0
"""s. No throw by hand lasts longer."""

_PRECISION: Final = 1e-9


@dataclass(frozen=True, eq=False)
class Throw:
    """How a body is thrown.

    Attributes
    ----------
    speed : float, m/s
    angle : float, rad
        Above the horizontal.
    height : float, m
        Of the release above the water.
    pull : float, N
        Of the line, against the flight.
    wind : float, m/s
        From behind.
    """

    speed: float
    angle: float
    height: float
    pull: float = 0.0
    wind: float = 0.0


@dataclass(frozen=True, eq=False)
class Trajectory:
    """A flight down to the water.

    Attributes
    ----------
    distance : float, m
    seconds : float, s
    splash_speed : float, m/s
    splash_angle : float, rad
        Below the horizontal.
    x, y : (n,) arrays, m
        Along the flight and above the water, evenly spread in time.
    """

    distance: float
    seconds: float
    splash_speed: float
    splash_angle: float
    x: Floats
    y: Floats


def trajectory(
    mass: float, drag_area: float | Callable[[float], float], throw: Throw, density: float, points: int = 61
) -> Trajectory:
    """Return the flight of a body of a drag area.

    Parameters
    ----------
    mass : float, kg
    drag_area : float or callable, m2
        Drag coefficient times area; a callable is given the speed through the air, m/s.
    throw : Throw
    density : float, kg/m3
        Of the air.
    points : int
        Of the path returned.

    Raises
    ------
    ValueError
        Where mass, density or speed is not positive, where the line pulls as hard as the body weighs, or where the
        body is still in the air after a minute.

    Notes
    -----
    m dv/dt = -rho/2 C_D A |w| w - m g - T v/|v|, w the speed through the air; eighth-order Runge-Kutta (Dormand and
    Prince) to 1e-9. The buoyancy of the air, lift and spin are neglected.
    """
    from scipy.integrate import solve_ivp

    if not (mass > 0 and density > 0 and throw.speed > 0):
        raise ValueError(f"a throw has mass, air and speed, not {mass} kg, {density} kg/m3, {throw.speed} m/s")
    if not 0 <= throw.pull < mass * GRAVITY:
        raise ValueError(f"a line that pulls {throw.pull:g} N stops a bait of {mass * GRAVITY:.3g} N weight in the air")
    area = drag_area if callable(drag_area) else (lambda _: drag_area)

    def change(_: float, state: Floats) -> list[float]:
        vx, vy = float(state[2]), float(state[3])
        wx = vx - throw.wind
        through, over = float(np.hypot(wx, vy)), float(np.hypot(vx, vy))
        drag = density / 2 * area(through) * through / mass
        line = throw.pull / (mass * over) if over > 0 else 0.0
        return [vx, vy, -drag * wx - line * vx, -drag * vy - line * vy - GRAVITY]

    def lands(_: float, state: Floats) -> float:
        return float(state[1])

    lands.terminal = True  # type: ignore[attr-defined]
    lands.direction = -1  # type: ignore[attr-defined]
    start = [0.0, throw.height, throw.speed * np.cos(throw.angle), throw.speed * np.sin(throw.angle)]
    found = solve_ivp(
        change,
        (0.0, LONGEST),
        start,
        method="DOP853",
        events=lands,
        dense_output=True,
        rtol=_PRECISION,
        atol=_PRECISION,
    )
    if found.t_events is None or found.y_events is None or found.sol is None or not len(found.t_events[0]):
        raise ValueError(f"still in the air after {LONGEST:g} s")
    seconds = float(found.t_events[0][0])
    x, _, vx, vy = (float(value) for value in found.y_events[0][0])
    path = found.sol(np.linspace(0.0, seconds, points))
    return Trajectory(x, seconds, float(np.hypot(vx, vy)), float(np.arctan2(-vy, vx)), path[0], path[1])


def sphere_drag_area(diameter: float, viscosity: float) -> Callable[[float], float]:
    """Return the drag area of a smooth sphere, m2, as a function of its speed, m/s.

    Parameters
    ----------
    diameter : float, m
    viscosity : float, m2/s
        Kinematic, of the fluid.

    Notes
    -----
    The drag coefficient by Reynolds number from the library ``fluids`` (its default correlation).
    """
    from fluids.drag import drag_sphere

    area = np.pi * diameter**2 / 4

    def at(speed: float) -> float:
        # Below a thousandth of a metre a second the drag is nothing, and the correlation without limit.
        return float(area * drag_sphere(max(speed, 1e-3) * diameter / viscosity))

    return at


def launch_speed(distance: float, fly: Callable[[float], float], fastest: float) -> float | None:
    """Return the speed at which a throw reaches a distance, m/s; None where even the fastest falls short.

    Parameters
    ----------
    distance : float, m
    fly : callable
        Distance, m, of a throw at a speed, m/s.
    fastest : float, m/s
    """
    from scipy.optimize import brentq

    slowest = 0.1
    if not fly(slowest) < distance <= fly(fastest):
        return None
    return float(brentq(lambda speed: fly(speed) - distance, slowest, fastest, xtol=1e-6))
