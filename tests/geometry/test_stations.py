"""Stations against the sections that geometry gives: cone, ellipsoid, box, torus."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from hypothesis import given
from hypothesis import strategies as st
from scipy.special import ellipe

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.stations import Stations, station_positions, stations
from meshlure.geometry.surface import Floats, Surface

X, Y, Z = np.eye(3)


def along(surface: Surface, axis: Floats, lateral: tuple[Floats, Floats], count: int = 31) -> Stations:
    return stations(BlockIndex.build(surface), axis, lateral, count)


def test_ellipsoid() -> None:
    # Section at x: semi-axes b k, c k with k^2 = 1 - (x/a)^2; girth by the complete elliptic integral.
    a, b, c = 0.05, 0.008, 0.011
    shift = np.array([0.2, 0.3, 0.4])
    found = along(shapes.ellipsoid((a, b, c), 5).moved(shift=shift), X, (Y, Z))
    k = np.sqrt(1 - ((found.position - shift[0]) / a) ** 2)
    assert (found.low, found.high) == pytest.approx((shift[0] - a, shift[0] + a), rel=1e-14)
    assert found.length == pytest.approx(2 * a, rel=1e-12)
    middle = slice(2, -2)
    for values, exact in (
        (found.area, np.pi * b * c * k**2),
        (found.perimeter, 4 * c * ellipe(1 - (b / c) ** 2) * k),
        (found.width, 2 * b * k),
        (found.depth, 2 * c * k),
        (found.spread[:, 0], 2 * b * k),
        (found.spread[:, 1], 2 * c * k),
    ):
        np.testing.assert_allclose(values[middle], exact[middle], rtol=6e-3)
    np.testing.assert_allclose(found.centre[:, 1:], np.tile(shift[1:], (31, 1)), rtol=0, atol=1e-5)
    # Volume by the trapezoidal rule over the area curve: 4/3 pi a b c.
    assert np.trapezoid(found.area, found.position) == pytest.approx(4 / 3 * np.pi * a * b * c, rel=5e-3)


def test_cone_is_followed_exactly_between_its_facets() -> None:
    # A cone on an n-gon: area n/2 sin(2 pi/n) r^2, r = z tan: quadratic in z, girth linear.
    around = 48
    found = along(shapes.cone(0.02, 0.05, around), Z, (X, Y))
    r = found.position * 0.02 / 0.05
    np.testing.assert_allclose(found.area, around / 2 * np.sin(2 * np.pi / around) * r**2, rtol=1e-10)
    np.testing.assert_allclose(found.perimeter, 2 * around * np.sin(np.pi / around) * r, rtol=1e-10)
    np.testing.assert_allclose(found.width, 2 * r, rtol=1e-10)


def test_flat_ends_show_their_area() -> None:
    found = along(shapes.box((0.1, 0.02, 0.03), level=2), X, (Y, Z))
    np.testing.assert_allclose(found.area, 0.02 * 0.03, rtol=1e-12)
    np.testing.assert_allclose(found.perimeter, 2 * (0.02 + 0.03), rtol=1e-12)
    np.testing.assert_allclose(found.width, 0.02, rtol=1e-12)
    np.testing.assert_allclose(found.depth, 0.03, rtol=1e-12)
    # An oblong with side s has the second moment A s^2/12: the ellipse of equal moment has the axis 4 s/sqrt(12).
    np.testing.assert_allclose(found.spread, np.tile([0.02, 0.03], (31, 1)) * 4 / np.sqrt(12), rtol=1e-12)


def test_the_coat_does_not_count() -> None:
    surface = shapes.ellipsoid((0.05, 0.008, 0.011), 3)
    coated = BlockIndex.build(surface, np.full(len(surface.faces), 0.3e-3))
    bare = along(surface, X, (Y, Z))
    found = stations(coated, X, (Y, Z), 31)
    np.testing.assert_allclose(found.area, bare.area, rtol=1e-12)
    np.testing.assert_allclose(found.spread, bare.spread, rtol=1e-9)


def test_two_tubes_of_a_torus_count_with_both_their_girths() -> None:
    ring, tube = 0.03, 0.01
    found = along(shapes.torus(ring, tube, 64), X, (Y, Z), 41)
    middle = len(found.position) // 2
    assert found.position[middle] == pytest.approx(0, abs=1e-15)
    assert found.area[middle] == pytest.approx(2 * np.pi * tube**2, rel=4e-3)
    assert found.perimeter[middle] == pytest.approx(4 * np.pi * tube, rel=2e-3)
    assert found.width[middle] == pytest.approx(2 * (ring + tube), rel=2e-3)
    assert found.depth[middle] == pytest.approx(2 * tube, rel=2e-3)


@given(st.integers(0, 1000))
def test_stations_turn_with_the_body(seed: int) -> None:
    surface, turn = shapes.lumpy(seed, level=2), shapes.turn(seed)
    shift = np.random.default_rng(seed).normal(size=3)
    here = along(surface, X, (Y, Z), 9)
    there = along(surface.moved(turn, shift), turn @ X, (turn @ Y, turn @ Z), 9)
    np.testing.assert_allclose(there.position - shift @ turn @ X, here.position, rtol=0, atol=1e-12)
    for name in ("area", "perimeter", "width", "depth"):
        np.testing.assert_allclose(getattr(there, name), getattr(here, name), rtol=1e-6)


def test_positions_are_even_and_just_inside() -> None:
    positions = station_positions(-0.02, 0.08, 11)
    assert len(positions) == 11
    assert -0.02 < positions[0] < -0.0199
    assert 0.0799 < positions[-1] < 0.08
    np.testing.assert_allclose(np.diff(positions), 0.01, rtol=1e-3)
