"""A bait put together, against sums done by hand and an account by cells that knows nothing of meshes."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import pytest
import shapes
from cells import Block, account
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy.spatial.transform import Rotation
from workbench import MM, bait, coat, codes, hardware, insert, only, vector, void

from meshlure.bait.composition import Composition, compose
from meshlure.bait.pieces import Bait
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats, Surface

BODY = shapes.box((0.08, 0.016, 0.02))
BODY_VOLUME = 25.6e-6


def block(size: tuple[float, float, float], centre: tuple[float, float, float] = (0, 0, 0)) -> Surface:
    """Box of a size about a centre, both in mm."""
    return shapes.box(tuple(vector(*size)), tuple(vector(*centre)))


def displaced(made: Composition) -> tuple[float, Floats]:
    """Volume, m3, with its centre, m, coat included, without hardware."""
    index = BlockIndex.build(made.skin.surface, made.skin.thickness)
    volume = index.volume + index.coat_volume
    return volume, (index.moment + index.coat_moment) / volume


def box_inertia(mass: float, size: Floats) -> Floats:
    """m/12 (b2 + c2, c2 + a2, a2 + b2)."""
    return np.diag(mass / 12 * ((size**2).sum() - size**2))


def carried(inertia: Floats, mass: float, arm: Floats) -> Floats:
    """Steiner's theorem."""
    return np.asarray(inertia + mass * ((arm @ arm) * np.eye(3) - np.outer(arm, arm)))


def test_an_insert_inside_adds_what_it_weighs_more_than_the_body() -> None:
    size, at = vector(10, 4, 6), vector(-20, 2, -5)
    made = compose(bait(BODY, insert("slug", block((10, 4, 6), (-20, 2, -5)), 11.34)))
    own, more = BODY_VOLUME * 600, 240e-9 * (11340 - 600)
    mass = made.still_mass
    assert mass.amount == pytest.approx(own + more, rel=1e-12)
    np.testing.assert_allclose(mass.first, more * at, rtol=1e-9)
    # The slug's extra mass is a box of its own; both tensors carried to the common centre.
    centre = more * at / (own + more)
    inertia = carried(box_inertia(own, vector(80, 16, 20)), own, centre) + carried(
        box_inertia(more, size), more, at - centre
    )
    np.testing.assert_allclose(mass.inertia, inertia, rtol=1e-9, atol=1e-9 * inertia[0, 0])
    volume, middle = displaced(made)
    assert volume == pytest.approx(BODY_VOLUME, rel=1e-12)
    np.testing.assert_allclose(middle, 0, atol=1e-12)


def test_two_slugs_add_up_like_one_at_a_time() -> None:
    slugs = [insert("a", block((5, 5, 5), (-20, 0, 0)), 11.34), insert("b", block((4, 4, 4), (10, 2, -3)), 7.9)]
    alone, both = compose(bait(BODY)).still_mass, compose(bait(BODY, *slugs)).still_mass
    change = [compose(bait(BODY, slug)).still_mass - alone for slug in slugs]
    assert both.amount - alone.amount == pytest.approx(sum(c.amount for c in change), rel=1e-9)
    np.testing.assert_allclose(both.first - alone.first, sum(c.first for c in change), rtol=1e-9, atol=1e-15)


@pytest.mark.parametrize("hair", [1e-6, 1e-8, 1e-10])
def test_a_hair_across_the_skin_changes_next_to_nothing(hair: float) -> None:
    # Inside, pieces are only summed; across the skin, everything is cut. 10 x 4 mm of the slug's top pass the skin.
    sides = []
    for step in (-hair, hair):
        top = block((10, 4, 6), (-20, 2, 7)).moved(shift=np.array([0, 0, step]))
        made = compose(bait(BODY, insert("slug", top, 11.34), insert("wire", block((40, 1, 1)), 7.9)))
        sides.append((made.still_mass, *displaced(made)))
    (inner, low, low_centre), (outer, high, high_centre) = sides
    assert high - low == pytest.approx(40e-6 * hair, rel=1e-3, abs=1e-17)
    # On the way 2 hairs of body are replaced or added; nothing else may jump.
    assert abs(outer.amount - inner.amount) < 40e-6 * 2 * hair * 11340 + 1e-14
    np.testing.assert_allclose(outer.centre, inner.centre, atol=2 * hair)
    np.testing.assert_allclose(high_centre, low_centre, atol=2 * hair)
    np.testing.assert_allclose(outer.inertia, inner.inertia, rtol=1e3 * hair + 1e-9, atol=1e-12 * inner.inertia[1, 1])


