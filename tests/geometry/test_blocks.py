"""Cuts of the block index against closed forms, a general mesh library, and the whole that two parts must make."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from hypothesis import given
from hypothesis import strategies as st

from meshlure.geometry.blocks import BlockIndex, curve_order
from meshlure.geometry.moments import skin_moments, solid_moments
from meshlure.geometry.surface import Floats, Surface

UP = np.array([0.0, 0.0, 1.0])
SEEDS = st.integers(0, 10_000)


def below(surface: Surface, normal: Floats, height: float) -> tuple[float, Floats]:
    cut = BlockIndex.build(surface).cut(normal, height)
    return cut.volume, cut.moment


@pytest.mark.parametrize("share", [0.2, 0.55, 0.93])
def test_cap_of_a_sphere_converges_with_the_square_of_the_facets_size(share: float) -> None:
    # Cap of height h: V = pi h^2 (3R - h)/3, centroid 3 (2R - h)^2 / (4 (3R - h)) from the middle; section pi a^2,
    # a^2 = h (2R - h), second moments pi a^4/4 each.
    radius = 0.02
    h = 2 * radius * share
    volume, a2 = np.pi * h**2 * (3 * radius - h) / 3, h * (2 * radius - h)
    depth = -3 * (2 * radius - h) ** 2 / (4 * (3 * radius - h))
    normal, shift = shapes.direction(1), np.array([0.2, -0.1, 0.4])
    errors = []
    for level in (3, 4, 5):
        index = BlockIndex.build(shapes.sphere(radius, level).moved(shapes.turn(2), shift))
        cut = index.cut(normal, float(shift @ normal) + h - radius)
        section = cut.section
        centre = cut.moment / cut.volume - shift
        second = np.pi * a2**2 / 4 * (np.eye(3) - np.outer(normal, normal))
        errors.append(
            [
                cut.volume / volume - 1,
                (centre @ normal - depth) / radius,
                section.area / (np.pi * a2) - 1,
                np.abs(section.second - second).max() / (np.pi * a2**2 / 4),
                section.perimeter / (2 * np.pi * np.sqrt(a2)) - 1,
            ]
        )
    # Section errors hang on where the plane meets the facets, so that their order wavers.
    orders = np.log2(np.abs(np.array(errors)[0] / np.array(errors)[2])) / 2
    assert orders == pytest.approx(np.full(5, 2.0), abs=0.25)
    assert np.abs(errors[2]).max() < 4e-3


@given(SEEDS, SEEDS, st.floats(0.02, 0.98))
def test_the_two_sides_of_a_cut_make_the_whole(body: int, way: int, share: float) -> None:
    index = BlockIndex.build(shapes.lumpy(body, level=2))
    normal = shapes.direction(way)
    low, high = index.reach(normal)
    height = low + share * (high - low)
    under, over = index.cut(normal, height), index.cut(-normal, -height)
    assert under.volume + over.volume == pytest.approx(index.volume, rel=1e-12)
    np.testing.assert_allclose(under.moment + over.moment, index.moment, rtol=0, atol=1e-12 * index.volume * 0.1)
    assert under.section.area == pytest.approx(over.section.area, rel=1e-9)
    np.testing.assert_allclose(under.section.centre, over.section.centre, rtol=0, atol=1e-9)


@given(SEEDS, SEEDS, st.floats(0.1, 0.9))
def test_against_the_general_mesh_librarys_capped_slice(body: int, way: int, share: float) -> None:
    # trimesh.Trimesh.slice_plane with cap=True: an independent way to cut, by triangulating the cap.
    surface = shapes.lumpy(body, level=2)
    index, normal = BlockIndex.build(surface), shapes.direction(way)
    low, high = index.reach(normal)
    height = low + share * (high - low)
    part = shapes.as_trimesh(surface).slice_plane(normal * height, -normal, cap=True)
    cut = index.cut(normal, height)
    assert cut.volume == pytest.approx(float(part.volume), rel=1e-9)
    np.testing.assert_allclose(cut.moment / cut.volume, part.center_mass, rtol=0, atol=1e-10)
    assert cut.section.area == pytest.approx(float(part.area - _wet_skin(surface, normal, height)), rel=1e-7)


def _wet_skin(surface: Surface, normal: Floats, height: float) -> float:
    return float(shapes.as_trimesh(surface).slice_plane(normal * height, -normal, cap=False).area)


@given(SEEDS, SEEDS, st.floats(0.1, 0.9))
def test_a_cut_turns_and_moves_with_the_body(body: int, motion: int, share: float) -> None:
    surface, turn = shapes.lumpy(body, level=2), shapes.turn(motion)
    shift = np.random.default_rng(motion).normal(size=3)
    normal = shapes.direction(body + motion)
    index, moved = BlockIndex.build(surface), BlockIndex.build(surface.moved(turn, shift))
    low, high = index.reach(normal)
    height = low + share * (high - low)
    here = index.cut(normal, height)
    there = moved.cut(turn @ normal, height + float(turn @ normal @ shift))
    assert there.volume == pytest.approx(here.volume, rel=1e-11)
    centre = turn @ here.moment / here.volume + shift
    np.testing.assert_allclose(there.moment / there.volume, centre, rtol=0, atol=1e-12)
    np.testing.assert_allclose(there.section.centre, turn @ here.section.centre + shift, rtol=0, atol=1e-11)
    np.testing.assert_allclose(
        there.section.second, turn @ here.section.second @ turn.T, rtol=0, atol=1e-9 * np.trace(here.section.second)
    )


@given(SEEDS, SEEDS, st.floats(0.1, 0.9))
def test_the_order_of_faces_and_vertices_changes_nothing(body: int, seed: int, share: float) -> None:
    surface, normal = shapes.lumpy(body, level=2), shapes.direction(seed)
    one, other = BlockIndex.build(surface), BlockIndex.build(shapes.shuffled(surface, seed))
    low, high = one.reach(normal)
    height = low + share * (high - low)
    here, there = one.cut(normal, height), other.cut(normal, height)
    assert other.volume == pytest.approx(one.volume, rel=1e-13)
    assert there.volume == pytest.approx(here.volume, rel=1e-12)
    np.testing.assert_allclose(there.moment, here.moment, rtol=0, atol=1e-12 * one.volume * 0.1)
    assert there.section.area == pytest.approx(here.section.area, rel=1e-10)


def test_a_plane_through_rings_of_vertices_loses_no_piece_of_the_section() -> None:
    # Prism on a regular 48-gon: area n/2 r^2 sin(2 pi/n), volume area * height. Vertices lie exactly in the plane,
    # where rounding decides on which side they fall.
    random, around, radius = np.random.default_rng(1), 48, 0.01
    area = around / 2 * np.sin(2 * np.pi / around) * radius**2
    for _ in range(60):
        z = np.sort(random.uniform(-0.05, 0.05, random.integers(4, 40)))
        shift = random.normal(size=3) * random.choice([0, 0.01, 1])
        surface = shapes.revolved(np.full(len(z), radius), z, around).moved(shift=shift)
        index = BlockIndex.build(surface)
        low, _ = index.reach(UP)
        for height in np.unique(surface.vertices[:, 2])[1:-1]:
            cut = index.cut(UP, height)
            assert cut.section.area == pytest.approx(area, rel=1e-11)
            assert cut.volume == pytest.approx(area * (height - low), rel=1e-11)


def test_faces_lying_in_the_plane() -> None:
    # A box cut in its own top and bottom: nothing or all below; in either case no volume is made up.
    index = BlockIndex.build(shapes.box((2, 3, 4), level=2))
    top, bottom = index.cut(UP, 2.0), index.cut(UP, -2.0)
    assert top.volume == pytest.approx(24, rel=1e-14)
    assert top.section.area == pytest.approx(6, rel=1e-14)
    assert bottom.volume == 0
    assert bottom.section.area == 0


def test_a_plane_through_one_vertex_only() -> None:
    apex = BlockIndex.build(shapes.cone(1.0, 2.0, 12))
    cut = apex.cut(UP, 0.0)
    assert cut.volume == 0
    assert cut.section.area == 0
    assert apex.cut(-UP, 0.0).volume == pytest.approx(apex.volume, rel=1e-14)


@pytest.mark.parametrize("height", [-5.0, 5.0])
def test_a_plane_that_misses_the_body(height: float) -> None:
    index = BlockIndex.build(shapes.lumpy(4))
    cut = index.cut(UP, height)
    assert cut.volume == pytest.approx(index.volume if height > 0 else 0.0, rel=1e-12)
    np.testing.assert_allclose(cut.moment, index.moment if height > 0 else np.zeros(3), rtol=1e-9, atol=1e-22)
    assert cut.section.area == cut.section.perimeter == 0
    assert not cut.section.second.any()
    assert cut.extents(np.array([1.0, 0, 0]), np.array([0, 1.0, 0])) == (0, 0)


def test_a_flooded_hollow_counts_only_its_wall() -> None:
    # A box with a box-shaped hollow, whose skin is turned inward; cut through both: (outer - inner) areas and volumes.
    hollow = shapes.together(shapes.box((4, 4, 4)), shapes.box((2, 2, 2)).turned())
    cut = BlockIndex.build(hollow).cut(UP, 0.5)
    assert cut.volume == pytest.approx(16 * 2.5 - 4 * 1.5, rel=1e-14)
    assert cut.section.area == pytest.approx(16 - 4, rel=1e-14)
    assert cut.section.perimeter == pytest.approx(16 + 8, rel=1e-14)
    # a^4/12 of either square.
    np.testing.assert_allclose(np.diag(cut.section.second), [(4**4 - 2**4) / 12] * 2 + [0], rtol=1e-13, atol=1e-13)


def test_shells_apart_add_up() -> None:
    pair = shapes.together(shapes.box((1, 1, 1), (-2, 0, 0)), shapes.box((1, 1, 3), (2, 0, 0)))
    cut = BlockIndex.build(pair).cut(UP, 0.25)
    assert cut.volume == pytest.approx(0.75 + 1.75, rel=1e-14)
    np.testing.assert_allclose(cut.moment, [0.75 * -2 + 1.75 * 2, 0, 0.75 * -0.125 + 1.75 * -0.625], atol=1e-15)
    section = cut.section
    assert section.area == pytest.approx(2, rel=1e-14)
    # Two unit squares 4 apart: 2/12 + 2 * 2^2 about the common middle.
    np.testing.assert_allclose(np.diag(section.second), [2 / 12 + 8, 2 / 12, 0], rtol=1e-13, atol=1e-15)


def test_a_body_a_kilometre_off() -> None:
    # The coordinates themselves carry 1.1e-13 m there.
    surface, shift = shapes.lumpy(5), np.array([1000.0, 1000.0, -1000.0])
    normal = shapes.direction(6)
    near, far = BlockIndex.build(surface), BlockIndex.build(surface.moved(shift=shift))
    height = float(near.origin @ normal)
    here, there = near.cut(normal, height), far.cut(normal, height + float(shift @ normal))
    assert there.volume == pytest.approx(here.volume, rel=1e-10)
    np.testing.assert_allclose(there.moment / there.volume - shift, here.moment / here.volume, rtol=0, atol=2e-12)
    second = here.section.second
    np.testing.assert_allclose(there.section.second, second, rtol=0, atol=1e-9 * np.trace(second))


@given(SEEDS, SEEDS)
def test_reach_is_that_of_the_vertices(body: int, way: int) -> None:
    surface, normal = shapes.lumpy(body, level=3), shapes.direction(way)
    heights = surface.vertices @ normal
    reach = BlockIndex.build(surface).reach(normal)
    assert reach == pytest.approx((heights.min(), heights.max()), rel=1e-14, abs=1e-17)


def test_totals_are_the_solids_moments() -> None:
    # moments.solid_moments and skin_moments stand against closed forms in their own tests.
    surface = shapes.lumpy(8)
    thickness = np.random.default_rng(0).uniform(0, 0.3e-3, len(surface.faces))
    index = BlockIndex.build(surface, thickness)
    solid, coat = solid_moments(surface), skin_moments(surface, thickness)
    assert index.volume == pytest.approx(solid.amount, rel=1e-12)
    np.testing.assert_allclose(index.moment, solid.first, rtol=1e-10)
    assert index.coat_volume == pytest.approx(coat.amount, rel=1e-12)
    np.testing.assert_allclose(index.coat_moment, coat.first, rtol=1e-10)


def test_coat_of_a_zone_of_a_sphere() -> None:
    # Archimedes: the zone of height h has the area 2 pi R h, evenly spread along its height; its coat's section with
    # the plane is a ring 2 pi a wide t / sin of the angle between skin and plane, which is a / R: 2 pi R t.
    radius, thickness = 0.02, 0.15e-3
    h = 0.027
    errors = []
    for level in (3, 4, 5):
        surface = shapes.sphere(radius, level)
        cut = BlockIndex.build(surface, np.full(len(surface.faces), thickness)).cut(UP, h - radius)
        ring = cut.section.area - cut.bare_section.area
        errors.append(
            [
                cut.coat_volume / (2 * np.pi * radius * h * thickness) - 1,
                (cut.coat_moment[2] / cut.coat_volume - (h / 2 - radius)) / radius,
                ring / (2 * np.pi * radius * thickness) - 1,
            ]
        )
    orders = np.log2(np.abs(np.array(errors)[0] / np.array(errors)[2])) / 2
    assert orders[:2] == pytest.approx([2, 2], abs=0.1)
    # The ring's width hangs on the slope of the few facets that the plane meets.
    assert orders[2] > 1
    assert np.abs(errors[2]).max() < 2e-3


def test_the_section_with_its_coat_is_the_derivative_of_what_lies_below() -> None:
    # d(volume + coat)/dh = area of the section, ribbon included: central difference on a body without symmetry.
    surface = shapes.lumpy(11, level=3)
    index = BlockIndex.build(surface, np.full(len(surface.faces), 0.2e-3))
    normal = shapes.direction(12)
    height, step = float(index.origin @ normal), 1e-7
    up, down = index.cut(normal, height + step), index.cut(normal, height - step)
    slope = (up.volume + up.coat_volume - down.volume - down.coat_volume) / (2 * step)
    assert index.cut(normal, height).section.area == pytest.approx(slope, rel=1e-5)
    first = (up.moment + up.coat_moment - down.moment - down.coat_moment) / (2 * step)
    section = index.cut(normal, height).section
    np.testing.assert_allclose(section.centre, first / slope, rtol=0, atol=1e-6)
    assert section.area > index.cut(normal, height).bare_section.area * 1.01


def test_a_coat_on_some_faces_only_leaves_the_solid_alone() -> None:
    surface = shapes.lumpy(13)
    thickness = np.where(surface.corners[:, 0, 0] > surface.vertices[:, 0].mean(), 1e-3, 0.0)
    plain, coated = BlockIndex.build(surface).cut(UP, 0.0), BlockIndex.build(surface, thickness).cut(UP, 0.0)
    assert coated.volume == plain.volume
    np.testing.assert_array_equal(coated.moment, plain.moment)
    assert plain.coat_volume == 0
    assert coated.coat_volume > 0
    assert coated.bare_section.area == pytest.approx(plain.section.area, rel=1e-14)


def test_the_curve_keeps_every_point_once_even_where_all_lie_in_a_plane() -> None:
    points = np.random.default_rng(0).normal(size=(500, 3)) * (1, 1, 0)
    assert sorted(curve_order(points).tolist()) == list(range(500))
    assert curve_order(np.zeros((3, 3))).tolist() == [0, 1, 2]
    assert len(curve_order(np.empty((0, 3)))) == 0
