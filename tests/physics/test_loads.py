"""Loads at any attitude against Allen and Perkins, Munk and DATCOM, written out for bodies with closed volumes."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from scipy.optimize import brentq
from shapes import box, cylinder, turn
from winged import AIR, FRAME, Winged, hook, spheroid, turned

from meshlure.bait.pieces import Frame, Hardware
from meshlure.geometry.surface import Floats, Surface
from meshlure.physics.loads import Glider, Lead

LENGTH, DIAMETER = 0.12, 0.02
COUPLE = 0.8719
"""k2 - k1 of a prolate spheroid of fineness 6 (Lamb 1932, art. 114)."""

ETA = 0.63
"""Crossflow factor at fineness 6: DATCOM fig. 4.2.1.2-35a has 0.60 at 4 and 0.66 at 8."""

VOLUME = math.pi / 6 * LENGTH * DIAMETER**2


def attached(wings: Glider, body: Winged) -> Glider:
    """The same with the flow attached all round: nothing of the closed body's couple is lost to the wake."""
    cuts = body.cuts
    whole = np.pi / 4 * cuts.spread[:, ::-1].T ** 2
    nose = Lead(wings.nose_first.axial, cuts.position[::-1], whole[:, ::-1])
    return replace(wings, nose_first=nose, tail_first=Lead(wings.tail_first.axial, cuts.position, whole))


def bent(angle: float, lateral: Floats = FRAME.back, nose: Floats = FRAME.nose) -> Floats:
    return np.asarray(math.cos(angle) * nose + math.sin(angle) * lateral)


@pytest.fixture(scope="module")
def body() -> Winged:
    return Winged(spheroid(LENGTH, DIAMETER))


@pytest.fixture(scope="module")
def closed(body: Winged) -> Glider:
    return attached(body.wings(), body)


@pytest.mark.parametrize("degrees", [3.0, 20.0, 45.0, 70.0, 100.0, 150.0, 178.0])
@pytest.mark.parametrize("lateral", [FRAME.back, FRAME.side])
def test_an_attached_spheroid_feels_munks_couple_and_the_crossflow_at_its_middle(
    closed: Glider, degrees: float, lateral: Floats
) -> None:
    # Munk 1924, Allen and Perkins 1951: (k2 - k1) Vol sin 2a cos(a/2), a from the end that leads; it turns the bait
    # away from its motion. Crossflow and axial force act at the middle and on the axis: no moment about the middle.
    angle = math.radians(degrees)
    lead = min(angle, math.pi - angle)
    moment = closed.loads(bent(angle, lateral)).about(np.array([0.0, 0.0, LENGTH / 2]))[0]
    expected = COUPLE * VOLUME * math.sin(2 * angle) * math.cos(lead / 2)
    assert float(moment @ np.cross(FRAME.nose, lateral)) == pytest.approx(-expected, rel=4e-3)


@pytest.mark.parametrize("degrees", [0.0, 10.0, 40.0, 90.0, 130.0, 180.0])
def test_forces_of_a_closed_attached_body_are_axial_and_crossflow_alone(closed: Glider, degrees: float) -> None:
    # Allen and Perkins 1951 with no base: C_A0 cos^2 a along, eta C_dc A_p sin^2 a across, C_dc 1.2, A_p pi/4 l d.
    angle = math.radians(degrees)
    force = closed.loads(bent(angle)).force[0]
    lead = closed.nose_first if degrees <= 90 else closed.tail_first
    along = lead.axial * math.cos(angle) * abs(math.cos(angle))
    across = ETA * 1.2 * math.pi / 4 * LENGTH * DIAMETER * math.sin(angle) ** 2
    assert float(force @ FRAME.nose) == pytest.approx(-along, rel=1e-9, abs=1e-20)
    assert float(force @ FRAME.back) == pytest.approx(-across, rel=0.02, abs=1e-12)
    assert abs(float(force @ FRAME.side)) < 1e-15


