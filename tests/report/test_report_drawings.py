"""Names, leaders and scale of the drawings, and the water in them."""

from __future__ import annotations

import math
from itertools import combinations, pairwise

import invented_baits as baits
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from shapely.geometry import LineString, Polygon, box

from meshlure.report.layout import RAIL, SLANT, layout, scale_for, scale_words
from meshlure.report.leaders import Named, arrange, spread
from meshlure.report.names import LINE, numbers_text
from meshlure.report.outlines import below, inner_point, thinned, within
from meshlure.report.subject import Rest, subject, water_in
from meshlure.results import DrawnPiece, View

ACROSS = st.floats(0, 180)


@given(st.lists(st.tuples(ACROSS, st.floats(1, 30)), min_size=1, max_size=9))
def test_names_in_a_row_keep_order_and_room(boxes: list[tuple[float, float]]) -> None:
    boxes.sort()
    wanted, widths = [x for x, _ in boxes], [w for _, w in boxes]
    placed = spread(wanted, widths, 0, 180, 2)
    if sum(widths) + 2 * (len(widths) - 1) > 180:
        assert placed is None
        return
    assert placed is not None
    edges = [(x - w / 2, x + w / 2) for x, w in zip(placed, widths, strict=True)]
    assert edges[0][0] >= -1e-9
    assert edges[-1][1] <= 180 + 1e-9
    assert all(after[0] - before[1] >= 2 - 1e-9 for before, after in pairwise(edges))


def test_spreading_moves_least_in_squares() -> None:
    # Two boxes that want one place share the move: closed form, 50 -+ (10 + 2) / 2.
    assert spread([50, 50], [10, 10], 0, 100, 2) == pytest.approx([44, 56])
    # At the end of the row the first stops at its half width: closed form.
    assert spread([1, 1], [10, 10], 0, 100, 2) == pytest.approx([5, 17])


@given(st.lists(st.tuples(ACROSS, st.floats(-10, 10), st.floats(3, 18)), min_size=1, max_size=12))
def test_no_leader_crosses_another_on_its_side(things: list[tuple[float, float, float]]) -> None:
    placed = arrange([Named((str(i),), w, x, y) for i, (x, y, w) in enumerate(things)], 0.0, 0, 180)
    if placed is None:
        return
    for above in (True, False):
        sign = 1 if above else -1
        slants = [
            LineString([(p.text_x, sign * (11 + SLANT)), (p.drop_x, sign * 11)]) for p in placed if p.above == above
        ]
        assert not any(one.intersects(other) for one, other in combinations(slants, 2))


@pytest.mark.parametrize("study", [baits.minnow, baits.stick, baits.hostile])
@pytest.mark.parametrize("view", [0, 1, 2])
def test_no_name_covers_another_or_the_outline(study: object, view: int) -> None:
    bait = study()  # type: ignore[operator]
    paper = layout(bait.views[view], subject(bait.results), 1.0)
    low, high = paper.strip()
    texts = []
    for mark in paper.placed:
        depth, foot = LINE * len(mark.named.lines), high + SLANT if mark.above else low - SLANT
        bottom = foot if mark.above else foot - depth
        texts.append(
            box(mark.text_x - mark.named.width / 2, bottom, mark.text_x + mark.named.width / 2, bottom + depth)
        )
    assert texts
    assert not any(one.intersects(other) for one, other in combinations(texts, 2))
    outline = box(0, low + RAIL, paper.width, high - RAIL)
    frame = box(0, 0, paper.width, paper.height)
    assert all(not text.intersects(outline) and frame.contains(text) for text in texts)


@pytest.mark.parametrize(
    ("length", "words"), [(20.0, "5:1"), (60.0, "2:1"), (92.0, "1:1"), (151.0, "1:1"), (152.0, "1:2"), (400.0, "1:5")]
)
def test_scale_is_the_greatest_of_iso_5455_that_fits_a_page(length: float, words: str) -> None:
    assert scale_words(scale_for(length, 10.0)) == words


