"""Meshes of cylinders and balls: volume, closedness and place, against formulas and against trimesh."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.clearance import nearest
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.shapes import ball, rod
from meshlure.geometry.surface import Floats

PLACE = np.array([0.05, -0.02, 0.03])


@pytest.mark.parametrize("sides", [3, 4, 7, 24, 96])
@pytest.mark.parametrize("seed", range(2))
def test_a_rod_has_the_cylinders_volume_and_length(sides: int, seed: int) -> None:
    axis = shapes.direction(seed)
    made = rod(Cylinder(PLACE, axis, 0.02, 0.0025), sides)
    mesh = shapes.as_trimesh(made)
    assert mesh.is_watertight
    assert mesh.is_winding_consistent
    assert mesh.volume == pytest.approx(np.pi * 0.0025**2 * 0.02, rel=1e-12)  # closed form; trimesh sums tetrahedra
    np.testing.assert_allclose(mesh.center_mass, PLACE, rtol=1e-9)
    along = (made.vertices - PLACE) @ axis
    assert (along.min(), along.max()) == pytest.approx((-0.01, 0.01), rel=1e-12)


def test_a_rod_keeps_close_to_the_round_skin() -> None:
    made = rod(Cylinder(PLACE, np.array([0.0, 0, 1]), 0.02, 0.0025))
    reach = np.linalg.norm((made.vertices - PLACE)[:192, :2], axis=1)
    assert reach - 0.0025 == pytest.approx(0.0025 * np.pi**2 / (3 * 96**2), rel=1e-3)
    middles = (made.corners[:96, 0] + made.corners[:96, 1]) / 2 - PLACE
    assert 0.0025 - np.linalg.norm(middles[:, :2], axis=1).max() == pytest.approx(
        0.0025 * np.pi**2 / (6 * 96**2), rel=1e-3
    )


@pytest.mark.parametrize("fineness", [0, 1, 3, 5])
def test_a_ball_has_the_balls_volume(fineness: int) -> None:
    made = ball(PLACE, 0.004, fineness)
    mesh = shapes.as_trimesh(made)
    assert len(made.faces) == 20 * 4**fineness
    assert mesh.is_watertight
    assert mesh.is_winding_consistent
    assert mesh.volume == pytest.approx(np.pi * 0.004**3 / 6, rel=1e-12)
    np.testing.assert_allclose(mesh.center_mass, PLACE, rtol=1e-9)


def test_a_ball_keeps_close_to_the_round_skin() -> None:
    made = ball(PLACE, 2.0)
    inward = 1 - nearest(made, PLACE[None]).distance[0]
    outward = np.linalg.norm(made.vertices - PLACE, axis=1).max() - 1
    assert 0 < inward < 1e-3
    assert 0 < outward < 1e-3


@pytest.mark.parametrize("axis", [np.eye(3)[k] * sign for k in range(3) for sign in (1, -1)])
def test_a_rod_faces_outward_whichever_way_it_points(axis: Floats) -> None:
    made = rod(Cylinder(np.zeros(3), axis, 1.0, 1.0), 12)
    assert (np.einsum("ij,ij->i", made.double_areas, made.corners.mean(axis=1)) > 0).all()


def test_two_sides_make_no_rod() -> None:
    with pytest.raises(ValueError, match="3 sides"):
        rod(Cylinder(np.zeros(3), np.array([0.0, 0, 1]), 1.0, 1.0), 2)
