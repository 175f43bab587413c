"""Shells against closed forms (Euclid, Gauss) and trimesh's own volume."""

from __future__ import annotations

from itertools import pairwise

import numpy as np
import pytest
import trimesh
from scipy.spatial.transform import Rotation

from meshlure.geometry.nesting import nest, nested
from meshlure.geometry.shells import boxes_meet, enclosed_volume, measures, split, winding_number
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired
from meshlure.geometry.welding import weld


def ball(radius: float, at: tuple[float, float, float] = (0, 0, 0), *, inwards: bool = False) -> trimesh.Trimesh:
    mesh: trimesh.Trimesh = trimesh.creation.icosphere(subdivisions=2, radius=radius)
    mesh.apply_translation(at)
    if inwards:
        mesh.invert()
    return mesh


def surface_of(*meshes: trimesh.Trimesh) -> Surface:
    return weld(np.concatenate([np.asarray(mesh.triangles, dtype=np.float64) for mesh in meshes])).surface


@pytest.mark.parametrize("far", [0.0, 1e4])
def test_volume_of_a_box_is_the_product_of_its_sides_wherever_it_lies(far: float) -> None:
    surface = surface_of(trimesh.creation.box(bounds=[[far, far, far], [far + 2, far + 3, far + 5]]))
    assert enclosed_volume(surface) == pytest.approx(30, rel=1e-12)
    assert enclosed_volume(surface.turned()) == pytest.approx(-30, rel=1e-12)


def test_measures_of_many_faces_are_those_of_trimesh() -> None:
    # More faces than one piece of the pass holds.
    mesh = trimesh.creation.torus(3.0, 1.0, major_sections=300, minor_sections=100)
    volumes, areas = measures(Surface(np.asarray(mesh.vertices), np.asarray(mesh.faces)))
    np.testing.assert_allclose(areas, mesh.area_faces, rtol=1e-9)
    assert volumes.sum() == pytest.approx(mesh.volume, rel=1e-12)


@pytest.mark.parametrize(
    ("point", "expected"),
    [
        ((0.1, 0.2, 0.3), 1.0),
        ((3.0, 0.2, 0.3), 0.0),
        ((1.0, 0.5, 0.5), 0.5),
        ((1.0, 1.0, 0.5), 0.25),
        ((1, 1, 1), 0.125),
    ],
)
def test_winding_number_is_the_share_of_the_sphere_of_directions_that_lies_inside(
    point: tuple[float, float, float], expected: float
) -> None:
    # Gauss: a box fills 4 pi of the directions seen from inside, 0 from outside, 2 pi from a point of a wall, pi from
    # one of an edge and pi / 2 from a corner.
    surface = surface_of(trimesh.creation.box(bounds=[[-1, -1, -1], [1, 1, 1]]))
    found = winding_number(surface, np.array(point, dtype=np.float64))
    assert found == pytest.approx(expected, abs=1e-12)
    turned = winding_number(surface.turned(), np.array(point, dtype=np.float64))
    assert turned == pytest.approx(-expected, abs=1e-12)


def test_shells_come_largest_first_and_sum_to_the_whole() -> None:
    meshes = [ball(1.0, (9, 0, 0)), ball(3.0), ball(2.0, inwards=True)]
    surface = surface_of(*meshes)
    shells = split(surface, paired(surface))
    np.testing.assert_allclose([s.volume for s in shells], [meshes[i].volume for i in (1, 2, 0)], rtol=1e-12)
    np.testing.assert_allclose([s.area for s in shells], [meshes[i].area for i in (1, 2, 0)], rtol=1e-12)
    np.testing.assert_allclose(shells[2].bounds, meshes[0].bounds, rtol=1e-12)
    assert [s.reversed for s in shells] == [False, True, False]
    assert sum(s.volume for s in shells) == pytest.approx(enclosed_volume(surface), rel=1e-12)
    for shell in shells:
        np.testing.assert_array_equal(shell.surface.corners, surface.corners[shell.faces])


