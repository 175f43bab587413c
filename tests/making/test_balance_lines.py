"""Where ballast must lie and what it does, against hydrostatics of a box by hand.

Authority: a box of length L and beam B in water displaces L B T at draught T; its centre of buoyancy lies at T/2, and
the metacentre BM = I/V above that, with I = L B^3/12 sideways and B L^3/12 fore and aft: B^2/(12 T) and L^2/(12 T)
(any textbook of naval architecture). A body hung under water turns until its centre of gravity is plumb below that of
buoyancy.
"""

from __future__ import annotations

from functools import cache
from math import atan2, degrees, radians
from typing import Any

import numpy as np
import pytest
import shapes
from workbench import bait, insert, vector

from meshlure.balancing.finding import balance
from meshlure.files.sections.target import TargetSection
from meshlure.making.balance.aim import Lines, aim
from meshlure.making.balance.ground import Ground

L, B, H = 0.12, 0.04, 0.024
"""m: 115.2 cm3."""
WATER, BODY = 1000.0, 500.0
FIXED, AT = 4e-3, 0.03
"""kg of a fixed weight in the place of body, and m behind the middle."""
RESERVE = 40e-3


def boat(target: dict[str, Any], **ballast: Any) -> Any:
    """A box with its middle at the origin and a weight behind it; nose to -x, back to +z."""
    side = 0.008
    density = (FIXED / side**3 + BODY) / 1e6
    weight = insert("weight", shapes.box((side,) * 3, (AT, 0.0, 0.0)), density * 1e3)
    return bait(shapes.box((L, B, H), level=2), weight, density=0.5, target=target, ballast=ballast)


FLOATS = {"behaviour": "floats", "reserve": f"{RESERVE * 1e3} g", "nose_up": "0 deg"}
NET = (WATER - BODY) * L * B * H - RESERVE - FIXED
"""kg: displacement less reserve less what is there, 13.6 g."""


def lines(target: dict[str, Any]) -> tuple[Ground, Lines]:
    boated = boat(target)
    ground = Ground.of(boated)
    stated: TargetSection = boated.plan.target
    return ground, Lines(ground, aim(ground, stated))


def test_mass_wanted() -> None:
    _, found = lines(FLOATS)
    assert found.net == pytest.approx(NET, rel=1e-9)


def test_the_line_levels_the_box() -> None:
    _, found = lines(FLOATS)
    foot = found.line(NET).at(-0.005)
    # Moments about the middle: net x = -4 g x 30 mm.
    assert foot == pytest.approx([-FIXED * AT / NET, 0.0, -0.005], abs=1e-9)


@pytest.mark.parametrize("angle", [-6.0, 4.0])
def test_the_line_of_a_trimmed_box(angle: float) -> None:
    """With the bow up by t the centre of buoyancy moves aft by L^2/(12 T) tan t and up by half of that times tan t,
    as long as neither end of the box dips or leaves the water (wall-sided formula, any textbook)."""
    _, found = lines({**FLOATS, "nose_up": f"{angle} deg"})
    mass = WATER * L * B * H - RESERVE
    draught, t = mass / (WATER * L * B), np.tan(radians(angle))
    aft, rise = L**2 / (12 * draught) * t, L**2 / (24 * draught) * t**2
    buoyant = np.array([aft, 0.0, -H / 2 + draught / 2 + rise])
    up = np.array([-np.sin(radians(angle)), 0.0, np.cos(radians(angle))])
    rest = mass - NET
    centre = np.array([FIXED * AT / rest, 0.0, 0.0])
    middle = (mass * buoyant - rest * centre) / NET
    assert found.line(NET).off(middle[None])[0] == pytest.approx(np.zeros(3), abs=2e-8)
    assert found.line(NET).up == pytest.approx(up)


