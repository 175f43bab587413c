"""Sinking and rising against closed forms: terminal speed, approach to it, glide, small swings, energy."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from scipy.integrate import solve_ivp
from shapes import cylinder, sphere, turn
from winged import FRAME, WATER, Winged, hook, spheroid

from meshlure.bait.pieces import Frame
from meshlure.geometry.moments import Moments
from meshlure.geometry.surface import Floats, Surface
from meshlure.physics.course import course, free_fall_speed, holds, steady_motion
from meshlure.physics.loads import Glider, Loads
from meshlure.physics.sinking import sinking
from meshlure.physics.submerged import Submerged, added_mass
from meshlure.physics.tow import tow
from meshlure.tolerances import GRAVITY

DENSITY = WATER[0]
LENGTH, DIAMETER = 0.08, 0.016
LONG = Winged(spheroid(LENGTH, DIAMETER))
BALL = Winged(sphere(0.012, 4))
ALL_ROUND = 3e-4
"""m2. A drag area that is the same in every direction."""


class Towed(Glider):
    """No loads but those of the hooks."""

    def _body(self, u: Floats) -> Loads:
        return Loads(np.zeros_like(u), np.zeros_like(u))


def bare(body: Winged, area: float) -> Glider:
    """A body whose only load is one drag area at its centre of buoyancy."""
    wings = replace(body.wings(0.2, WATER), hooks=[], lips=[])
    parts = {name: getattr(wings, name) for name in wings.__dataclass_fields__}
    hooks = [hook("all", area, body.bulk.centre)]
    return Towed(**parts | {"hooks": Winged(body.surface, hooks).wings(0.2, WATER).hooks})


@pytest.mark.parametrize("share", [0.9, 0.99, 1.02, 1.5])
def test_a_ball_falls_or_rises_to_its_terminal_speed(share: float) -> None:
    # v_t tanh(t/tau), v_t = sqrt(2|W - B|/(rho C A)), tau = v_t (m + rho Vol/2)/|W - B|; way v_t tau ln cosh(t/tau).
    # A sphere carries half of what it displaces along (Lamb 1932, art. 92).
    displaced = DENSITY * BALL.bulk.amount
    mass = displaced * share
    body = BALL.sunk(BALL.weighed(mass, above=-1e-3), bare(BALL, ALL_ROUND))
    found = course(body, "level", 0.0, (1.0, 3.0))
    net = abs(displaced - mass) * GRAVITY
    speed = math.sqrt(2 * net / (DENSITY * ALL_ROUND))
    tau = speed * (mass + displaced / 2) / net
    assert found.settles
    assert abs(found.speed) == pytest.approx(speed, rel=1e-6)
    assert np.sign(found.speed) == np.sign(share - 1)
    for way, seconds in zip((1.0, 3.0), found.seconds, strict=True):
        assert seconds == pytest.approx(tau * math.acosh(math.exp(way / (speed * tau))), rel=2e-3)


def test_the_ball_is_followed_along_tanh() -> None:
    displaced = DENSITY * BALL.bulk.amount
    body = BALL.sunk(BALL.weighed(1.5 * displaced, above=-1e-3), bare(BALL, ALL_ROUND))
    net = 0.5 * displaced * GRAVITY
    speed = math.sqrt(2 * net / (DENSITY * ALL_ROUND))
    tau = speed * 2.0 * displaced / net
    times = tau * np.array([0.3, 1.0, 2.0])
    path = solve_ivp(lambda _, s: body.change(s), (0, 2 * tau), np.zeros(4), rtol=1e-8, atol=1e-12, t_eval=times)
    assert -path.y[2] == pytest.approx(speed * np.tanh([0.3, 1.0, 2.0]), rel=1e-4)


@pytest.mark.parametrize(("pitch", "factor"), [(-math.pi / 2, 0.0591), (0.0, 0.8943)])
def test_it_sets_off_against_what_it_carries_along(pitch: float, factor: float) -> None:
    # At rest |W - B|/(m + k rho Vol): k1 lengthwise and k2 crosswise at fineness 5 (Lamb 1932, art. 114).
    displaced = DENSITY * LONG.bulk.amount
    rates = LONG.sunk(LONG.weighed(1.2 * displaced)).change(np.array([pitch, 0.0, 0.0, 0.0]))
    down = -(rates[1] * math.sin(pitch) + rates[2] * math.cos(pitch))
    assert down == pytest.approx(0.2 * GRAVITY / (1.2 + factor), rel=2e-3)


@pytest.mark.parametrize("net", [0.02, -0.02])
def test_a_level_bait_meets_the_water_with_its_plan(net: float) -> None:
    # Broadside: sqrt(2|W - B|/(rho eta C_dc A_p)), A_p = pi/4 l d, C_dc 1.2, eta of fineness 5 from DATCOM, 0.615. The
    # weight low, so that it stays level.
    displaced = DENSITY * LONG.bulk.amount
    body = LONG.sunk(LONG.weighed(displaced * (1 + net), above=-2e-3))
    found = sinking(body, LONG.way, WATER[1])
    drag = 0.615 * 1.2 * math.pi / 4 * LENGTH * DIAMETER
    expected = math.sqrt(2 * abs(net) * LONG.bulk.amount * GRAVITY / drag)
    assert found.speed == pytest.approx(math.copysign(expected, net), rel=0.01)
    assert found.same
    assert (found.nose_up, found.glide) == pytest.approx((0, 0), abs=1e-3)
    assert abs(found.speed_low) < abs(found.speed) < abs(found.speed_high)


@pytest.mark.parametrize("low", [2.0, 3.0])
def test_speed_goes_with_the_root_of_the_net_weight(low: float) -> None:
    # Common practice, no source; exact for one drag coefficient.
    displaced = DENSITY * LONG.bulk.amount
    speeds = [
        sinking(LONG.sunk(LONG.weighed(displaced * (1 + 0.01 * more), above=-3e-3)), LONG.way, WATER[1]).speed
        for more in (1.0, low**2)
    ]
    assert speeds[1] / speeds[0] == pytest.approx(low, rel=0.01)


class Gliding(Glider):
    """Axial and crossflow drag that act at the middle of the body, no couple."""

    def _body(self, u: Floats) -> Loads:
        force = super()._body(u).force
        return Loads(force, np.cross(LONG.bulk.centre, force))


def gliding(wings: Glider) -> Gliding:
    parts = {name: getattr(wings, name) for name in wings.__dataclass_fields__}
    for name in ("nose_first", "tail_first"):
        parts[name] = replace(parts[name], held=parts[name].held * 0)
    return Gliding(**parts)


@pytest.mark.parametrize("degrees", [10.0, 30.0, 60.0])
@pytest.mark.parametrize("net", [0.05, -0.05])
def test_a_bait_that_hangs_askew_glides(degrees: float, net: float) -> None:
    # With no moment of the water it keeps its hanging pitch th; along its axis net sin(th) = rho/2 S_a u|u|, across it
    # net cos(th) = rho/2 S_c w|w|: so the path's angle from the vertical is closed, by resolving forces.
    pitch = math.radians(degrees)
    wings = LONG.wings(0.2, WATER)
    arm = 4e-3
    weighed = LONG.weighed(
        DENSITY * LONG.bulk.amount * (1 + net), ahead=-arm * math.sin(pitch), above=-arm * math.cos(pitch)
    )
    body = LONG.sunk(weighed, gliding(wings))
    assert body.hanging() == pytest.approx(pitch, rel=1e-6)
    found = course(body, "hanging", pitch, (1.0,))
    push = abs(net) * LONG.bulk.amount * GRAVITY
    crossflow = -float(wings.loads(FRAME.back).force[0] @ FRAME.back)
    lead = wings.nose_first if net < 0 else wings.tail_first
    u, w = math.sqrt(2 * push * math.sin(pitch) / lead.axial), math.sqrt(2 * push * math.cos(pitch) / crossflow)
    up, ahead = u * math.sin(pitch) + w * math.cos(pitch), u * math.cos(pitch) - w * math.sin(pitch)
    assert found.settles
    assert found.nose_up == pytest.approx(pitch, rel=1e-3)
    assert found.speed == pytest.approx(math.copysign(up, net), rel=2e-3)
    # Rising, it slides towards the nose that points up; sinking, it slides back, away from it.
    assert found.glide == pytest.approx(math.copysign(math.atan2(ahead, up), -net), rel=5e-3)


def test_small_swings_in_still_water() -> None:
    # Pendulum: I = I_G + m a^2 + k' rho (inertia of what is displaced), period 2 pi sqrt(I/(W a)), for a weight a below
    # the middle of a spheroid: (l^2 + d^2)/20 of its mass, k' 0.6999 at fineness 5 (Lamb 1932, art. 373). The tilt
    # is timed over ten swings, small enough that the water's resistance does not show.
    displaced, arm = DENSITY * LONG.bulk.amount, 3e-3
    body = LONG.sunk(LONG.weighed(displaced, above=-arm))
    turning = (1 + 0.6999) * displaced * (LENGTH**2 + DIAMETER**2) / 20 + displaced * arm**2
    period = 2 * math.pi * math.sqrt(turning / (displaced * GRAVITY * arm))
    assert body.swing_period == pytest.approx(period, rel=5e-3)

    def level(_: float, state: Floats) -> float:
        return float(state[0])

    start = [1e-4, 0, 0, 0]
    path = solve_ivp(lambda _, s: body.change(s), (0, 5.2 * period), start, events=level, rtol=1e-7, atol=1e-12)
    assert path.t_events is not None
    times = path.t_events[0]
    # The centre of buoyancy gives way sideways, as the weight swings against the water carried along.
    assert 2 * (times[-1] - times[0]) / (len(times) - 1) == pytest.approx(period, rel=0.04)


def test_turning_on_the_spot_meets_the_crossflow_of_its_own_speed() -> None:
    # rho/2 eta C_dc d 2 (l/2)^4/4 w^2 for a cylinder: the integral of |x|^3 over its length. eta of fineness 5, 0.615.
    radius, length, rate = 0.008, 0.08, 3.0
    body = Winged(cylinder(radius, length, 64, 40))
    mass = body.weighed(DENSITY * body.bulk.amount)
    acting = body.sunk(mass).acting(np.array([0.0, 0.0, 0.0, rate]))
    expected = DENSITY / 2 * 0.615 * 1.2 * 2 * radius * (length / 2) ** 4 / 2 * rate**2
    assert acting[2] == pytest.approx(-expected, rel=0.02)
    assert abs(acting[1]) < 1e-3 * expected / length


def test_hooks_resist_turning_with_their_own_speed() -> None:
    # rho/2 S (w r)^2 r at a distance r.
    place, rate = LONG.bulk.centre + 0.03 * FRAME.nose, 2.0
    hooked = Winged(LONG.surface, [hook("h", 5e-5, place)])
    mass = hooked.weighed(DENSITY * LONG.bulk.amount)
    state = np.array([0.0, 0.0, 0.0, rate])
    extra = hooked.sunk(mass).acting(state) - LONG.sunk(mass).acting(state)
    assert extra[2] == pytest.approx(-DENSITY / 2 * 5e-5 * (rate * 0.03) ** 2 * 0.03, rel=1e-6)


def test_munks_couple_turns_a_coasting_bait_once() -> None:
    # Not turning yet: d2a/dt2 = (k2 - k1) rho/2 Vol V^2 sin 2a cos(a/2)/(I + k' I_fluid), weight and buoyancy equal and
    # at one place; as the attached part of the loads gives it, and no second time by the added masses.
    angle, speed = math.radians(20), 0.5
    mass = LONG.weighed(DENSITY * LONG.bulk.amount)
    wings = LONG.wings(0.2, WATER)
    cuts = LONG.cuts
    whole = np.pi / 4 * cuts.spread[:, ::-1].T[:, ::-1] ** 2
    wings = replace(wings, nose_first=replace(wings.nose_first, held=whole))
    rates = LONG.sunk(mass, wings).change(np.array([0.3, speed * math.cos(angle), speed * math.sin(angle), 0.0]))
    inertia = (1 + 0.6999) * mass.amount * (LENGTH**2 + DIAMETER**2) / 20
    moment = 0.8351 * DENSITY / 2 * LONG.bulk.amount * speed**2 * math.sin(2 * angle) * math.cos(angle / 2)
    # The motion lies on the side of the back: the nose is turned away from it, down.
    assert rates[3] == pytest.approx(-moment / inertia, rel=0.01)


def test_in_a_fluid_without_mass_energy_and_way_are_a_rigid_bodys() -> None:
    # No loads, no added mass, no buoyancy: the centre of gravity falls freely and the turning stays.
    body = LONG.sunk(LONG.weighed(0.02, ahead=8e-3, above=-3e-3), bare(LONG, 1e-30))
    none = replace(added_mass(LONG.cuts, 5.0, LENGTH / 2, 1.0), along=0.0, up=0.0, turning=0.0)
    body = replace(body, added=none, volume=0.0, density=1e-30)
    gx, gz = body.offset
    start = np.array([0.4, 0.3, -0.2, 5.0, 0.0, 0.0])

    def change(_: float, s: Floats) -> Floats:
        sine, cosine = math.sin(s[0]), math.cos(s[0])
        return np.array([*body.change(s[:4]), s[1] * sine + s[2] * cosine, s[1] * cosine - s[2] * sine])

    def place(s: Floats) -> Floats:
        sine, cosine = math.sin(s[0]), math.cos(s[0])
        return np.array([s[5] + gx * cosine - gz * sine, s[4] + gx * sine + gz * cosine])

    end = solve_ivp(change, (0, 0.5), start, rtol=1e-10, atol=1e-12).y[:, -1]
    sine, cosine = math.sin(0.4), math.cos(0.4)
    u, w = 0.3 - 5.0 * gz, -0.2 + 5.0 * gx
    away = np.array([u * cosine - w * sine, u * sine + w * cosine]) * 0.5 - (0.0, GRAVITY * 0.125)
    assert end[3] == pytest.approx(5.0, rel=1e-7)
    assert place(end) - place(start) == pytest.approx(away, rel=1e-6)


def test_a_steady_motion_that_tips_over_is_not_held() -> None:
    # Moving along its long axis with little to right it a slender body turns broadside (Munk 1924; Kelvin and Tait).
    body = LONG.sunk(LONG.weighed(1.3 * DENSITY * LONG.bulk.amount, ahead=1e-4))
    fall = free_fall_speed(body, -math.pi / 2)
    state = steady_motion(body, np.array([-math.pi / 2, fall, 0.0, 0.0]))
    assert state is not None
    assert state[1] == pytest.approx(fall, rel=1e-6)
    assert not holds(body, state)
    found = course(body, "hanging", -math.pi / 2, (1.0,))
    assert abs(found.nose_up) < math.radians(45)
    heavy = replace(body, mass=LONG.weighed(1.02 * DENSITY * LONG.bulk.amount, ahead=0.025))
    state = steady_motion(heavy, np.array([-math.pi / 2, free_fall_speed(heavy, -math.pi / 2), 0.0, 0.0]))
    assert state is not None
    assert holds(heavy, state)


def test_what_suspends_is_not_timed() -> None:
    # Its speed is the formula's in the hanging posture: sqrt(2|W - B|/(rho C A)).
    displaced = DENSITY * LONG.bulk.amount
    body = LONG.sunk(LONG.weighed(displaced * 1.0019, above=-2e-3))
    found = sinking(body, LONG.way, WATER[1])
    assert found.suspends
    assert found.seconds == (None, None)
    drag = 0.615 * 1.2 * math.pi / 4 * LENGTH * DIAMETER
    assert found.speed == pytest.approx(math.sqrt(2 * 0.0019 * LONG.bulk.amount * GRAVITY / drag), rel=0.01)
    just = sinking(LONG.sunk(LONG.weighed(displaced * 1.0021, above=-2e-3)), LONG.way, WATER[1])
    assert not just.suspends
    assert just.seconds[0] is not None
    assert sinking(body, LONG.way, WATER[1], suspends_within=1e-6).suspends is False
    assert sinking(LONG.sunk(LONG.weighed(displaced, above=-2e-3)), LONG.way, WATER[1]).speed == 0


def test_what_creeps_is_not_waited_for() -> None:
    # 3 m in ten minutes is 5 mm/s.
    displaced = DENSITY * LONG.bulk.amount
    body = LONG.sunk(LONG.weighed(displaced * (1 + 4e-5), above=-2e-3))
    found = sinking(body, LONG.way, WATER[1], suspends_within=0.0)
    assert 1 / 600 < found.speed < 3 / 600
    # It sets off slowly, with what it carries along: v_t tau ln cosh(t/tau), k2 0.8943 at fineness 5 (Lamb 1932).
    tau = found.speed * 1.8943 / (4e-5 * GRAVITY)
    assert found.seconds[0] == pytest.approx(tau * math.acosh(math.exp(1 / (found.speed * tau))), rel=0.01)
    assert found.seconds[1] is None


def _askew(frame: Frame, surface: Surface) -> tuple[Winged, Submerged]:
    place = 0.02 * frame.nose
    body = Winged(surface, [], frame)
    body = Winged(surface, [hook("h", 5e-5, body.bulk.centre - place)], frame)
    return body, body.sunk(body.weighed(1.1 * DENSITY * body.bulk.amount, ahead=2e-3, above=-2e-3))


def test_sinking_turns_with_the_mesh() -> None:
    q = turn(5)
    (one, first), (other, second) = (
        _askew(FRAME, LONG.surface),
        _askew(Frame.of(q @ FRAME.nose, q @ FRAME.back), Surface(LONG.surface.vertices @ q.T, LONG.surface.faces)),
    )
    a, b = sinking(first, one.way, WATER[1]), sinking(second, other.way, WATER[1])
    assert abs(a.glide) > math.radians(5)
    assert (b.speed, b.nose_up, b.glide) == pytest.approx((a.speed, a.nose_up, a.glide), rel=2e-3)
    assert b.seconds == pytest.approx(a.seconds, rel=2e-3)


def test_turned_end_for_end_it_sinks_alike() -> None:
    # By symmetry: the same body with its nose named the other way falls along the mirrored path.
    _, first = _askew(FRAME, LONG.surface)
    back_to_front = Frame.of(-FRAME.nose, FRAME.back)
    moved = Moments(first.mass.amount, first.mass.first, first.mass.second)
    body = Winged(LONG.surface, [hook("h", 5e-5, LONG.bulk.centre - 0.02 * FRAME.nose)], back_to_front)
    a, b = (course(s, "level", 0.0, (1.0,)) for s in (first, body.sunk(moved)))
    assert b.speed == pytest.approx(a.speed, rel=1e-3)
    assert b.nose_up == pytest.approx(-a.nose_up, rel=2e-3)
    assert b.glide == pytest.approx(-a.glide, rel=2e-3)


def test_tow_is_the_drag_nose_first_by_its_parts() -> None:
    hooked = Winged(LONG.surface, [hook("h", 5e-5, (0.0, -0.009, 0.03))])
    for row, speed in zip(tow(hooked.way, (0.5, 1.0), *WATER), (0.5, 1.0), strict=True):
        drag = hooked.way.drag("nose", speed, *WATER, None)
        # rho/2 v^2 S.
        assert row.hooks == pytest.approx(500 * speed**2 * 5e-5, rel=1e-12)
        assert row.whole == pytest.approx(drag.force, rel=1e-12)
        assert row.kilogram_force * GRAVITY == pytest.approx(row.whole, rel=1e-12)
        assert row.low < row.whole < row.high
