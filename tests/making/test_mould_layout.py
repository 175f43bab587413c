"""What a mould has besides its plug: places by name, sprue, vents, pins, slots and seats; and what is refused."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
import shapes
import trimesh
from moulds import moulded
from scipy.spatial.transform import Rotation
from workbench import Insert, bait, insert, vector, void

from meshlure.errors import InputError
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.making.mould.bench import Bench
from meshlure.making.mould.contour import Contour
from meshlure.making.mould.design import Mould
from meshlure.making.mould.draftmap import draft_map
from meshlure.making.mould.fittings import Holding
from meshlure.making.mould.peaks import peaks
from meshlure.making.mould.plug import plug

BODY = shapes.ellipsoid((0.03, 0.007, 0.01), 3)
"""60 x 14 x 20 mm, nose at -x, back at +z; its left side looks to -y."""


EYE = shapes.sphere(0.002, 2).moved(shift=vector(-15, 6, 3))


def block(size: tuple[float, float, float], at: tuple[float, float, float]) -> Surface:
    return shapes.box(tuple(vector(*size)), tuple(vector(*at)))


def humps() -> Surface:
    """Two balls of 10 and 8 mm, 15 mm apart, with one of 4 mm on either side of the second, off the plane y = 0."""
    balls = [(10, (0, 0, 0)), (8, (15, 0, 0)), (4, (15, 7, 5)), (4, (15, -7, 5))]
    parts = [Solid.of(shapes.sphere(r * 1e-3, 3).moved(shift=vector(*at))) for r, at in balls]
    return parts[0].joined(*parts[1:]).surface()


def codes(made: Mould) -> set[str]:
    return {finding.code for finding in made.findings}


def test_two_humps_have_two_peaks() -> None:
    # Where balls of 10 and 8 mm, 15 mm apart, meet: x = (100 - 64 + 225)/30 = 8.7 mm, radius sqrt(100 - 8.7^2) = 4.93.
    two = Solid.of(shapes.sphere(0.010, 4)).joined(Solid.of(shapes.sphere(0.008, 4).moved(shift=vector(15, 0, 0))))
    high, low = peaks(two.surface(), np.array([0.0, 0.0, 1.0]), 1e-3)
    assert high.at * 1e3 == pytest.approx([0, 0, 10], abs=0.1)
    assert low.at * 1e3 == pytest.approx([15, 0, 8], abs=0.1)
    assert high.prominence == np.inf
    assert low.prominence * 1e3 == pytest.approx(8 - 4.93, abs=0.15)
    assert len(peaks(two.surface(), np.array([0.0, 0.0, 1.0]), 4e-3)) == 1


def test_a_flat_top_is_one_peak_at_its_middle() -> None:
    (peak,) = peaks(shapes.box((0.04, 0.02, 0.01), level=3), np.array([0.0, 0.0, 1.0]), 1e-4)
    assert peak.at == pytest.approx([0, 0, 0.005], abs=1e-9)


def test_the_contour_s_own_geometry() -> None:
    contour = Contour.of(Solid.of(shapes.box((0.04, 0.02, 0.01))))
    assert contour.outermost(np.array([1.0, 0.0])) * 1e3 == pytest.approx([20, 0], abs=1e-6)
    assert contour.nearest(np.array([0.03, 0.003])) * 1e3 == pytest.approx([20, 3], abs=1e-6)
    assert contour.outward(np.array([0.02, 0.003]), 2e-3) == pytest.approx([1, 0], abs=1e-9)
    assert contour.chord(np.array([0.019, 0.0]), np.array([0.6, 0.8])) == pytest.approx(
        0.001 / 0.6 + 0.010 / 0.8, rel=1e-9
    )
    assert contour.chord(np.array([0.021, 0.0]), np.array([0.0, 1.0])) == 0.0


def test_every_high_point_gets_a_vent_or_is_told() -> None:
    # Poured with the back up: the sprue empties the large hump, a vent the small one; the others are off the plane.
    made = moulded(humps(), pull=[0, 1, 0], sprue={"at": "back", "diameter": "6 mm"})
    assert made.sprue is not None
    assert made.plug.bench.drawn(np.append(made.sprue.at, 0)) * 1e3 == pytest.approx([0, 0, 10], abs=0.2)
    traps = sorted(f.where[0] for f in made.findings if f.code == "air-trap")
    assert np.array(traps) * 1e3 == pytest.approx(np.array([[15, -7, 9], [15, 7, 9]]), abs=0.5)
    # Without these the second one has its peak in the plane.
    two = Solid.of(shapes.sphere(0.010, 3)).joined(Solid.of(shapes.sphere(0.008, 3).moved(shift=vector(15, 0, 0))))
    vented = moulded(two.surface(), pull=[0, 1, 0], sprue={"at": "back", "diameter": "6 mm"})
    (vent,) = vented.vents
    assert vented.plug.bench.drawn(np.append(vent.at, 0)) * 1e3 == pytest.approx([15, 0, 8], abs=0.3)
    assert "air-trap" not in codes(vented)
    # Nose up, the body has no other high point.
    assert moulded(BODY, sprue={"at": "nose"}).vents == ()


@pytest.mark.parametrize(
    ("place", "at", "out"),
    [
        ("nose", [-30, 0, 0], [-1, 0, 0]),
        ("tail", [30, 0, 0], [1, 0, 0]),
        ("back", [0, 0, 10], [0, 0, 1]),
        ("belly", [0, 0, -10], [0, 0, -1]),
        ([18.0, 0.0, 8.0], [18, 0, 8], [18 / 900, 0, 8 / 100]),
    ],
)
def test_places_by_name_and_by_point(place: object, at: list[float], out: list[float]) -> None:
    made = moulded(BODY, sprue={"at": place, "diameter": "6 mm"})
    assert made.sprue is not None
    bench = made.plug.bench
    assert bench.drawn(np.append(made.sprue.at, 0)) * 1e3 == pytest.approx(at, abs=0.15)
    way = bench.turn.T @ np.append(made.sprue.direction, 0)
    assert way == pytest.approx(np.array(out) / np.linalg.norm(out), abs=0.03)


@pytest.mark.parametrize(
    ("keys", "told"),
    [
        (
            {"sprue": {"at": "tail", "diameter": "15 mm"}},
            r"mould\.sprue\.diameter: the sprue is wider(.|\n)*up to 14\.0",
        ),
        ({"sprue": {"at": [0.0, 0.0, 14.0]}}, r"mould\.sprue\.at: the point is not where(.|\n)*4\.0 mm off"),
        ({"sprue": {"at": [0.0, 5.0, 5.0]}}, r"mould\.sprue\.at: the point is not where"),
        ({"sprue": {"at": "back"}, "pull": "back"}, r"mould\.sprue\.at: this place lies along the pull(.|\n)*'nose'"),
        ({"vents": ["belly", [50.0, 0.0, 0.0]]}, r"mould\.vents\[2\]: the point is not where(.|\n)*20\.0 mm off"),
        ({"board": "2 mm"}, r"mould\.board: the board is too thin for keys(.|\n)*keys = 0"),
    ],
)
def test_what_does_not_fit_the_body_is_refused(keys: dict[str, Any], told: str) -> None:
    with pytest.raises(InputError, match=told):
        moulded(BODY, **keys)


def wire(length: float, at: tuple[float, float, float], **keys: object) -> Insert:
    return insert("wire", block((length, 1, 1), at), 7.9, **keys)


def test_what_a_mould_does_with_each_piece() -> None:
    pieces = [
        wire(20, (-30, 0, 0)),
        insert("lip", block((12, 8, 2), (-28, 0, -6)), 1.2, lip=True, fit="0.1 mm"),
        insert(
            "eye", shapes.sphere(0.002, 2).moved(shift=vector(-15, 6, 3)), 1.2, fit="0.1 mm", glue="epoxy clear coat"
        ),
        insert("slug", block((6, 3, 3), (5, 0, -4)), 11.3, pinned=True),
        insert("bead", block((3, 3, 3), (15, 0, 0)), 2.5),
        void("chamber", block((8, 4, 4), (2, 0, 3))),
        void("well", block((4, 4, 8), (-8, 0, 8)), kind="flooded"),
    ]
    made = moulded(BODY, *pieces)
    assert {fitting.piece.name: fitting.holding for fitting in made.plug.fittings} == {
        "wire": Holding.SEAT,
        "lip": Holding.SLOT,
        "eye": Holding.SLOT,
        "slug": Holding.PINNED,
        "bead": Holding.EMBEDDED,
        "chamber": Holding.HOLLOW,
        "well": Holding.OPEN,
    }
    assert {"mould-hollow", "mould-loose", "pinned"} <= codes(made)
    # What the mould has of the body, and what resin is left of it, by the general library's booleans in mm.
    body, *solids = (shapes.as_trimesh(s.moved(scale=1e3)) for s in (BODY, *(piece.surface for piece in pieces)))
    named = dict(zip([piece.name for piece in pieces], solids, strict=True))
    slots = [trimesh.creation.box(extents=[12.2, 8.2, 2.2]), named["eye"].copy(), named["well"]]
    slots[0].apply_translation([-28, 0, -6])
    slots[1].apply_translation([15, -6, -3])
    slots[1].apply_scale(2.1 / 2)
    slots[1].apply_translation([-15, 6, 3])
    form = trimesh.boolean.difference([body, *slots])
    assert made.plug.form.volume * 1e9 == pytest.approx(form.volume, rel=1e-4)
    resin = trimesh.boolean.difference([form, *(named[name] for name in ("wire", "slug", "bead", "chamber"))])
    assert made.plug.resin * 1e9 == pytest.approx(resin.volume, rel=1e-4)


def test_a_pinned_lip_gets_a_seat() -> None:
    given = bait(BODY, insert("lip", block((12, 8, 2), (-28, 0, -6)), 1.2, lip=True, pinned=True))
    made = plug(given, Bench.of(moulded(BODY).section, given.frame))
    assert [fitting.holding for fitting in made.fittings] == [Holding.SEAT]


def test_what_lies_in_a_drawn_pocket_leaves_it_open() -> None:
    pocket = block((6, 4, 8), (0, 0, -8))
    body = Solid.of(BODY).less(Solid.of(pocket)).surface()
    made = moulded(body, insert("weight", block((6, 4, 4), (0, 0, -6)), 11.3))
    assert [fitting.holding for fitting in made.plug.fittings] == [Holding.LATER]
    assert made.plug.whole.volume == pytest.approx(Solid.of(body).volume, rel=1e-9)


def test_pins_hold_what_lies_inside() -> None:
    long, short = block((12, 3, 3), (0, 0, -5)), block((4, 3, 3), (15, 0, -3))
    made = moulded(BODY, insert("slug", long, 11.3, pinned=True), insert("bead", short, 7.9, pinned=True))
    assert made.pins.held == ("slug", "slug", "bead")
    places = [made.plug.bench.drawn(np.append(pin.at, 0)) for pin in made.pins.runners]
    for place in places:
        # On the ellipse that the parting plane cuts, under the piece.
        x, y, z = place / (0.03, 0.007, 0.01)
        assert x * x + z * z == pytest.approx(1, abs=0.02)
        assert abs(y) < 1e-9
        assert z < 0
    assert abs(places[0][0] - places[1][0]) * 1e3 == pytest.approx(6, abs=0.5)
    # A pin of 1.2 mm with 0.1 mm about it.
    assert {round(pin.diameter * 1e3, 6) for pin in made.pins.runners} == {1.4}
    off = moulded(BODY, insert("slug", block((6, 2, 3), (0, 4, 0)), 11.3, pinned=True))
    assert "pin-off-plane" in codes(off)
    assert off.pins.runners == ()


def test_a_sprue_over_a_seat_is_a_fault_and_is_not_chosen() -> None:
    tail = wire(20, (30, 0, 0))
    asked = moulded(BODY, tail, sprue={"at": "tail", "diameter": "6 mm"})
    assert [(f.code, f.level.value) for f in asked.findings if f.level == "fault"] == [("sprue-over-seat", "fault")]
    # Where nothing is said, the first free end is taken: the nose.
    left = moulded(BODY, tail)
    assert left.sprue_name == "nose"
    assert not [f for f in left.findings if f.level == "fault"]


def test_a_slot_that_holds_the_rubber_is_told_by_its_piece() -> None:
    # A slot 6 mm wide from the belly up: where the body is wider than that, each half holds a fin of 3 mm.
    lip = insert("lip", block((12, 6, 6), (-14, 0, -7)), 1.2, lip=True)
    made = moulded(BODY, lip)
    told = [f for f in made.findings if f.code == "undercut"]
    assert [f.piece for f in told] == ["lip", "lip"]
    # The body's half-width is 7 sqrt(1 - x2/900 - z2/100) mm.
    x, z = np.meshgrid(np.arange(-20, -8, 0.02) + 0.01, np.arange(-10, -4, 0.02) + 0.01)
    closed = np.count_nonzero(49 * (1 - x**2 / 900 - z**2 / 100) > 9) * 0.02**2
    assert made.study.trapped * 1e9 == pytest.approx(6 * closed, rel=0.03)


def test_a_lean_that_helps_is_told() -> None:
    cylinder = shapes.cylinder(0.01, 0.02, 24).moved(rotation=Rotation.from_rotvec([0.2, 0, 0]).as_matrix())
    made = moulded(cylinder, pull="+z", lean=True, keys=0, sprue={"at": "tail", "diameter": "5 mm"})
    (told,) = [f for f in made.findings if f.code == "better-pull"]
    # 0.2 rad are 11.5 degrees; the axis of the cylinder is [0, -0.199, 0.980].
    assert "degrees from this one" in told.message
    way = made.plug.bench.turn.T @ made.study.best.direction
    assert way == pytest.approx([0, -np.sin(0.2), np.cos(0.2)], abs=0.02)
    assert f"pull = [{round(float(way[0]), 3) + 0.0:.3f}" in told.advice


def test_the_map_of_a_ball() -> None:
    # Seen along the pull a ball of radius R shows draft over an angle a within the circle R cos a.
    ball = shapes.sphere(0.01, 5)
    found = draft_map(ball, "B", np.radians(2))
    edges = np.radians([0, 1, 2, 3, 10, 30, 90])
    assert [r.low for r in found.regions] == pytest.approx(edges[:-1])
    assert [r.high for r in found.regions] == pytest.approx(edges[1:])
    for region in found.regions[3:]:
        assert region.low is not None
        assert region.high is not None
        ring = np.pi * 100 * (np.cos(region.low) ** 2 - np.cos(region.high) ** 2)
        area = sum(_area(ring_) for ring_ in region.rings) * 1e6
        assert area == pytest.approx(ring, rel=0.08)


def test_the_map_shows_what_is_held() -> None:
    # A groove of 40 x 4 mm along a side.
    groove = Solid.of(block((50, 8, 5), (0, 10, 5)))
    grooved = Solid.of(block((40, 20, 20), (0, 0, 0))).less(groove).surface()
    held = draft_map(grooved, "A", 0.0).regions[-1]
    assert held.low is None
    assert sum(_area(ring) for ring in held.rings) * 1e6 == pytest.approx(160, rel=0.06)
    assert all(region.low is not None for region in draft_map(grooved, "B", 0.0).regions)


def _area(ring: np.ndarray[tuple[int, ...], np.dtype[np.float64]]) -> float:
    x, y = ring.T
    return float(x @ np.roll(y, -1) - np.roll(x, -1) @ y) / 2
