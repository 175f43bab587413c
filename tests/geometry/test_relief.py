"""Reliefs and steepness of what faces a direction, against closed forms."""

from __future__ import annotations

import math

import numpy as np
import pytest
import shapes

from meshlure.geometry.relief import relief
from meshlure.geometry.steepness import facing_ahead
from meshlure.geometry.surface import Surface

X = np.array([1.0, 0, 0])


@pytest.mark.parametrize("seed", range(3))
def test_relief_of_a_ball(seed: int) -> None:
    towards = shapes.direction(seed)
    seen = relief(shapes.sphere(0.5, 5).moved(shift=np.array([2.0, 1, -3])), towards, cells=60)
    rows, columns = np.indices(seen.depth.shape)
    middle = (np.array(seen.depth.shape) - 1) / 2
    reach = np.hypot(rows - middle[0], columns - middle[1]) * seen.step
    well_inside = reach < 0.48
    np.testing.assert_allclose(seen.depth[well_inside], 0.5 - np.sqrt(0.25 - reach[well_inside] ** 2), atol=1e-3)
    assert np.isinf(seen.depth[reach > 0.51]).all()


def test_relief_of_a_box_is_flat_however_few_its_faces() -> None:
    seen = relief(shapes.box((1, 2, 3)), X, cells=30)
    assert seen.depth.shape in ((20, 30), (30, 20))
    np.testing.assert_allclose(seen.depth, 0, atol=1e-12)


def test_relief_sees_the_nearer_of_two_and_through_a_ring() -> None:
    front = shapes.box((0.1, 1, 1), (1, 0, 0))
    seen = relief(shapes.together(shapes.box((0.1, 2, 2)), front), X, cells=40)
    assert sorted(np.unique(seen.depth.round(9))) == [0.0, 1.0]
    assert np.count_nonzero(seen.depth < 0.5) == pytest.approx(400, abs=1)
    ring = relief(shapes.torus(0.4, 0.1, 24), np.array([0, 0, 1.0]))
    assert np.isinf(ring.depth[ring.depth.shape[0] // 2, ring.depth.shape[1] // 2])


def test_a_ball_faces_ahead_with_its_sections_and_half_their_steepness() -> None:
    # Ahead of depth x a ball shows pi x (2R - x); sin^2 of its skin is 1 - a/R^2 at the radius squared a.
    x = np.linspace(0.02, 0.5, 9)
    shown, steep = facing_ahead(shapes.sphere(0.5, 5), X, x)
    share = x * (1 - x) / 0.25
    np.testing.assert_allclose(shown, math.pi / 4 * share, rtol=0.01)
    np.testing.assert_allclose(steep, math.pi / 4 * (share - share**2 / 2), rtol=0.01)


@pytest.mark.parametrize("half_angle", [10, 45, 80])
def test_a_cone_is_equally_steep_all_along(half_angle: float) -> None:
    height = 0.5 / math.tan(math.radians(half_angle))
    mesh = shapes.cone(0.5, height, 400)
    x = np.linspace(0, height, 7)[1:]
    shown, steep = facing_ahead(mesh, np.array([0, 0, -1.0]), x)
    np.testing.assert_allclose(shown, math.pi / 4 * (x / height) ** 2, rtol=1e-4)
    np.testing.assert_allclose(steep / shown, math.sin(math.radians(half_angle)) ** 2, rtol=1e-3)


def test_a_cube_on_its_edge() -> None:
    turn = np.array([[1, -1, 0], [1, 1, 0], [0, 0, math.sqrt(2)]]) / math.sqrt(2)
    x = np.array([0.1, 0.4, 0.7, 1.4])
    shown, steep = facing_ahead(shapes.box((1, 1, 1)).moved(turn), X, x)
    np.testing.assert_allclose(shown, np.minimum(2 * x, math.sqrt(2)), rtol=1e-12)
    np.testing.assert_allclose(steep, shown / 2, rtol=1e-12)


def test_the_sums_do_not_hang_on_how_finely_faces_are_cut() -> None:
    coarse = Surface(shapes.box((1, 1, 2)).vertices, shapes.box((1, 1, 2)).faces)
    towards = shapes.direction(5)
    x = np.linspace(0.05, 1.5, 40)
    for one, other in zip(
        facing_ahead(coarse, towards, x), facing_ahead(shapes.box((1, 1, 2), level=3), towards, x), strict=True
    ):
        np.testing.assert_allclose(one, other, rtol=1e-9)
