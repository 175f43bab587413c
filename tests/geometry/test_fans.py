"""Solids that touch along an edge or in a point, welded there: the space they enclose is a sum of cubes."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.fans import parted
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired


def welded(*surfaces: Surface) -> Surface:
    together = shapes.together(*surfaces)
    vertices, numbers = np.unique(together.vertices, axis=0, return_inverse=True)
    return Surface(vertices, numbers.reshape(-1)[together.faces])


def plate_with_two_holes() -> Surface:
    """Plate of 4 x 4 x 1 with two square holes that meet along an edge: one shell, 16 - 2 = 14."""
    plate = Solid.of(shapes.box((4, 4, 1)))
    holes = [Solid.of(shapes.box((1, 1, 3), centre)) for centre in ((-0.5, -0.5, 0.0), (0.5, 0.5, 0.0))]
    return welded(plate.less(*holes).surface())


TOUCHING = {
    "along an edge": (welded(shapes.box((1, 1, 1)), shapes.box((1, 1, 1), (1, 1, 0))), 2.0),
    "in a point": (welded(shapes.box((1, 1, 1)), shapes.box((1, 1, 1), (1, 1, 1))), 2.0),
    "with itself": (plate_with_two_holes(), 14.0),
}


@pytest.mark.parametrize("how", TOUCHING)
def test_parted_every_edge_has_two_faces(how: str) -> None:
    surface, _ = TOUCHING[how]
    one = parted(surface, paired(surface))
    assert not len(paired(one).irregular.ends)
    np.testing.assert_array_equal(one.corners, surface.corners)


@pytest.mark.parametrize("how", TOUCHING)
def test_a_solid_that_touches_itself_keeps_its_volume(how: str) -> None:
    surface, volume = TOUCHING[how]
    assert Solid.of(surface).volume == pytest.approx(volume, rel=1e-12)


def test_a_surface_that_touches_nothing_stays_as_it_is() -> None:
    ball = shapes.sphere(1.0, 2)
    assert len(parted(ball, paired(ball)).vertices) == len(ball.vertices)
