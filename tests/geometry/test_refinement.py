"""Coarse facets split along the smooth skin: round bodies come nearer to themselves, flat and sharp ones stay."""

from __future__ import annotations

import math

import numpy as np
import pytest
import shapes

from meshlure.geometry.moments import solid_moments
from meshlure.geometry.refinement import refined
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired


def split(mesh: Surface) -> Surface:
    finer, pairs = refined(mesh, paired(mesh))
    assert pairs.closed
    assert len(finer.faces) == 4 * len(mesh.faces)
    return finer


def missing(mesh: Surface, volume: float) -> float:
    return 1 - solid_moments(mesh).amount / volume


@pytest.mark.parametrize(
    ("mesh", "volume"),
    [
        (shapes.sphere(0.01, 2), 4 / 3 * math.pi * 1e-6),
        (shapes.ellipsoid((0.04, 0.01, 0.007), 3), 4 / 3 * math.pi * 2.8e-6),
        (shapes.cylinder(0.01, 0.05, 24, 2), math.pi * 5e-6),
        (shapes.torus(0.02, 0.006, 24), 2 * math.pi**2 * 0.02 * 0.006**2),
        (shapes.cone(0.01, 0.03, 24), math.pi * 1e-6),
    ],
    ids=["sphere", "ellipsoid", "cylinder", "torus", "cone"],
)
def test_facets_of_curved_skin_leave_out_a_quarter_of_what_they_did(mesh: Surface, volume: float) -> None:
    # Volumes by closed form. Twice as fine a mesh with all corners on the skin would leave out just a quarter; a cone
    # of one facet from tip to rim keeps straight edges at its tip.
    before, after = missing(mesh, volume), missing(split(mesh), volume)
    assert 0.15 * before < after < 0.5 * before
    twice = split(split(mesh))
    assert 0.02 * before < missing(twice, volume) < 0.2 * before


def test_corners_of_a_split_ball_lie_on_the_ball() -> None:
    radii = np.linalg.norm(split(shapes.sphere(1.0, 2)).vertices, axis=1)
    assert np.abs(radii - 1).max() < 2e-3
    assert np.linalg.norm(shapes.sphere(1.0, 2).corners.mean(axis=1), axis=1).min() < 0.985


def test_a_rim_stays_in_its_plane_and_becomes_rounder() -> None:
    finer = split(shapes.cylinder(0.01, 0.05, 24))
    top = finer.vertices[np.isclose(finer.vertices[:, 2], finer.vertices[:, 2].max(), rtol=0, atol=1e-12)]
    reach = np.linalg.norm(top[:, :2], axis=1)
    rim = reach[reach > 0.009]
    assert len(rim) == 48
    assert np.abs(rim / 0.01 - 1).max() < 2e-4


@pytest.mark.parametrize("size", [(1, 2, 3), (0.02, 1, 5), (4, 1, 1)])
def test_flat_faces_stay_flat(size: tuple[float, float, float]) -> None:
    mesh = shapes.box(size, level=1)
    finer = split(split(mesh))
    assert solid_moments(finer).amount == pytest.approx(np.prod(size), rel=1e-12)
    assert finer.area == pytest.approx(mesh.area, rel=1e-12)


def test_a_kink_stays_a_kink() -> None:
    # Cone of 15 degrees half angle before a cylinder: the cone's skin must not swell at the shoulder.
    tip = 0.01 / math.tan(math.radians(15))
    mesh = shapes.revolved(
        [0, 0.0025, 0.005, 0.0075, 0.01, 0.01, 0.01],
        [0, tip / 4, tip / 2, 3 * tip / 4, tip, tip + 0.02, tip + 0.04],
        48,
    )
    volume = math.pi * 1e-4 * (tip / 3 + 0.04)
    finer = split(mesh)
    assert abs(missing(finer, volume)) < 0.5 * missing(mesh, volume)
    # Corners stand no farther out than the body that the facets were drawn on.
    inside = finer.vertices[finer.vertices[:, 2] < tip]
    assert (np.linalg.norm(inside[:, :2], axis=1) <= inside[:, 2] * math.tan(math.radians(15)) * 1.01 + 1e-12).all()


def test_needle_faces_move_no_corner_far() -> None:
    # A prism with hundreds of narrow sides and a cap of slivers.
    mesh = shapes.revolved([1, 1], [0, 20], 600)
    mesh = Surface(mesh.vertices * (4, 0.5, 1), mesh.faces)
    finer = split(mesh)
    assert np.abs(finer.bounds - mesh.bounds).max() < 1e-3
    assert solid_moments(finer).amount == pytest.approx(2 * math.pi * 20, rel=1e-3)


def test_a_body_far_from_the_origin_is_split_alike() -> None:
    near = shapes.ellipsoid((0.04, 0.01, 0.007), 2)
    far = split(near.moved(shift=np.array([800.0, -600.0, 10.0])))
    np.testing.assert_allclose(far.vertices - [800.0, -600.0, 10.0], split(near).vertices, atol=1e-9)