def test_a_flush_insert_shares_its_face_with_the_body() -> None:
    made = compose(bait(BODY, insert("plate", block((10, 4, 6), (0, 0, 7)), 2.7)))
    assert displaced(made)[0] == pytest.approx(BODY_VOLUME, rel=1e-12)
    assert made.still_mass.amount == pytest.approx((BODY_VOLUME - 240e-9) * 600 + 240e-9 * 2700, rel=1e-12)
    assert not codes(made.findings)


def test_an_insert_laid_on_the_skin_displaces_all_of_itself() -> None:
    made = compose(bait(BODY, insert("fin", block((10, 1, 6), (0, 0, 13)), 1.2)))
    assert displaced(made)[0] == pytest.approx(BODY_VOLUME + 60e-9, rel=1e-12)
    assert made.still_mass.amount == pytest.approx(BODY_VOLUME * 600 + 60e-9 * 1200, rel=1e-12)
    assert "60 mm3" in only(made.findings, "sits-outside").message


def test_sticking_out_displaces_exactly_the_outside_part() -> None:
    made = compose(bait(BODY, insert("lip", block((20, 10, 2), (-45, 0, -6)), 1.2, lip=True)))
    volume, centre = displaced(made)
    out = 15 * 10 * 2e-9
    assert volume == pytest.approx(BODY_VOLUME + out, rel=1e-12)
    np.testing.assert_allclose(centre, out * vector(-47.5, 0, -6) / (BODY_VOLUME + out), rtol=1e-9, atol=1e-15)
    assert made.still_mass.amount == pytest.approx((BODY_VOLUME - 100e-9) * 600 + 400e-9 * 1200, rel=1e-12)
    (plate,) = made.skin.lips.values()
    assert solid_moments(plate).amount == pytest.approx(out, rel=1e-12)
    assert solid_moments(made.skin.bare).amount == pytest.approx(BODY_VOLUME, rel=1e-12)


def test_a_pair_of_eyes_in_one_file_one_in_and_one_out() -> None:
    pair = shapes.together(block((2, 2, 2)), block((2, 2, 2), (0, 9, 0)))
    made = compose(bait(BODY, insert("eyes", pair, 1.2)))
    assert displaced(made)[0] == pytest.approx(BODY_VOLUME + 8e-9, rel=1e-12)
    assert made.still_mass.amount == pytest.approx((BODY_VOLUME - 8e-9) * 600 + 16e-9 * 1200, rel=1e-12)


def test_solids_in_a_void_are_solid_whatever_the_order() -> None:
    chamber, slug = block((20, 6, 6)), block((4, 4, 4), (5, 0, 0))
    pieces = [void("chamber", chamber), insert("slug", slug, 11.34)]
    for order in (pieces, pieces[::-1]):
        made = compose(bait(BODY, *order))
        assert made.still_mass.amount == pytest.approx((BODY_VOLUME - 720e-9) * 600 + 64e-9 * 11340, rel=1e-12)
        volumes = {part.name: part.volume for part in made.parts}
        assert volumes["chamber"] == pytest.approx(656e-9, rel=1e-9)
        assert volumes["body"] == pytest.approx(BODY_VOLUME - 720e-9, rel=1e-12)


