"""Skins cut from lattices: closed whatever the values are, and as large as the ball that the values stand for."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from hypothesis import given, settings
from hypothesis import strategies as st

from meshlure.geometry.lattice import MARGIN, skin
from meshlure.geometry.surface import Floats, Surface


def ball(count: int, radius: float) -> Floats:
    """Depths in half steps in a ball off the middle of a lattice."""
    grid = np.stack(np.meshgrid(*(np.arange(count),) * 3, indexing="ij"), axis=-1)
    return np.asarray(radius - np.linalg.norm(grid - (count - 1) / 2 - (0.13, 0.21, 0.37), axis=-1))


@given(st.integers(0, 1000))
@settings(max_examples=10)
def test_any_values_give_a_closed_skin(seed: int) -> None:
    # As trimesh sees it: every edge of two faces, wound alike, a volume above nothing.
    random = np.random.default_rng(seed)
    values = np.full((13, 15, 17), -1.0)
    values[2:-2, 2:-2, 2:-2] = random.normal(size=(9, 11, 13))
    cut = skin(values)
    mesh = shapes.as_trimesh(Surface(cut.places, cut.faces))
    assert mesh.is_watertight
    assert mesh.is_winding_consistent
    assert set(np.unique(mesh.edges_sorted, axis=0, return_counts=True)[1].tolist()) == {2}
    assert mesh.volume > 0


def test_a_ball_converges_with_the_square_of_the_step() -> None:
    errors = []
    for count in (15, 29, 57):
        radius = 0.37 * (count - 1)
        cut = skin(ball(count, radius))
        places = cut.inner + (cut.outer - cut.inner) * cut.share[:, None]
        mesh = shapes.as_trimesh(Surface(places, cut.faces))
        assert mesh.euler_number == 2
        errors.append(mesh.volume / (4 / 3 * np.pi * radius**3) - 1)
    assert shapes.order(errors) == pytest.approx([2, 2], abs=0.2)
    assert -2.5e-3 < errors[-1] < 0


def test_vertices_lie_between_a_positive_node_and_another() -> None:
    values = ball(21, 7.0)
    cut = skin(values)
    assert (values[tuple(cut.inner.T)] > 0).all()
    assert (values[tuple(cut.outer.T)] <= 0).all()
    ways = np.sort(np.abs(cut.outer - cut.inner), axis=1)
    assert {tuple(way) for way in ways.tolist()} == {(0, 0, 2), (1, 1, 1)}
    kept = np.linalg.norm(cut.places - cut.inner, axis=1) / np.linalg.norm(ways, axis=1)
    assert kept.min() >= MARGIN * (1 - 1e-12)
    assert kept.max() <= (1 - MARGIN) * (1 + 1e-12)


def test_nothing_positive_has_no_skin() -> None:
    cut = skin(np.full((9, 9, 9), -1.0))
    assert cut.faces.shape == (0, 3)
    assert cut.places.shape == (0, 3)
