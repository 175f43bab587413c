"""Trajectories against the closed forms of flight with quadratic drag, and spheres against the library fluids."""

from __future__ import annotations

import math

import numpy as np
import pytest
from fluids.drag import Clift_Gauvin, Haider_Levenspiel

from meshlure.physics.trajectory import Throw, launch_speed, sphere_drag_area, trajectory
from meshlure.tolerances import GRAVITY

MASS, AREA, DENSITY = 0.012, 2.5e-4, 1.225
K = DENSITY * AREA / (2 * MASS)
"""1/m, deceleration over the square of the speed."""

V_T = math.sqrt(GRAVITY / K)
"""Terminal speed, m/s."""


def thrown(speed: float, degrees: float, height: float = 0.0, area: float = AREA, **also: float) -> Throw:
    return Throw(speed, math.radians(degrees), height, **also)


@pytest.mark.parametrize("height", [2.0, 30.0, 300.0])
def test_a_fall_from_rest(height: float) -> None:
    # v = v_t sqrt(1 - exp(-2 g y/v_t^2)), y = (v_t^2/g) ln cosh(g t/v_t): exact.
    found = trajectory(MASS, AREA, thrown(1e-9, -90, height), DENSITY)
    assert found.splash_speed == pytest.approx(V_T * math.sqrt(-math.expm1(-2 * GRAVITY * height / V_T**2)), rel=1e-7)
    assert found.seconds == pytest.approx(V_T / GRAVITY * math.acosh(math.exp(GRAVITY * height / V_T**2)), rel=1e-7)
    assert found.splash_angle == pytest.approx(math.pi / 2)


@pytest.mark.parametrize("speed", [5.0, 25.0, 60.0])
def test_a_throw_straight_up(speed: float) -> None:
    # Up in (v_t/g) atan(v0/v_t) to (v_t^2/2g) ln(1 + v0^2/v_t^2), back at v0/sqrt(1 + v0^2/v_t^2): exact.
    found = trajectory(MASS, AREA, thrown(speed, 90), DENSITY, points=4001)
    top = V_T**2 / (2 * GRAVITY) * math.log1p(speed**2 / V_T**2)
    back = speed / math.sqrt(1 + speed**2 / V_T**2)
    seconds = V_T / GRAVITY * (math.atan(speed / V_T) + math.atanh(back / V_T))
    assert found.splash_speed == pytest.approx(back, rel=1e-7)
    assert found.seconds == pytest.approx(seconds, rel=1e-7)
    assert float(found.y.max()) == pytest.approx(top, rel=1e-5)


def hodograph(angle: float) -> float:
    return math.tan(angle) / math.cos(angle) + math.asinh(math.tan(angle))


@pytest.mark.parametrize("degrees", [10.0, 40.0, 75.0])
@pytest.mark.parametrize("speed", [12.0, 30.0, 80.0])
def test_the_hodograph_is_kept(degrees: float, speed: float) -> None:
    # 1/u_x^2 = 1/u_x0^2 + (k/g) [F(th0) - F(th)], F = sec th tan th + asinh(tan th): Johann Bernoulli 1719, exact.
    found = trajectory(MASS, AREA, thrown(speed, degrees, 2.0), DENSITY)
    start, end = math.radians(degrees), -found.splash_angle
    across = found.splash_speed * math.cos(end)
    expected = 1 / (speed * math.cos(start)) ** 2 + K / GRAVITY * (hodograph(start) - hodograph(end))
    assert 1 / across**2 == pytest.approx(expected, rel=1e-6)


@pytest.mark.parametrize("degrees", [20.0, 45.0, 70.0])
def test_the_range_in_a_vacuum(degrees: float) -> None:
    # R = v^2 sin 2th/g: exact.
    found = trajectory(MASS, 0.0, thrown(25, degrees), DENSITY)
    assert found.distance == pytest.approx(625 * math.sin(2 * math.radians(degrees)) / GRAVITY, rel=1e-8)
    assert found.splash_speed == pytest.approx(25, rel=1e-8)
    assert found.splash_angle == pytest.approx(math.radians(degrees), rel=1e-8)


def test_wind_is_a_moving_frame() -> None:
    # Galilei: in a wind w the throw is one in still air at the velocity less w, seen from a frame that moves with w.
    wind = 4.0
    found = trajectory(MASS, AREA, Throw(25, math.radians(40), 2.0, 0.0, wind), DENSITY)
    x, y = 25 * math.cos(math.radians(40)) - wind, 25 * math.sin(math.radians(40))
    still = trajectory(MASS, AREA, Throw(math.hypot(x, y), math.atan2(y, x), 2.0), DENSITY)
    assert found.seconds == pytest.approx(still.seconds, rel=1e-8)
    assert found.distance == pytest.approx(still.distance + wind * still.seconds, rel=1e-8)


