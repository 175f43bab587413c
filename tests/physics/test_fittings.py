"""Lips as inclined plates, hooks and rings as wire."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from meshlure.bait.pieces import Hardware
from meshlure.physics.broadside import crossflow_factor
from meshlure.physics.plate import inclined_plate_cn, lip_drag_area, normal_plate_cd
from meshlure.physics.tackle import hook_drag_area
from meshlure.physics.wire import Lie, eye_drag_area, wire_drag_area


@pytest.mark.parametrize(("aspect", "expected"), [(5, 1.2), (10, 1.3), (20, 1.5), (1e6, 2.0)])
def test_plates_square_to_the_flow(aspect: float, expected: float) -> None:
    # White, Fluid Mechanics, table 7.3 (from memory); the curve itself is Eiffel's.
    assert normal_plate_cd(aspect) == pytest.approx(expected, rel=0.04)
    assert normal_plate_cd(1 / aspect) == pytest.approx(normal_plate_cd(aspect))


def test_a_square_plate_presses_most_at_37_degrees() -> None:
    # Eiffel 1910/11: almost 1.5 times the force at 90 degrees.
    angles = np.radians(np.arange(5, 91))
    force = [inclined_plate_cn(1, float(angle)) for angle in angles]
    assert max(force) / force[-1] == pytest.approx(1.47, rel=0.05)
    assert math.degrees(angles[int(np.argmax(force))]) == pytest.approx(37, abs=3)
    assert force[-1] == pytest.approx(normal_plate_cd(1), rel=1e-3)


@pytest.mark.parametrize(("aspect", "slope"), [(0.5, 0.76), (1, 1.45), (2, 2.4)])
def test_small_angles_follow_the_published_slopes(aspect: float, slope: float) -> None:
    # Polhamus 1966, NASA TN D-3767 (from memory), K_p per radian.
    assert inclined_plate_cn(aspect, 1e-4) / 1e-4 == pytest.approx(slope, rel=0.09)


@pytest.mark.parametrize("aspect", [0.3, 1, 2, 6])
def test_the_force_has_no_jump_over_the_angle(aspect: float) -> None:
    force = [inclined_plate_cn(aspect, float(angle)) for angle in np.linspace(0, math.pi / 2, 361)]
    assert np.abs(np.diff(force)).max() < 0.06


def test_a_lip_square_to_the_flow_is_a_plate_and_one_along_it_costs_nothing() -> None:
    assert lip_drag_area(2e-4, 1, math.pi / 2) == pytest.approx(2e-4 * 1.13, rel=1e-4)
    assert lip_drag_area(2e-4, 1, 0.0) == 0.0


def test_lies_of_a_wire_are_means_of_the_cubed_sine() -> None:
    # Crossflow principle; a hundred thousand directions spread evenly over the sphere, and a thousand round a ring.
    cosine = np.linspace(-1, 1, 100001)
    assert pytest.approx(np.mean((1 - cosine**2) ** 1.5), rel=1e-3) == Lie.ANYHOW.value
    turn = 2 * math.pi * np.arange(1000) / 1000
    assert pytest.approx(np.mean(np.abs(np.sin(turn)) ** 3), rel=1e-3) == Lie.RING_EDGE_ON.value


@pytest.mark.parametrize(("swing", "within"), [(0, 0.03), (10, 0.1), (20, 0.25)])
def test_a_trailing_treble_is_its_bends_and_a_rubbed_shank(swing: float, within: float) -> None:
    # Crossflow principle on the wire of a regular treble of gape 1: shanks of two gapes, three half rings, and points
    # to make up eleven gapes (shop experience, no source), turned by an angle in many directions.
    turn = math.radians(swing)
    total = []
    for way in np.linspace(0, 2 * math.pi, 12, endpoint=False):
        flow = np.array([math.cos(turn), math.sin(turn) * math.cos(way), math.sin(turn) * math.sin(way)])
        area = 0.0
        t = (np.arange(600) + 0.5) / 600 * math.pi
        for roll in np.arange(3) * 2 * math.pi / 3:
            out = np.array([0, math.cos(roll), math.sin(roll)])
            tangents = np.cos(t)[:, None] * np.array([1.0, 0, 0]) + np.sin(t)[:, None] * out
            area += math.pi / 2 * np.mean((1 - (tangents @ flow) ** 2) ** 1.5)
        straight = 11 - 3 * math.pi / 2
        total.append(1.1 * (area + straight * math.sin(turn) ** 3) + straight * 0.035 * math.cos(turn) ** 3)
    assert wire_drag_area(11.0, 1.0, Lie.TRAILING) == pytest.approx(np.mean(total), rel=within)
    assert Lie.TRAILING.value < 0.5 * Lie.ANYHOW.value


def test_wire_across_the_flow() -> None:
    # Hoerner 1965, ch. 3 (from memory): 1.0 to 1.2 on length times diameter at Reynolds numbers of 1e3 to 2e5.
    assert wire_drag_area(0.07, 0.9e-3, Lie.ACROSS) / (0.07 * 0.9e-3) == pytest.approx(1.1, abs=0.1)
    assert eye_drag_area(1e-5) == pytest.approx(1.1e-5)


@pytest.mark.parametrize(
    ("fineness", "eta"), [(2, 0.56), (4, 0.60), (8, 0.66), (12, 0.71), (16, 0.74), (20, 0.76), (24, 0.775), (28, 0.79)]
)
def test_crossflow_factor_agrees_with_datcom(fineness: float, eta: float) -> None:
    # USAF Stability and Control DATCOM, fig. 4.2.1.2-35a.
    assert crossflow_factor(fineness) == pytest.approx(eta, abs=0.013)


def test_bad_input_is_refused() -> None:
    with pytest.raises(ValueError, match="aspect"):
        normal_plate_cd(0.0)
    with pytest.raises(ValueError, match="degrees"):
        inclined_plate_cn(1, 2.0)
    with pytest.raises(ValueError, match="lip"):
        lip_drag_area(-1, 1, 1)
    with pytest.raises(ValueError, match="wire"):
        wire_drag_area(-1, 1)
    with pytest.raises(ValueError, match="wire"):
        wire_drag_area(1, math.nan)


def hung(item: str | None, *, hangs: bool, **wire: float | None) -> Hardware:
    """One gram of hardware at the origin."""
    made = Hardware("it", 1e-3, 1e-3, 1e-3, np.zeros(3), hangs, 0.0, None, item, "stated", False)
    return replace(made, **wire)  # type: ignore[arg-type]


def test_what_hangs_trails_and_what_is_fixed_lies_anyhow() -> None:
    size: dict[str, float | None] = {"wire": 0.9e-3, "wire_length": 0.088}
    assert hook_drag_area(hung("treble 6", hangs=True, **size)) == wire_drag_area(0.088, 0.9e-3, Lie.TRAILING)
    assert hook_drag_area(hung(None, hangs=True, **size)) == wire_drag_area(0.088, 0.9e-3, Lie.TRAILING)
    assert hook_drag_area(hung("screw eye 1.0 x 15", hangs=False, **size)) == wire_drag_area(0.088, 0.9e-3, Lie.ANYHOW)
    ring = wire_drag_area(0.088, 0.9e-3, Lie.RING_EDGE_ON)
    assert hook_drag_area(hung("split ring 3", hangs=True, **size)) == ring
    assert hook_drag_area(hung("treble 6", hangs=True, drag_area=6e-5, **size)) == 6e-5
    assert hook_drag_area(hung("barrel swivel hanger", hangs=True)) == 0.0
