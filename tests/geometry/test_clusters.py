"""Coarse copies: closed, of the asked size, near the surface, and of its symmetry, volume and centroid."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.clearance import nearest
from meshlure.geometry.clusters import coarse, matched
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired

BODIES = {
    "ellipsoid": shapes.ellipsoid((0.05, 0.008, 0.011), 5),
    "torus": shapes.torus(0.03, 0.01, 48),
    "box": shapes.box((0.1, 0.02, 0.03), level=5),
    "lumpy": shapes.lumpy(3, level=5),
    "shells": shapes.together(shapes.sphere(0.01, 4), shapes.sphere(0.02, 5).moved(shift=np.array([0.05, 0, 0]))),
    "hollow": shapes.together(shapes.sphere(0.02, 5), shapes.sphere(0.012, 4).turned()),
}


@pytest.mark.parametrize("name", BODIES)
@pytest.mark.parametrize("triangles", [500, 3000])
def test_a_coarse_copy_is_closed_small_and_near(name: str, triangles: int) -> None:
    body = BODIES[name]
    copy = coarse(body, triangles)
    assert paired(copy).closed
    assert 0.5 * triangles < len(copy.faces) < 2 * triangles
    cell = np.sqrt(2 * body.area / triangles)
    assert nearest(body, copy.vertices).distance.max() < 0.6 * cell
    # What it cuts off is a fraction of a cell all over the skin.
    assert solid_moments(copy).amount == pytest.approx(solid_moments(body).amount, abs=0.15 * cell * body.area)


def test_the_volume_comes_back_with_finer_copies() -> None:
    body = shapes.ellipsoid((0.05, 0.02, 0.03), 6)
    whole = solid_moments(body).amount
    missing = [abs(1 - solid_moments(coarse(body, n)).amount / whole) for n in (400, 1600, 6400)]
    assert missing[0] > 2 * missing[1] > 4 * missing[2]
    assert missing[1] < 0.03


def test_a_surface_of_few_triangles_is_returned_as_it_is() -> None:
    body = shapes.sphere(1.0, 2)
    assert coarse(body, len(body.faces)) is body


@pytest.mark.parametrize("triangles", [150, 400, 1000])
def test_a_body_alike_on_both_sides_has_a_copy_alike_on_both_sides(triangles: int) -> None:
    # Else the copy of a straight bait leans. A box meshed alike on all sides, off the origin.
    copy = coarse(shapes.box((0.1, 0.02, 0.02), (0.2, 0.1, -0.3), level=4), triangles)
    corners = np.round(copy.vertices - (0.2, 0.1, -0.3), 9)
    for axis in range(3):
        mirrored = corners * np.where(np.arange(3) == axis, -1, 1)
        assert {tuple(p + 0.0) for p in mirrored} == {tuple(p + 0.0) for p in corners}


def test_a_matched_copy_has_the_volume_and_the_centroid() -> None:
    body = shapes.lumpy(5, level=5)
    exact = solid_moments(body)
    found = solid_moments(matched(coarse(body, 500), exact.amount, exact.centre))
    assert found.amount == pytest.approx(exact.amount, rel=1e-12)
    np.testing.assert_allclose(found.centre, exact.centre, rtol=1e-12)


def test_faces_between_merged_vertices_are_gone() -> None:
    copy = coarse(BODIES["lumpy"], 500)
    a, b, c = copy.faces.T
    assert not ((a == b) | (b == c) | (c == a)).any()
    assert isinstance(copy, Surface)
