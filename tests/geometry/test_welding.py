"""Welding against numpy's row-wise unique (an independent method) and against counts known from Euler's formula."""

from __future__ import annotations

import numpy as np
import pytest
import trimesh

from meshlure.geometry import welding
from meshlure.geometry.surface import Floats
from meshlure.geometry.welding import weld


def loose(mesh: trimesh.Trimesh) -> Floats:
    return np.array(mesh.triangles, dtype=np.float64)


def test_icosphere_comes_back_with_the_vertices_euler_asks_for() -> None:
    # Closed, genus 0, all triangles: V = F / 2 + 2 (Euler 1758).
    corners = loose(trimesh.creation.icosphere(subdivisions=4, radius=0.02))
    welded = weld(corners)
    assert welded.collapsed == 0
    assert len(welded.surface.vertices) == len(corners) // 2 + 2
    np.testing.assert_array_equal(welded.surface.corners, corners)


@pytest.mark.parametrize("seed", range(5))
def test_same_partition_as_rowwise_unique(seed: int) -> None:
    rng = np.random.default_rng(seed)
    corners = np.asarray(rng.integers(-3, 3, (400, 3, 3)) * 0.1, dtype=np.float64)
    keep = [len({tuple(p) for p in face}) == 3 for face in corners]
    welded = weld(corners)
    expected, inverse = np.unique(corners[keep].reshape(-1, 3), axis=0, return_inverse=True)
    assert welded.collapsed == keep.count(False) > 0
    assert len(welded.surface.vertices) == len(expected)
    pairs = set(zip(welded.surface.faces.ravel().tolist(), inverse.ravel().tolist(), strict=True))
    assert len(pairs) == len(expected)


def test_vertices_stand_in_the_order_of_first_mention() -> None:
    p = np.array([[9.0, 0, 0], [1, 0, 0], [5, 1, 0], [0, 0, 2]])
    welded = weld(p[[[0, 1, 2], [2, 1, 3]]])
    np.testing.assert_array_equal(welded.surface.vertices, p)
    np.testing.assert_array_equal(welded.surface.faces, [[0, 1, 2], [2, 1, 3]])


def test_minus_zero_is_zero_but_the_next_number_is_another() -> None:
    face = np.array([[[0.0, 0, 0], [1, 0, 0], [0, 1, 0]]])
    mirrored = face.copy()[:, ::-1]
    mirrored[mirrored == 0] = -0.0
    assert len(weld(np.concatenate([face, mirrored])).surface.vertices) == 3
    mirrored[0, 0, 1] = np.nextafter(1.0, 2.0)
    assert len(weld(np.concatenate([face, mirrored])).surface.vertices) == 4


def test_a_face_with_two_equal_corners_goes_and_its_lonely_vertex_too() -> None:
    faces = np.array([[[0.0, 0, 0], [1, 0, 0], [0, 1, 0]], [[0, 0, 0], [7, 7, 7], [7, 7, 7]]])
    welded = weld(faces)
    assert welded.collapsed == 1
    assert len(welded.surface.faces) == 1
    assert len(welded.surface.vertices) == 3


def test_points_that_share_a_hash_are_still_told_apart(monkeypatch: pytest.MonkeyPatch) -> None:
    corners = loose(trimesh.creation.icosphere(subdivisions=2))
    expected = weld(corners)
    # A hash that sees only the sign of x makes almost every pair of points collide.
    monkeypatch.setattr(welding, "_mixed", lambda points, salt: (points[:, 0] < 0).astype(np.uint64) << np.uint64(63))
    found = weld(corners)
    np.testing.assert_array_equal(found.surface.faces, expected.surface.faces)
    np.testing.assert_array_equal(found.surface.vertices, expected.surface.vertices)


@pytest.mark.parametrize("value", [np.nan, np.inf, -np.inf])
def test_a_number_that_is_none_is_refused(value: float) -> None:
    corners = np.zeros((2, 3, 3))
    corners[1, 2, 0] = value
    with pytest.raises(ValueError, match="finite"):
        weld(corners)


def test_no_faces_give_an_empty_surface() -> None:
    welded = weld(np.empty((0, 3, 3)))
    assert welded.surface.faces.shape == (0, 3)
    assert welded.surface.vertices.shape == (0, 3)
