"""Plane sections against closed forms and against shapely's polygons."""

from __future__ import annotations

import numpy as np
import pytest
import shapely
import shapely.affinity
import shapes
import trimesh
from hypothesis import given
from hypothesis import strategies as st

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.waterplane import Cut

UP = np.array([0.0, 0.0, 1.0])


def cut(surface: Surface, height: float, normal: Floats = UP) -> Cut:
    return BlockIndex.build(surface).cut(normal, height)


def test_oblong() -> None:
    # a b^3/12 and a^3 b/12, whichever way the box is turned about the vertical: products by rotation.
    a, b, angle = 0.1, 0.02, 0.6
    turn = np.array([[np.cos(angle), -np.sin(angle), 0], [np.sin(angle), np.cos(angle), 0], [0, 0, 1]])
    section = cut(shapes.box((a, b, 0.03), level=2).moved(turn, np.array([0.4, 0.3, 0.2])), 0.2031).section
    exact = turn @ np.diag([a**3 * b / 12, a * b**3 / 12, 0]) @ turn.T
    assert section.area == pytest.approx(a * b, rel=1e-12)
    assert section.centre == pytest.approx([0.4, 0.3, 0.2031], abs=1e-14)
    np.testing.assert_allclose(section.second, exact, rtol=0, atol=1e-12 * exact.max())
    assert section.perimeter == pytest.approx(2 * (a + b), rel=1e-12)


def test_box_cut_aslant() -> None:
    # A plane at angle t to the horizontal through a box's middle cuts an oblong of b by a/cos t.
    a, b, t = 0.04, 0.02, 0.5
    normal = np.array([np.sin(t), 0, np.cos(t)])
    section = cut(shapes.box((a, b, 0.2), level=1), 0.0, normal).section
    along = np.array([np.cos(t), 0, -np.sin(t)])
    assert section.area == pytest.approx(a * b / np.cos(t), rel=1e-12)
    assert along @ section.second @ along == pytest.approx(b * (a / np.cos(t)) ** 3 / 12, rel=1e-12)
    assert section.second[1, 1] == pytest.approx(a / np.cos(t) * b**3 / 12, rel=1e-12)
    assert np.abs(section.second @ normal).max() < 1e-12 * np.trace(section.second)


def test_ellipse_converges_with_the_square_of_the_facets_size() -> None:
    # Section z = h of an ellipsoid: semi-axes a k, b k with k^2 = 1 - (h/c)^2; area pi a b k^2, moments pi a b^3 k^4/4.
    a, b, c, h = 0.05, 0.008, 0.011, 0.0043
    k2 = 1 - (h / c) ** 2
    exact = np.array([np.pi * a * b * k2, np.pi * a**3 * b * k2**2 / 4, np.pi * a * b**3 * k2**2 / 4])
    errors = []
    for level in (3, 4, 5):
        section = cut(shapes.ellipsoid((a, b, c), level), h).section
        errors.append(np.array([section.area, section.second[0, 0], section.second[1, 1]]) / exact - 1)
    assert np.log2(np.abs(errors[0] / errors[2])) / 2 == pytest.approx(np.full(3, 2.0), abs=0.25)
    assert np.abs(errors[2]).max() < 2e-3


def test_ring_cut_through_a_torus() -> None:
    # Across the axis at height h: annulus between R -+ sqrt(r^2 - h^2); area pi (o^2 - i^2), moments pi (o^4 - i^4)/4.
    ring, tube, h = 0.03, 0.01, 0.004
    half = np.sqrt(tube**2 - h**2)
    outer, inner = ring + half, ring - half
    section = cut(shapes.torus(ring, tube, 96), h).section
    assert section.area == pytest.approx(np.pi * (outer**2 - inner**2), rel=2e-3)
    assert section.second[0, 0] == pytest.approx(np.pi * (outer**4 - inner**4) / 4, rel=3e-3)
    assert section.perimeter == pytest.approx(2 * np.pi * (outer + inner), rel=1e-3)


