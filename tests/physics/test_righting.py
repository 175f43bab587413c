"""Righting arms against the ball, the wall-sided box, and the derivative of the energy."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from afloat import UP, Afloat
from hypothesis import given, settings
from hypothesis import strategies as st

from meshlure.geometry.surface import Floats
from meshlure.physics.potential import State
from meshlure.physics.righting import Righting, righting

NOSE, SIDE = np.array([-1.0, 0, 0]), np.array([0, -1.0, 0])


def curves(body: Afloat, state: State) -> tuple[Righting, Righting]:
    return righting(body.potential, state, NOSE, SIDE)


def arm_at(curve: Righting, degrees: float) -> float:
    return float(curve.arm[np.flatnonzero(np.abs(curve.heel - np.radians(degrees)) < 1e-9)[0]])


@pytest.mark.parametrize("share", [0.25, 0.7])
def test_a_ball_rights_with_the_sine_of_the_heel(share: float) -> None:
    # Buoyancy acts through the middle: GZ = e sin(phi) at every heel.
    depth = 0.003
    errors = []
    for level in (3, 4, 5):
        body = Afloat(shapes.sphere(0.02, level), share, np.array([0, 0, -depth]))
        both = curves(body, body.at(UP))
        errors.append(max(float(np.abs(curve.arm - depth * np.sin(curve.heel)).max()) for curve in both) / depth)
    assert shapes.order(errors) == pytest.approx([2, 2], abs=0.4)
    assert errors[-1] < 0.01
    assert both[0].heel.min() == pytest.approx(-np.pi)
    assert both[0].heel.max() == pytest.approx(np.pi)
    assert both[1].heel.max() == pytest.approx(np.pi / 2)


def test_a_box_rights_by_the_wall_sided_formula() -> None:
    # GZ = sin(phi) (GM + BM tan^2(phi)/2) until an edge leaves or enters the water (standard naval architecture).
    length, beam, height, share = 0.1, 0.04, 0.03, 0.5
    body = Afloat(shapes.box((length, beam, height), level=2), share, np.array([0, 0, -0.002]))
    sideways, fore_aft = curves(body, body.at(UP))
    draught = share * height
    rise = height / 2 - 0.002 - draught / 2
    for curve, breadth in ((sideways, beam), (fore_aft, length)):
        bm = breadth**2 / 12 / draught
        dry = np.abs(np.tan(curve.heel)) <= 2 * min(draught, height - draught) / breadth
        heel = curve.heel[dry & (np.abs(curve.heel) < 1.5)]
        arm = curve.arm[dry & (np.abs(curve.heel) < 1.5)]
        assert len(heel) >= 5 if breadth == beam else len(heel) >= 3
        exact = np.sin(heel) * (bm - rise + bm * np.tan(heel) ** 2 / 2)
        np.testing.assert_allclose(arm, exact, rtol=1e-9, atol=1e-15)


def test_positive_heels_lean_to_the_baits_right_and_lift_its_nose() -> None:
    # Ballast on its own left (side = -y): the bait lies over to the left, so heeling it to the right turns back
    # less than heeling it to the left does; likewise ballast towards the nose.
    size = (0.1, 0.04, 0.03)
    for offset, number in ((0.0005 * SIDE, 0), (0.0005 * NOSE, 1)):
        body = Afloat(shapes.box(size, level=2), 0.5, offset - 0.002 * UP)
        curve = curves(body, body.at(UP))[number]
        # At heel 0 the arm is the derivative of -n.B + n.G: G towards the rising side lifts the energy.
        assert arm_at(curve, 0) == pytest.approx(0.0005, rel=1e-9)
        assert arm_at(curve, 5) > -arm_at(curve, -5)


@settings(max_examples=5)
@given(st.integers(0, 10_000))
def test_the_arm_is_the_energys_derivative_by_the_heel(seed: int) -> None:
    # Central differences of n.(G - B) along the same great circle, from any upright, at rest or not.
    body = Afloat(shapes.lumpy(seed, level=3), 0.6, None, 0.1e-3, 3e-8, (0.0, 0.0, -0.04))
    start = body.at(shapes.direction(seed))
    step = 1e-4
    for curve, towards in zip(curves(body, start), directions(start.up), strict=True):
        for k in (0, 3, len(curve.heel) // 2, len(curve.heel) - 4):
            up, down = (
                body.at(np.cos(heel) * start.up + np.sin(heel) * towards).energy
                for heel in (curve.heel[k] + step, curve.heel[k] - step)
            )
            assert curve.arm[k] == pytest.approx((up - down) / (2 * step), rel=1e-4, abs=1e-8)


def directions(up: Floats) -> tuple[Floats, Floats]:
    """Horizontal directions to the left and along the nose, by Gram and Schmidt."""
    along = NOSE - (NOSE @ up) * up
    along = along / np.linalg.norm(along)
    left = SIDE - (SIDE @ up) * up - (SIDE @ along) * along
    return left / np.linalg.norm(left), along


def test_the_area_under_the_curve_is_the_work_of_heeling() -> None:
    # Integral of GZ from 0 to phi = U(phi) - U(0), over many small steps by the curve's own smoothness.
    body = Afloat(shapes.ellipsoid((0.05, 0.012, 0.01), 5), 0.6, np.array([0, 0, -0.002]))
    start = body.at(UP)
    sideways, _ = curves(body, start)
    within = (sideways.heel >= 0) & (sideways.heel <= np.radians(60) + 1e-9)
    work = np.trapezoid(sideways.arm[within], sideways.heel[within])
    end = body.at(np.cos(np.pi / 3) * UP + np.sin(np.pi / 3) * SIDE)
    assert work == pytest.approx(end.energy - start.energy, rel=3e-3)


def test_a_symmetric_bait_rights_alike_both_ways_and_ends_where_it_began() -> None:
    body = Afloat(shapes.ellipsoid((0.05, 0.012, 0.01), 4), 0.6, np.array([0, 0, -0.002]))
    sideways, fore_aft = curves(body, body.at(UP))
    for curve in (sideways, fore_aft):
        np.testing.assert_allclose(curve.arm, -curve.arm[::-1], rtol=0, atol=1e-6)
        assert arm_at(curve, 0) == pytest.approx(0, abs=1e-9)
    assert sideways.arm[0] == pytest.approx(sideways.arm[-1], abs=1e-12)
    assert np.diff(np.sign(sideways.arm[sideways.heel > 0.01])).any() or sideways.arm[-2] > 0
