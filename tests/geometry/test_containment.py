"""Which points lie inside, against formulas and against the sum of solid angles."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from hypothesis import given, settings
from hypothesis import strategies as st

from meshlure.geometry.clearance import Boxes
from meshlure.geometry.containment import inside
from meshlure.geometry.shells import winding_number
from meshlure.geometry.surface import Surface


@given(st.integers(0, 1000))
@settings(max_examples=8)
def test_against_solid_angles(seed: int) -> None:
    # 80, 320 or 1280 faces: the last box of faces is filled up differently.
    body = shapes.lumpy(seed, level=1 + seed % 3)
    points = np.random.default_rng(seed).uniform(body.bounds[0], body.bounds[1], (120, 3))
    angles = [winding_number(body, point) > 0.5 for point in points]
    np.testing.assert_array_equal(inside(Boxes.of(body), points), angles)


@pytest.mark.parametrize("long", range(3))
def test_lines_through_vertices_and_along_edges(long: int) -> None:
    # |x| + |y| + |z| < 1, stretched: from points in its planes of symmetry the lines go through vertices and edges.
    stretch = np.ones(3)
    stretch[long] = 2
    corners = np.vstack([np.eye(3), -np.eye(3)]) * stretch
    turns = [(0, 1, 2), (1, 3, 2), (3, 4, 2), (4, 0, 2), (1, 0, 5), (3, 1, 5), (4, 3, 5), (0, 4, 5)]
    octahedron = Boxes.of(Surface(corners, np.array(turns)))
    grid = np.stack(np.meshgrid(*(np.linspace(-1.25, 1.25, 11),) * 3, indexing="ij"), axis=-1).reshape(-1, 3)
    reach = np.abs(grid).sum(axis=1)
    clear = np.abs(reach - 1) > 1e-9
    np.testing.assert_array_equal(inside(octahedron, grid * stretch)[clear], (reach < 1)[clear])


def test_cavities_and_overlaps() -> None:
    ball = shapes.sphere(1.0, 3)
    points = np.array([[0.0, 0, 0], [0.75, 0, 0], [1.5, 0, 0], [5, 0, 0]])
    hollow = shapes.together(ball, shapes.sphere(0.5, 3).turned())
    assert inside(Boxes.of(hollow), points).tolist() == [False, True, False, False]
    pair = shapes.together(ball, ball.moved(shift=np.array([1.0, 0, 0])))
    assert inside(Boxes.of(pair), points).tolist() == [True, True, True, False]


def test_a_kilometre_off_and_no_points() -> None:
    body, shift = shapes.lumpy(4, level=3), np.array([1000.0, -1000, 1000])
    points = np.random.default_rng(2).uniform(body.bounds[0], body.bounds[1], (200, 3))
    here, there = inside(Boxes.of(body), points), inside(Boxes.of(body.moved(shift=shift)), points + shift)
    np.testing.assert_array_equal(here, there)
    assert inside(Boxes.of(body), np.empty((0, 3))).shape == (0,)