def test_first_order_tilt_of_what_lies_beside() -> None:
    _, found = lines(FLOATS)
    mass = WATER * L * B * H - RESERVE
    draught, low = mass / (WATER * L * B), -0.006
    gravity = NET * low / mass
    height = -H / 2 + draught / 2 + L**2 / (12 * draught) - gravity
    place = found.line(NET).at(low) + np.array([1e-3, 0.0, 0.0])
    assert found.tilts(NET, place[None]) == pytest.approx([1e-3 * NET / mass / height], rel=1e-6)


@cache
def settled() -> tuple[dict[str, Any], ...]:
    found = balance(boat(FLOATS, materials=["lead"], shapes=["rod"], cover="2 mm"))
    assert found.met
    return tuple(found.account["options"])


def test_every_way_levels_it() -> None:
    assert len(settled()) >= 4
    for row in settled():
        assert row["reserve_g"] == pytest.approx(RESERVE * 1e3, abs=1e-6)
        assert (row["nose_up_deg"], row["lean_deg"]) == pytest.approx((0.0, 0.0), abs=1e-4)
        assert row["at_mm"][0] == pytest.approx(-FIXED * AT / NET * 1e3, abs=1e-6)
        assert row["from_nose_mm"] == pytest.approx((L / 2 - FIXED * AT / NET) * 1e3, abs=1e-6)
        # Net mass: the lead less the body that makes room.
        assert row["mass_g"] * (1 - BODY / 11340) == pytest.approx(NET * 1e3, rel=1e-9)


def test_metacentric_heights_by_hand() -> None:
    mass = WATER * L * B * H - RESERVE
    draught = mass / (WATER * L * B)
    for row in settled():
        gravity = NET * row["at_mm"][2] * 1e-3 / mass
        above = -H / 2 + draught / 2 - gravity
        heights = row["metacentric_mm"]
        assert heights["sideways"] == pytest.approx((above + B**2 / (12 * draught)) * 1e3, rel=1e-6)
        assert heights["fore_aft"] == pytest.approx((above + L**2 / (12 * draught)) * 1e3, rel=1e-6)
        assert heights["least"] == pytest.approx(heights["sideways"], rel=1e-9)


def test_the_lowest_place_is_the_one_with_the_cover_asked_for() -> None:
    # In a box every rod can go down until 2 mm are left below it.
    for row in settled():
        assert row["at_mm"][2] == pytest.approx(-H / 2 * 1e3 + 2 + row["size_mm"] / 2, abs=0.035)
        assert row["cover_mm"] == pytest.approx(-row["size_mm"] / 2 + row["at_mm"][2] + H / 2 * 1e3, abs=0.003)
        assert row["cover_mm"] >= 2 - 0.003


@pytest.mark.parametrize(("nose_up", "lean"), [(12.0, 0.0), (-20.0, 5.0)])
def test_a_sinker_hangs_plumb(nose_up: float, lean: float) -> None:
    """Its numbers alone: the centre of gravity of weight, body and ballast straight below the middle of the box."""
    target = {"behaviour": "sinks", "reserve": "-10 g", "nose_up": f"{nose_up} deg", "lean": f"{lean} deg"}
    found = balance(boat(target, materials=["lead", "tungsten heavy alloy 90% W"], shapes=["rod"], cover="1 mm"))
    assert found.met
    for row in found.account["options"][:3]:
        size = np.pi / 4 * (row["size_mm"] * 1e-3) ** 2 * row["length_mm"] * 1e-3
        net = row["mass_g"] * 1e-3 - size * BODY
        whole = BODY * L * B * H + FIXED + net
        assert whole - WATER * L * B * H == pytest.approx(10e-3, rel=1e-9)
        gravity = (FIXED * vector(AT * 1e3, 0, 0) + net * vector(*row["at_mm"])) / whole
        up = -gravity / np.linalg.norm(gravity)
        # Nose to -x, back to +z, own left to -y: side = back x nose.
        assert degrees(np.arcsin(-up[0])) == pytest.approx(nose_up, abs=0.01)
        assert degrees(atan2(-up[1], up[2])) == pytest.approx(lean, abs=0.01)
        assert row["metacentric_mm"]["least"] == pytest.approx(np.linalg.norm(gravity) * 1e3, rel=1e-6)
