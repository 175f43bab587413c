"""Trims, wells and verdicts of moment curves that are known in closed form."""

from __future__ import annotations

import math
from collections.abc import Callable

import numpy as np
import pytest

from meshlure.geometry.surface import Floats
from meshlure.physics.trim import STEP, MomentCurve, bearing, leading

INERTIA = 1e-5


def curve(moment: Callable[[Floats], Floats], force: Callable[[Floats], Floats] = np.zeros_like) -> MomentCurve:
    angle = np.arange(-np.pi, np.pi + STEP / 2, STEP)
    return MomentCurve("yaw", angle, np.asarray(moment(angle)), INERTIA, force(angle))


def arrow(end: str) -> MomentCurve:
    """A weathercock: M = M0 sin a, or its opposite."""
    sign = 1.0 if end == "nose" else -1.0
    return curve(lambda a: sign * 2e-3 * np.sin(a))


def cone(trim: float) -> MomentCurve:
    """A slender body's couple against a restoring moment, M = M0 sin a (cos t - cos a): trims at t to either side."""
    return curve(lambda a: 2e-3 * np.sin(a) * (math.cos(trim) - np.cos(a)))


def test_a_weathercock_trims_at_its_end_alone() -> None:
    for end, other in (("nose", "tail"), ("tail", "nose")):
        found = arrow(end)
        trim = found.nearest_trim(end)
        assert trim is not None
        assert trim.from_end(end) == pytest.approx(0, abs=1e-9)
        assert trim.slope == pytest.approx(2e-3, rel=1e-3)
        assert [abs(t.from_end(other)) for t in found.trims if not t.stable] == pytest.approx([0], abs=1e-9)


@pytest.mark.parametrize("start", [0.2, 0.6, 1.2])
def test_a_pendulum_swings_as_far_as_it_was_let_go(start: float) -> None:
    # Energy: M = M0 sin a has the work M0 (1 - cos a).
    found = arrow("tail")
    assert found.swing("tail", start) == pytest.approx(start, abs=float(STEP))
    assert found.work.max() - found.work.min() == pytest.approx(2 * 2e-3, rel=1e-3)
    assert found.swing("nose", start) == pytest.approx(np.pi)


@pytest.mark.parametrize("degrees", [12.0, 31.3, 75.5])
def test_trims_of_a_double_well(degrees: float) -> None:
    found = cone(math.radians(degrees))
    stable = sorted(t.angle for t in found.trims if t.stable)
    assert np.degrees(stable) == pytest.approx([-degrees, degrees], rel=1e-3)
    # Slope there, by differentiation: M0 sin^2 t.
    slope = 2e-3 * math.sin(math.radians(degrees)) ** 2
    assert [t.slope for t in found.trims if t.stable] == pytest.approx([slope, slope], rel=5e-3)


def test_a_swing_in_a_double_well_ends_where_the_work_is_the_same() -> None:
    # Work M0 (sin^2 a/-2 - cos t cos a): equal at cosines c1 and c2 with c1 + c2 = 2 cos t.
    trim, start = math.radians(40), math.radians(30)
    other = math.acos(2 * math.cos(trim) - math.cos(start))
    assert cone(trim).swing("nose", start) == pytest.approx(other, abs=float(STEP))


def test_a_lower_start_crosses_the_hump() -> None:
    # From farther out than cos a = 2 cos t - 1 the hump at the nose is crossed, and it swings as far to the other side.
    trim = math.radians(40)
    beyond = math.acos(2 * math.cos(trim) - 1) + math.radians(3)
    assert cone(trim).swing("nose", beyond) == pytest.approx(beyond, abs=float(STEP))


def test_moving_the_weight_ahead_by_a_lever_adds_the_forces_moment() -> None:
    # A side force -F sin a behind the centre of gravity by the shift: statics.
    found = curve(np.zeros_like, lambda a: -0.05 * np.sin(a)).moved(0.01)
    assert found.moment == pytest.approx(0.01 * 0.05 * np.sin(found.angle), rel=1e-12)
    assert found.moved(-0.01).moment == pytest.approx(np.zeros_like(found.angle), abs=1e-15)


@pytest.mark.parametrize(
    ("degrees", "verdict"), [(19.0, "steady"), (21.0, "sways"), (59.0, "sways"), (89.0, "tumbles")]
)
def test_verdicts_just_inside_and_outside_the_limits(degrees: float, verdict: str) -> None:
    # The limits are ours: a trim within 20 degrees whose well holds a start 30 off; within 60; anything else.
    found = bearing([cone(math.radians(degrees))], "nose")
    assert found.verdict == verdict
    assert found.trim == pytest.approx(math.radians(degrees), rel=1e-3)


def test_the_worse_plane_decides() -> None:
    assert bearing([arrow("nose"), cone(math.radians(40))], "nose").verdict == "sways"
    assert bearing([arrow("nose"), arrow("tail")], "nose").verdict == "tumbles"
    assert bearing([arrow("nose"), cone(math.radians(10))], "nose").verdict == "steady"


def test_the_steadier_end_leads() -> None:
    assert leading([arrow("tail"), arrow("tail")]).end == "tail"
    assert leading([arrow("nose"), cone(math.radians(40))]).end == "nose"
    # Both ends are wells; that of the tail is the deeper.
    both = curve(lambda a: 1e-3 * np.sin(2 * a) - 2e-4 * np.sin(a))
    assert {bearing([both], end).verdict for end in ("nose", "tail")} == {"steady"}
    assert leading([both]).end == "tail"


def test_without_any_moment_there_is_no_end_to_hold() -> None:
    still = curve(np.zeros_like)
    assert bearing([still], "nose").verdict == "tumbles"
    assert still.nearest_trim("nose") is None
