"""The bait's own views and its rose of areas against ellipsoids and boxes in closed form."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.bait.pieces import Frame
from meshlure.geometry.topology import paired
from meshlure.physics.areas import rose, silhouettes

FRAME = Frame.of(np.array([-1.0, 0, 0]), np.array([0, 0, 1.0]))
LENGTH, WIDTH, DEPTH = 0.05, 0.008, 0.011


def test_side_top_and_front_of_an_ellipsoid() -> None:
    # pi a c from the side, pi a b from above, pi b c from the front; along any other direction
    # pi sqrt((b c ux)^2 + (a c uy)^2 + (a b uz)^2).
    surface = shapes.ellipsoid((LENGTH, WIDTH, DEPTH), 5)
    asked = np.array([1.0, 2.0, 3.0]) / np.sqrt(14)
    found = silhouettes(surface, paired(surface), FRAME, [asked])
    assert [name for name, _ in found] == ["side", "top", "front", "axis"]
    faces = np.array([WIDTH * DEPTH, LENGTH * DEPTH, LENGTH * WIDTH])
    exact = [np.pi * faces[1], np.pi * faces[2], np.pi * faces[0], np.pi * np.linalg.norm(faces * asked)]
    assert [shown.area for _, shown in found] == pytest.approx(exact, rel=2e-3)
    axes = [shown.axis for _, shown in found]
    np.testing.assert_allclose(axes, [FRAME.side, FRAME.back, FRAME.nose, asked], rtol=0, atol=1e-12)


def test_the_nose_points_left_from_the_side_and_from_above() -> None:
    surface = shapes.box((0.1, 0.02, 0.03), level=1)
    views = dict(silhouettes(surface, paired(surface), FRAME, []))
    assert views["side"].right @ FRAME.nose == pytest.approx(-1)
    assert views["side"].up @ FRAME.back == pytest.approx(1)
    assert views["top"].right @ FRAME.nose == pytest.approx(-1)
    assert views["front"].up @ FRAME.back == pytest.approx(1)


def test_centres_of_a_wedge() -> None:
    # A cone pointing to the nose: its side and top are triangles, two thirds of the way to the base.
    cone = shapes.cone(0.01, 0.06, 64).moved(np.array([[0, 0, 1.0], [0, 1, 0], [-1, 0, 0]]), np.array([0.2, 0.1, 0.3]))
    views = dict(silhouettes(cone, paired(cone), FRAME, []))
    for name in ("side", "top"):
        assert views[name].centre == pytest.approx([0.24, 0.1, 0.3], rel=1e-9)
    assert views["front"].centre[1:] == pytest.approx([0.1, 0.3], rel=1e-9)


def test_rose_of_a_box() -> None:
    # b c |ux| + a c |uy| + a b |uz| in every one of its directions, three planes of twelve.
    a, b, c = 0.1, 0.02, 0.03
    surface = shapes.box((a, b, c), level=1)
    found = rose(surface, paired(surface), FRAME)
    assert len(found.area) == len(found.axis) == len(found.plane) == len(found.angle) == 36
    np.testing.assert_allclose(found.area, np.abs(found.axis) @ np.array([b * c, a * c, a * b]), rtol=1e-6)
    np.testing.assert_allclose(np.linalg.norm(found.axis, axis=1), 1, rtol=1e-12)
    assert np.degrees(found.angle[:12]) == pytest.approx(np.arange(0, 180, 15))


def test_planes_of_the_rose_run_from_their_first_direction_to_their_second() -> None:
    surface = shapes.box((0.1, 0.02, 0.03))
    found = rose(surface, paired(surface), FRAME)
    degrees = np.round(np.degrees(found.angle)).astype(int).tolist()
    at = dict(zip(zip(found.plane, degrees, strict=True), found.axis, strict=True))
    for plane, first, second in (
        ("around", FRAME.side, FRAME.back),
        ("level", FRAME.nose, FRAME.side),
        ("upright", FRAME.nose, FRAME.back),
    ):
        assert at[plane, 0] == pytest.approx(first, abs=1e-12)
        assert at[plane, 90] == pytest.approx(second, abs=1e-12)
        assert at[plane, 30] @ second == pytest.approx(0.5, abs=1e-12)


def test_the_side_is_the_baits_own_left() -> None:
    # Nose away from the reader, back up: left is back x nose.
    assert np.cross(FRAME.back, FRAME.nose) == pytest.approx(FRAME.side)
    skew = Frame.of(np.array([3.0, 0.002, 0]), np.array([0.1, 0, 5.0]))
    for one, other in ((skew.nose, skew.back), (skew.back, skew.side), (skew.side, skew.nose)):
        assert abs(one @ other) < 1e-15
