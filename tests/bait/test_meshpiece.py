"""Shells of one mesh: volumes from geometry, each space counted once."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.bait.meshpiece import Shape, shape
from meshlure.errors import InputError
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.soundness import Soundness, examine
from meshlure.geometry.surface import Surface


def made(*shells: Surface) -> Shape:
    sound = examine(shapes.together(*shells), "eye")
    assert not sound.stops
    return shape(sound, "eye")


def volume(surface: Surface) -> float:
    """Enclosed volume by the general mesh library."""
    return float(shapes.as_trimesh(surface).volume)


def ball(radius: float, level: int = 3, at: tuple[float, float, float] = (0, 0, 0)) -> Surface:
    return shapes.sphere(radius, level).moved(shift=np.array(at))


def test_one_shell_is_taken_as_it_is() -> None:
    box = shapes.box((3, 2, 1))
    found = made(box)
    assert volume(found.outer) == pytest.approx(6, rel=1e-12)
    assert (len(found.shells), found.cavities, found.deficit) == (1, (), found.skin_deficit)


def test_an_eye_on_its_body_counts_once() -> None:
    # A ball about a point of a face: half of it is in the box (a geodesic ball is its own mirror image in its middle).
    eye = ball(0.5, at=(0, 0, 1))
    found = made(shapes.box((4, 3, 2)), eye)
    assert volume(found.outer) == pytest.approx(24 + volume(eye) / 2, rel=1e-9)
    assert len(found.shells) == 1


def test_an_eye_sunk_in_its_body_adds_nothing() -> None:
    found = made(shapes.box((4, 3, 2)), ball(0.5))
    assert volume(found.outer) == pytest.approx(24, rel=1e-9)
    assert found.cavities == ()


def test_bodies_apart_both_count() -> None:
    found = made(shapes.box((1, 1, 1)), shapes.box((2, 1, 1), (5, 0, 0)))
    assert volume(found.outer) == pytest.approx(3, rel=1e-12)
    assert sorted(volume(shell) for shell in found.shells) == pytest.approx([1, 2], rel=1e-12)


def test_a_reversed_shell_inside_is_a_cavity() -> None:
    found = made(shapes.box((4, 3, 2)), shapes.box((1, 1, 1), (1, 0, 0)).turned())
    assert volume(found.outer) == pytest.approx(24, rel=1e-12)
    (cavity,) = found.cavities
    assert volume(cavity) == pytest.approx(1, rel=1e-12)
    np.testing.assert_allclose(solid_moments(cavity).centre, [1, 0, 0], atol=1e-12)


def test_an_island_makes_its_cavity_smaller() -> None:
    found = made(shapes.box((4, 3, 2)), shapes.box((2, 2, 1)).turned(), shapes.box((1, 1, 0.5)))
    assert volume(found.outer) == pytest.approx(24, rel=1e-12)
    assert sum(volume(cavity) for cavity in found.cavities) == pytest.approx(4 - 0.5, rel=1e-9)


def test_a_hollow_in_an_island_is_a_second_cavity() -> None:
    shells = (
        shapes.box((8, 8, 8)),
        shapes.box((6, 6, 6)).turned(),
        shapes.box((4, 4, 4)),
        shapes.box((2, 2, 2)).turned(),
    )
    found = made(*shells)
    assert volume(found.outer) == pytest.approx(512, rel=1e-12)
    assert sorted(volume(cavity) for cavity in found.cavities) == pytest.approx([8, 216 - 64], rel=1e-9)


def test_two_cavities() -> None:
    holes = [shapes.box((1, 1, 1), (x, 0, 0)).turned() for x in (-1, 1)]
    found = made(shapes.box((5, 3, 2)), *holes)
    assert [volume(cavity) for cavity in found.cavities] == pytest.approx([1, 1], rel=1e-9)


def test_deficits_of_a_hollow_ball() -> None:
    # What facets leave out of a ball: 4/3 pi r^3 less their volume; out of the wall between two, the difference.
    outer, inner = ball(2.0), ball(1.0)
    found = made(outer, inner.turned())
    exact = [4 / 3 * np.pi * radius**3 - volume(surface) for radius, surface in ((2, outer), (1, inner))]
    assert found.skin_deficit == pytest.approx(exact[0], rel=0.05)
    assert found.deficit == pytest.approx(exact[0] - exact[1], rel=0.05)


def test_deficit_of_shells_that_share_space() -> None:
    # Two balls of radius R, their middles d apart, less their lens pi (4R + d)(2R - d)^2 / 12.
    radius, apart = 2.0, 2.5
    found = made(ball(radius, 4), ball(radius, 4, (apart, 0, 0)))
    exact = 8 / 3 * np.pi * radius**3 - np.pi * (4 * radius + apart) * (2 * radius - apart) ** 2 / 12
    short = exact - volume(found.outer)
    assert found.deficit == pytest.approx(short, rel=0.05)
    assert found.deficit < 0.9 * 2 * (4 / 3 * np.pi * radius**3 - volume(ball(radius, 4)))


def test_what_the_solid_library_refuses_is_told_of_the_piece(monkeypatch: pytest.MonkeyPatch) -> None:
    from meshlure.geometry import solids

    monkeypatch.setattr(solids, "_taken", lambda *_: None)
    sound: Soundness = examine(shapes.together(shapes.box((4, 3, 2)), ball(0.5, at=(0, 0, 1))), "eye")
    with pytest.raises(InputError, match=r"eye: the mesh is closed, but no solid"):
        shape(sound, "eye")
