"""Insets against closed forms: boxes, Steiner's formula inward, rings, an angle with its round hollow edge."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
import shapes
import trimesh
from scipy.integrate import quad

from meshlure.geometry.clearance import Boxes, nearest
from meshlure.geometry.containment import inside
from meshlure.geometry.crossing import self_crossings
from meshlure.geometry.inset import inset
from meshlure.geometry.level import CLOSE, Level
from meshlure.geometry.surface import Surface


def volume(surface: Surface) -> float:
    """By trimesh, which must find it closed and outward."""
    mesh = shapes.as_trimesh(surface)
    assert mesh.is_watertight
    assert mesh.is_winding_consistent
    return float(mesh.volume)


def depths(surface: Surface, body: Surface) -> tuple[float, float]:
    """Least and greatest distance of some thousand of a surface's vertices from the body's skin, by boxes."""
    distance = nearest(body, surface.vertices[:: max(1, len(surface.vertices) // 1000)]).distance
    return float(distance.min()), float(distance.max())


def eroded_spheroid(a: float, b: float, t: float) -> float:
    """Steiner's formula inward, V - t S + t^2 M - 4/3 pi t^3, of a spheroid long along its axis, t < b^2/a.

    R. Schneider (2014), Convex bodies: the Brunn-Minkowski theory, ch. 4: exact up to the least radius of curvature. M,
    the integral of the mean curvature, is that of the support function over all directions.
    """
    e = np.sqrt(1 - b * b / (a * a))
    area = 2 * np.pi * b * b * (1 + a / (b * e) * np.arcsin(e))
    bend = 2 * np.pi * quad(lambda z: np.sqrt(a * a * z * z + b * b * (1 - z * z)), -1, 1, epsabs=1e-12)[0]
    return float(4 / 3 * np.pi * a * b * b - t * area + t * t * bend - 4 / 3 * np.pi * t**3)


def angle(size: float, wide: float, thick: float) -> Surface:
    """An L of two arms, its corner at the origin."""
    outline = np.array([[0, 0], [size, 0], [size, wide], [wide, wide], [wide, size], [0, size]], dtype=np.float64)
    low = np.column_stack([outline, np.zeros(6)])
    floor = np.array([[0, 3, 1], [1, 3, 2], [0, 5, 3], [3, 5, 4]])
    k = np.arange(6)
    after = (k + 1) % 6
    sides = [np.column_stack([k, after, after + 6]), np.column_stack([k, after + 6, k + 6])]
    return Surface(np.vstack([low, low + np.array([0, 0, thick])]), np.vstack([floor, floor[:, ::-1] + 6, *sides]))


@pytest.mark.parametrize("level", [0, 2])
def test_a_box_keeps_its_edges(level: int) -> None:
    size, t = np.array([0.095, 0.018, 0.024]), 1.5e-3
    (found,) = inset(shapes.box((0.095, 0.018, 0.024), level=level).moved(shapes.turn(1), size), t)
    assert volume(found) == pytest.approx(float(np.prod(size - 2 * t)), rel=1e-12)
    assert len(found.faces) == 12
    assert inset(shapes.box((0.095, 0.018, 0.024), level=level), 0.00901) == ()


def test_a_spheroid_by_its_planes() -> None:
    # The facets lie within the skin: their error falls with the square of their size.
    errors = []
    for level in (2, 3, 4):
        (found,) = inset(shapes.ellipsoid((0.03, 0.012, 0.012), level), 2e-3)
        errors.append(volume(found) / eroded_spheroid(0.03, 0.012, 2e-3) - 1)
    assert shapes.order(errors) == pytest.approx([2, 2], abs=0.2)
    assert abs(errors[-1]) < 0.02


def test_a_ball_whose_faces_all_vanish_but_one_point() -> None:
    ball = shapes.sphere(0.01, 3)
    (found,) = inset(ball, 0.0085)
    assert volume(found) == pytest.approx(4 / 3 * np.pi * 0.0015**3, rel=0.1)
    assert inset(ball, 0.01001) == ()


def test_the_level_of_a_spheroid_converges_with_the_square_of_the_pitch() -> None:
    # To what lies below the planes of all faces, another way to the same solid, and so to Steiner's formula.
    body, t = shapes.ellipsoid((0.03, 0.012, 0.012), 4), 2e-3
    (planes,) = inset(body, t)
    level, errors = Level.of(body, t), []
    for pitch in (1.6e-3, 0.8e-3):
        found = level.drawn(pitch)
        assert found is not None
        errors.append(volume(found) / volume(planes) - 1)
        low, high = depths(found, body)
        assert low >= t * (1 - CLOSE)
        assert high <= t * (1 + CLOSE)
    assert shapes.order(errors) == pytest.approx([2], abs=0.3)
    assert abs(errors[-1]) < 2e-3


def test_a_ring_keeps_its_facets() -> None:
    # 2 pi^2 R (r - t)^2, moved in by its faces: as many of them, each further from round.
    errors = []
    for across in (32, 48):
        ring = shapes.torus(0.02, 0.006, across)
        (found,) = inset(ring, 1.5e-3)
        errors.append(volume(found) / (2 * np.pi**2 * 0.02 * 0.0045**2) - 1)
    assert len(found.faces) == len(ring.faces)
    assert shapes.order(errors, 1.5) == pytest.approx([2], abs=0.2)
    low, high = depths(found, ring)
    assert low >= 1.5e-3 * (1 - 1e-9)
    assert high <= 1.5e-3 * 1.0003  # where inner edges fold by 2.5 degrees, sec(1.25 degrees)


def test_an_angle_gets_a_round_hollow_edge() -> None:
    # In its plane (s - 2t)^2 - (s - w)^2 + t^2 (1 - pi/4): the arms, and what rounding the hollow edge leaves; by its
    # thickness less 2t. The lattice cuts across the sharp edges.
    size, wide, thick, t = 0.03, 0.012, 0.01, 2e-3
    body = angle(size, wide, thick)
    exact = ((size - 2 * t) ** 2 - (size - wide) ** 2 + t * t * (1 - np.pi / 4)) * (thick - 2 * t)
    errors = []
    for pitch in (1e-3, 0.5e-3):
        (found,) = inset(body, t, pitch)
        errors.append(volume(found) / exact - 1)
        assert depths(found, body)[0] >= t * (1 - CLOSE)
    assert abs(errors[1]) < 3e-3
    assert shapes.order(errors)[0] > 1.5
    # A mitred edge would leave out t^2 (1 - pi/4) of the plane, another half percent of the volume.
    mitred = exact - t * t * (1 - np.pi / 4) * (thick - 2 * t)
    assert volume(found) > mitred * (1 + 1e-3)


def test_flat_grooves_across_each_other_leave_nothing_that_crosses() -> None:
    # A plate with a groove along x above and one along y below, 2 degrees flat: mitred faces would be deep enough at
    # every vertex and middle, but cross where the grooves do.
    a, at, rise, high = 0.04, 0.013, 0.02, 3.2e-3
    lift = {-a: rise * (a + at), at: 0.0, a: rise * (a - at)}
    top = np.array([[x, y, high + lift[y]] for x in (-a, a) for y in (-a, at, a)])
    floor = np.array([[x, y, -lift[x]] for x in (-a, at, a) for y in (-a, a)])
    # Above 0 to 5 by x, then y; below 6 to 11 by x, then y.
    quads = [(0, 3, 4, 1), (1, 4, 5, 2), (6, 7, 9, 8), (8, 9, 11, 10)]
    walls = [(1, 2, 7, 6, 0), (4, 3, 10, 11, 5), (8, 10, 3, 0, 6), (9, 7, 2, 5, 11)]
    fans = [(ring[0], ring[k], ring[k + 1]) for ring in (*quads, *walls) for k in range(1, len(ring) - 1)]
    plate = Surface(np.vstack([top, floor]), np.array(fans))
    assert volume(plate) > 0
    parts = inset(plate, 1.7e-3, 1.2e-3)
    assert parts
    for part in parts:
        crossed = self_crossings(part, 0.0)
        assert crossed is not None
        assert not len(crossed)
        assert inside(Boxes.of(plate), part.vertices).all()
        assert depths(part, plate)[0] >= 1.7e-3 * (1 - CLOSE)


def two_balls(neck: float) -> Surface:
    """Balls of radius 0.01, their middles 0.024 apart, joined by a rod."""
    meet = np.arcsin(neck / 0.01)
    turn = np.linspace(np.pi, meet, 40)
    radius, height = 0.01 * np.sin(turn), 0.01 * np.cos(turn) - 0.012
    radius[0] = 0.0
    return shapes.revolved(np.concatenate([radius, radius[::-1]]), np.concatenate([height, -height[::-1]]), 60)


def test_a_thin_neck_parts() -> None:
    # Each ball shrinks to R - t, and bulges a little into where the neck leaves a hole in its skin. A neck thicker than
    # twice the distance holds the two together.
    parts = inset(two_balls(1e-3), 1.5e-3, 1.3e-3)
    assert len(parts) == 2
    for part in parts:
        assert volume(part) == pytest.approx(4 / 3 * np.pi * 0.0085**3, rel=1e-2)
        assert abs(shapes.as_trimesh(part).center_mass[2]) == pytest.approx(0.012, rel=1e-3)
    assert len(inset(two_balls(2.5e-3), 1.5e-3, 1.3e-3)) == 1


def test_a_hollow_ball_stays_hollow() -> None:
    hollow = shapes.together(shapes.sphere(0.02, 3), shapes.sphere(0.008, 3).turned())
    (found,) = inset(hollow, 2e-3, 2e-3)
    assert volume(found) == pytest.approx(4 / 3 * np.pi * (0.018**3 - 0.01**3), rel=2e-2)
    assert len(shapes.as_trimesh(found).split()) == 2
    assert inset(hollow, 6.1e-3, 3e-3) == ()


def test_a_minnows_inset_holds_what_is_deep_enough() -> None:
    # Points all over the body, told by their distance from its skin; those nearer to the level than the sag of its
    # facets are left out.
    path = Path(__file__).parents[2] / "samples" / "minnow" / "coarse" / "body.stl"
    mesh = trimesh.load_mesh(path)
    body, t = Surface(np.asarray(mesh.vertices) * 1e-3, np.asarray(mesh.faces)), 1.5e-3
    (found,) = inset(body, t)
    points = np.random.default_rng(0).uniform(body.bounds[0], body.bounds[1], (2000, 3))
    boxes = Boxes.of(body)
    deep = np.where(inside(boxes, points), boxes.nearest(points).distance, 0.0)
    clear = np.abs(deep - t) > 0.03e-3
    np.testing.assert_array_equal(inside(Boxes.of(found), points)[clear], deep[clear] > t)
    assert depths(found, body)[0] >= t * (1 - CLOSE)


def test_no_distance_leaves_the_solid_as_it_is() -> None:
    parts = inset(shapes.together(shapes.box((1, 1, 1)), shapes.box((2, 2, 2), (5, 0, 0))), 0.0)
    assert [volume(part) for part in parts] == pytest.approx([8, 1], rel=1e-12)


@pytest.mark.parametrize(
    ("distance", "pitch", "match"),
    [(-1e-3, None, "0 or more"), (np.nan, None, "0 or more"), (1e-3, 2e-3, "or less"), (1e-3, 0.0, "or less")],
)
def test_distances_and_pitches_that_make_no_sense(distance: float, pitch: float | None, match: str) -> None:
    with pytest.raises(ValueError, match=match):
        inset(shapes.lumpy(1, 1), distance, pitch)
    if pitch is not None:
        with pytest.raises(ValueError, match=match):
            Level.of(shapes.sphere(0.005, 1), distance).drawn(pitch)
