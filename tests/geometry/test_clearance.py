"""Distances to surfaces against formulas for boxes and balls, and against trimesh's triangle by triangle search."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
import trimesh
from hypothesis import given
from hypothesis import strategies as st

from meshlure.geometry.clearance import nearest
from meshlure.geometry.surface import Floats, Surface


def box_distance(points: Floats, half: Floats) -> Floats:
    """Outside: length of what sticks out; inside: to the nearest of six faces."""
    beyond = np.abs(points) - half
    outside = np.linalg.norm(np.maximum(beyond, 0), axis=1)
    return np.asarray(np.where((beyond < 0).all(axis=1), -beyond.max(axis=1), outside))


@pytest.mark.parametrize("level", [0, 3])
def test_box_from_inside_and_outside(level: int) -> None:
    half = np.array([0.05, 0.01, 0.02])
    points = np.random.default_rng(0).normal(size=(400, 3)) * 0.04
    found = nearest(shapes.box((0.1, 0.02, 0.04), level=level), points)
    np.testing.assert_allclose(found.distance, box_distance(points, half), rtol=0, atol=1e-15)
    np.testing.assert_allclose(np.linalg.norm(found.place - points, axis=1), found.distance, rtol=0, atol=1e-15)
    assert np.abs(box_distance(found.place, half)).max() < 1e-15


def test_sphere_converges_with_the_square_of_the_facets_size() -> None:
    # |r - R|, the mean error over many fixed points.
    radius = 0.02
    points = np.random.default_rng(1).normal(size=(300, 3)) * 0.02
    exact = np.abs(np.linalg.norm(points, axis=1) - radius)
    errors = [float(np.abs(nearest(shapes.sphere(radius, k), points).distance - exact).mean()) for k in (2, 3, 4)]
    assert shapes.order(errors) == pytest.approx([2, 2], abs=0.15)


@given(st.integers(0, 1000))
def test_against_a_search_through_every_triangle(seed: int) -> None:
    # trimesh.triangles.closest_point on all triangles for each point: no boxes involved.
    surface = shapes.lumpy(seed, level=2)
    points = np.random.default_rng(seed).normal(size=(20, 3)) * 0.03
    found = nearest(surface, points)
    for point, distance in zip(points, found.distance, strict=True):
        all_points = np.tile(point, (len(surface.faces), 1))
        places = trimesh.triangles.closest_point(surface.corners, all_points)  # type: ignore[no-untyped-call]
        assert distance == pytest.approx(np.linalg.norm(places - point, axis=1).min(), rel=1e-9, abs=1e-15)


def test_points_on_the_surface_have_no_distance() -> None:
    surface = shapes.lumpy(3, level=3)
    for points in (surface.vertices, surface.corners.mean(axis=1)):
        assert nearest(surface, points).distance.max() < 1e-15


def test_an_open_and_flat_surface() -> None:
    square = Surface(np.array([[0.0, 0, 0], [1, 0, 0], [1, 1, 0], [0, 1, 0]]), np.array([[0, 1, 2], [0, 2, 3]]))
    points = np.array([[0.5, 0.5, 2.0], [2.0, 0.5, 0.0], [2.0, 2.0, 1.0], [0.25, 0.75, 0.0]])
    assert nearest(square, points).distance == pytest.approx([2, 1, np.sqrt(3), 0], rel=1e-14)


def test_a_kilometre_off() -> None:
    # The coordinates carry 1.1e-13 m.
    surface, shift = shapes.lumpy(4, level=2), np.array([1000.0, -1000, 1000])
    points = np.random.default_rng(2).normal(size=(50, 3)) * 0.03
    here, there = nearest(surface, points), nearest(surface.moved(shift=shift), points + shift)
    np.testing.assert_allclose(there.distance, here.distance, rtol=0, atol=1e-12)


def test_no_points_ask_for_nothing() -> None:
    assert len(nearest(shapes.box((1, 1, 1)), np.empty((0, 3))).distance) == 0
