"""Points spread over a surface: every place has one near, by plain geometry of a square and of a sphere."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from scipy.spatial import cKDTree

from meshlure.geometry.samples import spread


@pytest.mark.parametrize("spacing", [0.4, 0.11, 0.03])
def test_every_place_of_a_box_has_a_point_near(spacing: float) -> None:
    points = spread(shapes.box((1, 1, 1)), spacing)
    assert np.abs(np.abs(points).max(axis=1) - 0.5).max() < 1e-12  # on the faces
    random = np.random.default_rng(1).uniform(-0.5, 0.5, (4000, 3))
    random[:, 0] = 0.5
    assert np.asarray(cKDTree(points).query(random)[0]).max() <= spacing


def test_the_fine_mesh_gives_its_vertices_alone() -> None:
    ball = shapes.sphere(1.0, 4)
    assert len(spread(ball, 0.5)) == len(ball.vertices)


def test_no_spacing_is_refused() -> None:
    with pytest.raises(ValueError, match="apart"):
        spread(shapes.box((1, 1, 1)), 0.0)
