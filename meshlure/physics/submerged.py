"""Submerged: a bait wholly under water, and how weight, buoyancy and the water's loads move it in its upright plane."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from functools import cached_property
from typing import Final

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.geometry.moments import Moments
from meshlure.geometry.stations import Stations
from meshlure.geometry.surface import Floats
from meshlure.physics.broadside import crossflow_factor
from meshlure.physics.crossflow import crossflow_strips
from meshlure.physics.lamb import lamb_factors
from meshlure.physics.loads import Glider
from meshlure.tolerances import CENTRES_MEET, GRAVITY

_STEP: Final = np.radians(1.0)
_TURN: Final = 2 * np.pi

PITCH, ALONG, UP, TURNING = range(4)
"""Entries of the state: nose above the horizontal (rad), speed of the centre of buoyancy along the nose and along the
back (m/s), and rate at which the nose rises (rad/s)."""


@dataclass(frozen=True, eq=False)
class AddedMass:
    """Water that a bait carries along as it moves in its upright plane.

    Attributes
    ----------
    along, up : float, kg
        For motion along the nose and along the back.
    turning : float, kg m2
        For turning about the centre of buoyancy.
    """

    along: float
    up: float
    turning: float


def added_mass(cuts: Stations, fineness: float, centre: float, density: float) -> AddedMass:
    """Return the added mass of a body for motion in its upright plane.

    Parameters
    ----------
    cuts : Stations
        Along the nose, with the side as first and the back as second lateral direction.
    fineness : float
        Length over the diameter of the greatest section's circle.
    centre : float, m
        Along the nose, about which it turns.
    density : float, kg/m3

    Notes
    -----
    Lamb's factors of the prolate spheroid of that fineness, on the body's own volume lengthwise and on the circles
    about its sections' widths crosswise: an ellipse carries across the flow what the circle on its width does. The
    couplings of a body with unlike ends are left out.

    References
    ----------
    H. Lamb (1932), Hydrodynamics, 6th ed., articles 71, 114 and 373.
    """
    factors = lamb_factors(fineness)
    width, depth = cuts.spread[:, 0], cuts.spread[:, 1]
    arm = cuts.position - centre
    volume = float(np.trapezoid(cuts.area, cuts.position))
    round_ = np.pi / 4 * width**2
    turned = float(np.trapezoid(round_ * (arm**2 + depth**2 / 16), cuts.position))
    return AddedMass(
        along=factors.along * density * volume,
        up=factors.across * density * float(np.trapezoid(round_, cuts.position)),
        turning=factors.turning * density * turned,
    )


@dataclass(frozen=True, eq=False)
class Submerged:
    """A bait wholly under water that moves in the plane of its nose and back.

    Attributes
    ----------
    frame : Frame
    mass : Moments, kg
    volume : float, m3
        Displaced.
    centre : (3,) array, m
        Of buoyancy.
    density : float, kg/m3
        Of the water.
    glider : Glider
        For water at about the speed in question.
    cuts : Stations
        Along the nose, of the body without lips.
    added : AddedMass
    """

    frame: Frame
    mass: Moments
    volume: float
    centre: Floats
    density: float
    glider: Glider
    cuts: Stations
    added: AddedMass
    _matrix: Floats = field(init=False)
    _inverse: Floats = field(init=False)
    _table: Floats = field(init=False)
    _arm: Floats = field(init=False)
    _strips: Floats = field(init=False)
    _eyes: Floats = field(init=False)

    def __post_init__(self) -> None:
        nose, back, side = self.frame.nose, self.frame.back, self.frame.side
        middle = self.centre
        gx, gz = self.offset
        m = self.mass.amount
        turning = float(side @ self.mass.inertia @ side) + m * (gx**2 + gz**2) + self.added.turning
        matrix = np.array(
            [
                [m + self.added.along, 0.0, -m * gz],
                [0.0, m + self.added.up, m * gx],
                [-m * gz, m * gx, turning],
            ]
        )
        angle = np.arange(-np.pi, np.pi + _STEP / 2, _STEP)
        towards = np.cos(angle)[:, None] * nose + np.sin(angle)[:, None] * back
        loads = self.glider.loads(towards)
        # side = back x nose, so that the nose rises about its opposite.
        table = np.column_stack([loads.force @ nose, loads.force @ back, -loads.about(middle) @ side])
        steps = np.diff(self.cuts.position)
        # Weights of the trapezoidal rule: the ends, where turning is fastest, count for half a step.
        run = (np.append(steps, 0.0) + np.insert(steps, 0, 0.0)) / 2
        strips = crossflow_factor(self.glider.fineness) * crossflow_strips(self.cuts, 1) * run
        hooks = [(h.drag_area, (h.place - middle) @ nose, (h.place - middle) @ back) for h in self.glider.hooks]
        for name, values in (
            ("_matrix", matrix),
            ("_inverse", np.linalg.inv(matrix)),
            ("_table", _spline(table)),
            ("_arm", self.cuts.position - float(middle @ nose)),
            ("_strips", strips),
            ("_eyes", np.array(hooks, dtype=np.float64).reshape(-1, 3).T),
        ):
            object.__setattr__(self, name, values)

    @cached_property
    def offset(self) -> tuple[float, float]:
        """Centre of gravity from that of buoyancy along nose and back, m."""
        apart = self.mass.centre - self.centre
        return float(apart @ self.frame.nose), float(apart @ self.frame.back)

    @cached_property
    def net(self) -> float:
        """Buoyancy less weight, N."""
        return GRAVITY * (self.density * self.volume - self.mass.amount)

    def acting(self, state: Floats) -> Floats:
        """Return force along nose and back, N, and moment about the centre of buoyancy, N m, at a state, (3,) array.

        Notes
        -----
        The loads of steady motion, plus what turning adds to the crossflow of each section and to the drag of each
        hook, from the speed there. A still bait that turns meets rho/2 eta times the integral of C_dc b |x|^3 dx.
        """
        pitch, along, up, turning = (float(value) for value in state[:4])
        sine, cosine = math.sin(pitch), math.cos(pitch)
        gx, gz = self.offset
        weight = GRAVITY * self.mass.amount
        half, net = self.density / 2, self.net
        met = half * (along * along + up * up) * self._loads(math.atan2(up, along))
        met += (net * sine, net * cosine, -weight * (gx * cosine - gz * sine))
        if turning:
            across = up + turning * self._arm
            extra = self._strips * (across * np.abs(across) - up * abs(up))
            area, x, z = self._eyes
            u, w = along - turning * z, up + turning * x
            speed, before = np.sqrt(u * u + w * w), math.hypot(along, up)
            fx, fz = area * (speed * u - before * along), area * (speed * w - before * up)
            met -= (
                half * fx.sum(),
                half * (extra.sum() + fz.sum()),
                half * (extra @ self._arm + x @ fz - z @ fx),
            )
        return met

    def change(self, state: Floats) -> Floats:
        """Return the rate of change of a state, (4,) array.

        Notes
        -----
        Kirchhoff's equations of a body in an unbounded fluid, for plane motion, about the centre of buoyancy. Their
        term (A_up - A_along) u w is the Munk couple, which the loads hold already, as far as the flow is attached:
        it stands only once.

        References
        ----------
        H. Lamb (1932), Hydrodynamics, 6th ed., articles 124 to 126.
        """
        along, up, turning = float(state[ALONG]), float(state[UP]), float(state[TURNING])
        gx, gz = self.offset
        m = self.mass.amount
        p = self._matrix[:2] @ state[ALONG:]
        gyration = np.array([-turning * p[1], turning * p[0], m * turning * (up * gz + along * gx)])
        rates = self._inverse @ (self.acting(state) - gyration)
        return np.array([turning, *rates])

    @cached_property
    def swing_period(self) -> float:
        """Period of small swings about the hanging posture in water without resistance, s; 0 where it has none."""
        if self.hanging() is None:
            # Centres that meet but for rounding would swing for hours.
            return 0.0
        weight = GRAVITY * self.mass.amount * float(np.hypot(*self.offset))
        return _TURN * float(np.sqrt(self._matrix[2, 2] / weight))

    def drag_area(self, pitch: float, sign: float) -> float:
        """Return the drag area, m2, of motion straight up (sign 1) or down (-1) at a pitch."""
        towards = sign * np.array([np.sin(pitch), np.cos(pitch)])
        return float(-self._loads(float(np.arctan2(towards[1], towards[0])))[:2] @ towards)

    def hanging(self) -> float | None:
        """Return the pitch at which buoyancy stands straight above gravity, rad; None where the two centres meet."""
        gx, gz = self.offset
        return None if np.hypot(gx, gz) < CENTRES_MEET else float(np.arctan2(-gx, -gz))

    def _loads(self, angle: float) -> Floats:
        at = (angle + np.pi) % _TURN / _STEP
        cell = min(int(at), self._table.shape[1] - 1)
        t = (at - cell) * _STEP
        c = self._table[:, cell]
        return np.asarray(((c[0] * t + c[1]) * t + c[2]) * t + c[3])


def _spline(values: Floats) -> Floats:
    """Coefficients of the periodic cubic spline through values at every step, (4, n, k) array."""
    from scipy.interpolate import CubicSpline

    closed = values.copy()
    closed[-1] = closed[0]
    return np.asarray(CubicSpline(np.arange(len(values)) * _STEP, closed, bc_type="periodic").c)