@pytest.mark.parametrize("degrees", [5.0, 15.0, 40.0])
def test_allen_and_perkins_for_a_body_with_a_base(degrees: float) -> None:
    # NASA Rep. 1048 (memory): C_N A = (k2 - k1) A_b sin 2a cos(a/2) + eta C_dc A_p sin^2 a, and about x_m, nose up,
    # C_m A d = (k2 - k1) [Vol - A_b (l - x_m)] sin 2a cos(a/2) + eta C_dc A_p (x_m - x_p) sin^2 a, x from the nose.
    # A paraboloid nose 40 mm long on a cylinder 60 mm long, diameter 20 mm: the flow leaves at the base.
    radius, head, length = 0.01, 0.04, 0.10

    def half(z: Floats) -> Floats:
        return np.asarray(radius * np.sqrt(np.clip((length - z) / head, 0.0, 1.0)))

    wings = Winged(turned(half, length, along=400)).wings()
    angle, middle = math.radians(degrees), 0.05
    base = math.pi * radius**2
    bulk = base * (head / 2 + length - head)
    plan = 2 * radius * (2 / 3 * head + length - head)
    centre = (2 * radius * (2 / 3 * head * 0.6 * head + (length - head) * (length + head) / 2)) / plan
    # Fineness 5: k2 - k1 0.8351 (Lamb), eta 0.615 (DATCOM).
    slender = 0.8351 * math.sin(2 * angle) * math.cos(angle / 2)
    viscous = 0.615 * 1.2 * plan * math.sin(angle) ** 2
    loads = wings.loads(bent(angle))
    normal = -float(loads.force[0] @ FRAME.back)
    turning = -float(loads.about(np.array([0.0, 0.0, length - middle]))[0] @ np.cross(FRAME.nose, FRAME.back))
    assert normal == pytest.approx(slender * base + viscous, rel=0.015)
    expected = slender * (bulk - base * (length - middle)) + viscous * (middle - centre)
    assert turning == pytest.approx(expected, rel=0.045)


def test_as_much_lift_is_kept_on_a_smooth_tail_as_datcom_keeps() -> None:
    # DATCOM 4.2.1.1 counts the sections as far as x0/l = 0.378 + 0.527 x1/l, x1 where they shrink fastest: of a
    # spheroid that is its end, so that x0/l = 0.905 and 4 x0 (l - x0)/l^2 = 0.344 of the greatest section is kept:
    # 2 (k2 - k1) 0.344 per radian on it. That is for turbulent layers; here it lies midway between those and laminar
    # ones, which leave earlier and so keep more.
    wings = Winged(spheroid(LENGTH, DIAMETER)).wings()
    slope = -float(wings.loads(bent(1e-4)).force[0] @ FRAME.back) / 1e-4
    assert slope == pytest.approx(2 * COUPLE * 0.344 * math.pi / 4 * DIAMETER**2, rel=0.3)


def test_straight_on_the_loads_are_the_drag() -> None:
    hooks = [hook("belly", 60e-6, (0.0, -0.011, 0.07)), hook("tail", 40e-6, (0.0, 0.0, -0.002))]
    lip = box((0.012, 0.001, 0.016), (0.0, -0.004, 0.125))
    body = Winged(spheroid(LENGTH, DIAMETER), hooks, lips={"lip": lip})
    wings = body.wings()
    for end, sign in (("nose", 1.0), ("tail", -1.0)):
        force = wings.loads(sign * FRAME.nose).force[0]
        drag = body.way.drag(end, 25.0, *AIR, None)
        assert -float(force @ FRAME.nose) * sign == pytest.approx(drag.parts.total, rel=1e-6)


def test_a_hook_pulls_along_the_flow_at_its_eye() -> None:
    place, towards = np.array([0.002, -0.011, 0.07]), bent(math.radians(35))
    with_hook = Winged(spheroid(LENGTH, DIAMETER), [hook("h", 60e-6, place)]).wings()
    without = Winged(spheroid(LENGTH, DIAMETER)).wings()
    # The hook also trips the layer, which the axial force knows: the same lead for both.
    with_hook = replace(with_hook, nose_first=without.nose_first)
    extra = with_hook.loads(towards)
    assert extra.force[0] - without.loads(towards).force[0] == pytest.approx(-60e-6 * towards, rel=1e-9, abs=1e-17)
    turning = extra.moment[0] - without.loads(towards).moment[0]
    assert turning == pytest.approx(np.cross(place, -60e-6 * towards), rel=1e-9, abs=1e-17)