@pytest.mark.parametrize(("kind", "share"), [("sealed", 0.0), ("flooded", 1.0)])
def test_hollow_bodies(kind: str, share: float) -> None:
    # Box of 80 x 16 x 20 with a cavity of 60 x 10 x 10 of its own: sealed it displaces, flooded it does not.
    shell = shapes.together(BODY, block((60, 10, 10), (0, 0, 2)).turned())
    made = compose(bait(shell, cavities=kind))
    volume, centre = displaced(made)
    hollow = 6e-6
    assert made.still_mass.amount == pytest.approx((BODY_VOLUME - hollow) * 600, rel=1e-12)
    assert volume == pytest.approx(BODY_VOLUME - share * hollow, rel=1e-12)
    np.testing.assert_allclose(centre, -share * hollow * vector(0, 0, 2) / volume, rtol=1e-9, atol=1e-15)


@pytest.mark.parametrize("kind", ["sealed", "flooded"])
def test_an_island_in_a_cavity_is_body(kind: str) -> None:
    shell = shapes.together(BODY, block((60, 10, 10)).turned(), block((10, 5, 5), (20, 0, 0)))
    made = compose(bait(shell, cavities=kind))
    hollow = 6e-6 - 250e-9
    assert made.still_mass.amount == pytest.approx((BODY_VOLUME - hollow) * 600, rel=1e-9)
    assert displaced(made)[0] == pytest.approx(BODY_VOLUME - (hollow if kind == "flooded" else 0), rel=1e-9)


@pytest.mark.parametrize(("kind", "what"), [("sealed", "air"), ("flooded", "water")])
def test_a_ballast_in_a_pocket_with_a_gap(kind: str, what: str) -> None:
    # Pocket of 12 x 6 x 8 closed off in the body's own mesh, slug of 10 x 4 x 6 in it: 1 mm around.
    shell = shapes.together(BODY, block((12, 6, 8)).turned())
    made = compose(bait(shell, insert("slug", block((10, 4, 6)), 11.34), cavities=kind))
    gap = (576 - 240) * 1e-9
    assert made.still_mass.amount == pytest.approx((BODY_VOLUME - 576e-9) * 600 + 240e-9 * 11340, rel=1e-12)
    assert displaced(made)[0] == pytest.approx(BODY_VOLUME - (gap if kind == "flooded" else 0), rel=1e-9)
    said = only(made.findings, "insert-in-cavity")
    assert "'slug' lies in 'body cavity' and fills 240 mm3 of its 576 mm3" in said.message
    assert f"336 mm3 of {what} stay around" in said.message


def test_an_open_pocket_lets_the_water_in() -> None:
    # Pocket of 12 x 6 x 8 open at the top, slug of 10 x 4 x 8 flush with the skin: the gap is water.
    pocketed = Solid.of(BODY).less(Solid.of(block((12, 6, 10), (0, 0, 7)))).surface()
    made = compose(bait(pocketed, insert("slug", block((10, 4, 8), (0, 0, 6)), 11.34)))
    body, slug = BODY_VOLUME - 576e-9, 320e-9
    assert displaced(made)[0] == pytest.approx(body + slug, rel=1e-9)
    assert made.still_mass.amount == pytest.approx(body * 600 + slug * 11340, rel=1e-9)


@pytest.mark.parametrize("across", [False, True])
@pytest.mark.parametrize("turn", [0.0, 3.0])
def test_a_pocket_drawn_for_its_insert_changes_nothing(across: bool, turn: float) -> None:
    # A cylinder in the body, or the body with that cylinder cut out and put back, its facets alike or turned a little:
    # then they miss each other by up to the segment between them, 1 - sin(a)/a of the section with a = 2 pi / 48.
    slug = shapes.cylinder(3 * MM, 20 * MM, 48)
    turned = slug.moved(Rotation.from_euler("z", turn, degrees=True).as_matrix())
    slug, turned = (s.moved(np.eye(3)[[2, 0, 1]], vector(36 if across else 0, 0, 0)) for s in (slug, turned))
    pocketed = Solid.of(BODY).less(Solid.of(slug)).surface()
    plain = compose(bait(BODY, insert("slug", slug, 11.34)))
    fitted = compose(bait(pocketed, insert("slug", turned, 11.34)))
    miss = (1 - np.sinc(2 / 48)) * solid_moments(slug).amount if turn else 1e-9 * BODY_VOLUME
    assert fitted.still_mass.amount == pytest.approx(plain.still_mass.amount, abs=miss * 600)
    assert displaced(fitted)[0] == pytest.approx(displaced(plain)[0], abs=miss)
    said = {(True, 0.0): {"sits-outside"}, (False, 0.0): {"hollow-filled"}, (False, 3.0): {"insert-in-cavity"}}
    assert codes(fitted.findings) == said.get((across, turn), {"sits-outside"})


