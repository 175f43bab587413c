"""Silhouettes against closed forms of shadows, Cauchy's mean, and shapely's union of every projected triangle."""

from __future__ import annotations

import numpy as np
import pytest
import shapely
import shapes
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.special import ellipe

from meshlure.geometry.outline import Outline, drawing_axes, outline
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import paired

DIRECTIONS = [*np.eye(3), *(shapes.direction(k) for k in range(5))]
SEEDS = st.integers(0, 10_000)


def seen(surface: Surface, axis: Floats, up: Floats | None = None) -> Outline:
    return outline(surface, paired(surface), axis, up)


def shadow_by_shapely(surface: Surface, shown: Outline) -> shapely.Geometry:
    """Union of all triangles projected on the outline's own drawing plane."""
    flat = surface.corners @ np.column_stack([shown.right, shown.up])
    return shapely.union_all(shapely.polygons(flat))


@pytest.mark.parametrize("axis", DIRECTIONS)
def test_shadow_of_an_ellipsoid(axis: Floats) -> None:
    # A = pi sqrt((b c ux)^2 + (a c uy)^2 + (a b uz)^2): the shadow is an ellipse (derived in closed form).
    a, b, c = 0.05, 0.008, 0.011
    exact = np.pi * np.sqrt((b * c * axis[0]) ** 2 + (a * c * axis[1]) ** 2 + (a * b * axis[2]) ** 2)
    shift = np.array([0.3, -0.2, 0.1])
    errors = []
    for level in (2, 3, 4, 5):
        shown = seen(shapes.ellipsoid((a, b, c), level).moved(shift=shift), axis)
        errors.append(shown.area / exact - 1)
        # Every shadow of a body with a centre of symmetry has its centroid there.
        assert np.abs((shown.centre - shift) - (shown.centre - shift) @ axis * axis).max() < 1e-12
    assert shapes.order([errors[0], errors[-1]], 8.0) == pytest.approx([2], abs=0.2)
    assert -5e-3 < errors[-1] < 0


def test_perimeter_of_an_ellipse() -> None:
    # 4 a E(e^2), complete elliptic integral (scipy.special.ellipe).
    a, b = 0.05, 0.011
    shown = seen(shapes.ellipsoid((a, 0.008, b), 5), np.array([0, 1.0, 0]))
    assert shown.perimeter == pytest.approx(4 * a * ellipe(1 - (b / a) ** 2), rel=2e-3)


@pytest.mark.parametrize("axis", DIRECTIONS)
def test_shadow_of_a_box(axis: Floats) -> None:
    # b c |ux| + a c |uy| + a b |uz|.
    a, b, c = 0.1, 0.02, 0.03
    exact = np.abs(axis) @ np.array([b * c, a * c, a * b])
    assert seen(shapes.box((a, b, c), (1, 2, 3), level=1), axis).area == pytest.approx(exact, rel=1e-7)


def test_greatest_shadow_of_a_box() -> None:
    # Along (bc, ca, ab): sqrt((ab)^2 + (bc)^2 + (ca)^2), a hexagon whose sides are the projected edges.
    faces = np.array([6.0, 3.0, 2.0])
    axis = faces / np.linalg.norm(faces)
    shown = seen(shapes.box((1, 2, 3)), axis)
    assert shown.area == pytest.approx(7.0, rel=1e-7)
    edges = np.array([1, 2, 3]) * np.sqrt(1 - axis**2)
    assert shown.perimeter == pytest.approx(2 * edges.sum(), rel=1e-7)


@pytest.mark.parametrize("tilt", [0.0, 0.4, 1.1, np.pi / 2])
def test_shadow_of_a_cylinder(tilt: float) -> None:
    # pi r^2 |cos| + 2 r l |sin|, tilt from the axis.
    r, length = 0.01, 0.06
    axis = np.array([np.sin(tilt), 0, np.cos(tilt)])
    exact = np.pi * r**2 * np.cos(tilt) + 2 * r * length * np.sin(tilt)
    assert seen(shapes.cylinder(r, length, 400), axis).area == pytest.approx(exact, rel=1e-3)


def test_torus_shows_its_hole_along_the_axis_and_a_stadium_across() -> None:
    # pi ((R + r)^2 - (R - r)^2); 4 R r + pi r^2, with the perimeter 4 R + 2 pi r.
    ring, tube = 0.03, 0.01
    surface = shapes.torus(ring, tube, 96)
    along, across = seen(surface, np.array([0, 0, 1.0])), seen(surface, np.array([1.0, 0, 0]))
    assert along.area == pytest.approx(np.pi * ((ring + tube) ** 2 - (ring - tube) ** 2), rel=2e-3)
    assert len(along.region.rings) == 2
    assert along.perimeter == pytest.approx(2 * np.pi * 2 * ring, rel=1e-3)
    assert across.area == pytest.approx(4 * ring * tube + np.pi * tube**2, rel=2e-3)
    assert len(across.region.rings) == 1
    assert across.perimeter == pytest.approx(4 * ring + 2 * np.pi * tube, rel=1e-3)


