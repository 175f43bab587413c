"""The grid of directions: Euler's formula, evenness, and the critical points that Morse theory counts."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from hypothesis import given
from hypothesis import strategies as st

from meshlure.geometry.directions import direction_grid

GRID = direction_grid(np.eye(3))


@pytest.mark.parametrize("cells", [2, 3, 16])
def test_a_triangulated_sphere(cells: int) -> None:
    # 4 n^2 + 2 corners on an octahedron whose edges are cut in n; E = 3 V - 6 with all faces triangles (Euler 1758).
    grid = direction_grid(shapes.turn(cells), cells)
    count = 4 * cells**2 + 2
    assert len(grid.directions) == count
    assert len(grid.edges) == 3 * count - 6
    np.testing.assert_allclose(np.linalg.norm(grid.directions, axis=1), 1, rtol=1e-14)
    assert len(np.unique(np.round(grid.directions, 9), axis=0)) == count


def test_neighbours_are_near_and_stand_in_turn() -> None:
    ends = GRID.directions[GRID.edges]
    apart = np.degrees(np.arccos((ends[:, 0] * ends[:, 1]).sum(axis=1)))
    assert 5 < apart.min() < apart.max() < 9
    # Going round, each neighbour is a neighbour of the next, counterclockwise seen from outside.
    pairs = {frozenset(edge) for edge in GRID.edges.tolist()}
    for here, ring in enumerate(GRID.ring.tolist()):
        distinct = list(dict.fromkeys(ring))
        for one, other in zip(distinct, distinct[1:] + distinct[:1], strict=True):
            assert frozenset((one, other)) in pairs
            assert np.cross(GRID.directions[one], GRID.directions[other]) @ GRID.directions[here] > 0


def test_the_great_circles_of_the_frame_are_lines_of_the_grid() -> None:
    frame = shapes.turn(3)
    grid = direction_grid(frame)
    for axis in frame:
        assert (np.abs(grid.directions @ axis) < 1e-12).sum() == 64


def test_a_quadratic_form_has_two_of_each_kind() -> None:
    # x^2 + 2 y^2 + 3 z^2 on the sphere: minima at +-x, saddles at +-y, maxima at +-z.
    values = GRID.directions**2 @ np.array([1.0, 2.0, 3.0])
    for found, axis in ((GRID.minima(values), 0), (GRID.saddles(values), 1), (GRID.minima(-values), 2)):
        np.testing.assert_allclose(np.abs(GRID.directions[found]), np.tile(np.eye(3)[axis], (2, 1)), rtol=0, atol=1e-12)


@given(st.integers(0, 10_000))
def test_minima_plus_maxima_less_saddles_is_two(seed: int) -> None:
    # Poincare-Hopf on the sphere, Banchoff (1970) for polyhedra: a place round which values change sign 2 k times
    # counts k - 1 saddles.
    random = np.random.default_rng(seed)
    waves = random.normal(size=(5, 3)) * 3
    values = np.cos(GRID.directions @ waves.T + random.uniform(0, 6, 5)).sum(axis=1)
    above = values[GRID.ring] > values[:, None]
    turns = (above != np.roll(above, 1, axis=1)).sum(axis=1)
    saddles = GRID.saddles(values)
    assert set(saddles.tolist()) == set(np.flatnonzero(turns >= 4).tolist())
    assert (np.diff(values[saddles]) >= 0).all()
    assert len(GRID.minima(values)) + len(GRID.minima(-values)) - (turns[saddles] // 2 - 1).sum() == 2


def test_a_flat_stretch_has_one_lowest_place() -> None:
    assert len(GRID.minima(np.zeros(len(GRID.directions)))) == 1
