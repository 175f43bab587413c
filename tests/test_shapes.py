"""The shapes that other tests stand on: closed, outward, and on the exact skin."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired

SHAPES = {
    "sphere": shapes.sphere(2.0, 2),
    "ellipsoid": shapes.ellipsoid((3, 2, 1), 2),
    "box": shapes.box((1, 2, 3), (4, 5, 6), 2),
    "cylinder": shapes.cylinder(1.0, 3.0, 12, 4),
    "cone": shapes.cone(1.0, 2.0, 12),
    "paraboloid": shapes.paraboloid(1.0, 2.0, 8),
    "torus": shapes.torus(3.0, 1.0, 12),
    "wigley": shapes.wigley(10.0, 1.0, 0.6, 0.4, 12),
    "lumpy": shapes.lumpy(1),
    "shuffled": shapes.shuffled(shapes.lumpy(2), 3),
}


@pytest.mark.parametrize("name", SHAPES)
def test_every_shape_is_closed_and_outward(name: str) -> None:
    surface = SHAPES[name]
    pairs = paired(surface)
    assert pairs.closed
    if name != "wigley":
        assert not len(pairs.irregular.ends)
    assert shapes.as_trimesh(surface).volume > 0


@pytest.mark.parametrize(
    ("surface", "skin"),
    [
        (SHAPES["sphere"], lambda p: np.linalg.norm(p, axis=1) / 2 - 1),
        (SHAPES["ellipsoid"], lambda p: ((p / (3, 2, 1)) ** 2).sum(axis=1) - 1),
        (SHAPES["torus"], lambda p: np.hypot(np.hypot(p[:, 0], p[:, 1]) - 3, p[:, 2]) - 1),
        (SHAPES["paraboloid"], lambda p: np.where(p[:, 2] < 2, p[:, 0] ** 2 + p[:, 1] ** 2 - p[:, 2], 0)),
    ],
)
def test_vertices_lie_on_the_exact_skin(surface: Surface, skin: object) -> None:
    assert callable(skin)
    np.testing.assert_allclose(skin(surface.vertices), 0, atol=1e-14)
