"""Convex solids from planes: volumes and counts that any table of polyhedra has, and what is not convex."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.halfspaces import planes_of, solid_below
from meshlure.geometry.surface import Surface


def volume(surface: Surface | None) -> float:
    """By trimesh, which must find it closed and outward."""
    assert surface is not None
    mesh = shapes.as_trimesh(surface)
    assert mesh.is_watertight
    assert mesh.is_winding_consistent
    return float(mesh.volume)


def test_a_box_has_six_planes_however_it_is_meshed() -> None:
    turn, shift = shapes.turn(3), np.array([0.3, -0.2, 0.5])
    for level in (0, 2):
        planes = planes_of(shapes.box((0.1, 0.02, 0.03), level=level).moved(turn, shift))
        assert planes is not None
        assert len(planes) == 6
        normals = planes[:, :3] @ turn
        np.testing.assert_allclose(np.sort(np.abs(normals).max(axis=1)), 1, rtol=1e-12)
        heights = planes[:, 3] - planes[:, :3] @ shift
        np.testing.assert_allclose(np.sort(heights), [0.01, 0.01, 0.015, 0.015, 0.05, 0.05], rtol=1e-12)
        assert volume(solid_below(planes)) == pytest.approx(0.1 * 0.02 * 0.03, rel=1e-12)


@pytest.mark.parametrize(("cut", "exact"), [(3.0, 8.0), (2.0, 20 / 3), (1.0, 4 / 3)])
def test_a_cube_with_its_corners_cut(cut: float, exact: float) -> None:
    # |x| + |y| + |z| < cut in a cube of side 2: nothing cut, the cuboctahedron 5 a^3 sqrt(2)/3 with a = sqrt 2, the
    # octahedron 4/3.
    signs = np.array(np.meshgrid(*([-1, 1],) * 3)).reshape(3, -1).T / np.sqrt(3)
    corners = np.column_stack([signs, np.full(8, cut / np.sqrt(3))])
    sides = np.column_stack([np.vstack([np.eye(3), -np.eye(3)]), np.ones(6)])
    planes = np.vstack([corners, sides]) * 0.01 ** np.array([0, 0, 0, 1])
    assert volume(solid_below(planes)) == pytest.approx(exact * 1e-6, rel=1e-12)


def test_planes_that_leave_nothing() -> None:
    planes = planes_of(shapes.ellipsoid((0.03, 0.01, 0.01), 3))
    assert planes is not None
    planes[:, 3] -= 0.0101
    assert solid_below(planes) is None


def test_what_is_not_convex_has_no_planes() -> None:
    assert planes_of(shapes.lumpy(1)) is None
    assert planes_of(shapes.torus(2.0, 0.5, 12)) is None
    assert planes_of(shapes.together(shapes.sphere(1.0, 2), shapes.sphere(0.4, 2).turned())) is None
    apart = shapes.sphere(1.0, 2).moved(shift=np.array([3.0, 0, 0]))
    assert planes_of(shapes.together(shapes.sphere(1.0, 2), apart)) is None
    # One vertex of a fine ball pushed in by a five hundredth of the radius, less than a millionth of the volume; one by
    # the rounding of four-byte numbers.
    ball = shapes.sphere(0.02, 5)
    for share, convex in ((0.998, False), (1 - 1e-8, True)):
        vertices = ball.vertices.copy()
        vertices[100] *= share
        assert (planes_of(Surface(vertices, ball.faces)) is not None) is convex
    assert planes_of(Surface(np.eye(3), np.array([[0, 1, 2], [0, 2, 1]]))) is None