def test_the_line_pulls_against_the_motion() -> None:
    # Straight up without air: heavier by T/m on the way up, lighter by as much on the way down.
    pull, speed = 0.03, 20.0
    found = trajectory(MASS, 0.0, thrown(speed, 90, pull=pull), DENSITY)
    up, down = GRAVITY + pull / MASS, GRAVITY - pull / MASS
    top = speed**2 / (2 * up)
    assert found.seconds == pytest.approx(speed / up + math.sqrt(2 * top / down), rel=1e-6)
    assert found.splash_speed == pytest.approx(math.sqrt(2 * down * top), rel=1e-6)


@pytest.mark.parametrize("degrees", [20.0, 60.0])
def test_the_line_takes_its_pull_times_the_way(degrees: float) -> None:
    # Energy without air: v^2/2 falls by g times the rise and by T/m times the length of the path.
    pull, height = 0.05, 2.0
    found = trajectory(MASS, 0.0, thrown(25, degrees, height, pull=pull), DENSITY, points=4001)
    way = float(np.hypot(np.diff(found.x), np.diff(found.y)).sum())
    lost = 25**2 / 2 + GRAVITY * height - found.splash_speed**2 / 2
    assert lost == pytest.approx(pull / MASS * way, rel=1e-5)


@pytest.mark.parametrize("reynolds", [2e3, 1e4, 1e5])
def test_spheres_agree_with_other_correlations(reynolds: float) -> None:
    # Clift and Gauvin 1970, Haider and Levenspiel 1989, as coded in fluids: not the one that is used.
    diameter, viscosity = 0.02, 1.46e-5
    cd = sphere_drag_area(diameter, viscosity)(reynolds * viscosity / diameter) / (math.pi / 4 * diameter**2)
    assert cd == pytest.approx(Clift_Gauvin(reynolds), rel=0.08)
    assert cd == pytest.approx(Haider_Levenspiel(reynolds), rel=0.12)


def test_a_sphere_in_free_fall_ends_at_fluids_terminal_speed() -> None:
    from fluids.drag import v_terminal

    diameter, density, air = 0.01, 900.0, 1.225
    mass = density * math.pi / 6 * diameter**3
    # fluids subtracts the air's buoyancy, which is left out here: that of 0.14% less weight.
    expected = v_terminal(D=diameter, rhop=density + air, rho=air, mu=1.46e-5 * air)
    found = trajectory(mass, sphere_drag_area(diameter, 1.46e-5), thrown(1e-6, -90, 400.0), air)
    assert found.splash_speed == pytest.approx(expected, rel=1e-3)


def test_the_speed_that_a_distance_asks_for() -> None:
    # Vacuum, 45 degrees: v = sqrt(g R).
    found = launch_speed(60.0, lambda speed: trajectory(MASS, 0.0, thrown(speed, 45), DENSITY, 2).distance, 100.0)
    assert found == pytest.approx(math.sqrt(GRAVITY * 60), rel=1e-6)
    assert launch_speed(1e4, lambda speed: speed, 100.0) is None


def test_at_one_drag_and_size_the_heavier_bait_goes_farther() -> None:
    # Common practice, no source.
    reach = [trajectory(mass, AREA, thrown(25, 40, 2.0, pull=0.03), DENSITY).distance for mass in (0.008, 0.012, 0.02)]
    assert np.all(np.diff(reach) > 1.0)


@pytest.mark.parametrize(("mass", "density", "speed"), [(0.0, 1.2, 20.0), (0.01, 0.0, 20.0), (0.01, 1.2, 0.0)])
def test_a_throw_has_mass_air_and_speed(mass: float, density: float, speed: float) -> None:
    with pytest.raises(ValueError, match="a throw has mass"):
        trajectory(mass, AREA, Throw(speed, 0.7, 2.0), density)


def test_a_line_that_holds_the_weight_is_refused() -> None:
    # Statics: it would stop in the air and hang there.
    with pytest.raises(ValueError, match="stops a bait"):
        trajectory(MASS, AREA, thrown(25, 40, 2.0, pull=1.01 * MASS * GRAVITY), DENSITY)
    assert trajectory(MASS, AREA, thrown(25, 40, 2.0, pull=0.9 * MASS * GRAVITY), DENSITY).distance > 0


def test_what_never_lands_is_refused() -> None:
    with pytest.raises(ValueError, match="still in the air"):
        trajectory(1e-6, AREA, Throw(20.0, 0.7, 2000.0), DENSITY)
