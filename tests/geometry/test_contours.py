"""Outer boundaries of sections, chords across a flow and stations near the ends, against closed forms."""

from __future__ import annotations

import math

import numpy as np
import pytest
import shapes

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.chords import chords
from meshlure.geometry.contours import outer_contours
from meshlure.geometry.stations import STATIONS, dense_positions, station_positions, stations
from meshlure.geometry.surface import Surface

X, Y, Z = np.eye(3)


def pipe(outer: float, inner: float, length: float, around: int) -> Surface:
    """A pipe along z, open through."""
    turn = 2 * np.pi * np.arange(around) / around
    circle = np.column_stack([np.cos(turn), np.sin(turn)])
    rings = [
        np.column_stack([circle * r, np.full(around, z)])
        for r, z in ((outer, 0), (outer, length), (inner, length), (inner, 0))
    ]
    k = np.arange(around)
    after = (k + 1) % around
    faces = []
    for low in range(4):
        a, b = low * around, (low + 1) % 4 * around
        faces += [np.column_stack([a + k, a + after, b + after]), np.column_stack([a + k, b + after, b + k])]
    return Surface(np.concatenate(rings), np.concatenate(faces))


def polygon(radius: float, around: int) -> tuple[float, float]:
    """Area and girth of a regular polygon in a circle."""
    return around / 2 * radius**2 * math.sin(2 * math.pi / around), 2 * around * radius * math.sin(math.pi / around)


def test_a_hole_is_filled_and_its_rim_left_out() -> None:
    area, girth = outer_contours([BlockIndex.build(pipe(0.02, 0.015, 0.1, 48)).cut(Z, 0.03)])
    expected = polygon(0.02, 48)
    assert area[0] == pytest.approx(expected[0], rel=1e-12)
    assert girth[0] == pytest.approx(expected[1], rel=1e-12)


def test_what_stands_in_a_hole_counts_no_second_time() -> None:
    core = shapes.cylinder(0.005, 0.1, 24).moved(shift=np.array([0.003, 0, 0.05]))
    index = BlockIndex.build(shapes.together(pipe(0.02, 0.015, 0.1, 48), core))
    cut = index.cut(Z, 0.03)
    assert outer_contours([cut])[0][0] == pytest.approx(polygon(0.02, 48)[0], rel=1e-12)
    assert cut.section.area < polygon(0.02, 48)[0]


def test_loops_side_by_side_add_up_and_no_section_is_nothing() -> None:
    two = shapes.together(shapes.box((0.02, 0.01, 0.04)), shapes.box((0.01, 0.03, 0.04), (0.05, 0, 0)))
    index = BlockIndex.build(two)
    area, girth = outer_contours([index.cut(Z, height) for height in (0.0, 0.01, 1.0)])
    np.testing.assert_allclose(area, [5e-4, 5e-4, 0], rtol=1e-12)
    np.testing.assert_allclose(girth, [0.14, 0.14, 0], rtol=1e-12)
    assert outer_contours([index.cut(Z, 1.0)])[0] == [0.0]


@pytest.mark.parametrize("seed", range(3))
def test_solid_sections_of_any_shape_keep_their_area_and_perimeter(seed: int) -> None:
    # The same sums by another way: Green's theorem over all segments at once.
    cut = stations(BlockIndex.build(shapes.lumpy(seed)), shapes.direction(seed), [X, Y], dense=True)
    np.testing.assert_allclose(cut.filled, cut.area, rtol=1e-9)
    np.testing.assert_allclose(cut.girth, cut.perimeter, rtol=1e-9)


def test_chords_of_a_disc_turned_and_moved() -> None:
    turn = shapes.turn(4)
    mesh = shapes.cylinder(0.5, 2.0, 720).moved(turn, np.array([3.0, -1.0, 7.0]))
    axis, towards = turn @ Z, turn @ np.array([0.6, 0.8, 0])
    found = chords(BlockIndex.build(mesh).cut(axis, float(np.array([3.0, -1.0, 7.0]) @ axis)), towards)
    assert found is not None
    assert found.depth == pytest.approx(1, rel=1e-4)
    expected = 2 * np.sqrt(found.x * (1 - found.x))
    np.testing.assert_allclose(found.width, expected, atol=0.003)


def test_chords_run_from_the_side_that_leads_and_span_a_hollow() -> None:
    # A wedge is counted from its edge or from its face; a pipe's chord reaches from outside to outside.
    wedge = Surface(
        np.array([[0.0, 0, 0], [1, -0.5, 0], [1, 0.5, 0], [0.0, 0, 1], [1, -0.5, 1], [1, 0.5, 1]]),
        np.array([[0, 2, 1], [3, 4, 5], [0, 1, 4], [0, 4, 3], [1, 2, 5], [1, 5, 4], [2, 0, 3], [2, 3, 5]]),
    )
    cut = BlockIndex.build(wedge).cut(Z, 0.4)
    edge, face = chords(cut, -X), chords(cut, X)
    assert edge is not None
    assert face is not None
    np.testing.assert_allclose(edge.width, edge.x, atol=1e-12)
    np.testing.assert_allclose(face.width, 1 - face.x, atol=1e-12)
    found = chords(BlockIndex.build(pipe(0.5, 0.4, 1.0, 240)).cut(Z, 0.5), X)
    assert found is not None
    assert found.width.max() == pytest.approx(1, rel=1e-3)


def test_stations_stand_closer_near_the_ends_and_the_even_ones_are_among_them() -> None:
    index = BlockIndex.build(shapes.ellipsoid((0.05, 0.01, 0.008), 3))
    dense, even = stations(index, X, [Y, Z], dense=True), stations(index, X, [Y, Z])
    assert len(even.position) == STATIONS < len(dense.position)
    kept = dense.even()
    np.testing.assert_array_equal(kept.position, even.position)
    np.testing.assert_array_equal(kept.area, even.area)
    np.testing.assert_array_equal(kept.centre, even.centre)
    position = dense_positions(0.0, 1.0)
    assert np.all(np.diff(position) > 0)
    # A tenth of the diameter of a body eight diameters long.
    assert np.count_nonzero(position < 0.0125) >= 8
    assert set(station_positions(0.0, 1.0)) <= set(position)
