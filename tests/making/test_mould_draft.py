"""Draft, undercuts and trapped rubber against closed forms, and against rays cast by the general mesh library."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
import shapes

from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.making.mould.bench import FLIP
from meshlure.making.mould.cover import covered
from meshlure.making.mould.draft import Draft, draft
from meshlure.making.mould.halves import half
from meshlure.making.mould.undercuts import Undercut, undercuts


def judged(surface: Surface, name: str = "A", least: float = 0.0) -> tuple[Draft, list[Undercut]]:
    found = draft(half(surface, name), np.radians(least))
    return found, undercuts(surface if name == "A" else surface.moved(rotation=FLIP), found)


def areas(found: Draft) -> list[float]:
    """opens, within, vertical, undercut, mm2."""
    return [value * 1e6 for value in found.area_by_range.values()]


def globe(radius: float) -> Surface:
    """A ball of 64 sides between rings two degrees apart, one of them its equator."""
    angle = np.radians(np.arange(-90, 91, 2))
    return shapes.revolved(np.maximum(radius * np.cos(angle), 0.0) * (np.abs(angle) < 1.57), radius * np.sin(angle), 64)


def lifted(surface: Surface, mm: float) -> Surface:
    return surface.moved(shift=np.array([0.0, 0.0, mm * 1e-3]))


@pytest.mark.parametrize("degrees", [0.2, 1.0, 2.0, 30.0])
def test_a_cone_s_frustum(degrees: float) -> None:
    # Radius 10 mm at the foot, 20 mm high, draft as named: lateral pi (r1 + r2) s, lid pi r2^2; 96 flat sides.
    upper = 10 - 20 * np.tan(np.radians(degrees))
    if upper <= 0:
        upper = 1e-9
    frustum = shapes.revolved(np.array([10, upper]) * 1e-3, np.array([0, 20]) * 1e-3, 96)
    around, flat = 96 / np.pi * np.sin(np.pi / 96), 96 / (2 * np.pi) * np.sin(2 * np.pi / 96)
    # The sides' own draft is that of the circle inscribed into the polygon.
    slant = np.hypot(20, (10 - upper) * np.cos(np.pi / 96))
    side, lid = np.pi * (10 + upper) * slant * around, np.pi * upper**2 * flat
    for least, expected in ((0.0, [side + lid, 0, 0, 0]), (89.0, [lid, side, 0, 0])):
        found, under = judged(frustum, least=least)
        assert areas(found) == pytest.approx(expected, rel=1e-6, abs=1e-3)
        assert (found.trapped, under) == (0.0, [])
    own = np.degrees(found.angle[found.angle < np.pi / 3])
    if upper > 1:
        assert own == pytest.approx(np.degrees(np.arctan((10 - upper) * np.cos(np.pi / 96) / 20)), rel=1e-6)


def test_a_cone_on_its_tip_is_all_undercut() -> None:
    # Apex on the plane, 10 mm wide and 20 mm high above it: trapped is the cylinder about it less the cone, 2/3 of it.
    cone = shapes.cone(0.01, 0.02, 96)
    found, (under,) = judged(cone)
    flat, around = 96 / (2 * np.pi) * np.sin(2 * np.pi / 96), 96 / np.pi * np.sin(np.pi / 96)
    slant = np.hypot(20, 10 * np.cos(np.pi / 96))
    assert areas(found) == pytest.approx([100 * np.pi * flat, 0, 0, np.pi * 10 * slant * around], rel=1e-9)
    assert found.trapped * 1e9 == pytest.approx(2 / 3 * np.pi * 100 * 20 * flat, rel=1e-9)
    assert found.trapped_error == 0.0
    # The apex lies a radius under the lid's edge.
    assert under.depth * 1e3 == pytest.approx(10, rel=2e-3)
    assert under.at == pytest.approx([0, 0, 0], abs=1e-6)
    other, none = judged(cone, "B")
    assert (areas(other), none) == ([0, 0, 0, 0], [])


@pytest.mark.parametrize("low", [1.0, 4.0, 7.0])
def test_a_ball_parted_below_its_middle(low: float) -> None:
    # Radius 10 mm. A zone of height h has 2 pi R h; rubber is held between the zone and the cylinder about the ball.
    ball = lifted(globe(0.01), low)
    found, under = judged(ball)
    zone = 2 * np.pi * 10 * low
    trapped = np.pi * 100 * low - np.pi * (100 * low - low**3 / 3)
    # 64 sides lose 0.16% of a circle's area, and half of that of its length; the rings' chords lose 0.02%, and up to
    # R (1 - cos 1 degree) = 1.5 um over the zone where the wall is upright.
    assert found.undercut * 1e6 == pytest.approx(zone, rel=3e-3)
    assert found.trapped * 1e9 == pytest.approx(trapped, rel=3e-3, abs=zone * 1.5e-3)
    depth = 10 - np.sqrt(100 - low**2)
    assert under[0].depth * 1e3 == pytest.approx(depth, rel=0.02, abs=0.005)
    assert np.hypot(*under[0].at[:2]) * 1e3 == pytest.approx(np.sqrt(100 - low**2), rel=1e-2)
    whole = sum(areas(found)) + sum(areas(judged(ball, "B")[0]))
    assert whole == pytest.approx(shapes.as_trimesh(ball).area * 1e6, rel=1e-9)
    assert judged(ball, "B")[0].undercut == 0.0


def test_draft_of_a_ball_by_archimedes() -> None:
    # Of a hemisphere, draft below an angle takes 2 pi R^2 sin(angle).
    found, _ = judged(globe(0.01), least=30.0)
    assert areas(found) == pytest.approx([100 * np.pi, 100 * np.pi, 0, 0], rel=3e-3)


GROOVED = Solid.of(shapes.box((0.04, 0.02, 0.02))).less(Solid.of(shapes.box((0.05, 0.008, 0.005), (0, 0.010, 0.005))))
"""A block of 40 x 20 x 20 mm with a groove along a side: 4 mm deep, from 2.5 to 7.5 mm above the middle."""


def test_a_grooved_block() -> None:
    found, (under,) = judged(GROOVED.surface())
    # Roof and floor of the groove 40 x 4 each, its back 40 x 5; the sides above the plane 40 x 10 + 40 x 5 +
    # 2 x 20 x 10 less two groove ends of 4 x 5; the lid 40 x 20.
    assert areas(found) == pytest.approx([800, 0, 400 + 200 + 400 - 40, 520], rel=1e-9)
    assert found.trapped * 1e9 == pytest.approx(40 * 4 * 5, rel=1e-9)
    assert under.area * 1e6 == pytest.approx(520, rel=1e-9)
    assert under.depth * 1e3 == pytest.approx(4, rel=1e-3)
    assert under.at[1] * 1e3 == pytest.approx(6, abs=1e-6)
    lower, none = judged(GROOVED.surface(), "B")
    assert areas(lower) == pytest.approx([800, 0, 1200, 0], rel=1e-9)
    assert none == []


def test_rounding_of_a_wall_is_no_undercut() -> None:
    # Four-byte coordinates 0.3 m off the origin, as an STL has them.
    block = GROOVED.surface().moved(shift=np.array([0.3, 0.2, 0.0]))
    rounded = Surface(block.vertices.astype(np.float32).astype(np.float64), block.faces)
    found, _ = judged(rounded)
    assert areas(found) == pytest.approx([800, 0, 960, 520], rel=1e-5)


def test_what_lies_under_a_hat_in_part() -> None:
    # A foot of radius 10, a stem of 2, a hat of 6 mm: of the foot's top the ring from 2 to 6 is hidden, no more.
    def disc(radius: float, low: float, high: float) -> Solid:
        return Solid.of(lifted(shapes.cylinder(radius * 1e-3, (high - low) * 1e-3, 64), (low + high) / 2))

    hat = disc(10, -2, 2).joined(disc(2, 0, 20), disc(6, 16, 20)).surface()
    found, under = judged(hat)
    flat, around = 64 / (2 * np.pi) * np.sin(2 * np.pi / 64), 64 / np.pi * np.sin(np.pi / 64)
    ring = np.pi * (36 - 4) * flat
    assert found.undercut * 1e6 == pytest.approx(2 * ring + 2 * np.pi * 2 * 14 * around, rel=5e-3)
    assert found.trapped * 1e9 == pytest.approx(ring * 14, rel=2e-3)
    assert abs(found.trapped * 1e9 - ring * 14) <= found.trapped_error * 1e9
    assert 0 < found.spacing < 0.2e-3
    assert under[0].depth * 1e3 == pytest.approx(4, rel=5e-3)


def test_hidden_faces_as_rays_find_them() -> None:
    # The general library's rays, from the middle of every face of a knobbly body along the pull.
    # That library is at home in mm.
    body = shapes.lumpy(7, 3, depth=0.9)
    body = body.moved(shift=-body.bounds.mean(axis=0))
    mesh: Any = shapes.as_trimesh(body.moved(scale=1e3))
    middles = mesh.triangles_center + 1e-4 * mesh.face_normals
    hits = mesh.ray.intersects_any(middles, np.tile([0.0, 0.0, 1.0], (len(middles), 1)))
    found, under = judged(body)
    whole = np.flatnonzero((body.corners[:, :, 2] > 0).all(axis=1))
    # Faces wholly above the plane come first and in order.
    shares = found.hidden[: len(whole)]
    clear = (shares == 0) | (shares == 1)
    assert clear.mean() > 0.97
    assert (hits[whole][clear] == (shares[clear] == 1)).mean() > 0.998
    assert 0.02 < shares.mean() < 0.5
    assert under


def test_cover_of_a_ball() -> None:
    random = np.random.default_rng(1)
    points = random.uniform(-1.2, 1.2, (4000, 3))
    under = covered(points, shapes.sphere(1.0, 5).corners, 0.0)
    r2 = (points[:, :2] ** 2).sum(axis=1)
    height = np.sqrt(np.maximum(1 - r2, 0.0))
    exact = (r2 < 1) & (points[:, 2] < height)
    sure = np.abs(points[:, 2] - height) > 0.01
    sure &= np.abs(r2 - 1) > 0.01
    assert (under == exact)[sure].all()