def test_two_discs_cut_along_the_axis_of_a_torus() -> None:
    # A plane holding the axis cuts two discs of radius r, 2R apart: moment across 2 (pi r^4/4 + pi r^2 R^2).
    ring, tube = 0.03, 0.01
    section = cut(shapes.torus(ring, tube, 96), 1e-5, np.array([0.0, 1.0, 0.0])).section
    assert section.area == pytest.approx(2 * np.pi * tube**2, rel=2e-3)
    assert section.second[0, 0] == pytest.approx(2 * (np.pi * tube**4 / 4 + np.pi * tube**2 * ring**2), rel=3e-3)
    assert section.second[2, 2] == pytest.approx(2 * np.pi * tube**4 / 4, rel=3e-3)


OUTLINES = {
    "L": [(0, 0), (4, 0), (4, 1), (1, 1), (1, 3), (0, 3)],
    "arrow": [(0, 0), (3, 1), (0, 2), (1, 1)],
    "comb": [(0, 0), (5, 0), (5, 3), (4, 3), (4, 1), (3, 1), (3, 3), (2, 3), (2, 1), (1, 1), (1, 3), (0, 3)],
}


@pytest.mark.parametrize("name", OUTLINES)
def test_section_of_a_concave_prism_is_its_outline(name: str) -> None:
    # Area, centroid and perimeter by shapely, an independent library; second moments by summing shapely's triangles:
    # a triangle's integral of x x^T about the origin is area/12 (sum of v v^T + s s^T), s the sum of its corners.
    outline = shapely.Polygon(OUTLINES[name])
    mesh = trimesh.creation.extrude_polygon(outline, 2.0)
    section = cut(Surface(np.asarray(mesh.vertices), np.asarray(mesh.faces)), 0.7).section
    assert section.area == pytest.approx(outline.area, rel=1e-12)
    assert section.centre == pytest.approx([outline.centroid.x, outline.centroid.y, 0.7], rel=1e-12)
    assert section.perimeter == pytest.approx(outline.length, rel=1e-12)
    second = np.zeros((2, 2))
    for part in shapely.constrained_delaunay_triangles(outline).geoms:
        v = np.array(part.exterior.coords)[:3] - section.centre[:2]
        second += part.area / 12 * (v.T @ v + np.outer(v.sum(axis=0), v.sum(axis=0)))
    np.testing.assert_allclose(section.second[:2, :2], second, rtol=0, atol=1e-12 * second.max())


@given(st.integers(0, 1000), st.floats(0.15, 0.85))
def test_section_of_a_knobbly_body_by_shapely(seed: int, share: float) -> None:
    # The segments themselves, polygonised by shapely: area and centroid, holes and islands included.
    index = BlockIndex.build(shapes.lumpy(seed, level=2))
    low, high = index.reach(UP)
    found = index.cut(UP, low + share * (high - low))
    region = shapely.Polygon()
    for part in shapely.polygonize([shapely.LineString(s) for s in _joined(found)]).geoms:
        region = region.symmetric_difference(part)
    assert found.section.area == pytest.approx(region.area, rel=1e-9)
    assert found.section.centre[:2] == pytest.approx([region.centroid.x, region.centroid.y], rel=1e-7)


def _joined(found: Cut) -> Floats:
    """Segments with ends that agree to 1e-12 m made one, as shapely's noding asks for equal points."""
    return np.asarray(np.round(np.stack([found.start[:, :2], found.end[:, :2]], axis=1), 12))


def test_segments_run_with_the_solid_to_their_left() -> None:
    # An anticlockwise round has a positive area by the shoelace rule; a hole runs clockwise.
    hollow = shapes.together(shapes.box((4, 4, 4)), shapes.box((2, 2, 2)).turned())
    found = cut(hollow, 0.5)
    size = np.abs(found.start[:, :2]).max(axis=1)
    p, q = found.start, found.end
    turn = (p[:, 0] * q[:, 1] - p[:, 1] * q[:, 0]) / 2
    assert turn[size > 1.5].sum() == pytest.approx(16, rel=1e-12)
    assert turn[size < 1.5].sum() == pytest.approx(-4, rel=1e-12)


def test_extents() -> None:
    found = cut(shapes.ellipsoid((3, 2, 1), 5), 0.0)
    east, north = np.array([1.0, 0, 0]), np.array([0, 1.0, 0])
    assert found.extents(east, north) == pytest.approx((6, 4), rel=1e-3)
    assert found.extents((east + north) / np.sqrt(2)) == pytest.approx((2 * np.sqrt((9 + 4) / 2),), rel=2e-3)