@pytest.mark.parametrize(("kind", "share"), [("sealed", 0.0), ("flooded", 1.0)])
def test_voids_inside(kind: str, share: float) -> None:
    made = compose(bait(BODY, void("chamber", block((20, 6, 6), (10, 0, 0)), kind)))
    volume, centre = displaced(made)
    assert made.still_mass.amount == pytest.approx((BODY_VOLUME - 720e-9) * 600, rel=1e-12)
    assert volume == pytest.approx(BODY_VOLUME - share * 720e-9, rel=1e-12)
    np.testing.assert_allclose(centre, -share * 720e-9 * vector(10, 0, 0) / volume, rtol=1e-9, atol=1e-15)


@pytest.mark.parametrize("kind", ["sealed", "flooded"])
def test_a_void_that_reaches_the_outside_is_water(kind: str) -> None:
    made = compose(bait(BODY, void("bore", block((20, 6, 6), (-40, 0, 0)), kind)))
    assert displaced(made)[0] == pytest.approx(BODY_VOLUME - 360e-9, rel=1e-9)
    assert codes(made.findings) == ({"sealed-void-open"} if kind == "sealed" else set())


def test_a_plug_closes_a_bore_off() -> None:
    # Bore from the nose, 20 x 6 x 6, its outer 5 mm plugged: what stays is 15 x 6 x 6 of air.
    plug = insert("plug", block((5, 6, 6), (-37.5, 0, 0)), 1.2)
    made = compose(bait(BODY, void("bore", block((20, 6, 6), (-30, 0, 0))), plug))
    assert displaced(made)[0] == pytest.approx(BODY_VOLUME, rel=1e-9)
    assert made.still_mass.amount == pytest.approx((BODY_VOLUME - 720e-9) * 600 + 180e-9 * 1200, rel=1e-9)
    assert not codes(made.findings)


def test_a_coat_weighs_and_displaces_thickness_times_skin() -> None:
    area, thick = 2 * (80 * 16 + 80 * 20 + 16 * 20) * 1e-6, 0.15 * MM
    made = compose(bait(BODY, coat=coat(thick, 1.15)))
    assert made.still_mass.amount == pytest.approx(BODY_VOLUME * 600 + thick * area * 1150, rel=1e-12)
    assert displaced(made)[0] == pytest.approx(BODY_VOLUME + thick * area, rel=1e-12)
    assert made.skin.painted == pytest.approx(area, rel=1e-12)


def test_the_coat_leaves_lip_and_voids_bare() -> None:
    # The skin loses the lip's 10 x 2 mm footprint on the nose and the bore's 4 x 4 mm mouth on the back.
    area = (2 * (80 * 16 + 80 * 20 + 16 * 20) - 10 * 2 - 4 * 4) * 1e-6
    pieces = [
        insert("lip", block((20, 10, 2), (-45, 0, -6)), 1.2, lip=True),
        void("bore", block((4, 4, 10), (10, 0, 10)), "flooded"),
        void("chamber", block((20, 6, 6), (0, 0, -4)), "flooded"),
    ]
    made = compose(bait(BODY, *pieces, coat=coat(0.15 * MM, 1.15)))
    assert made.skin.painted == pytest.approx(area, rel=1e-9)
    out, gone = 300e-9, (4 * 4 * 5 + 20 * 6 * 6) * 1e-9
    assert displaced(made)[0] == pytest.approx(BODY_VOLUME + out - gone + 0.15 * MM * area, rel=1e-9)
    coated = next(part for part in made.parts if part.name == "coat")
    assert coated.mass.amount == pytest.approx(0.15 * MM * area * 1150, rel=1e-9)


