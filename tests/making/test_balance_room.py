"""Room for ballast against closed forms in boxes and balls, and brute force in a knobbly body.

Authorities: distances between a box, a cylinder along an axis and a ball by hand; the general mesh library's nearest
places on triangles, asked from points all over a rod.
"""

from __future__ import annotations

from functools import cache
from typing import Any

import numpy as np
import pytest
import shapes
import trimesh
from hypothesis import given
from hypothesis import strategies as st
from workbench import bait, hardware, insert, vector

from meshlure.bait.pieces import Substance
from meshlure.geometry.clearance import Boxes
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.standoff import clears, solid_standoff
from meshlure.geometry.surface import Floats, Surface
from meshlure.making.balance.ballast import BALL, EMBEDDED, FROM_BELLY, ROD, Ballast, Kind
from meshlure.making.balance.ground import Ground
from meshlure.making.balance.room import Room

MM = 1e-3
LEAD = Substance("lead", 11340.0, 11340.0, 11340.0, "by hand", assumed=False)
NOSE, BACK = np.array([-1.0, 0.0, 0.0]), np.array([0.0, 0.0, 1.0])
BOX = shapes.box((0.08, 0.02, 0.03))


def ground(body: Surface = BOX, *inserts: Any, **sections: Any) -> Ground:
    return Ground.of(bait(body, *inserts, density=1.2, **sections))


def room(on: Ground, cover: float = 1.5, clear: float = 1.0, between: tuple[float, float] | None = None) -> Room:
    return Room(on, cover * MM, clear * MM, None if between is None else (between[0] * MM, between[1] * MM))


def rod(length: float, diameter: float, at: Floats, pocket: str = EMBEDDED, fit: float = 0.0) -> Ballast:
    kind = Kind(LEAD, ROD, diameter * MM, 1, pocket, fit * MM, None)
    return Ballast(kind, length * MM, at, BACK if pocket == FROM_BELLY else NOSE)


def balls(count: int, diameter: float, at: Floats) -> Ballast:
    return Ballast.balls(Kind(LEAD, BALL, diameter * MM, count, EMBEDDED, 0.0, None), at, NOSE)


@pytest.mark.parametrize("at", [(0.0, 0.0, 0.0), (10.0, 3.0, -6.0), (-30.0, 0.0, 4.0)])
def test_cover_of_a_rod_in_a_box(at: tuple[float, float, float]) -> None:
    left = room(ground()).left(rod(12, 5, vector(*at)))
    walls = [40 - abs(at[0]) - 6, 10 - abs(at[1]) - 2.5, 15 - abs(at[2]) - 2.5]
    assert left.cover / MM == pytest.approx(min(walls), abs=2e-3)
    axis = int(np.argmin(walls))
    assert abs(left.cover_at[axis]) / MM == pytest.approx((40, 10, 15)[axis], abs=1e-6)
    assert left.clear == np.inf


def test_cover_of_a_ball_in_a_ball() -> None:
    # The facets of a ball of 20 mm lie within it by a thousandth of its radius.
    left = room(ground(shapes.sphere(0.02, 4))).left(balls(1, 6, vector(4, -3, 12)))
    assert left.cover / MM == pytest.approx(20 - 13 - 3, abs=0.03)
    assert left.cover / MM <= 4


def test_a_gap_takes_cover() -> None:
    left = room(ground()).left(rod(12, 5, vector(0, 0, -6), fit=0.3))
    assert left.cover / MM == pytest.approx(15 - 6 - 2.5 - 0.3, abs=2e-3)


def test_clear_of_an_insert_and_of_a_hook() -> None:
    slug = insert("slug", shapes.box((0.006, 0.006, 0.006), (0.02, 0.0, 0.0)), 2.0)
    at = room(ground(BOX, slug, hardware=[hardware("eye", 1.0, vector(0, 0, 9))]))
    # The slug begins at 17 mm, the rod ends at 6 mm.
    assert at.left(rod(12, 5, vector(0, 0, 0))).clear / MM == pytest.approx(9 - 2.5, abs=2e-3)
    assert at.left(rod(12, 5, vector(0, 0, -8))).clear / MM == pytest.approx(np.hypot(11, 8 - 3 - 2.5), abs=2e-3)


@pytest.mark.parametrize(
    ("down", "held"),
    [(10.99, True), (11.01, False)],  # half the box less half the rod less 1.5 mm of cover
)
def test_a_rod_is_held_as_far_as_the_cover_lets_it(down: float, held: bool) -> None:
    assert room(ground()).holds(rod(12, 5, vector(0, 0, -down))) is held


def test_outside_nothing_is_held() -> None:
    assert not room(ground()).holds(rod(12, 5, vector(0, 30, 0)))
    assert not room(ground()).holds(balls(2, 5, vector(0, 0, 40)))


def test_nothing_is_held_in_an_insert_or_round_one() -> None:
    wide = insert("wide", shapes.box((0.03, 0.014, 0.02)), 2.0)
    assert not room(ground(BOX, wide)).holds(rod(8, 4, vector(0, 0, 0)))
    bead = insert("bead", shapes.box((0.001, 0.001, 0.001)), 2.0)
    assert not room(ground(BOX, bead)).holds(rod(20, 8, vector(0, 0, 0)))
    assert room(ground()).holds(rod(20, 8, vector(0, 0, 0)))


def test_a_cavity_of_the_body_is_in_the_way() -> None:
    hollow = shapes.together(BOX, shapes.box((0.006, 0.006, 0.006), (0.02, 0.0, 0.0)).turned())
    at = room(ground(hollow))
    assert not at.holds(rod(12, 5, vector(12, 0, 0)))
    assert at.holds(rod(12, 5, vector(9, 0, 0)))


