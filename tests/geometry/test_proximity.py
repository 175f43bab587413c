"""Distances by spots against distances by boxes, which have no spots, and against formulas."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from hypothesis import given, settings
from hypothesis import strategies as st

from meshlure.geometry.clearance import closest_places, nearest
from meshlure.geometry.proximity import Proximity
from meshlure.geometry.surface import Surface


@given(st.integers(0, 1000), st.sampled_from([0.03, 0.2, 5.0]))
@settings(max_examples=10)
def test_against_boxes(seed: int, spacing: float) -> None:
    # Points inside, outside and on a knobbly body with hollows; spots far closer than the faces are large, and no more
    # than one a face.
    body = shapes.lumpy(seed, level=2, size=1.0)
    random = np.random.default_rng(seed)
    points = np.concatenate([random.normal(size=(80, 3)) + body.vertices.mean(axis=0), body.vertices[:5]])
    proximity, exact = Proximity.spaced(body, spacing), nearest(body, points)
    found = proximity.nearest(points)
    np.testing.assert_allclose(found.distance, exact.distance, rtol=1e-12, atol=1e-15)
    np.testing.assert_allclose(np.linalg.norm(found.place - points, axis=1), found.distance, rtol=1e-12, atol=1e-15)
    excess = proximity.near(points) - exact.distance
    assert excess.min() > -1e-12
    assert (excess <= np.hypot(exact.distance, proximity.cover) - exact.distance + 1e-12).all()


def test_every_place_is_within_the_cover_of_a_spot() -> None:
    body = shapes.together(shapes.box((3, 1, 0.2)), shapes.lumpy(4, level=2, size=1.0))
    proximity = Proximity.spaced(body, 0.3)
    weights = np.random.default_rng(0).dirichlet(np.ones(3), (40, len(body.faces)))
    places = np.einsum("nmk,mki->nmi", weights, body.corners).reshape(-1, 3)
    middles = (body.corners + np.roll(body.corners, 1, axis=1)).reshape(-1, 3) / 2
    assert np.max(proximity.tree.query(np.concatenate([places, middles]))[0]) <= proximity.cover
    spots = np.asarray(proximity.tree.data)
    assert np.linalg.norm(closest_places(spots, body.corners[proximity.owner]) - spots, axis=1).max() < 1e-12


def test_points_with_thousands_of_spots_as_near() -> None:
    # On the axis of a tube and in the middle of a ball: R cos(pi/n), and the nearest plane.
    tube = Proximity.spaced(shapes.cylinder(1.0, 6.0, 64), 0.2)
    axis = np.column_stack([np.zeros((5, 2)), np.linspace(-1, 1, 5)])
    np.testing.assert_allclose(tube.nearest(axis).distance, np.cos(np.pi / 64), rtol=1e-12)
    ball = shapes.sphere(1.0, 4)
    planes = np.abs(np.einsum("ij,ij->i", ball.corners[:, 0], ball.double_areas)) / np.linalg.norm(
        ball.double_areas, axis=1
    )
    assert Proximity.spaced(ball, 1.0).nearest(np.zeros((1, 3))).distance[0] == pytest.approx(planes.min(), rel=1e-12)


def test_a_large_face_a_little_nearer_than_many_small_ones() -> None:
    # The spots of the small ones all come before those of the large one, at whose place nearest there is none.
    many = shapes.box((4, 4, 0.2), (0, 0, 1.1), level=6)
    large = shapes.box((4, 4, 0.2), (0.3, 0.4, -1.09))
    found = Proximity.spaced(shapes.together(many, large), 1.0).nearest(np.zeros((1, 3)))
    assert found.distance[0] == pytest.approx(0.99, rel=1e-12)


def test_a_triangle_alone_and_no_points() -> None:
    corner = Proximity.spaced(Surface(np.eye(3), np.array([[0, 1, 2]])), 5.0)
    assert corner.nearest(np.zeros((1, 3))).distance[0] == pytest.approx(1 / np.sqrt(3), rel=1e-14)
    assert corner.nearest(np.ones((1, 3)) * 7).distance[0] == pytest.approx(20 / np.sqrt(3), rel=1e-14)
    assert corner.nearest(np.array([[3.0, 0, 0]])).distance[0] == pytest.approx(2, rel=1e-14)
    assert len(corner.nearest(np.empty((0, 3))).distance) == 0