def test_hardware_is_a_mass_at_its_place() -> None:
    at = vector(10, 0, -12)
    made = compose(bait(BODY, hardware=[hardware("hook", 0.8, at, 7.85)]))
    part = made.parts[-1]
    assert (part.mass.amount, part.volume) == pytest.approx((0.8e-3, 0.8e-3 / 7850), rel=1e-12)
    np.testing.assert_allclose(made.still_mass.first, 0.8e-3 * at, rtol=1e-12, atol=1e-18)


def test_a_body_eaten_up_by_its_insert_stops() -> None:
    made = compose(bait(BODY, insert("mould", shapes.box((0.1, 0.05, 0.05)), 1.2)))
    assert only(made.findings, "nothing-left").stops


SEEDS = st.integers(0, 10_000)
Pose = Callable[[Surface], Surface]


def knobbly(seed: int, pose: Pose = lambda surface: surface, turn: Floats | None = None) -> Bait:
    """A knobbly body with a slug, a bead, a chamber and a lip, all turned and set at random, some across the skin.

    Every mesh goes through ``pose``; ``turn`` is the rotation in it.
    """
    random = np.random.default_rng(seed)
    body = shapes.lumpy(seed, level=3)
    middle, reach = body.vertices.mean(axis=0), np.ptp(body.vertices, axis=0)
    turn = np.eye(3) if turn is None else turn

    def put(surface: Surface, *where: float) -> Surface:
        return pose(surface.moved(shapes.turn(int(random.integers(1 << 30))), middle + np.array(where) * reach))

    eye = pose(Surface(np.tile(middle, (3, 1)), np.array([[0, 1, 2]]))).vertices[0]
    return bait(
        pose(body),
        insert("slug", put(shapes.box((0.006, 0.003, 0.003)), -0.22, 0, -0.1), 11.34),
        insert("bead", put(shapes.sphere(0.003, 2), 0.2, 0.05, 0), 2.5),
        void("chamber", put(shapes.cylinder(0.003, 0.009, 24), 0, 0, 0.05), "flooded"),
        insert("lip", put(shapes.box((0.02, 0.01, 0.001)), 0, 0, -0.5), 1.2, lip=True),
        nose=(turn @ [-1, 0, 0]).tolist(),
        back=(turn @ [0, 0, 1]).tolist(),
        coat=coat(0.2 * MM, 1.12),
        hardware=[hardware("hook", 0.7, eye, 7.85)],
    )


def agree(one: Composition, other: Composition, turn: Floats, shift: Floats, share: float) -> None:
    """Hold a composition against another, turned and then shifted; lengths to a share of 20 mm."""
    # What is coarse is told by the facets' normals, which are no longer known where a coordinate has lost their digits.
    assert codes(one.findings) - {"coarse-facets"} == codes(other.findings) - {"coarse-facets"}
    assume(not any(finding.stops for finding in one.findings))
    np.testing.assert_allclose(other.still_mass.amount, one.still_mass.amount, rtol=share)
    np.testing.assert_allclose(other.still_mass.centre, turn @ one.still_mass.centre + shift, atol=0.02 * share)
    inertia = turn @ one.still_mass.inertia @ turn.T
    np.testing.assert_allclose(other.still_mass.inertia, inertia, atol=10 * share * np.abs(inertia).max())
    (volume, centre), (new, new_centre) = displaced(one), displaced(other)
    np.testing.assert_allclose(new, volume, rtol=share)
    np.testing.assert_allclose(new_centre, turn @ centre + shift, atol=0.02 * share)
    for part, same in zip(one.parts, other.parts, strict=True):
        assert same.name == part.name
        assert same.volume == pytest.approx(part.volume, rel=10 * share)