@pytest.mark.parametrize(("along", "held"), [(-19.0, True), (-21.0, False), (9.0, True), (9.5, False)])
def test_between(along: float, held: bool) -> None:
    # The nose is at -40 mm: from 15 to 55 mm behind it is from -25 to 15 mm; the rod reaches 6 mm either way.
    assert room(ground(), between=(15, 55)).holds(rod(12, 5, vector(along, 0, 0))) is held


def test_places_keep_the_stretch_and_are_where_there_is_room() -> None:
    at = room(ground(), between=(15, 55))
    wide = at.places(rod(12, 5, vector(0, 0, 0)))
    sure = at.places(rod(12, 5, vector(0, 0, 0)), sure=True)
    assert len(wide) > len(sure) > 100
    pitch = at.depths.pitch
    assert (np.abs(wide[:, 2]) <= 11 * MM + 1.5 * pitch).all()
    assert wide[:, 0].min() >= -19 * MM - 1e-9
    assert wide[:, 0].max() <= 9 * MM + 1e-9
    assert all(at.holds(rod(12, 5, place)) for place in sure[:: len(sure) // 20])


def test_a_hole_from_the_belly_goes_round_an_insert() -> None:
    slug = insert("slug", shapes.box((0.006, 0.006, 0.006), (0.0, 0.0, -0.009)), 2.0)
    at = room(ground(BOX, slug))
    above = rod(6, 5, vector(0, 0, 2), FROM_BELLY)
    assert at.holds(rod(6, 5, vector(0, 0, 2)))  # lying there it would be clear: 2 - 2.5 + 6 = 5.5 mm
    assert not at.holds(above)
    assert not (np.linalg.norm(at.places(above)[:, :2], axis=1) < 4 * MM).any()
    assert at.holds(rod(6, 5, vector(8, 0, 2), FROM_BELLY))
    # From the hole's side to the slug's: 8 - 2.5 - 3.
    assert at.left(rod(6, 5, vector(8, 0, 2), FROM_BELLY)).clear / MM == pytest.approx(2.5, abs=2e-3)


@pytest.mark.parametrize("sure", [False, True])
def test_longest_rod_in_a_box(sure: bool) -> None:
    at = room(ground())
    # 80 mm less twice 1.5.
    longest = at.longest(rod(5, 5, vector(0, 0, 0)), sure)
    assert longest == pytest.approx(77 * MM, abs=3 * at.depths.pitch)
    assert (longest <= 77 * MM) is sure


@cache
def knobbly() -> tuple[Surface, Boxes, Floats]:
    """A knobbly body, and points all over it, 15 on each face."""
    surface = shapes.lumpy(7, 4, 0.02)
    steps = [(i / 4, j / 4) for i in range(5) for j in range(5 - i)]
    weights = np.array([(1 - u - v, u, v) for u, v in steps])
    return surface, Boxes.of(surface), np.einsum("pk,fki->fpi", weights, surface.corners).reshape(-1, 3)


def any_rod(seed: int) -> Cylinder:
    surface, *_ = knobbly()
    random = np.random.default_rng(seed)
    middle = surface.vertices[random.integers(len(surface.vertices))] * random.uniform(0.0, 1.3)
    return Cylinder(middle, shapes.direction(seed), random.uniform(1e-3, 8e-3), random.uniform(0.5e-3, 3e-3))


def from_solid(cylinder: Cylinder, points: Floats) -> Floats:
    """Distances from a solid cylinder by hand: beyond its side, beyond its ends, 0 in it."""
    off = points - cylinder.middle
    along = off @ cylinder.axis
    beside = np.linalg.norm(off - along[:, None] * cylinder.axis, axis=1) - cylinder.radius
    return np.asarray(np.hypot(np.maximum(beside, 0), np.maximum(np.abs(along) - cylinder.length / 2, 0)))


@given(st.integers(0, 10_000))
def test_distance_of_a_rod_by_brute_force(seed: int) -> None:
    _, boxes, points = knobbly()
    cylinder = any_rod(seed)
    brute, found = float(from_solid(cylinder, points).min()), solid_standoff(boxes, cylinder)
    # Faces are some 1.5 mm wide, so that no place of one is farther than 0.25 mm from a point.
    assert found.distance - 2e-6 <= brute <= found.distance + 0.25e-3
    assert from_solid(cylinder, found.place[None])[0] == pytest.approx(found.distance, abs=1e-9)
    for bar in (0.9, 0.98, 1.02, 1.1):
        if found.distance > 0.2e-3:
            assert clears(boxes, cylinder, bar * found.distance) is (bar < 1)
    assert found.distance > 10e-6 or not clears(boxes, cylinder, 15e-6)


@pytest.mark.parametrize("seed", [1, 6])
def test_nearest_place_of_a_rod_by_another_library(seed: int) -> None:
    surface, boxes, _ = knobbly()
    cylinder = any_rod(seed)
    found = solid_standoff(boxes, cylinder)
    if found.distance > 0:
        near, apart, _ = trimesh.proximity.ProximityQuery(  # type: ignore[no-untyped-call]
            shapes.as_trimesh(surface)
        ).on_surface(found.on[None])
        assert apart[0] == pytest.approx(found.distance, abs=2e-6)
        assert near[0] == pytest.approx(found.place, abs=1e-4)


def test_a_mesh_inside_a_rod_is_no_distance_from_it() -> None:
    bead = Boxes.of(shapes.sphere(1e-3, 2))
    around = Cylinder(np.zeros(3), NOSE, 10e-3, 4e-3)
    assert solid_standoff(bead, around).distance == 0
    assert not clears(bead, around, 1e-4)
