"""Where and along what a body parts: the plane's height, the parting curve, the pull that traps least."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from scipy.spatial.transform import Rotation

from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats, Surface
from meshlure.making.mould.lean import best_pull
from meshlure.making.mould.parting import parting, straightened
from meshlure.making.mould.shadow import Shadow

MM3 = 1e9


def turned(degrees: float, axis: str) -> Floats:
    return np.asarray(Rotation.from_euler(axis, degrees, degrees=True).as_matrix())


def frustum(foot: float, top: float, height: float) -> Surface:
    """A truncated cone between z = 0 and its height, mm."""
    return shapes.revolved(np.array([foot, top]) * 1e-3, np.array([0.0, height]) * 1e-3, 96)


@pytest.mark.parametrize("height", [-3.0, 0.0, 2.0, 7.0])
def test_what_a_plane_traps_about_a_ball(height: float) -> None:
    # Radius 10 mm: between the plane, the ball and the cylinder about it, pi h^3/3, whichever side the plane lies.
    shadow = Shadow.of(shapes.sphere(0.01, 5), 0.1e-3)
    assert shadow.trapped(height * 1e-3) * MM3 == pytest.approx(np.pi * abs(height) ** 3 / 3, rel=0.04, abs=0.05)


def test_a_hollow_between_two_parts_is_trapped_at_any_height() -> None:
    # A groove of 40 x 4 x 5 mm, from 2.5 to 7.5 mm above the middle.
    groove = Solid.of(shapes.box((0.05, 0.008, 0.005), (0, 0.010, 0.005)))
    shadow = Shadow.of(Solid.of(shapes.box((0.04, 0.02, 0.02))).less(groove).surface(), 0.1e-3)
    for height in (-9, 0, 3, 5, 9):
        assert shadow.trapped(height * 1e-3) * MM3 == pytest.approx(800, rel=0.03)


def test_the_plane_goes_where_the_body_is_widest() -> None:
    # Two cones foot to foot, 5 mm high above and 15 below: the widest place is not the middle of the height.
    cones = Solid.of(frustum(10, 2, 5)).joined(Solid.of(frustum(2, 10, 15)).shifted(np.array([0, 0, -0.015])))
    shadow = Shadow.of(cones.surface(), 0.1e-3)
    assert shadow.best_height(-0.005, cones.volume) * 1e3 == pytest.approx(0.0, abs=0.15)
    assert shadow.trapped(0.0) * MM3 < 1


def test_the_middle_is_kept_where_it_is_as_good() -> None:
    # Anywhere along an upright wall, and within a hair of the best on a ball.
    wall = Shadow.of(shapes.box((0.03, 0.02, 0.01)), 0.1e-3)
    assert wall.best_height(0.0021, 6e-6) == 0.0021
    ball = Shadow.of(shapes.sphere(0.01, 4), 0.1e-3)
    assert ball.best_height(0.0002, 4.19e-6) == 0.0002
    assert ball.best_height(0.003, 4.19e-6) == pytest.approx(0.0, abs=1e-4)


@pytest.mark.parametrize("seed", range(3))
def test_the_parting_curve_of_an_ellipsoid(seed: int) -> None:
    # Where the normal is square to the pull d, x^T A d = 0: a plane through the middle (polar of the direction).
    axes = np.array([0.03, 0.007, 0.01])
    tilt = shapes.turn(seed)
    ellipsoid = shapes.ellipsoid(axes.tolist(), 5).moved(rotation=tilt)
    (ring,) = parting(ellipsoid)
    polar = tilt @ np.diag(axes**-2.0) @ tilt.T @ np.array([0.0, 0.0, 1.0])
    off = np.abs(ring @ polar / np.linalg.norm(polar))
    # The curve follows the facets' edges, at most a facet off the smooth one.
    edge = np.linalg.norm(ellipsoid.corners[:, 1] - ellipsoid.corners[:, 0], axis=1).max()
    assert off.max() < edge
    length = np.linalg.norm(np.roll(ring, -1, axis=0) - ring, axis=1).sum()
    assert length > 4 * axes[1]


def test_a_hole_along_the_pull_has_a_ring_of_its_own() -> None:
    rings = parting(shapes.torus(0.01, 0.003, 48))
    radii = [np.linalg.norm(ring[:, :2], axis=1).mean() * 1e3 for ring in rings]
    assert radii == pytest.approx([13, 7], rel=2e-3)


def test_a_ring_is_straightened_within_its_slack() -> None:
    angle = np.linspace(0, 2 * np.pi, 2000, endpoint=False)
    circle = np.column_stack([np.cos(angle), np.sin(angle), np.zeros(2000)]) * 1e-2
    kept = straightened(circle, 1e-5)
    # A chord that strays by e from a circle of radius R spans 2 arccos(1 - e/R): 70 of them at least.
    assert 70 <= len(kept) < 200
    spans = np.linalg.norm(np.roll(kept, -1, axis=0) - kept, axis=1)
    assert (0.01 - np.sqrt(0.01**2 - (spans / 2) ** 2)).max() < 1.01e-5


@pytest.mark.parametrize(("axis", "degrees"), [("x", 8.0), ("y", -13.0)])
def test_a_leaning_cylinder_is_pulled_along_its_axis(axis: str, degrees: float) -> None:
    cylinder = shapes.cylinder(0.01, 0.02, 48).moved(rotation=turned(degrees, axis))
    found = best_pull(cylinder, 6.28e-6)
    assert np.degrees(np.arccos(found.direction @ turned(degrees, axis)[:, 2])) < 0.5
    assert found.trapped < 0.02 * 6.28e-6


def test_a_block_parts_between_opposite_edges_too() -> None:
    # 60 x 20 mm: a plane through two opposite edges, square to a pull arctan(20/60) = 18.4 degrees off the walls, traps
    # nothing either. With the walls 22 degrees off the pull asked for, only that one is in reach, 3.6 degrees away.
    block = shapes.box((0.06, 0.03, 0.02)).moved(rotation=turned(-22, "y"))
    found = best_pull(block, 36e-6)
    off = np.degrees(np.arcsin(found.direction @ turned(-22, "y")[:, 0]))
    assert off == pytest.approx(np.degrees(np.arctan(1 / 3)), abs=0.5)
    assert found.trapped < 0.01 * 36e-6


def test_an_overhang_narrower_than_the_grid_counts() -> None:
    # Walls 1 degree off: 0.17 mm on each half of the height, where columns stand 0.6 mm apart. By hand 100 mm2 x tan 1
    # degree x 30 mm on the two ends together.
    block = shapes.box((0.06, 0.03, 0.02)).moved(rotation=turned(1.0, "y"))
    asked = best_pull(block, 36e-6, cone=np.radians(0.01))
    assert asked.trapped * MM3 == pytest.approx(100 * np.tan(np.radians(1)) * 30, rel=0.15)
    found = best_pull(block, 36e-6)
    assert np.degrees(np.arccos(found.direction @ turned(1.0, "y")[:, 2])) < 0.2


def test_a_pull_as_good_as_any_is_kept() -> None:
    for body, volume in ((shapes.ellipsoid((0.03, 0.007, 0.01), 4), 8.8e-6), (shapes.box((0.03, 0.02, 0.01)), 6e-6)):
        found = best_pull(body, volume)
        assert found.direction.tolist() == [0.0, 0.0, 1.0]
        assert found.trapped <= 1e-4 * volume


def test_the_search_stays_in_its_cone() -> None:
    disc = shapes.cylinder(0.02, 0.006, 48).moved(rotation=turned(25, "x"))
    found = best_pull(disc, 7.54e-6, cone=np.radians(10))
    assert np.degrees(np.arccos(found.direction[2])) == pytest.approx(10, abs=0.3)
    assert np.degrees(np.arccos(found.direction @ turned(25, "x")[:, 2])) == pytest.approx(15, abs=0.5)