@pytest.mark.parametrize("axis", DIRECTIONS)
def test_torus_aslant_by_shapely(axis: Floats) -> None:
    surface = shapes.torus(0.03, 0.01, 16)
    shown = seen(surface, axis)
    shadow = shadow_by_shapely(surface, shown)
    assert shown.area == pytest.approx(shadow.area, rel=1e-7)
    # Seen along a line of symmetry, shapely's union leaves cracks of no width between triangles: they are closed first.
    assert shown.perimeter == pytest.approx(shadow.buffer(1e-7).length, rel=1e-4)


@settings(max_examples=15)
@given(SEEDS, SEEDS)
def test_a_body_that_hides_parts_of_itself_by_shapely(body: int, way: int) -> None:
    # Three knobbly shells one behind another, with gaps and overlaps.
    parts = [shapes.lumpy(body + k, level=2, depth=0.6) for k in range(3)]
    surface = shapes.together(*parts)
    shown = seen(surface, shapes.direction(way))
    shadow = shadow_by_shapely(surface, shown)
    assert shown.area == pytest.approx(shadow.area, rel=1e-7)
    at = shadow.centroid
    centre = shown.centre @ np.column_stack([shown.right, shown.up])
    assert centre == pytest.approx([at.x, at.y], abs=1e-8)


@pytest.mark.parametrize("surface", [shapes.box((3, 1, 0.4)), shapes.sphere(1.0, 2), shapes.cone(1.0, 2.0, 24)])
def test_mean_shadow_of_a_convex_body_is_a_quarter_of_its_skin(surface: Surface) -> None:
    # Cauchy (1832). Exact for any convex polyhedron; directions spread evenly leave the error of the mean alone.
    k = np.arange(800) + 0.5
    polar, turn = np.arccos(1 - k / 400), np.pi * (1 + np.sqrt(5)) * k
    axes = np.column_stack([np.cos(turn) * np.sin(polar), np.sin(turn) * np.sin(polar), np.cos(polar)])
    pairs = paired(surface)
    mean = np.mean([outline(surface, pairs, axis).area for axis in axes])
    assert mean == pytest.approx(surface.area / 4, rel=1e-3)


def test_mean_shadow_of_a_concave_body_is_less_than_a_quarter_of_its_skin() -> None:
    surface = shapes.torus(3.0, 1.0, 24)
    pairs = paired(surface)
    mean = np.mean([outline(surface, pairs, shapes.direction(k)).area for k in range(200)])
    assert mean < 0.95 * surface.area / 4


@given(SEEDS, SEEDS)
def test_the_shadow_turns_with_the_body_and_is_the_same_from_behind(body: int, motion: int) -> None:
    surface, axis = shapes.lumpy(body, level=2), shapes.direction(motion + 1)
    turn, shift = shapes.turn(motion), np.random.default_rng(motion).normal(size=3)
    here, moved = seen(surface, axis), seen(shapes.shuffled(surface.moved(turn, shift), motion), turn @ axis)
    assert moved.area == pytest.approx(here.area, rel=1e-7)
    assert moved.perimeter == pytest.approx(here.perimeter, rel=1e-5)
    across = np.eye(3) - np.outer(turn @ axis, turn @ axis)
    np.testing.assert_allclose(across @ (moved.centre - shift), across @ (turn @ here.centre), rtol=0, atol=1e-8)
    assert seen(surface, -axis).area == pytest.approx(here.area, rel=1e-7)


@given(SEEDS, SEEDS)
def test_drawing_axes_are_right_handed_and_keep_up_upright(way: int, lift: int) -> None:
    axis, up = shapes.direction(way), shapes.direction(lift)
    for wish in (None, up, axis, -axis):
        right, upright = drawing_axes(axis, wish)
        np.testing.assert_allclose(np.cross(right, upright), axis, rtol=0, atol=1e-12)
        assert abs(right @ upright) < 1e-12
    if way != lift:
        right, upright = drawing_axes(axis, up)
        assert upright @ up > 0
        assert abs(right @ up) < 1e-12


def test_the_left_side_is_seen_with_the_nose_to_the_left() -> None:
    # Nose -x, back +z, side = back x nose = -y: an eye there, back up, sees -x, the nose, to its left.
    right, upright = drawing_axes(np.array([0, -1.0, 0]), np.array([0, 0, 1.0]))
    assert right == pytest.approx([1, 0, 0])
    assert upright == pytest.approx([0, 0, 1])
    wedge = shapes.cone(1.0, 4.0, 48).moved(np.array([[0, 0, 1.0], [0, 1, 0], [-1, 0, 0]]))
    assert seen(wedge, np.array([0, -1.0, 0]), np.array([0, 0, 1.0])).centre == pytest.approx([8 / 3, 0, 0], rel=1e-12)


def test_the_centre_lies_midway_between_the_solids_ends_along_the_view() -> None:
    # It is known across the view only; along it the middle is taken, whatever rounding makes of faces seen edge on.
    cylinder = shapes.cylinder(1.0, 3.0, 32, 4).moved(shift=np.array([5.0, 6, 7]))
    for surface in (shapes.box((1, 2, 3), (5, 6, 7), 1), cylinder):
        for axis in np.eye(3):
            assert seen(surface, axis).centre == pytest.approx([5, 6, 7], rel=1e-12)
