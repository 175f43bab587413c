"""Polygons are cut into triangles that cover them: areas by the shoelace formula, outlines by shapely."""

from __future__ import annotations

import numpy as np
import pytest
from numpy.typing import NDArray
from shapely import box, union_all
from shapely.geometry import Polygon

from meshlure.files.polygons import Cut, Polygons, cut

Floats = NDArray[np.float64]

# A turn of the plane that no axis keeps, so that nothing is drawn in the plane it is cut in.
_TILT = np.linalg.qr(np.array([[1.0, 2.0, 0.5], [-0.3, 1.0, 2.0], [2.0, 0.1, 1.0]]))[0]


def tilted(outline: object) -> Floats:
    flat = np.asarray(outline, dtype=np.float64)
    turned: Floats = np.column_stack([flat, np.zeros(len(flat))]) @ _TILT.T + [3.0, -7.0, 11.0]
    return turned


def alone(corners: Floats) -> Cut:
    return cut(corners, Polygons(np.arange(len(corners)), np.array([len(corners)])))


def areas(corners: Floats, result: Cut) -> Floats:
    """Signed areas of the triangles, seen from the side from which the outline runs anticlockwise."""
    a, b, c = np.moveaxis(corners[result.faces], 1, 0)
    signed: Floats = np.cross(b - a, c - a) @ (_TILT[:, 2] * np.sign(np.linalg.det(_TILT))) / 2
    return signed


def shoelace(outline: object) -> float:
    x, y = np.asarray(outline, dtype=np.float64).T
    return float((x * np.roll(y, -1) - np.roll(x, -1) * y).sum()) / 2


def outline_edges(result: Cut) -> set[tuple[int, int]]:
    """Edges that only one triangle has, as the triangles run along them."""
    edges = {(int(f[k]), int(f[(k + 1) % 3])) for f in result.faces for k in range(3)}
    return {(a, b) for a, b in edges if (b, a) not in edges}


L_SHAPE = [(0, 0), (30, 0), (30, 4), (6, 4), (6, 20), (0, 20)]
COMB = [(0, 0), (4, 0), (4, 2), (3, 2), (3, 1), (2, 1), (2, 2), (1, 2), (1, 1), (0, 1)]
SQUARE_WITH_CORNER_ON_EDGE = [(0, 0), (1, 0), (2, 0), (2, 2), (0, 2)]
FRAME_BY_BRIDGE = [(0, 0), (4, 0), (4, 4), (0, 4), (0, 2), (1, 2), (1, 3), (3, 3), (3, 1), (1, 1), (1, 2), (0, 2)]
CRESCENT = [(np.cos(t), np.sin(t)) for t in np.linspace(0.3, 5.9, 40)] + [
    (0.8 * np.cos(t), 0.8 * np.sin(t)) for t in np.linspace(5.9, 0.3, 40)
]


@pytest.mark.parametrize("outline", [L_SHAPE, COMB, SQUARE_WITH_CORNER_ON_EDGE, FRAME_BY_BRIDGE, CRESCENT])
@pytest.mark.parametrize("first", [0, 1, 3])
def test_a_concave_polygon_keeps_its_area_and_its_outline(outline: list[tuple[float, float]], first: int) -> None:
    outline = outline[first:] + outline[:first]
    corners = tilted(outline)
    result = alone(corners)
    parts = areas(corners, result)
    assert len(result.faces) == len(outline) - 2
    assert (parts > 0).all(), "a triangle is turned over or has no area"
    assert parts.sum() == pytest.approx(shoelace(outline), rel=1e-12)
    # Every edge that was drawn is still there, so the neighbours across it find it.
    drawn = {(k, (k + 1) % len(outline)) for k in range(len(outline))}
    assert outline_edges(result) == drawn
    assert not len(result.bent)
    assert not len(result.crossing)


def test_a_fan_would_have_folded_the_concave_one() -> None:
    """The check above can fail: the fan from the first corner covers more than the polygon."""
    outline = L_SHAPE[1:] + L_SHAPE[:1]
    fan = sum(abs(shoelace([outline[0], outline[k], outline[k + 1]])) for k in range(1, 5))
    assert fan > 1.5 * shoelace(outline)


def test_random_grid_outlines_with_every_grid_point_a_corner() -> None:
    rng = np.random.default_rng(4)
    tried = 0
    while tried < 60:
        cells = {(0, 0)}
        for _ in range(int(rng.integers(2, 14))):
            x, y = sorted(cells)[rng.integers(len(cells))]
            dx, dy = [(1, 0), (-1, 0), (0, 1), (0, -1)][rng.integers(4)]
            cells.add((x + dx, y + dy))
        joined = union_all([box(x, y, x + 1, y + 1) for x, y in cells])
        if not isinstance(joined, Polygon) or joined.interiors:
            continue
        ring = np.array(joined.exterior.segmentize(1.0).coords)[:-1]
        if len(np.unique(ring, axis=0)) != len(ring):
            continue
        tried += 1
        ring = ring if shoelace(ring) > 0 else ring[::-1]
        corners = tilted(ring)
        result = alone(corners)
        parts = areas(corners, result)
        assert len(result.faces) == len(ring) - 2
        assert (parts > 1e-9).all()
        assert parts.sum() == pytest.approx(joined.area, rel=1e-12)


def test_a_corner_written_twice_makes_no_fault() -> None:
    corners = tilted([(0, 0), (2, 0), (2, 0), (2, 2), (0, 2)])
    result = alone(corners)
    assert areas(corners, result).sum() == pytest.approx(4.0, rel=1e-12)
    assert not len(result.crossing)


@pytest.mark.parametrize(
    "outline",
    [
        pytest.param([(0, 0), (2, 2), (2, 0), (0, 2)], id="bow tie, its halves cancel"),
        pytest.param([(0, 0), (3, 2), (3, 0), (0, 1)], id="bow tie, one half larger"),
        pytest.param(
            [(np.cos(4 * np.pi * k / 5), np.sin(4 * np.pi * k / 5)) for k in range(5)], id="five-pointed star"
        ),
    ],
)
def test_an_outline_that_crosses_itself_is_told(outline: list[tuple[float, float]]) -> None:
    assert alone(tilted(outline)).crossing.tolist() == [0]


def test_bent_just_above_the_limit_and_flat_just_below() -> None:
    """A square of side 1 with one corner lifted by h has all four corners h/4 off its mean plane, to first order."""
    for lift, bent in ((4.2e-3 * np.sqrt(2), [0]), (3.8e-3 * np.sqrt(2), [])):
        corners = np.array([(0, 0, 0), (1, 0, 0), (1, 1, lift), (0, 1, 0)], dtype=np.float64)
        result = alone(corners)
        assert result.bent.tolist() == bent
        assert result.bend == pytest.approx(lift / 4 if bent else 0.0, rel=1e-3)


def test_polygons_of_mixed_counts_keep_the_files_order() -> None:
    corners = np.vstack([tilted(L_SHAPE), tilted([(0, 0), (1, 0), (0, 1)]), tilted([(0, 0), (1, 0), (1, 1), (0, 1)])])
    polygons = Polygons(np.arange(13), np.array([6, 3, 4]))
    result = cut(corners, polygons)
    owners = np.searchsorted([6, 9, 13], result.faces, side="right")
    assert owners.tolist() == [[0] * 3] * 4 + [[1] * 3] + [[2] * 3] * 2


def test_corners_on_one_line_give_triangles_without_area() -> None:
    result = alone(tilted([(0, 0), (1, 0), (3, 0), (2, 0)]))
    assert len(result.faces) == 2
    assert not len(result.crossing)
