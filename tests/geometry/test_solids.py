"""Joining, cutting and filling against volumes from geometry: boxes, a lens of two balls, Steiner's formula."""

from __future__ import annotations

import numpy as np
import pytest
import shapely
import shapes
from hypothesis import given
from hypothesis import strategies as st

from meshlure.geometry.moments import solid_moments
from meshlure.geometry.solids import Filled, Solid, SolidError, filled, new_tag
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired


def solid(size: tuple[float, float, float], centre: tuple[float, float, float] = (0, 0, 0), level: int = 0) -> Solid:
    return Solid.of(shapes.box(size, centre, level))


def test_boxes_that_overlap() -> None:
    # 8 + 8 less the common 1 x 2 x 2.
    one, other = solid((2, 2, 2)), solid((2, 2, 2), (1, 0, 0))
    assert one.volume == pytest.approx(8, rel=1e-12)
    assert one.joined(other).volume == pytest.approx(12, rel=1e-12)
    assert one.met(other).volume == pytest.approx(4, rel=1e-12)
    assert one.less(other).volume == pytest.approx(4, rel=1e-12)
    assert one.volume == pytest.approx(8, rel=1e-12)
    assert one.met(solid((1, 1, 1), (9, 0, 0))).empty
    assert not one.empty


def test_several_at_once() -> None:
    corners = [solid((1, 1, 1), (x, y, 0)) for x in (-1, 1) for y in (-1, 1)]
    assert corners[0].joined(*corners[1:]).volume == pytest.approx(4, rel=1e-12)
    # Each covers a quarter of a unit cube's face: 1/2 x 1/2 x 1 of the box 2 x 2 x 1.
    assert solid((2, 2, 1)).less(*corners).volume == pytest.approx(4 - 4 * 0.25, rel=1e-12)


def test_lens_of_two_balls() -> None:
    # Two balls of radius R, their middles d apart: pi (4R + d)(2R - d)^2 / 12.
    radius, apart = 0.02, 0.025
    errors = []
    for level in (2, 3, 4):
        one = Solid.of(shapes.sphere(radius, level))
        other = Solid.of(shapes.sphere(radius, level).moved(shift=np.array([apart, 0, 0])))
        errors.append(one.met(other).volume / (np.pi * (4 * radius + apart) * (2 * radius - apart) ** 2 / 12) - 1)
    assert shapes.order(errors) == pytest.approx([2, 2], abs=0.3)
    assert abs(errors[-1]) < 0.01


@given(st.integers(0, 1000))
def test_the_parts_of_a_cut_make_the_whole(seed: int) -> None:
    whole = Solid.of(shapes.lumpy(seed, level=2))
    surface = shapes.lumpy(seed, level=2)
    tool = Solid.of(shapes.lumpy(seed + 1, level=2).moved(shift=np.asarray(surface.vertices.mean(axis=0))))
    inside, outside = whole.met(tool), whole.less(tool)
    assert inside.volume + outside.volume == pytest.approx(whole.volume, rel=1e-9)
    assert whole.joined(tool).volume == pytest.approx(tool.volume + outside.volume, rel=1e-9)


def test_what_comes_back_is_closed_and_keeps_double_precision() -> None:
    found = Solid.of(shapes.lumpy(2)).less(solid((0.01, 0.01, 1.0)))
    assert paired(found.surface()).closed
    moments = solid_moments(found.surface())
    assert moments.amount == pytest.approx(found.volume, rel=1e-12)
    # A third of a millimetre has no short binary fraction; single precision would be off by 1e-8 of it.
    third = Solid.of(shapes.box((1 / 3e3,) * 3)).surface()
    np.testing.assert_allclose(np.abs(third.vertices), 1 / 6e3, rtol=1e-15)


def test_a_closed_off_space_is_filled_and_what_lies_loose_in_it() -> None:
    shell = solid((4, 4, 4)).less(solid((3, 3, 3)))
    loose = solid((1, 1, 1))
    both = shell.joined(loose)
    assert both.volume == pytest.approx(64 - 27 + 1, rel=1e-12)
    parts = both.parts()
    assert sorted(round(part.volume, 9) for part in parts) == [-27, 1, 64]
    assert both.filled().volume == pytest.approx(64, rel=1e-12)
    assert loose.filled() is loose


def test_a_space_that_is_open_to_the_outside_is_not_filled() -> None:
    cup = solid((4, 4, 4)).less(solid((3, 3, 4), (0, 0, 1)))
    assert cup.filled().volume == pytest.approx(64 - 9 * 3, rel=1e-12)


def test_nested_shells_that_displace() -> None:
    # A hollow body inside the hollow of another: all of it is closed off.
    outer = solid((8, 8, 8)).less(solid((6, 6, 6)))
    inner = solid((4, 4, 4)).less(solid((2, 2, 2)))
    assert outer.joined(inner).filled().volume == pytest.approx(512, rel=1e-12)


def test_gap() -> None:
    one = solid((2, 2, 2))
    assert one.gap(solid((2, 2, 2), (2.3, 0, 0)), 1.0) == pytest.approx(0.3, rel=1e-9)
    assert one.gap(solid((2, 2, 2), (2.3, 2.4, 0)), 1.0) == pytest.approx(0.5, rel=1e-9)
    assert one.gap(solid((2, 2, 2), (9, 0, 0)), 0.7) == pytest.approx(0.7, rel=1e-9)
    assert one.gap(solid((2, 2, 2), (1, 0, 0)), 1.0) == 0


