"""Printed bodies: walls and infill against boxes and spheres by hand, Steiner's formula, and walls round pockets."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
import shapes
from workbench import Insert, bait, codes, insert, only, void

from meshlure.bait.composition import Part, compose
from meshlure.bait.pieces import Bait, Role
from meshlure.errors import InputError
from meshlure.geometry.surface import Surface

SOLID = 1200.0
BOX = (0.06, 0.02, 0.03)


def printed(body: Surface, *inserts: Insert, wall: float = 1.2e-3, infill: float = 0.15, **keys: Any) -> Bait:
    """A bait printed of a stated density of 1.2 g/cm3, or of what the keys say."""
    return bait(body, *inserts, printed=made(wall, infill, **keys))


def made(wall: float = 1.2e-3, infill: float = 0.15, **keys: Any) -> dict[str, Any]:
    return {"wall": f"{wall * 1e3!r} mm", "infill": infill, **(keys or {"density": "1.2 g/cm3"})}


def body_of(one: Bait) -> Part:
    return next(part for part in compose(one).parts if part.role is Role.BODY)


def test_a_box_by_hand() -> None:
    # The core of a box is the box less two walls each way.
    a, b, c = BOX
    t = 1.2e-3
    whole, core = a * b * c, (a - 2 * t) * (b - 2 * t) * (c - 2 * t)
    found = body_of(printed(shapes.box(BOX)))
    assert found.volume == pytest.approx(whole)
    assert found.mass.amount == pytest.approx(SOLID * (whole - 0.85 * core), rel=1e-9)
    # About the middle: 1/12 m (b2 + c2) of the box, less 85% of the core's.
    about_x = SOLID * (whole * (b**2 + c**2) - 0.85 * core * ((b - 2 * t) ** 2 + (c - 2 * t) ** 2)) / 12
    assert found.mass.inertia[0, 0] == pytest.approx(about_x, rel=1e-9)
    np.testing.assert_allclose(found.mass.centre, 0.0, atol=1e-12)
    assert found.substance is not None
    assert found.substance.density == pytest.approx(found.mass.amount / whole)
    # A stated density has half a percent either way, and so has what it is printed to.
    assert found.substance.low / found.substance.density == pytest.approx(0.995)


def test_a_sphere() -> None:
    radius, wall = 0.012, 2e-3
    ball = shapes.sphere(radius, 4)
    found = body_of(printed(ball, wall=wall, infill=0.2))
    # A mesh within the sphere is set off from its own facets: volumes by its own, the share of the core by radii.
    core = ((radius - wall) / radius) ** 3
    assert found.mass.amount / (SOLID * found.volume) == pytest.approx(1 - 0.8 * core, rel=1e-3)


def test_a_spheroid_by_steiners_formula_inward() -> None:
    # V - t S + t^2 M - 4/3 pi t^3 is what lies deeper than t under a smooth convex skin, as long as t is less than its
    # least radius of curvature. Prolate spheroid of half axes a > b, eccentricity e: S = 2 pi b (b + a asin(e)/e), and
    # M, the integral of the mean curvature, is 2 pi (a + b^2/(a e) artanh(e)) (Steiner 1840; Schneider, Convex Bodies).
    a, b, t = 0.030, 0.012, 1.5e-3
    assert t < b**2 / a
    e = np.sqrt(1 - (b / a) ** 2)
    volume = 4 / 3 * np.pi * a * b**2
    area = 2 * np.pi * b * (b + a * np.arcsin(e) / e)
    mean = 2 * np.pi * (a + b**2 / (a * e) * np.arctanh(e))
    core = volume - t * area + t**2 * mean - 4 / 3 * np.pi * t**3
    found = body_of(printed(shapes.ellipsoid((a, b, b), 4), wall=t, infill=0.1))
    assert found.mass.amount / (SOLID * found.volume) == pytest.approx(1 - 0.9 * core / volume, rel=1.5e-3)
    # Area times thickness would make the wall a tenth too heavy.
    assert (t * area) / (volume - core) > 1.08


def test_a_slicer_puts_walls_round_pockets_too() -> None:
    t, lead = 1.2e-3, 11.34
    # In the core alone; in the wall alone, with its own wall in the core; and across both.
    rooms = {
        "deep": ((0.01, 0.004, 0.004), (0.0, 0.0, -0.005)),
        "skin": ((0.002, 0.002, 0.0006), (0.01, 0.0, BOX[2] / 2 - 0.0006)),
        "both": ((0.004, 0.004, 0.004), (-0.02, 0.0, -BOX[2] / 2 + 0.0025)),
    }
    pockets = [insert(name, shapes.box(size, at), lead) for name, (size, at) in rooms.items()]
    found, bare = body_of(printed(shapes.box(BOX), *pockets)), body_of(printed(shapes.box(BOX)))
    # Counted on a grid: what of the core lies nearer to a pocket than a wall, by the distance from a box.
    core = np.array(BOX) / 2 - t
    taken = {name: _near(size, at, t, core) for name, (size, at) in rooms.items()}
    room = sum(float(np.prod(size)) for size, _ in rooms.values())
    lighter = SOLID * (room - 0.85 * sum(volume for volume, _ in taken.values()))
    assert found.volume == pytest.approx(np.prod(BOX) - room, rel=1e-9)
    # The walls weigh more than what the pockets take away.
    assert lighter < 0
    assert found.mass.amount - bare.mass.amount == pytest.approx(-lighter, rel=0.03)
    first = sum(0.85 * first for _, first in taken.values())
    first = SOLID * (first - sum(np.prod(size) * np.array(at) for size, at in rooms.values()))
    np.testing.assert_allclose(found.mass.first, first, atol=0.03 * np.abs(first).max())


def _near(size: Any, at: Any, t: float, core: Any, pitch: float = 0.1e-3) -> tuple[float, Any]:
    """Volume and first moment of what lies within a distance of a box, or in it, and in a box about the origin."""
    half, middle = np.array(size) / 2, np.array(at)
    low, high = np.maximum(middle - half - t, -core), np.minimum(middle + half + t, core)
    counts = np.ceil((high - low) / pitch).astype(int)
    steps = (high - low) / counts
    axes = [low[i] + steps[i] * (np.arange(counts[i]) + 0.5) for i in range(3)]
    points = np.stack(np.meshgrid(*axes, indexing="ij"), axis=-1).reshape(-1, 3)
    within = points[np.linalg.norm(np.maximum(np.abs(points - middle) - half, 0.0), axis=1) < t]
    return float(len(within) * np.prod(steps)), within.sum(axis=0) * np.prod(steps)


def test_a_hollow_of_its_own_mesh_gets_a_wall_too() -> None:
    # A box within the box, turned inside out: a wall round it as thick as that of the skin.
    hollow = (0.02, 0.006, 0.008)
    t = 1.2e-3
    body = shapes.together(shapes.box(BOX), shapes.box(hollow).turned())
    found = body_of(printed(body))
    whole = np.prod(BOX) - np.prod(hollow)
    core = np.prod(np.array(BOX) - 2 * t) - _grown(hollow, t)
    assert found.volume == pytest.approx(whole)
    assert found.mass.amount == pytest.approx(SOLID * (whole - 0.85 * core), rel=3e-3)


def _grown(size: tuple[float, float, float], t: float) -> float:
    """Volume of a box grown by a ball: V + t S + pi t^2 (a + b + c) + 4/3 pi t^3 (Steiner)."""
    a, b, c = size
    return float(a * b * c + 2 * t * (a * b + b * c + c * a) + np.pi * t**2 * (a + b + c) + 4 / 3 * np.pi * t**3)


def test_a_void_weighs_nothing_and_has_a_wall() -> None:
    size, t = (0.01, 0.004, 0.004), 1.2e-3
    chamber = void("chamber", shapes.box(size))
    with_void, without = body_of(printed(shapes.box(BOX), chamber)), body_of(printed(shapes.box(BOX)))
    heavier = SOLID * (0.85 * _grown(size, t) - np.prod(size))
    assert with_void.mass.amount - without.mass.amount == pytest.approx(heavier, rel=0.02)


def test_walls_that_meet_are_solid_and_said_to_be() -> None:
    one = printed(shapes.box(BOX), wall=0.011)
    assert body_of(one).mass.amount == pytest.approx(SOLID * np.prod(BOX))
    assert only(compose(one).findings, "printed-solid").piece == "body"


def test_a_leak_is_told_with_what_it_weighs() -> None:
    told = only(compose(printed(shapes.box(BOX))).findings, "printed-leaks")
    core = np.prod(np.array(BOX) - 2.4e-3)
    # 85% of the core fills with water of 1 g/cm3.
    assert f"{0.85 * core * 1e6:.2f} g heavier" in told.message
    assert "printed-solid" not in codes(compose(printed(shapes.box(BOX))).findings)


def test_a_filament_of_the_stock_reaches_most_of_its_density() -> None:
    # PLA of the stock, 1.24 g/cm3 (1.20 to 1.30), printed to 96% of it (93 to 99%): root of the squares of both.
    found = body_of(printed(shapes.box(BOX), infill=1.0, material="PLA")).substance
    assert found is not None
    assert found.density == pytest.approx(0.96 * 1240)
    assert found.low == pytest.approx(0.96 * 1240 * (1 - np.hypot(40 / 1240, 3 / 96)))
    assert found.high == pytest.approx(0.96 * 1240 * (1 + np.hypot(60 / 1240, 3 / 96)))
    assert found.assumed
    stated = body_of(printed(shapes.box(BOX), infill=1.0, material="PLA", solid=1.0)).substance
    assert stated is not None
    assert (stated.density, stated.low, stated.high) == pytest.approx((1240, 1200, 1300))


def test_a_filament_that_the_stock_does_not_know() -> None:
    with pytest.raises(InputError, match="no material of this name"):
        printed(shapes.box(BOX), material="PLAA solidd")
