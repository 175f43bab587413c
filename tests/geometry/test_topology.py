"""Edges of solids whose counts Euler's formula and the drawing give, and of solids with one thing spoilt."""

from __future__ import annotations

from collections import Counter

import numpy as np
import pytest
import trimesh

from meshlure.geometry import topology
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import EdgePairs, paired
from meshlure.geometry.welding import weld


def surface_of(*meshes: trimesh.Trimesh) -> Surface:
    return weld(np.concatenate([np.asarray(mesh.triangles, dtype=np.float64) for mesh in meshes])).surface


def cube(at: tuple[float, float, float] = (0, 0, 0)) -> trimesh.Trimesh:
    box: trimesh.Trimesh = trimesh.creation.box(bounds=np.array([at, np.add(at, 1.0)]))
    return box


def check_pairs(surface: Surface, pairs: EdgePairs) -> None:
    """Every row must be an edge that its two faces do run along, from first principles."""
    for half, source, target, face in (
        (pairs.forward, pairs.start, pairs.end, pairs.forward_face),
        (pairs.backward, pairs.end, pairs.start, pairs.backward_face),
    ):
        assert (half // 3 == face).all()
        assert (surface.faces[face, half % 3] == source).all()
        assert (surface.faces[face, (half + 1) % 3] == target).all()
    both = np.concatenate([pairs.forward, pairs.backward])
    assert len(np.unique(both)) == len(both)


@pytest.mark.parametrize(
    ("mesh", "characteristic"),
    [
        (trimesh.creation.icosphere(subdivisions=3), 2),
        (trimesh.creation.torus(3.0, 1.0), 0),
        (trimesh.creation.annulus(1.0, 2.0, 1.0), 0),
        (cube(), 2),
    ],
)
def test_edges_of_a_closed_surface_satisfy_euler(mesh: trimesh.Trimesh, characteristic: int) -> None:
    # V - E + F = 2 - 2 g (Euler 1758, Poincare 1895).
    surface = surface_of(mesh)
    pairs = paired(surface)
    check_pairs(surface, pairs)
    assert pairs.closed
    assert len(pairs.irregular.ends) == 0
    assert len(surface.vertices) - len(pairs.start) + len(surface.faces) == characteristic
    assert (pairs.start < pairs.end).all()


def test_a_missing_face_leaves_three_open_edges_in_its_neighbours_direction() -> None:
    whole = surface_of(trimesh.creation.icosphere(subdivisions=2))
    a, b, c = whole.faces[17].tolist()
    surface = Surface(whole.vertices, np.delete(whole.faces, 17, axis=0))
    pairs = paired(surface)
    check_pairs(surface, pairs)
    assert not pairs.closed
    assert sorted(map(tuple, pairs.irregular.open.tolist())) == sorted([(b, a), (c, b), (a, c)])
    assert len(pairs.irregular.miswound) == len(pairs.irregular.crowded) == 0
    assert len(pairs.start) == len(whole.faces) * 3 // 2 - 3


def test_a_turned_face_is_miswound_against_its_three_neighbours() -> None:
    whole = surface_of(trimesh.creation.icosphere(subdivisions=2))
    faces = whole.faces.copy()
    faces[5] = faces[5, ::-1]
    pairs = paired(Surface(whole.vertices, faces))
    assert not pairs.closed
    expected = Counter(frozenset(e) for e in zip(faces[5], np.roll(faces[5], 1), strict=True))
    assert Counter(frozenset(e) for e in pairs.irregular.miswound.tolist()) == expected
    assert len(pairs.irregular.open) == len(pairs.irregular.crowded) == 0


def test_a_fin_on_a_closed_body_makes_a_crowded_edge_and_open_ones() -> None:
    body = surface_of(cube())
    a, b = body.faces[0, 0], body.faces[0, 1]
    surface = Surface(np.vstack([body.vertices, [[3.0, 3.0, 3.0]]]), np.vstack([body.faces, [[a, b, 8]]]))
    pairs = paired(surface)
    check_pairs(surface, pairs)
    assert not pairs.closed
    assert {frozenset(e) for e in pairs.irregular.crowded.tolist()} == {frozenset((a, b))}
    assert sorted(map(tuple, pairs.irregular.open.tolist())) == sorted([(b, 8), (8, a)])


@pytest.mark.parametrize("seed", range(4))
def test_cubes_that_touch_along_an_edge_are_paired_each_within_itself(seed: int) -> None:
    surface = surface_of(cube(), cube((1, 1, 0)))
    order = np.random.default_rng(seed).permutation(len(surface.faces))
    pairs = paired(Surface(surface.vertices, surface.faces[order]))
    assert pairs.closed
    assert len(pairs.irregular.crowded) == 1
    assert len(pairs.start) == 36
    body = order // 12
    assert (body[pairs.forward_face] == body[pairs.backward_face]).all()


def test_cubes_that_share_a_wall_are_paired_each_within_itself() -> None:
    surface = surface_of(cube(), cube((1, 0, 0)))
    pairs = paired(surface)
    assert pairs.closed
    # The two diagonals of the wall cross, so that only its rim is shared.
    assert len(pairs.irregular.crowded) == 4
    assert (pairs.forward_face // 12 == pairs.backward_face // 12).all()


def test_a_face_that_names_a_vertex_twice_does_not_open_the_surface() -> None:
    body = surface_of(cube())
    a, b = body.faces[0, 0], body.faces[0, 1]
    surface = Surface(body.vertices, np.vstack([body.faces, [[a, a, b]]]))
    pairs = paired(surface)
    check_pairs(surface, pairs)
    assert pairs.closed


def test_the_plain_sort_agrees_with_the_packed_one(monkeypatch: pytest.MonkeyPatch) -> None:
    surface = surface_of(trimesh.creation.torus(3.0, 1.0), cube((0, 0, 9)))
    packed = paired(surface)
    monkeypatch.setattr(topology, "_WORD", 8)
    plain = paired(surface)
    for name in ("start", "end", "forward", "backward", "forward_face", "backward_face"):
        np.testing.assert_array_equal(getattr(plain, name), getattr(packed, name))


def test_no_faces_no_edges() -> None:
    pairs = paired(Surface(np.empty((0, 3)), np.empty((0, 3), dtype=np.intp)))
    assert len(pairs.start) == 0
    assert pairs.closed
