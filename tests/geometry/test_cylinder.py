"""Cylinders against handbook formulas and against the moments of a fine mesh."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.moments import solid_moments


def test_moments_of_an_upright_cylinder() -> None:
    # Any table of solids (Meriam and Kraige, Dynamics, appendix D, from memory): m r^2/2 about the axis,
    # m (3 r^2 + L^2)/12 across.
    found = Cylinder(np.array([0.1, 0, 0.2]), np.array([0.0, 0, 1]), 0.03, 0.005).moments()
    volume = np.pi * 0.005**2 * 0.03
    across = volume * (3 * 0.005**2 + 0.03**2) / 12
    assert found.amount == pytest.approx(volume, rel=1e-14)
    np.testing.assert_allclose(found.centre, [0.1, 0, 0.2], rtol=1e-14)
    np.testing.assert_allclose(found.inertia, np.diag([across, across, volume * 0.005**2 / 2]), atol=1e-14 * across)


@pytest.mark.parametrize("seed", range(3))
def test_moments_of_a_slanted_cylinder_against_a_mesh(seed: int) -> None:
    turn, middle = shapes.turn(seed), np.array([0.02, -0.03, 0.07])
    mesh = solid_moments(shapes.cylinder(0.004, 0.02, 720).moved(turn, middle))
    exact = Cylinder(middle, turn[:, 2], 0.02, 0.004).moments()
    assert mesh.amount == pytest.approx(exact.amount, rel=2e-5)
    np.testing.assert_allclose(mesh.centre, exact.centre, rtol=1e-12)
    np.testing.assert_allclose(mesh.inertia, exact.inertia, rtol=0, atol=4e-5 * exact.inertia.max())


def test_the_end_that_the_axis_points_to_comes_first() -> None:
    slug = Cylinder(np.array([1.0, 2, 3]), np.array([0.6, 0.0, 0.8]), 2.0, 0.5)
    np.testing.assert_allclose(slug.ends, [[1.6, 2, 3.8], [0.4, 2, 2.2]], rtol=1e-14)


@pytest.mark.parametrize("axis", [(1, 0, 0), (0, -1, 0), (0, 0, 1), (0.48, 0.6, -0.64)])
def test_the_vectors_across_and_the_axis_make_a_right_handed_frame(axis: tuple[float, float, float]) -> None:
    slug = Cylinder(np.zeros(3), np.array(axis), 1.0, 1.0)
    frame = np.vstack([slug.across, slug.axis])
    np.testing.assert_allclose(frame @ frame.T, np.eye(3), atol=1e-15)
    assert np.linalg.det(frame) == pytest.approx(1, rel=1e-14)


def test_growing_moves_the_side_and_both_ends() -> None:
    grown = Cylinder(np.ones(3), np.array([0.0, 1, 0]), 0.02, 0.003).grown(1e-3, 2e-3)
    assert (grown.length, grown.radius) == pytest.approx((0.024, 0.004), rel=1e-14)
    assert grown.volume == pytest.approx(np.pi * 0.004**2 * 0.024, rel=1e-14)
    np.testing.assert_array_equal(grown.middle, np.ones(3))


@pytest.mark.parametrize(
    ("axis", "length", "radius"), [((0, 0, 2), 1, 1), ((0, 0, 1), 0, 1), ((0, 0, 1), 1, -1), ((0, 0, np.nan), 1, 1)]
)
def test_what_is_no_cylinder_is_refused(axis: tuple[float, float, float], length: float, radius: float) -> None:
    with pytest.raises(ValueError, match="no cylinder"):
        Cylinder(np.zeros(3), np.array(axis), length, radius)
    with pytest.raises(ValueError, match=r"\(2,\)"):
        Cylinder(np.zeros(2), np.array([0.0, 0, 1]), 1.0, 1.0)
