"""Triangles that meet, against a linear programme and shapely (independent methods) and against drawings."""

from __future__ import annotations

import numpy as np
import pytest
import shapely
import shapes
import trimesh
from scipy.optimize import linprog

from meshlure.geometry.crossing import crossings, meets, self_crossings
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.welding import weld


def surface_of(mesh: trimesh.Trimesh) -> Surface:
    return Surface(np.asarray(mesh.vertices, dtype=np.float64), np.asarray(mesh.faces, dtype=np.intp))


def one_face(corners: Floats) -> Surface:
    return Surface(corners, np.array([[0, 1, 2]]))


def share_a_point(a: Floats, b: Floats) -> bool:
    """Whether weights s, t >= 0 with sums of 1 exist for which s a = t b: the definition of two triangles meeting."""
    equal = np.zeros((5, 6))
    equal[:3, :3], equal[:3, 3:] = a.T, -b.T
    equal[3, :3] = equal[4, 3:] = 1.0
    answer = linprog(np.zeros(6), A_eq=equal, b_eq=[0, 0, 0, 1, 1], method="highs")
    return bool(answer.status == 0)


def test_same_answer_as_a_linear_programme_on_a_lattice() -> None:
    # Lattice points make touching corners, corners on edges and faces in one plane as common as clean cuts.
    rng = np.random.default_rng(11)
    answers = []
    for _ in range(400):
        a, b = rng.integers(0, 5, (2, 3, 3)).astype(np.float64)
        expected = share_a_point(a, b)
        assert meets(one_face(a), one_face(b)) == expected
        answers.append(expected)
    assert 100 < sum(answers) < 300


def test_same_answer_as_shapely_in_one_plane() -> None:
    rng = np.random.default_rng(5)
    answers = []
    for _ in range(300):
        a, b = rng.integers(0, 7, (2, 3, 2)).astype(np.float64)
        expected = bool(shapely.intersects(shapely.convex_hull(shapely.multipoints(a)), shapely.Polygon(b)))
        if shapely.Polygon(b).area == 0 or shapely.Polygon(a).area == 0:
            continue
        flat = [np.column_stack([p, np.full(3, 2.0)]) for p in (a, b)]
        assert (len(crossings(one_face(flat[0]), one_face(flat[1]))) == 1) == expected
        answers.append(expected)
    assert 50 < sum(answers) < len(answers) - 50


def test_all_pairs_of_two_meshes_are_found() -> None:
    # Every pair tried one by one gives the same list as the search by boxes.
    a = surface_of(trimesh.creation.icosphere(subdivisions=1, radius=1.0))
    b = surface_of(trimesh.creation.torus(0.9, 0.4, major_sections=8, minor_sections=6))
    expected = [
        (i, j)
        for i in range(len(a.faces))
        for j in range(len(b.faces))
        if meets(one_face(a.corners[i]), one_face(b.corners[j]))
    ]
    assert [tuple(row) for row in crossings(a, b).tolist()] == expected
    assert sorted((i, j) for j, i in crossings(b, a).tolist()) == expected


@pytest.mark.parametrize("far", [0.0, 1e3])
def test_margin_is_the_gap_that_still_counts(far: float) -> None:
    gap = 1e-3
    lower = trimesh.creation.box(bounds=[[far, 0, 0], [far + 1, 1, 1]])
    upper = trimesh.creation.box(bounds=[[far, 0, 1 + gap], [far + 1, 1, 2]])
    a, b = surface_of(lower), surface_of(upper)
    assert not meets(a, b)
    assert len(crossings(a, b, margin=0.999 * gap)) == 0
    close = crossings(a, b, margin=1.001 * gap)
    top = np.flatnonzero((a.corners[:, :, 2] == 1).all(axis=1))
    assert set(top) <= set(close[:, 0])


def test_touching_counts_and_a_depth_asks_for_more() -> None:
    a = surface_of(trimesh.creation.box(bounds=[[0, 0, 0], [1, 1, 1]]))
    touching = surface_of(trimesh.creation.box(bounds=[[0.3, 0.2, 1], [0.6, 0.9, 2]]))
    sunk = surface_of(trimesh.creation.box(bounds=[[0.3, 0.2, 0.99], [0.6, 0.9, 2]]))
    assert meets(a, touching)
    assert not meets(a, touching, margin=-1e-6)
    assert meets(a, sunk, margin=-0.009)
    assert not meets(a, sunk, margin=-0.011)


def test_nothing_in_reach() -> None:
    ball = surface_of(trimesh.creation.icosphere(subdivisions=2))
    inner = surface_of(trimesh.creation.icosphere(subdivisions=2, radius=0.5))
    aside = surface_of(trimesh.creation.box(bounds=[[5, 5, 5], [6, 6, 6]]))
    empty = Surface(np.empty((0, 3)), np.empty((0, 3), dtype=np.intp))
    for other in (inner, aside, empty):
        assert crossings(ball, other).shape == (0, 2)
        assert not meets(other, ball)


def test_a_surface_against_itself_finds_what_two_shells_find() -> None:
    a = trimesh.creation.icosphere(subdivisions=3)
    b = a.copy()
    b.apply_translation([0.8, 0.31, 0.17])
    both = weld(np.concatenate([surface_of(a).corners, surface_of(b).corners])).surface
    expected = crossings(surface_of(a), surface_of(b))
    expected[:, 1] += len(a.faces)
    assert len(expected) > 50
    found = self_crossings(both, depth=0.0)
    assert found is not None
    np.testing.assert_array_equal(found, expected)


def test_a_sound_surface_does_not_cross_itself_and_a_large_one_is_not_searched() -> None:
    torus = surface_of(trimesh.creation.torus(3.0, 1.0))
    found = self_crossings(torus, depth=1e-9)
    assert found is not None
    assert found.shape == (0, 2)
    assert self_crossings(torus, depth=1e-9, most=len(torus.faces) - 1) is None


def test_boxes_that_all_meet_end_the_search() -> None:
    # Faces thrown across the whole of a cube: nearly every box holds part of every other.
    corners = np.random.default_rng(2).random((2000, 3, 3))
    assert self_crossings(weld(corners).surface, depth=1e-9) is None


def test_a_surface_that_was_asked_before_is_told_from_one_that_differs_by_a_hair() -> None:
    apart = shapes.together(shapes.box((2.0, 2.0, 2.0)), shapes.box((2.0, 2.0, 2.0), (2.0 + 1e-9, 0.3, 0.2)))
    meeting = shapes.together(shapes.box((2.0, 2.0, 2.0)), shapes.box((2.0, 2.0, 2.0), (2.0 - 1e-9, 0.3, 0.2)))
    for _ in range(2):
        found = [self_crossings(mesh, 0.0) for mesh in (apart, meeting)]
        assert [pairs is not None and len(pairs) > 0 for pairs in found] == [False, True]
