"""What of a solid lies within a distance of another, against caps, lenses and slabs by formula."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.vicinity import vicinity

MM = 1e-3


def lens(one: float, other: float, apart: float) -> float:
    """Volume that two balls share (Weisstein, MathWorld, Sphere-Sphere Intersection, eq. 16; from memory)."""
    root = apart**2 + 2 * apart * (one + other) - 3 * (one - other) ** 2
    return float(np.pi * (one + other - apart) ** 2 * root / (12 * apart))


@pytest.mark.parametrize("apart", [6.0, 8.0, 10.0])
def test_a_ball_near_a_ball(apart: float) -> None:
    # Within 1.5 mm of a ball of 3 mm is a ball of 4.5 mm; what it shares with one of 8 mm is a lens.
    body, other = shapes.sphere(8 * MM, 4), shapes.sphere(3 * MM, 4).moved(shift=np.array([apart * MM, 0, 0]))
    found = vicinity([body], other, 1.5 * MM)
    assert found.volume.amount == pytest.approx(lens(8, 4.5, apart) * MM**3, rel=0.01)
    assert found.volume.centre[1:] == pytest.approx([0, 0], abs=0.02 * MM)


def test_a_box_within_reach_of_a_box_has_the_moments_of_a_slab() -> None:
    body = shapes.box((20 * MM, 10 * MM, 6 * MM))
    beside = shapes.box((8 * MM, 30 * MM, 30 * MM), (12 * MM, 0, 0))
    found = vicinity([body], beside, 1.2 * MM)
    # Of the body, from x = 8 - 1.2 to 10 mm.
    size = np.array([3.2, 10, 6]) * MM
    assert found.volume.amount == pytest.approx(size.prod(), rel=0.005)
    np.testing.assert_allclose(found.volume.centre, [8.4 * MM, 0, 0], atol=0.02 * MM)
    np.testing.assert_allclose(np.diag(found.volume.second), size.prod() * size**2 / 12, rtol=0.02)
    assert found.face == pytest.approx(60 * MM**2, rel=0.03)
    # Both sides, top, bottom and the end.
    assert found.covered == pytest.approx((2 * 3.2 * (10 + 6) + 60) * MM**2, rel=0.05)


def test_skins_that_lie_on_each_other_share_nothing() -> None:
    # A cavity's wall as thick as the distance ends where the solid begins.
    body, hollow = shapes.sphere(8 * MM, 4), shapes.sphere(2.5 * MM, 4)
    core = shapes.together(body, shapes.sphere(4 * MM, 4).turned())
    assert vicinity([core], hollow, 1.5 * MM).volume.amount < 0.01 * 4 / 3 * np.pi * (4**3 - 2.5**3) * MM**3
    apart = vicinity([body], hollow.moved(shift=np.array([20 * MM, 0, 0])), 1.5 * MM)
    assert (apart.volume.amount, apart.face, apart.covered) == (0.0, 0.0, 0.0)


def test_thin_walls_are_found_as_well_as_thick_ones() -> None:
    # The grid's steps are shares of the distance: smaller distances are found as well as large ones.
    body, other = shapes.sphere(8 * MM, 5), shapes.sphere(3 * MM, 5)
    for reach in (0.4, 0.8, 1.6):
        found = vicinity([body], other, reach * MM).volume.amount
        assert found == pytest.approx(4 / 3 * np.pi * (3 + reach) ** 3 * MM**3, rel=0.006)


def test_what_is_thinner_than_the_grid_is_found_along_all_its_length() -> None:
    # Within a distance of a needle, which is all but a line: a round bar with half a ball at either end.
    body, reach = shapes.box((60 * MM, 10 * MM, 10 * MM)), 1.2 * MM
    needle = shapes.box((40 * MM, 0.02 * MM, 0.02 * MM), (0, 0.13 * MM, 0.07 * MM))
    expected = np.pi * reach**2 * 40 * MM + 4 / 3 * np.pi * reach**3 + 0.08 * MM * 40 * MM * reach
    assert vicinity([body], needle, reach).volume.amount == pytest.approx(expected, rel=0.01)