@given(SEEDS)
@settings(max_examples=12)
def test_masses_and_first_moments_of_the_pieces_make_the_whole(seed: int) -> None:
    made = compose(knobbly(seed))
    assume(not any(finding.stops for finding in made.findings))
    np.testing.assert_allclose(made.still_mass.amount, sum(p.mass.amount for p in made.parts), rtol=1e-12)
    first = sum((p.mass.first for p in made.parts), np.zeros(3))
    np.testing.assert_allclose(made.still_mass.first, first, atol=1e-12 * made.still_mass.amount)
    for part in made.parts:
        if part.substance is not None:
            assert part.mass.amount == pytest.approx(part.volume * part.substance.density, rel=1e-12)
    # Body, inserts and hollows fill the outer skin between them.
    inside = sum(part.volume for part in made.parts if part.role in ("body", "insert", "void"))
    assert inside >= solid_moments(made.skin.outer).amount * (1 - 1e-9)


@given(SEEDS)
@settings(max_examples=6)
def test_results_turn_and_shift_with_the_bait(seed: int) -> None:
    turn, shift = shapes.turn(seed + 1), np.random.default_rng(seed).normal(size=3) * 0.05
    other = compose(knobbly(seed, lambda surface: surface.moved(turn, shift), turn))
    agree(compose(knobbly(seed)), other, turn, shift, 1e-9)


@given(SEEDS)
@settings(max_examples=3)
def test_a_kilometre_from_the_origin(seed: int) -> None:
    # There a coordinate's last digit is 1e-13 m, and the solid library merges what is closer than 1e-9 m.
    shift = np.array([600.0, -800.0, 30.0])
    other = compose(knobbly(seed, lambda surface: surface.moved(shift=shift)))
    agree(compose(knobbly(seed)), other, np.eye(3), shift, 3e-6)


@given(SEEDS)
@settings(max_examples=6)
def test_the_order_of_faces_and_vertices_changes_nothing(seed: int) -> None:
    other = compose(knobbly(seed, lambda surface: shapes.shuffled(surface, seed)))
    agree(compose(knobbly(seed)), other, np.eye(3), np.zeros(3), 1e-9)


SHELF = Block((0, 0, 0), (40, 8, 10), 0.6)


@st.composite
def cell_baits(draw: st.DrawFn) -> list[Block]:
    """Up to two voids, then up to three solids that may replace each other: boxes on a grid of 2 mm, often flush."""
    blocks = []
    voids = draw(st.lists(st.sampled_from(["sealed", "flooded"]), max_size=2))
    for kind in [*voids, *["solid"] * draw(st.integers(0, 3))]:
        low = [draw(st.integers(-1, top // 2 - 1)) * 2 for top in SHELF.high]
        size = [draw(st.integers(1, 5)) * 2 for _ in range(3)]
        density = draw(st.sampled_from([1.2, 2.7, 11.34])) if kind == "solid" else None
        corner = tuple(a + b for a, b in zip(low, size, strict=True))
        blocks.append(Block((low[0], low[1], low[2]), (corner[0], corner[1], corner[2]), density, kind == "flooded"))
    return blocks


@given(cell_baits())
@settings(max_examples=50)
def test_any_heap_of_boxes_against_an_account_by_cells(blocks: list[Block]) -> None:
    names = [f"piece {number}" for number in range(len(blocks))]
    pieces = []
    for number, one in enumerate(blocks):
        if one.density is None:
            pieces.append(void(names[number], one.surface, "flooded" if one.flooded else "sealed"))
        else:
            earlier = [names[k] for k in range(number) if blocks[k].density is not None]
            keys = {"replaces": earlier} if earlier else {}
            pieces.append(insert(names[number], one.surface, one.density, **keys))
    made = compose(bait(SHELF.surface, *pieces))
    assume(not any(finding.stops for finding in made.findings))
    expected = account(SHELF, blocks)
    volumes = [part.volume for part in made.parts]
    np.testing.assert_allclose(volumes, [expected.body, *expected.volumes], rtol=1e-9, atol=1e-18)
    assert made.still_mass.amount == pytest.approx(expected.mass, rel=1e-9)
    np.testing.assert_allclose(made.still_mass.first, expected.moment, atol=1e-9 * expected.mass * 0.04)
    volume, centre = displaced(made)
    assert volume == pytest.approx(expected.displaced, rel=1e-9)
    np.testing.assert_allclose(centre * volume, expected.lift, atol=1e-9 * volume * 0.04)