def test_a_lip_is_a_plate_that_stalls() -> None:
    # A square plate along the stream, ahead of the nose. Helmbold's slope at aspect 1 is 1.48 per radian (Polhamus
    # 1966: 1.45); centre of pressure of thin plates at 0.2 + 0.3 sin a of the chord (Joessel 1870, from memory). At 90
    # degrees 1.13 (Eiffel 1910/11) at its middle.
    plate = box((0.02, 0.0004, 0.02), (0.0, 0.0, 0.14))
    body = Winged(spheroid(LENGTH, DIAMETER), lips={"lip": plate})
    wings = body.wings()
    bare = replace(wings, lips=[])
    angle = math.radians(1.0)
    for towards, force, place in ((bent(angle), 1.48 * angle, 0.13 + 0.02 * 0.8), (FRAME.back, 1.13, 0.14)):
        alone, there = wings.loads(towards), bare.loads(towards)
        pressed = -float((alone.force - there.force)[0] @ FRAME.back)
        # The normal force alone; the friction along the plate is neglected.
        assert pressed == pytest.approx(force * 4e-4, rel=0.06)
        turning = float((alone.moment - there.moment)[0] @ np.cross(FRAME.nose, FRAME.back))
        assert -turning / pressed == pytest.approx(place, rel=3e-3)


def test_loads_close_at_every_direction_without_a_jump(body: Winged) -> None:
    wings = body.wings()
    angle = np.linspace(-math.pi, math.pi, 2881)
    towards = np.cos(angle)[:, None] * FRAME.nose + np.sin(angle)[:, None] * FRAME.side
    loads = wings.loads(towards)
    for values in (loads.force, loads.moment):
        assert np.abs(np.diff(values, axis=0)).max() < 0.01 * np.abs(values).max()
        assert values[0] == pytest.approx(values[-1], abs=1e-12)


def _bait(surface: Surface, lip: Surface, places: Floats, frame: Frame) -> Winged:
    hooks: list[Hardware] = [hook(f"h{k}", (40 + 20 * k) * 1e-6, place) for k, place in enumerate(places)]
    return Winged(surface, hooks, frame, {"lip": lip})


SHAPE = Surface(spheroid(0.09, 0.02).vertices * (0.6, 1.0, 1.0) + (0.0, 0.001, 0.0), spheroid(0.09, 0.02).faces)
PLATE = box((0.012, 0.001, 0.016), (0.001, -0.008, 0.09))
PLACES = np.array([[0.001, -0.012, 0.05], [-0.001, 0.0, -0.002]])
DIRECTIONS = np.array(
    [bent(a, math.cos(r) * FRAME.back + math.sin(r) * FRAME.side) for a in (0.2, 1.1, 2.4) for r in (0.3, 2.0, 4.4)]
)


def test_a_mirrored_bait_has_mirrored_loads() -> None:
    flip = np.array([-1.0, 1.0, 1.0])
    one = _bait(SHAPE, PLATE, PLACES, FRAME).wings().loads(DIRECTIONS)

    def mirrored(surface: Surface) -> Surface:
        return Surface(surface.vertices * flip, surface.faces[:, ::-1])

    other = _bait(mirrored(SHAPE), mirrored(PLATE), PLACES * flip, FRAME).wings().loads(DIRECTIONS * flip)
    size = np.abs(one.force).max()
    assert other.force == pytest.approx(one.force * flip, abs=1e-6 * size)
    # Moments are axial vectors: they mirror the other way.
    assert other.moment == pytest.approx(-one.moment * flip, abs=1e-6 * size * 0.09)


def test_loads_stay_with_a_mesh_that_is_drawn_elsewhere() -> None:
    # Statics: the same forces, and the same moments about the same point of the bait.
    away = np.array([0.3, -0.2, 0.15])
    one = _bait(SHAPE, PLATE, PLACES, FRAME).wings().loads(DIRECTIONS)
    shape, plate = (Surface(surface.vertices + away, surface.faces) for surface in (SHAPE, PLATE))
    other = _bait(shape, plate, PLACES + away, FRAME).wings().loads(DIRECTIONS)
    size = np.abs(one.force).max()
    assert other.force == pytest.approx(one.force, abs=1e-6 * size)
    assert other.about(away) == pytest.approx(one.moment, abs=1e-6 * size * 0.09)


