"""Resting postures against floating bodies whose equilibria are known in closed form."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from afloat import UP, Afloat, angle_between
from hypothesis import given
from hypothesis import strategies as st
from scipy.optimize import brentq

from meshlure.geometry.surface import Floats
from meshlure.physics.posture import attitude, hanging, horizontal, spread_directions

EAST, NORTH = np.array([1.0, 0, 0]), np.array([0, 1.0, 0])
SEEDS = st.integers(0, 10_000)


def log(share: float, side: float = 0.02) -> Afloat:
    """A square log lying along x, long enough not to stand up."""
    return Afloat(shapes.box((6 * side, side, side), level=2), share)


def log_tilt(share: float) -> float:
    """Angle in degrees from flat at which a square log rests, up to 45.

    Derived in closed form for side 1 (the problem is that of Gilbert 1991, American Mathematical Monthly 98, and
    Delbourgo 1987, American Journal of Physics 55): water across opposite sides, tan^2 = 12 s (1 - s) - 2;
    across neighbouring sides at p and q from the corner, p + q = 3/2 and p q = 2 s. A heavy log's dry part stands as
    a light one's wetted part does.
    """
    s = min(share, 1 - share)
    if s <= (3 - np.sqrt(3)) / 6:
        return 0.0
    if s <= 0.25:
        return float(np.degrees(np.arctan(np.sqrt(12 * s * (1 - s) - 2))))
    if s < 9 / 32:
        root = np.sqrt(2.25 - 8 * s)
        return float(np.degrees(np.arctan((1.5 - root) / (1.5 + root))))
    return 45.0


@pytest.mark.parametrize("share", [0.1, 0.2, 0.213, 0.24, 0.26, 0.275, 0.3, 0.5, 0.71, 0.73, 0.76, 0.785, 0.8, 0.95])
def test_every_way_a_square_log_rests(share: float) -> None:
    tilt = np.radians(log_tilt(share))
    turns = {round(float(np.degrees(q * np.pi / 2 + s * tilt)) % 360, 6) for q in range(4) for s in (-1, 1)}
    rests = log(share).rests()
    found = [float(np.degrees(np.arctan2(r.state.up[1], r.state.up[2]))) % 360 for r in rests]
    assert len(found) == len(turns)
    for angle in turns:
        assert min(abs((f - angle + 180) % 360 - 180) for f in found) < 1e-5
    for rest in rests:
        assert abs(rest.state.up[0]) < 1e-7
        assert rest.state.energy == pytest.approx(rests[0].state.energy, rel=1e-11)
        assert rest.neutral is None
        assert rest.state.modes()[0][0] > 0
    assert sum(rest.share for rest in rests) == pytest.approx(1)
    assert sum(rest.upright for rest in rests) == 1


def test_wells_four_degrees_apart_are_two_postures() -> None:
    # Two degrees to either side of flat; the log is big so that its metacentric heights are not next to none.
    rests = log(0.2115, 0.2).rests()
    assert log_tilt(0.2115) == pytest.approx(2.0, abs=0.01)
    assert len(rests) == 8
    assert all(rest.neutral is None for rest in rests)


@pytest.mark.parametrize(("share", "angle"), [(0.2114, 1.3), (0.2815, 45.0)])
def test_wells_with_next_to_no_rise_between_them_count_as_one_free_posture(share: float, angle: float) -> None:
    # Just past the transition the log lies 1.3 degrees to either side of flat, its metacentric height microns. But the
    # four flat sides stay four postures, alike in all though they are.
    rests = log(share).rests()
    assert len(rests) == 4
    for rest in rests:
        assert rest.neutral is not None
        assert np.abs(rest.neutral @ np.cross(rest.state.up, EAST)) == pytest.approx(1, rel=1e-9)
        off = np.degrees(np.arctan2(np.abs(rest.state.up[1:]).min(), np.abs(rest.state.up[1:]).max()))
        assert off == pytest.approx(angle, abs=0.1)


def test_where_a_square_log_changes_its_way_to_rest() -> None:
    # Flat: I/V - BG = 1/(12 s) - (1 - s)/2 vanishes at (3 -+ sqrt 3)/6 = 0.2113, 0.7887. Edge up: at 9/32 and 23/32.
    def roll_height(share: float, up: Floats) -> float:
        return log(share).at(up).metacentric(np.cross(up / np.linalg.norm(up), EAST))

    def change(up: Floats, low: float, high: float) -> float:
        return float(brentq(lambda share: roll_height(share, up), low, high, xtol=1e-12))

    assert change(UP, 0.15, 0.4) == pytest.approx((3 - np.sqrt(3)) / 6, rel=1e-9)
    assert change(UP, 0.6, 0.9) == pytest.approx((3 + np.sqrt(3)) / 6, rel=1e-9)
    edge = np.array([0, 1.0, 1.0])
    assert change(edge, 0.25, 0.4) == pytest.approx(9 / 32, rel=1e-9)
    assert change(edge, 0.6, 0.75) == pytest.approx(23 / 32, rel=1e-9)


@pytest.mark.parametrize("share", [0.1, 0.3, 0.5, 0.85])
def test_least_breadth_of_a_plank_that_floats_flat(share: float) -> None:
    # (b/h)^2 = 6 s (1 - s): I/V = b^2/(12 s h) against BG = h (1 - s)/2.
    height = 0.01

    def roll_height(breadth: float) -> float:
        return Afloat(shapes.box((0.1, breadth, height)), share).at(UP).metacentric(NORTH)

    assert brentq(roll_height, 0.3 * height, 3 * height, xtol=1e-15) == pytest.approx(
        height * np.sqrt(6 * share * (1 - share)), rel=1e-9
    )


@pytest.mark.parametrize("half_angle", [20.0, 30.0])
def test_lightest_cone_that_floats_apex_down(half_angle: float) -> None:
    # s > cos^6 t: BM = 3/4 h tan^2 t against BG = 3/4 (H - h), h = H s^(1/3); a regular cone of n sides has tan^2 t
    # shrunk by (2 + cos(2 pi/n))/3, so that s^(1/3) = 1/(1 + tan^2 t (2 + cos(2 pi/n))/3).
    tan, around = np.tan(np.radians(half_angle)), 64
    surface = shapes.cone(0.05 * tan, 0.05, around)
    change = brentq(lambda share: Afloat(surface, share).at(UP).modes()[0][0], 0.2, 0.9, xtol=1e-12)
    polygon = (2 + np.cos(2 * np.pi / around)) / 3
    assert change == pytest.approx((1 + tan**2 * polygon) ** -3, rel=1e-9)
    assert change == pytest.approx(np.cos(np.radians(half_angle)) ** 6, rel=4e-3)


def test_archimedes_paraboloid() -> None:
    # On Floating Bodies II, propositions 2 and 4: r^2 = p z, apex down, rests upright if H <= 3 p/4 however light; a
    # taller one only from s = ((H - 3 p/4)/H)^2 on. B at 2/3 of the draught H sqrt(s), BM = p/2, G at 2/3 H.
    p, height = 0.02, 0.04
    tall = shapes.paraboloid(p, height, 96)
    change = brentq(lambda share: Afloat(tall, share).at(UP).modes()[0][0], 0.2, 0.7, xtol=1e-9)
    assert change == pytest.approx(((height - 0.75 * p) / height) ** 2, rel=3e-3)
    squat = shapes.paraboloid(p, 0.7 * p, 48)
    assert all(Afloat(squat, share).at(UP).modes()[0][0] > 0 for share in (0.02, 0.2, 0.6, 0.95))


def test_an_ellipsoid_rests_on_its_flat_sides() -> None:
    # Potential about the middle: U = -z_B of the affine image of a sphere's cap; least with the shortest axis upright,
    # a saddle with the middle one, greatest with the longest (derived in closed form).
    semi, zeta = (0.05, 0.014, 0.011), 0.3
    share = 0.5 + 0.75 * zeta - zeta**3 / 4
    body = Afloat(shapes.ellipsoid(semi, 6), share)
    ratio = (1 - zeta**2) ** 2 / (4 * (2 / 3 + zeta - zeta**3 / 3))
    heights = {axis: body.at(np.eye(3)[axis]) for axis in range(3)}
    for axis, state in heights.items():
        assert state.energy == pytest.approx(semi[axis] * ratio, rel=2e-3)
        # Dupin: curvature of the surface of buoyancy; metacentric heights (a^2 - c^2) ratio / c for each other axis.
        others = [k for k in range(3) if k != axis]
        exact = sorted((semi[k] ** 2 - semi[axis] ** 2) * ratio / semi[axis] for k in others)
        np.testing.assert_allclose(state.modes()[0], exact, rtol=5e-3)
    rests = body.rests()
    assert len(rests) == 2
    for rest in rests:
        assert angle_between(np.abs(rest.state.up), UP) < 1e-4
        assert rest.share == pytest.approx(0.5, abs=0.06)
    assert rests[0].state.up @ rests[1].state.up < 0


@pytest.mark.parametrize("share", [0.2, 0.5, 0.9])
def test_a_ball_rests_with_its_heavy_side_down(share: float) -> None:
    # B, the middle and the metacentre are in one line at any turn: up points from G to the middle.
    radius, offset = 0.02, np.array([0.001, -0.002, 0.0015])
    middle = np.array([0.3, 0.1, -0.2])
    body = Afloat(shapes.sphere(radius, 4).moved(shift=middle), share, middle + offset)
    rests = body.rests()
    assert len(rests) == 1
    assert rests[0].upright
    assert rests[0].share == 1
    assert angle_between(rests[0].state.up, -offset / np.linalg.norm(offset)) < np.radians(0.5)
    # Metacentric height of every tilt: the depth of G below the middle.
    np.testing.assert_allclose(rests[0].state.modes()[0], np.linalg.norm(offset), rtol=0.02)


def test_an_even_ball_has_one_posture_free_all_round() -> None:
    rests = Afloat(shapes.sphere(0.02, 5), 0.6).rests()
    assert len(rests) == 1
    assert rests[0].neutral is not None
    assert np.abs(rests[0].state.modes()[0]).max() < 0.05e-3
    assert rests[0].share == pytest.approx(1)


@pytest.mark.parametrize("share", [0.3, 0.5, 0.8])
def test_an_even_round_stick_has_one_posture_free_to_roll(share: float) -> None:
    # The metacentre of a horizontal circular cylinder is its axis.
    body = Afloat(shapes.cylinder(0.01, 0.1, 128, 24), share)
    rests = body.rests(NORTH)
    assert len(rests) == 1
    rest = rests[0]
    assert abs(rest.state.up[2]) < 1e-6
    assert rest.neutral is not None
    assert abs(rest.neutral @ UP) < 1e-3
    assert abs(rest.state.metacentric(np.cross(UP, rest.state.up))) < 0.02e-3


@pytest.mark.parametrize("share", [0.3, 0.5, 0.8])
def test_a_round_stick_hangs_by_its_off_axis_weight(share: float) -> None:
    # Metacentric height sideways: the weight's depth below the axis, whatever the draught.
    offset = np.array([0.0003, -0.0004, 0.0])
    body = Afloat(shapes.cylinder(0.01, 0.1, 128, 24), share, offset)
    rests = body.rests()
    assert len(rests) == 1
    assert angle_between(rests[0].state.up, -offset / 0.0005) < np.radians(2.0)
    assert rests[0].state.metacentric(np.cross(UP, rests[0].state.up)) == pytest.approx(0.0005, rel=0.05)


def test_nose_up_and_nose_down_of_a_round_body_are_two_postures() -> None:
    # A scan over the tilt of its axis shows that this short cylinder rests aslant, alike both ways up, free to roll.
    body = Afloat(shapes.cylinder(0.02, 0.034, 96, 12), 0.25)
    tilts = np.radians(np.arange(0, 181, 3))
    energies = np.array([body.at(np.array([np.sin(t), 0, np.cos(t)])).energy for t in tilts])
    low = [k for k in range(1, len(tilts) - 1) if energies[k] < min(energies[k - 1], energies[k + 1])]
    assert len(low) == 2
    rests = body.rests()
    assert len(rests) == 2
    tops = sorted(float(np.degrees(np.arccos(r.state.up[2]))) for r in rests)
    assert tops == pytest.approx(np.degrees(tilts[low]), abs=3)
    assert tops[0] + tops[1] == pytest.approx(180, abs=1e-2)
    assert all(rest.neutral is not None for rest in rests)
    assert [rest.share for rest in rests] == pytest.approx([0.5, 0.5], abs=0.1)


def test_a_bait_balanced_on_its_head_is_not_called_at_rest() -> None:
    # A plank with its weight above the metacentre, started exactly upright: nothing pushes it, and yet it falls.
    body = Afloat(shapes.box((0.1, 0.02, 0.02), level=2), 0.5, np.array([0, 0, 0.004]))
    assert np.linalg.norm(body.at(UP).lever) < 1e-15
    assert body.at(UP).modes()[0][0] < 0
    rests = body.rests(UP)
    assert all(rest.state.modes()[0][0] > 0 for rest in rests)
    upright = [rest for rest in rests if rest.upright]
    assert len(upright) == 1
    assert angle_between(upright[0].state.up, UP) > 0.1


def test_ballast_moved_aft_lifts_the_nose() -> None:
    # Common practice of the trade, no source. Nose -x.
    angles = []
    for aft in (-0.004, 0.0, 0.004):
        body = Afloat(shapes.ellipsoid((0.05, 0.011, 0.008), 3), 0.7, np.array([aft, 0, -0.002]))
        rest = next(rest for rest in body.rests() if rest.upright)
        angles.append(attitude(rest.state.up, -EAST, UP, -NORTH).nose_up)
    assert angles[0] < -0.02 < angles[1] < 0.02 < angles[2]


@given(SEEDS, SEEDS)
def test_hanging_turns_buoyancy_over_gravity(seed: int, way: int) -> None:
    body = Afloat(shapes.lumpy(seed, level=2), 1.0, None, 0.1e-3, 5e-8, (0.0, 0.0, -0.05))
    apart = 0.002 * shapes.direction(way)
    found = hanging(body.hull, body.hull.centre - apart)
    assert found.up is not None
    np.testing.assert_allclose(found.up, apart / 0.002, rtol=0, atol=1e-9)
    assert found.stiffness == pytest.approx(0.002, rel=1e-9)


@pytest.mark.parametrize(("apart", "known"), [(0.09e-3, False), (0.11e-3, True)])
def test_hanging_without_a_preferred_attitude(apart: float, known: bool) -> None:
    # The line is drawn at 0.1 mm.
    body = Afloat(shapes.sphere(0.01, 3), 1.0)
    assert (hanging(body.hull, body.hull.centre + apart * UP).up is not None) is known


def test_signs_of_nose_up_and_lean() -> None:
    # Nose -x, back +z, left side -y. Turned until the nose rises, then until it leans to its own right.
    nose, back, side = -EAST, UP, -NORTH
    level = attitude(back, nose, back, side)
    assert (level.nose_up, level.lean) == (0, 0)
    rising = attitude(np.cos(0.3) * back + np.sin(0.3) * nose, nose, back, side)
    assert rising.nose_up == pytest.approx(0.3)
    assert rising.lean == pytest.approx(0)
    # Leaning to its right, the left side points up.
    leaning = attitude(np.cos(0.4) * back + np.sin(0.4) * side, nose, back, side)
    assert leaning.lean == pytest.approx(0.4)
    assert leaning.nose_up == pytest.approx(0)
    assert attitude(-back, nose, back, side).lean == pytest.approx(np.pi)
    assert attitude(nose, nose, back, side).lean is None
    assert attitude(np.cos(0.08) * nose + np.sin(0.08) * back, nose, back, side).lean is None
    assert attitude(np.cos(0.1) * nose + np.sin(0.1) * back, nose, back, side).lean is not None


def test_horizontal_direction() -> None:
    found = horizontal(np.array([1.0, 0, 1.0]), UP)
    assert found == pytest.approx([1, 0, 0])
    for vertical in (UP, -UP):
        flat = horizontal(vertical, UP)
        assert abs(flat @ UP) < 1e-12
        assert np.linalg.norm(flat) == pytest.approx(1)


def test_starts_are_spread_evenly() -> None:
    # Every direction has a start within 30 degrees, and their sum nearly vanishes.
    starts = spread_directions(36)
    np.testing.assert_allclose(np.linalg.norm(starts, axis=1), 1, rtol=1e-14)
    assert np.abs(starts.mean(axis=0)).max() < 0.02
    anywhere = np.array([shapes.direction(k) for k in range(300)])
    assert (anywhere @ starts.T).max(axis=1).min() > np.cos(np.radians(30))