def test_many_shells_are_told_apart() -> None:
    # The lattice of 5 x 5 x 5 balls: more shells than are picked out one by one.
    at = np.stack(np.meshgrid(*[np.arange(5.0)] * 3), axis=-1).reshape(-1, 3)
    one = trimesh.creation.icosahedron()
    corners = np.concatenate([np.asarray(one.triangles) * 0.3 + shift for shift in at])
    surface = weld(corners).surface
    shells = split(surface, paired(surface))
    assert len(shells) == 125
    np.testing.assert_allclose([s.volume for s in shells], one.volume * 0.027, rtol=1e-9)
    assert len(boxes_meet(shells)) == 0
    assert {s.depth for s in nested(shells)} == {0}


def test_cubes_that_touch_at_a_corner_or_an_edge_are_two_shells() -> None:
    for at in ((1, 1, 1), (1, 1, 0)):
        surface = surface_of(
            trimesh.creation.box(bounds=[[0, 0, 0], [1, 1, 1]]),
            trimesh.creation.box(bounds=np.array([at, np.add(at, 1)])),
        )
        shells = split(surface, paired(surface))
        assert [s.volume for s in shells] == pytest.approx([1, 1])
        assert boxes_meet(shells).tolist() == [[0, 1]]


def test_depth_and_parent_of_balls_in_balls() -> None:
    surface = surface_of(
        ball(10), ball(8, inwards=True), ball(3, (-4, 0, 0)), ball(3, (4, 0, 0)), ball(1, (4, 0, 0.5), inwards=True)
    )
    shells = nested(split(surface, paired(surface)))
    assert [s.depth for s in shells] == [0, 1, 2, 2, 3]
    hole = shells[4]
    assert hole.parent is not None
    assert shells[hole.parent].centre[0] == pytest.approx(4)
    assert {shells[2].parent, shells[3].parent} == {1}


def test_a_shell_in_the_hole_of_a_ring_lies_outside_it() -> None:
    # The bounds of the ring hold those of the ball; only the winding number tells.
    surface = surface_of(trimesh.creation.torus(3.0, 1.0), ball(0.5), ball(0.5, (3, 0, 0)))
    shells = nested(split(surface, paired(surface)))
    inner = {round(float(s.centre[0])): s.depth for s in shells[1:]}
    assert inner == {0: 0, 3: 1}


def test_a_shell_that_touches_its_host_from_inside_lies_inside_it() -> None:
    outer = trimesh.creation.box(bounds=[[0, 0, 0], [4, 4, 4]])
    inner = trimesh.creation.box(bounds=[[0, 0, 0], [1, 1, 1]])
    turn = Rotation.from_rotvec([0.1, 0.1, 0.1]).as_matrix()
    inner.apply_transform(np.block([[turn, np.zeros((3, 1))], [np.zeros((1, 3)), np.ones((1, 1))]]))
    inner.apply_translation(-inner.bounds[0])
    tip = inner.vertices[:, 0].argmin()
    outer.apply_translation([0, inner.vertices[tip][1] - 2, inner.vertices[tip][2] - 2])
    shells = nested(split(surface_of(outer, inner), paired(surface_of(outer, inner))))
    assert [s.depth for s in shells] == [0, 1]


def test_outermost_inwards_turns_all() -> None:
    surface = surface_of(ball(10, inwards=True), ball(8), ball(5, inwards=True))
    made = nest(split(surface, paired(surface)), depth=1e-6)
    assert made.inverted
    assert made.turned == ()
    assert [s.reversed for s in made.shells] == [False, True, False]


def test_one_of_two_bodies_inwards_is_turned_with_all_that_lies_in_it() -> None:
    surface = surface_of(ball(10), ball(8, (30, 0, 0), inwards=True), ball(4, (30, 0, 0)))
    made = nest(split(surface, paired(surface)), depth=1e-6)
    assert not made.inverted
    assert made.turned == (1,)
    assert [s.reversed for s in made.shells] == [False, False, True]
    assert made.groups() == ((0,), (1, 2))


def test_balls_in_a_row_hang_together_as_far_as_they_meet() -> None:
    surface = surface_of(*[ball(1.0 - 0.01 * i, (1.8 * i, 0, 0)) for i in range(4)], ball(0.5, (20, 0, 0)))
    made = nest(split(surface, paired(surface)), depth=1e-6)
    assert made.joins == tuple(pairwise(range(4)))
    assert made.groups() == ((0, 1, 2, 3), (4,))
