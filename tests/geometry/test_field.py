"""The grid of depths against formulas, and which middles are inside against the sum of solid angles."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from hypothesis import given, settings
from hypothesis import strategies as st

from meshlure.geometry.clearance import nearest
from meshlure.geometry.field import Field, pitch_for
from meshlure.geometry.shells import winding_number
from meshlure.geometry.surface import Floats, Surface


def middles(field: Field) -> Floats:
    return field.places(np.ones(field.values.shape, dtype=np.bool_))


@given(st.integers(0, 1000))
@settings(max_examples=6)
def test_middles_inside_against_solid_angles(seed: int) -> None:
    # van Oosterom and Strackee's solid angles, as `shells.winding_number` sums them: no columns involved.
    body = shapes.lumpy(seed, level=1)
    field = Field.of(body, pitch_for(body, 300))
    angles = [winding_number(body, point) > 0.5 for point in middles(field)]
    np.testing.assert_array_equal(field.inside.ravel(), angles)


def test_columns_through_corners_and_edges() -> None:
    # Vertices on middles, but for the outermost, which put them there: hundreds of columns go through vertices and
    # along edges. A column that were counted wrongly would leave a streak outside or inside.
    ball, pitch = shapes.sphere(1.0, 3), 1 / 8
    snapped = np.round(ball.vertices / pitch) * pitch
    field = Field.of(Surface(np.where(np.abs(snapped) == 1, snapped * 33 / 32, snapped), ball.faces), pitch)
    assert (field.origin / pitch % 1 == 0).all()
    reach = np.linalg.norm(middles(field), axis=1).reshape(field.values.shape)
    assert field.inside[reach < 0.85].all()
    assert not field.inside[reach > 1.15].any()


def test_a_box_on_the_grid_fills_to_its_volume() -> None:
    # Half-open counting: middles on one of two opposite faces count, those on the other do not.
    field = Field.of(shapes.box((2, 3, 5), (0.1, 0.2, 0.3)), 0.25)
    assert np.count_nonzero(field.inside) * 0.25**3 == pytest.approx(30, rel=1e-12)


@pytest.mark.parametrize("stretch", [(1, 1, 1), (3, 1, 1), (1, 3, 1), (1, 1, 3)])
def test_volume_and_depths_of_an_ellipsoid(stretch: tuple[float, float, float]) -> None:
    axes = 0.01 * np.array(stretch)
    body = shapes.ellipsoid(list(axes), 5)
    field = Field.of(body, pitch_for(body, 60_000))
    volume = np.count_nonzero(field.inside) * field.pitch**3
    assert volume == pytest.approx(4 / 3 * np.pi * np.prod(axes), rel=5e-3)
    points = np.random.default_rng(1).uniform(-1, 1, (400, 3)) * axes * 1.05
    inside = ((points / axes) ** 2).sum(axis=1) < 1
    exact = np.where(inside, 1, -1) * nearest(body, points).distance
    assert np.abs(field.at(points) - exact).max() < field.slack
    assert np.abs(field.at(points) - exact).mean() < field.pitch / 2


def test_depths_at_the_middles_of_a_ball() -> None:
    # Closed form: R - r.
    field = Field.of(shapes.sphere(1.0, 5), 0.05)
    off = field.values.ravel() - (1 - np.linalg.norm(middles(field), axis=1))
    assert -0.52 * field.pitch < off.min()
    assert off.max() < 0.6 * field.pitch


def test_a_cavity_is_outside_and_what_overlaps_counts_once() -> None:
    ball = shapes.sphere(1.0, 3)
    hollow = shapes.together(ball, shapes.sphere(0.5, 3).turned())
    hollow_field = Field.of(hollow, 0.1)
    assert hollow_field.at(np.zeros((1, 3)))[0] == pytest.approx(-0.5, abs=hollow_field.slack)
    assert hollow_field.at(np.array([[0.75, 0, 0]]))[0] == pytest.approx(0.25, abs=0.1)
    pair = [ball, ball.moved(shift=np.array([1.0, 0, 0]))]
    for given_as in (pair, shapes.together(*pair)):
        both = Field.of(given_as, 0.1)
        # The lens in common is inside; half-way, the nearest skin is the circle of radius sqrt(3)/2 where the two meet.
        assert both.at(np.array([[0.5, 0, 0]]))[0] == pytest.approx(np.sqrt(3) / 2, abs=0.1)
        volume = np.count_nonzero(both.inside) * 0.1**3
        assert volume == pytest.approx(
            8 / 3 * np.pi - np.pi * 5 / 12, rel=0.02
        )  # less the lens, pi (4R + d)(2R - d)^2/12


def test_beyond_the_grid_depths_are_negative_and_fall() -> None:
    field = Field.of(shapes.sphere(1.0, 3), 0.1)
    depths = field.at(np.array([[1.2, 0, 0], [2, 0, 0], [5, 0, 0], [50, 50, 0]]))
    np.testing.assert_allclose(depths, [-0.2, -1, -4, -(np.sqrt(5000) - 1)], atol=0.12)


def test_a_body_too_thin_for_the_grid_is_outside() -> None:
    sheet = shapes.box((1.0, 1.0, 1e-3), (0, 0, 0.01))
    field = Field.of(shapes.together(sheet, shapes.box((1, 1, 1e-3), (0, 0, 1.0))), 0.1)
    assert not field.inside.any()
    assert (field.values == -0.05).all()


def test_middles_and_pitch() -> None:
    body = shapes.box((0.1, 0.02, 0.03))
    pitch = pitch_for(body, 1000)
    assert pitch == pytest.approx((0.1 * 0.02 * 0.03 / 1000) ** (1 / 3), rel=1e-12)
    field = Field.of(body, pitch)
    at = np.zeros(field.values.shape, dtype=np.bool_)
    at[3, 4, 5] = True
    np.testing.assert_allclose(field.places(at), field.origin[None] + pitch * np.array([[3, 4, 5]]))
    assert field.at(field.places(at))[0] == pytest.approx(field.values[3, 4, 5])


@pytest.mark.parametrize("pitch", [0.0, -1.0, np.nan, 1e-5])
def test_a_pitch_that_suits_no_grid_is_refused(pitch: float) -> None:
    with pytest.raises(ValueError, match="suits no body"):
        Field.of(shapes.box((1, 1, 1)), pitch)