@pytest.mark.parametrize(("across", "width"), [(FRAME.side, 0.024), (FRAME.back, 0.012)])
def test_a_flat_body_lifts_by_the_circle_on_the_width_that_the_flow_sees(across: Floats, width: float) -> None:
    # Apparent mass of an ellipse (Lamb 1932, art. 71; Jorgensen 1977): pi/4 of the square of its axis across the flow.
    # The base, cut square, keeps all of it: 12 mm wide, 24 mm deep, an elliptic nose of 60 mm before 40 mm alike.
    def half(z: Floats) -> Floats:
        return np.asarray(0.5 * np.sqrt(np.clip((0.10 - z) / 0.06, 0.0, 1.0)))

    round_ = turned(half, 0.10, along=300)
    wings = Winged(Surface(round_.vertices * (0.012, 0.024, 1.0), round_.faces)).wings()
    slope = -float(wings.loads(bent(1e-4, across)).force[0] @ across) / 1e-4
    # Fineness 0.1/sqrt(0.012 0.024) = 5.89: k2 - k1 0.868 between Lamb's 0.835 at 5 and 0.872 at 6.
    assert slope == pytest.approx(2 * 0.868 * math.pi / 4 * width**2, rel=0.02)


def test_loads_turn_with_the_mesh() -> None:
    q = turn(7)
    one = _bait(SHAPE, PLATE, PLACES, FRAME).wings().loads(DIRECTIONS)
    frame = Frame.of(q @ FRAME.nose, q @ FRAME.back)
    shape, plate = (Surface(surface.vertices @ q.T, surface.faces) for surface in (SHAPE, PLATE))
    other = _bait(shape, plate, PLACES @ q.T, frame).wings().loads(DIRECTIONS @ q.T)
    size = np.abs(one.force).max()
    # The lip's face and the cuts are found again in the turned mesh.
    assert other.force == pytest.approx(one.force @ q.T, abs=2e-3 * size)
    assert other.moment == pytest.approx(one.moment @ q.T, abs=2e-3 * size * 0.09)


@pytest.mark.parametrize("ahead", [0.10, 0.16, 0.30])
def test_trim_of_a_spheroid_with_its_weight_ahead(closed: Glider, ahead: float) -> None:
    # Where Munk's couple and the crossflow balance about a centre of gravity D ahead of the middle, a from the nose:
    # (k2 - k1) Vol 2 sin a cos a cos(a/2) = eta C_dc A_p D sin^2 a, hence
    # tan a / cos(a/2) = 2 (k2 - k1) Vol / (eta C_dc A_p D): Allen and Perkins, their cos(a/2) kept. The axial force
    # passes through the centre of gravity on the axis, and the closed attached body has no other force along its side.
    arm = ahead * LENGTH
    wanted = 2 * COUPLE * VOLUME / (ETA * 1.2 * math.pi / 4 * LENGTH * DIAMETER * arm)
    expected = brentq(lambda a: math.tan(a) - wanted * math.cos(a / 2), 1e-3, math.pi / 2 - 1e-6)
    centre = np.array([0.0, 0.0, LENGTH / 2 + arm])

    def turning(angle: float) -> float:
        return float(closed.loads(bent(angle)).about(centre)[0] @ np.cross(FRAME.nose, FRAME.back))

    assert brentq(turning, 0.05, math.pi / 2 - 1e-3) == pytest.approx(expected, rel=0.012)


def test_a_short_cylinder_is_not_turned_by_its_own_axis() -> None:
    # By symmetry: no moment about its middle at 0, 90 and 180 degrees, and none but the couple between.
    wings = Winged(cylinder(0.01, 0.06, 96, 30)).wings()
    for angle in (0.0, math.pi / 2, math.pi):
        assert np.abs(wings.loads(bent(angle)).moment).max() < 1e-9 * 0.06 * 0.02 * 0.06