def test_growth_is_steiners_and_never_short() -> None:
    # V + A d + pi d^2 (a + b + c) + 4/3 pi d^3 for a box; the rolling ball has flats, outside the true one by under 2%.
    a, b, c, d = 0.05, 0.02, 0.01, 0.001
    box = solid((a, b, c))
    grown = box.grown(d)
    steiner = a * b * c + 2 * (a * b + b * c + c * a) * d + np.pi * d**2 * (a + b + c) + 4 / 3 * np.pi * d**3
    added = grown.volume - a * b * c
    assert steiner - a * b * c <= added < 1.04 * (steiner - a * b * c)
    low, high = grown.surface().bounds
    assert (np.abs([low, high]) >= np.array([a, b, c]) / 2 + d - 1e-12).all()
    assert box.grown(0.0) is box


def test_simplified_keeps_to_its_tolerance() -> None:
    fine = solid((2, 2, 2), level=4)
    coarse = fine.simplified(1e-6)
    assert len(coarse.surface().faces) == 12
    assert coarse.volume == pytest.approx(8, rel=1e-9)
    ball = shapes.sphere(0.02, 5)
    fewer = Solid.of(ball).simplified(0.02e-3)
    assert len(fewer.surface().faces) < len(ball.faces) / 2
    # A skin moved by less than t changes the volume by less than t times the skin.
    assert abs(fewer.volume - Solid.of(ball).volume) < 0.02e-3 * ball.area


def test_faces_remember_their_source() -> None:
    body, tool = new_tag(), new_tag()
    assert body != tool
    cut = Solid.of(shapes.box((4, 4, 4)), body).less(Solid.of(shapes.box((2, 2, 2), (0, 0, 2)), tool))
    surface, sources = cut.surface(), cut.sources()
    area = np.linalg.norm(surface.double_areas, axis=1) / 2
    assert len(sources) == len(surface.faces)
    # The tool leaves a pocket one deep: its floor and four walls.
    assert area[sources == tool].sum() == pytest.approx(4 + 4 * 2, rel=1e-12)
    assert area[sources == body].sum() == pytest.approx(6 * 16 - 4, rel=1e-12)


def test_an_open_surface_is_refused() -> None:
    box = shapes.box((1, 1, 1))
    with pytest.raises(SolidError):
        Solid.of(Surface(box.vertices, box.faces[1:]))


def square(x: float, y: float, side: float) -> list[tuple[float, float]]:
    return [(x, y), (x + side, y), (x + side, y + side), (x, y + side)]


def test_filled_counts_what_loops_wind_round() -> None:
    # Non-zero rule: inside, a loop the other way round makes a hole; one the same way round does not.
    outer, inner = np.array(square(0, 0, 4), dtype=float), np.array(square(1, 1, 2), dtype=float)
    assert filled([outer, inner[::-1]]).area == pytest.approx(12, rel=1e-9)
    assert filled([outer, inner]).area == pytest.approx(16, rel=1e-9)
    assert filled([outer[::-1], inner]).area == pytest.approx(12, rel=1e-9)
    holed = filled([outer, inner[::-1]])
    assert holed.perimeter == pytest.approx(16 + 8, rel=1e-9)
    assert holed.centre == pytest.approx([2, 2], rel=1e-9)
    bow = filled([np.array([(0, 0), (2, 2), (2, 0), (0, 2)], dtype=float)])
    assert bow.area == pytest.approx(2, rel=1e-7)


def test_filled_joins_loops_that_overlap() -> None:
    # By shapely: three squares that overlap, far from the origin and small as a bait is.
    loops = [np.array(square(0.3 + x, 0.4 + y, 0.02)) for x, y in ((0, 0), (0.01, 0.005), (0.015, 0.015))]
    union = shapely.union_all([shapely.Polygon(loop) for loop in loops])
    found = filled(loops)
    assert found.area == pytest.approx(union.area, rel=1e-8)
    assert found.perimeter == pytest.approx(union.length, rel=1e-8)
    assert found.centre == pytest.approx([union.centroid.x, union.centroid.y], rel=1e-9)


def test_filled_of_nothing() -> None:
    for nothing in (filled([]), filled([np.array([[0.0, 0], [1, 1]])]), Filled(())):
        assert nothing.area == nothing.perimeter == 0
        assert nothing.centre == pytest.approx([0, 0])


@pytest.mark.parametrize("act", ["joined", "less", "met", "split"])
def test_books_that_do_not_balance_stop(act: str) -> None:
    """A solid that claims a hundredth of a permille more than its mesh holds: what is made of it falls short."""
    one, other = solid((2, 2, 2)), solid((2, 2, 2), (1, 0, 0))
    one.__dict__["volume"] = 8 * (1 + 1e-5)
    with pytest.raises(SolidError, match=r"changed their volume by .* mm3 of .* mm3"):
        one.split(np.array([1.0, 0.0, 0.0]), 0.0) if act == "split" else getattr(one, act)(other)
    if act != "split":
        with pytest.raises(SolidError):
            getattr(one, act)(solid((1, 1, 1), (9, 0, 0)))


@pytest.mark.parametrize("off", [0.0, 1e-9, 1e-4])
def test_solids_that_share_a_plane_keep_their_books(off: float) -> None:
    """A box set in another's corner with three faces in its planes, off by nothing, a nanometre, a tenth of a mm."""
    whole, tool = solid((0.04, 0.01, 0.016)), solid((0.01, 0.004, 0.004), (0.015 + off, 0.003 + off, 0.006 + off))
    shared = np.prod(np.array([0.01, 0.004, 0.004]) - off)
    assert whole.met(tool).volume == pytest.approx(shared, rel=1e-9)
    assert whole.less(tool).volume == pytest.approx(6.4e-6 - shared, rel=1e-9)
    assert whole.joined(tool).volume == pytest.approx(6.4e-6 + 0.16e-6 - shared, rel=1e-9)