def test_a_millimetre_is_a_millimetre_on_paper() -> None:
    bait = baits.minnow()
    paper = layout(bait.views[0], subject(bait.results), 1.0)
    (x0, y0), (x1, y1) = paper.spot(np.array([0.0, 0, 0])), paper.spot(np.array([92.0, 0, 10.0]))
    assert (x1 - x0, y1 - y0) == pytest.approx((92.0, 10.0))


@given(st.floats(-40, 40), st.floats(-5, 5), st.tuples(st.floats(-50, 50), st.floats(-5, 5), st.floats(-5, 5)))
def test_the_waters_edge_holds_the_points_of_the_surface(
    turn: float, level: float, through: tuple[float, float, float]
) -> None:
    side = baits.minnow_views()[0]
    side = View(side.name, side.right, side.up, 7.5, side.pieces)
    n = math.radians(turn)
    up = np.array([-math.sin(n), 0.1, math.cos(n)]) / math.sqrt(1.01)
    edge = water_in(side, Rest(up, level, ""), np.array(through))
    assert edge is not None
    # A point of the surface in the plane of the drawing, by solving for its height.
    x, y = 30.0, through[1]
    z = (level - up[0] * x - up[1] * y) / up[2]
    assert edge[0] @ np.array(side.place([x, y, z])) == pytest.approx(edge[1], abs=1e-9)


def test_the_surface_is_not_drawn_from_above() -> None:
    top = baits.minnow_views()[1]
    assert water_in(top, Rest(np.array([0.0, 0, 1]), 1.0, ""), np.zeros(3)) is None


def test_water_under_a_line_is_the_half_that_lies_below() -> None:
    square = np.array([[0.0, 0], [10, 0], [10, 10], [0, 10]])
    normal = np.array([math.sin(0.3), math.cos(0.3)])
    kept = Polygon(below(square, normal, 6.0))
    # Independent: shapely's intersection with a far half plane.
    along = np.array([normal[1], -normal[0]])
    far = [6 * normal - 99 * along, 6 * normal + 99 * along, -99 * normal + 99 * along, -99 * normal - 99 * along]
    assert kept.area == pytest.approx(Polygon(square).intersection(Polygon(far)).area)


def test_a_line_is_cut_to_its_box() -> None:
    ends = within(np.array([0.0, 5.0]), np.array([1.0, 0.0]), ((1.0, 9.0), (0.0, 10.0)))
    assert ends is not None
    assert np.array(ends) == pytest.approx(np.array([[1.0, 5.0], [9.0, 5.0]]))
    assert within(np.array([0.0, 11.0]), np.array([1.0, 0.0]), ((1.0, 9.0), (0.0, 10.0))) is None


@pytest.mark.parametrize(
    "ring",
    [
        [[0, 0], [10, 0], [10, 10], [9, 10], [9, 1], [0, 1]],
        [[0, 0], [6, 0], [6, 4], [5, 4], [5, 1], [1, 1], [1, 4], [0, 4]],
    ],
)
def test_a_leader_ends_inside_what_it_names(ring: list[list[float]]) -> None:
    from shapely.geometry import Point

    points = np.array(ring, dtype=float)
    assert Polygon(points).contains(Point(inner_point(DrawnPiece("bent", "insert", (points,)))))


def test_thinning_keeps_the_area() -> None:
    turn = np.linspace(0, 2 * math.pi, 20001)[:-1]
    ring = 30 * np.column_stack([np.cos(turn), np.sin(turn)])
    thin = thinned(ring, 0.05)
    assert len(thin) < len(ring) / 2
    assert Polygon(thin).area == pytest.approx(math.pi * 900, rel=1e-5)


def test_balls_are_drawn_at_both_ends_of_their_run() -> None:
    # The bait's centre of gravity moves by m/M of the balls' way: the first moment, invented_baits moves them 12 mm.
    (row,) = subject(baits.minnow_results()).balls
    assert row.at == pytest.approx([66.0, 0.0, 0.6])
    assert np.array(row.elsewhere) == pytest.approx(np.array([[54.0, 0.0, 0.6]]))


def test_runs_of_numbers() -> None:
    assert numbers_text([3, 1, 2, 7, None]) == "tie, 1–3, 7"
