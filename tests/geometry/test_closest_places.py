"""Distances to a surface, against closed forms, every triangle asked by a second method, and the unit of length."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from scipy.optimize import lsq_linear

from meshlure.geometry.clearance import closest_places, nearest
from meshlure.geometry.surface import Floats, Surface


def box_distance(points: Floats, half: Floats) -> Floats:
    """Distance to the skin of a box about the origin: outside by Pythagoras, inside to the next face."""
    beyond = np.abs(points) - half
    outside = (beyond > 0).any(axis=1)
    found: Floats = np.where(outside, np.linalg.norm(np.maximum(beyond, 0), axis=1), -beyond.max(axis=1))
    return found


@pytest.mark.parametrize("level", [0, 2, 5])
def test_distances_to_a_box(level: int) -> None:
    half = np.array([0.5, 1.0, 1.5])
    points = np.random.default_rng(level).uniform(-2, 2, (200, 3))
    found = nearest(shapes.box(list(2 * half), level=level), points)
    np.testing.assert_allclose(found.distance, box_distance(points, half), rtol=1e-12)
    np.testing.assert_allclose(np.linalg.norm(found.place - points, axis=1), found.distance, rtol=1e-12)


@pytest.mark.parametrize("scale", [1.0, 1e-3, 1e-5])
def test_the_unit_of_length_does_not_matter(scale: float) -> None:
    # Triangles of some hundredths of a square millimetre given in metres, where a fixed tolerance on areas would bite.
    body = shapes.lumpy(3, 4, size=1.0)
    points = np.random.default_rng(3).normal(size=(60, 3)) * 2
    exact = np.array([np.linalg.norm(closest_places(point, body.corners) - point, axis=1).min() for point in points])
    found = nearest(Surface(body.vertices * scale, body.faces), points * scale)
    np.testing.assert_allclose(found.distance, exact * scale, rtol=1e-9)


def test_a_point_and_a_triangle_against_a_general_least_squares_solver() -> None:
    # Nearest convex combination of the corners by scipy's bounded least squares; a heavy row makes the weights add up
    # to 1.
    random = np.random.default_rng(7)
    for _ in range(40):
        corners, point = random.normal(size=(3, 3)), random.normal(size=3) * 1.5
        heavy = 1e6
        rows, values = np.vstack([corners.T, heavy * np.ones(3)]), np.append(point, heavy)
        answer = lsq_linear(rows, values, (0, 1), method="bvls", tol=1e-14)
        expected = np.linalg.norm(corners.T @ (answer.x / answer.x.sum()) - point)
        found = np.linalg.norm(closest_places(point, corners) - point)
        assert found == pytest.approx(expected, rel=1e-6)
        assert found <= expected * (1 + 1e-9)


def test_a_triangle_without_area_counts_as_its_longest_side() -> None:
    needle = np.array([[0.0, 0, 0], [1, 0, 0], [3, 0, 0]])
    np.testing.assert_allclose(closest_places(np.array([2.0, 1, 0]), needle), [2, 0, 0], atol=1e-15)


def test_the_middle_of_a_ball_is_as_far_from_every_face() -> None:
    ball = shapes.sphere(1.0, 4)
    normals = ball.double_areas / np.linalg.norm(ball.double_areas, axis=1)[:, None]
    planes = np.abs(np.einsum("ij,ij->i", ball.corners[:, 0], normals))
    assert nearest(ball, np.zeros((1, 3))).distance[0] == pytest.approx(planes.min(), rel=1e-12)
