"""Course: the motion of a bait under water from rest until it is steady, or until it is plain that it swings on."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.surface import Floats
from meshlure.physics.submerged import ALONG, PITCH, UP, Submerged
from meshlure.tolerances import NOSE_VERTICAL

LONGEST: Final = 600.0
"""s. A bait that takes longer for its way is not waited for."""

_LENGTHS: Final = 4.0
_SWINGS: Final = (1.5, 10.0)
"""A window of time holds four of its own lengths travelled, but at least and at most so many swings."""

_WINDOWS: Final = 12
"""Windows after which a motion that is still unsteady is not followed further."""

_ENOUGH: Final = (12.0, 20.0, 60.0)
"""Nor after so many lengths and swings, or after so many more swings."""

_POINTS: Final = 48

_STILL_PITCH: Final = np.radians(0.05)
_STILL_SPEED: Final = 2e-3
"""How little pitch (rad) and speed (share) vary over a window of steady motion."""

_NUDGE: Final = np.radians(1.0)
"""rad. Every start is so far off, or a bait would stay in a balance that the least disturbance ends."""

_NEAR: Final = np.radians(20.0)
"""rad between the mean pitch of the last window and that of the steady motion that it is taken to lead to."""

_PRECISION: Final = 1e-5


@dataclass(frozen=True)
class Course:
    """How a bait moves on from one start, at rest and wholly under water.

    Attributes
    ----------
    start : str
        hanging or level.
    speed : float, m/s
        Downward; negative where it rises.
    through : float, m/s
        Along its path, through the water.
    nose_up : float, rad
        Nose above the horizontal, between -pi/2 and pi/2.
    overturned : bool
        Whether its belly is up, and the nose not near the vertical.
    glide : float, rad
        Of the path from the vertical, positive where it leads to the side that the nose points to.
    seconds : tuple of float or None, s
        For each way asked; None where it takes longer than ten minutes.
    settles : bool
        Whether the motion becomes steady. Else it swings on, and the numbers are means over the last of it.
    towards : (3,) tuple
        Direction of motion, mesh coordinates.
    """

    start: str
    speed: float
    through: float
    nose_up: float
    overturned: bool
    glide: float
    seconds: tuple[float | None, ...]
    settles: bool
    towards: tuple[float, float, float]


def free_fall_speed(body: Submerged, pitch: float) -> float:
    """Return the speed at which a bait held at a pitch sinks straight down or rises straight up, m/s.

    Notes
    -----
    sqrt(2 |W - B|/(rho C A)), C A the drag area along the path.
    """
    if body.net == 0:
        return 0.0
    area = body.drag_area(pitch, float(np.sign(body.net)))
    return float(np.sqrt(2 * abs(body.net) / (body.density * area)))


def steady_motion(body: Submerged, guess: Floats) -> Floats | None:
    """Return the steady motion near a guess, (4,) array, as a state; None where none is found.

    Parameters
    ----------
    body : Submerged
    guess : (4,) array
        A state.
    """
    from scipy.optimize import root

    speed = max(float(np.hypot(guess[ALONG], guess[UP])), 1e-6)
    force, arm = max(abs(body.net), 1e-9), body.cuts.length

    def left(unknown: Floats) -> Floats:
        state = np.array([unknown[0], unknown[1] * speed, unknown[2] * speed, 0.0])
        return np.asarray(body.acting(state) / (force, force, force * arm))

    found = root(left, [guess[PITCH], guess[ALONG] / speed, guess[UP] / speed], tol=1e-10)
    if not found.success or float(np.abs(found.fun).max()) > 1e-6:
        return None
    return np.array([found.x[0], found.x[1] * speed, found.x[2] * speed, 0.0])


def holds(body: Submerged, state: Floats) -> bool:
    """Return whether a steady motion comes back after a small disturbance.

    Notes
    -----
    All modes of the equations of motion, made linear by central differences about that state, die away.
    """
    speed = max(float(np.hypot(state[ALONG], state[UP])), 1e-6)
    steps = np.array([1e-4, 1e-4 * speed, 1e-4 * speed, 1e-4 * speed / body.cuts.length])
    columns = []
    for k, step in enumerate(steps):
        off = np.zeros(4)
        off[k] = step
        columns.append((body.change(state + off) - body.change(state - off)) / (2 * step))
    return bool(np.linalg.eigvals(np.column_stack(columns)).real.max() < 0)


def course(body: Submerged, start: str, pitch: float, ways: Sequence[float]) -> Course:
    """Return how a bait moves on from rest at a pitch, a degree off.

    Parameters
    ----------
    body : Submerged
        Not without weight in the water.
    start : str
        What to call it.
    pitch : float, rad
    ways : sequence of float, m
        Down or up, to be timed.
    """
    path = _followed(body, pitch)
    last = path.last
    mean = last[:, :4].mean(axis=0)
    found = steady_motion(body, np.array([*mean[:3], 0.0]))
    settles = found is not None and abs(found[PITCH] - mean[PITCH]) < _NEAR and holds(body, found)
    state = found if settles and found is not None else mean
    down, ahead = (float(np.mean(rate)) for rate in _rates(state if settles else last.T))
    cosine = float(np.cos(state[PITCH]))
    moves = state[ALONG] * body.frame.nose + state[UP] * body.frame.back
    moves = moves / np.linalg.norm(moves)
    return Course(
        start=start,
        speed=down,
        through=float(np.hypot(down, ahead)),
        nose_up=float(np.arcsin(np.sin(state[PITCH]))),
        overturned=cosine < -np.sin(np.radians(NOSE_VERTICAL)),
        glide=float(np.arctan2(ahead * (1 if cosine >= 0 else -1), abs(down))),
        seconds=tuple(path.seconds(way, down) for way in ways),
        settles=settles,
        towards=(float(moves[0]), float(moves[1]), float(moves[2])),
    )


@dataclass(frozen=True, eq=False)
class _Path:
    """A motion from rest: times, and states with depth below the start and way ahead of it."""

    time: Floats
    states: Floats
    last: Floats

    def seconds(self, way: float, speed: float) -> float | None:
        """Time for a way up or down: as followed, then on at the final speed."""
        depth = np.maximum.accumulate(self.states[:, 4] * np.sign(speed))
        if depth[-1] >= way:
            taken = float(np.interp(way, depth, self.time))
        elif speed != 0:
            taken = float(self.time[-1] + (way - depth[-1]) / abs(speed))
        else:
            return None
        return taken if taken <= LONGEST else None


def _rates(state: Floats) -> tuple[Floats, Floats]:
    """Speeds downward and towards where the nose points when level, m/s."""
    pitch, along, up = state[PITCH], state[ALONG], state[UP]
    sine, cosine = np.sin(pitch), np.cos(pitch)
    return -(along * sine + up * cosine), along * cosine - up * sine


def _followed(body: Submerged, pitch: float) -> _Path:
    from scipy.integrate import solve_ivp

    def change(_: float, state: Floats) -> Floats:
        return np.concatenate([body.change(state[:4]), _rates(state)])

    speed = free_fall_speed(body, pitch)
    pace, period = body.cuts.length / speed, body.swing_period
    window = _LENGTHS * pace
    if period:
        window = min(max(window, _SWINGS[0] * period), _SWINGS[1] * period)
    state = np.zeros(6)
    state[PITCH] = pitch + _NUDGE
    times, states = [np.zeros(1)], [state[None, :]]
    scale = np.array([1.0, speed, speed, 1.0, body.cuts.length, body.cuts.length])
    for number in range(_WINDOWS):
        begin = number * window
        moments = np.linspace(begin, begin + window, _POINTS)
        span = (begin, begin + window)
        found = solve_ivp(change, span, state, method="LSODA", t_eval=moments, rtol=_PRECISION, atol=_PRECISION * scale)
        if not found.success:
            raise ValueError(f"the motion under water cannot be followed: {found.message}")
        rows = found.y.T
        times.append(moments[1:])
        states.append(rows[1:])
        state = rows[-1]
        through = np.hypot(rows[:, ALONG], rows[:, UP])
        if np.ptp(rows[:, PITCH]) < _STILL_PITCH and np.ptp(through) < _STILL_SPEED * through.mean():
            break
        passed = float(moments[-1])
        if passed >= max(_ENOUGH[0] * pace, _ENOUGH[1] * period) or (period and passed >= _ENOUGH[2] * period):
            break
    return _Path(np.concatenate(times), np.vstack(states), rows)
