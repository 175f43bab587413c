"""Draughts and centres of buoyancy against hydrostatics in closed form."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from hypothesis import given
from hypothesis import strategies as st

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.waterplane import Cut
from meshlure.physics.immersion import Hull

UP = np.array([0.0, 0.0, 1.0])


def hull(surface: Surface, coat: float = 0.0, volume: float = 0.0, at: Floats | None = None) -> Hull:
    place = np.zeros(3) if at is None else at
    return Hull(BlockIndex.build(surface, np.full(len(surface.faces), coat)), volume, volume * place)


@pytest.mark.parametrize("share", [0.05, 0.3, 0.5, 0.97])
def test_box_draught(share: float) -> None:
    # T = s h, KB = T/2, BM = b^2/12 T across and l^2/12 T along (Bouguer 1746).
    length, beam, height = 0.1, 0.02, 0.03
    body = hull(shapes.box((length, beam, height), level=2))
    found = body.settled(UP, share * length * beam * height)
    draught = share * height
    assert found.cut.height == pytest.approx(draught - height / 2, abs=1e-15)
    assert found.centre == pytest.approx([0, 0, (draught - height) / 2], abs=1e-15)
    metacentric = np.diag(found.cut.section.second) / found.volume
    assert metacentric[:2] == pytest.approx([length**2 / 12 / draught, beam**2 / 12 / draught], rel=1e-12)


@pytest.mark.parametrize("share", [0.1, 0.5, 0.8])
def test_sphere_draught(share: float) -> None:
    # s = (h/R)^2 (3 - h/R)/4 (Archimedes, On the Sphere and Cylinder II); the metacentre is the middle: KB + BM = R.
    radius = 0.02
    roots = np.roots([-1, 3, 0, -4 * share])
    h = radius * float(next(root.real for root in roots if abs(root.imag) < 1e-12 and 0 < root.real < 2))
    errors = []
    for level in (3, 4, 5):
        body = hull(shapes.sphere(radius, level))
        found = body.settled(UP, share * body.volume)
        metacentre = found.centre[2] + found.cut.section.second[0, 0] / found.volume
        errors.append([(found.cut.height + radius - h) / radius, metacentre / radius])
    assert np.abs(errors[-1]).max() < 2e-3
    assert np.abs(errors[-1]).max() < np.abs(errors[0]).max() / 8


@pytest.mark.parametrize("half_angle", [20.0, 45.0])
def test_cone_apex_down(half_angle: float) -> None:
    # h/H = s^(1/3), KB = 3h/4, BM = 3/4 h tan^2 t; on a regular n-gon of corner radius r, A = n/2 r^2 sin(2 pi/n) and
    # I = A r^2 (2 + cos(2 pi/n))/12 (any handbook's table of sections), which shrinks BM by (2 + cos(2 pi/n))/3.
    tan, height, share, around = np.tan(np.radians(half_angle)), 0.04, 0.37, 90
    body = hull(shapes.cone(height * tan, height, around))
    found = body.settled(UP, share * body.volume)
    h = height * share ** (1 / 3)
    assert found.cut.height == pytest.approx(h, rel=1e-12)
    assert found.centre[2] == pytest.approx(3 * h / 4, rel=1e-12)
    polygon = (2 + np.cos(2 * np.pi / around)) / 3
    assert found.cut.section.second[0, 0] / found.volume == pytest.approx(0.75 * h * tan**2 * polygon, rel=1e-11)


@pytest.mark.parametrize("share", [0.2, 0.7])
def test_archimedes_paraboloid(share: float) -> None:
    # r^2 = p z: draught H sqrt(s), KB = 2h/3, BM = p/2 at every draught (On Floating Bodies II).
    p, height = 0.02, 0.05
    body = hull(shapes.paraboloid(p, height, 128))
    found = body.settled(UP, share * body.volume)
    h = height * np.sqrt(share)
    assert found.cut.height == pytest.approx(h, rel=1e-3)
    assert found.centre[2] == pytest.approx(2 * h / 3, rel=1e-3)
    assert found.cut.section.second[1, 1] / found.volume == pytest.approx(p / 2, rel=2e-3)


@pytest.mark.parametrize("zeta", [-0.6, 0.0, 0.4, 0.9])
def test_ellipsoid(zeta: float) -> None:
    # Waterline at z = zeta c: s = 1/2 + 3 zeta/4 - zeta^3/4, z_B = -c^2 (1 - zeta^2)^2/D,
    # z_M = (b^2 - c^2)(1 - zeta^2)^2/D, D = 4c(2/3 + zeta - zeta^3/3): a stretched cap of a ball, in closed form.
    a, b, c = 0.05, 0.014, 0.011
    share = 0.5 + 0.75 * zeta - zeta**3 / 4
    body = hull(shapes.ellipsoid((a, b, c), 6))
    found = body.settled(UP, share * body.volume)
    below = 4 * c * (2 / 3 + zeta - zeta**3 / 3)
    cap = (1 - zeta**2) ** 2
    assert found.cut.height == pytest.approx(zeta * c, abs=1e-4 * c)
    assert found.centre[2] == pytest.approx(-(c**2) * cap / below, rel=1e-3)
    metacentre = found.centre[2] + np.diag(found.cut.section.second)[:2] / found.volume
    assert metacentre[1] == pytest.approx((b**2 - c**2) * cap / below, rel=6e-3)
    assert metacentre[0] == pytest.approx((a**2 - c**2) * cap / below, rel=1e-3)


# Ellipsoid 100 x 16 x 22 mm in water of 998.2 kg/m3: mass g, submerged share, draught mm, BM along and across mm, g/mm;
# worked by hand from the closed form above for fresh water at 20 degrees.
TABLE = [
    (9.07, 0.4930, 10.90, 86.4, 2.21, 1.25),
    (14.0, 0.7610, 15.00, 42.1, 1.08, 1.09),
    (16.0, 0.8697, 17.02, 24.0, 0.615, 0.88),
    (17.5, 0.9512, 19.06, 9.6, 0.246, 0.58),
]


@pytest.mark.parametrize(("mass", "share", "draught", "along", "across", "per_mm"), TABLE)
def test_table_of_a_bait_shaped_ellipsoid(
    mass: float, share: float, draught: float, along: float, across: float, per_mm: float
) -> None:
    water, smooth = 998.2, 4 / 3 * np.pi * 0.05 * 0.008 * 0.011
    body = hull(shapes.ellipsoid((0.05, 0.008, 0.011), 6))
    under = mass * 1e-3 / water / smooth
    assert under == pytest.approx(share, abs=6e-5)
    found = body.settled(UP, under * body.volume)
    assert (found.cut.height + 0.011) * 1e3 == pytest.approx(draught, abs=0.011)
    section = found.cut.section
    assert section.second[0, 0] / found.volume * 1e3 == pytest.approx(along, rel=3e-3)
    assert section.second[1, 1] / found.volume * 1e3 == pytest.approx(across, rel=3e-3)
    assert section.area * water == pytest.approx(per_mm, rel=5e-3)


def test_wigleys_hull() -> None:
    # Parabolic hull of Wigley (1934): C_B 4/9, C_M 2/3, C_WP 2/3, KB 5T/8, BM 3 B^2/35 T and 3 L^2/40 T (integrals of
    # its polynomial), at the draught to its deck edge.
    length, beam, draught = 0.1, 0.01, 0.00625
    errors = []
    for cells in (32, 64, 128):
        body = hull(shapes.wigley(length, beam, draught, 0.004, cells))
        found = body.at(UP, 0.0)
        section = found.cut.section
        errors.append(
            np.array(
                [
                    found.volume / (length * beam * draught * 4 / 9),
                    section.area / (length * beam * 2 / 3),
                    (found.centre[2] + draught) / (5 / 8 * draught),
                    section.second[1, 1] / found.volume / (3 / 35 * beam**2 / draught),
                    section.second[0, 0] / found.volume / (3 / 40 * length**2 / draught),
                ]
            )
            - 1
        )
        amidships = body.index.cut(np.array([1.0, 0, 0]), 1e-9).section.area - beam * 0.004
        assert amidships == pytest.approx(2 / 3 * beam * draught, rel=1e-2)
    assert np.log2(np.abs(errors[0] / errors[2])) / 2 == pytest.approx(np.full(5, 2.0), abs=0.1)
    assert np.abs(errors[2]).max() < 1e-3
    settled = body.settled(UP, found.volume)
    assert settled.cut.height == pytest.approx(0, abs=1e-12)


def test_wetted_skin_of_wigleys_hull() -> None:
    # S = 0.14879 L^2 at L/B 10, B/T 1.6 (quadrature of the hull's equation): by the coat below water.
    length, thickness = 0.1, 1e-5
    surface = shapes.wigley(length, length / 10, length / 16, 0.004, 128)
    body = hull(surface, thickness)
    assert body.at(UP, 0.0).cut.coat_volume / thickness == pytest.approx(0.14879 * length**2, rel=1e-3)


def test_hanging_points_displace_in_every_posture() -> None:
    # A box floats on its own volume and on a hook below it: the draught falls short by the hook's, and B moves to it.
    size, hook, at = 0.02, 1e-7, np.array([0.01, 0.0, -0.03])
    body = hull(shapes.box((size, size, size), level=1), volume=hook, at=at)
    volume = 0.6 * size**3
    found = body.settled(UP, volume)
    own = volume - hook
    assert found.cut.height == pytest.approx(own / size**2 - size / 2, abs=1e-14)
    middle = np.array([0, 0, (found.cut.height - size / 2) / 2])
    np.testing.assert_allclose(found.centre, (own * middle + hook * at) / volume, rtol=0, atol=1e-15)
    assert body.volume == pytest.approx(size**3 + hook, rel=1e-14)
    np.testing.assert_allclose(body.centre, hook * at / body.volume, rtol=0, atol=1e-15)


def test_a_coat_displaces_by_its_wetted_skin() -> None:
    # Upright box: t (l b + 2 (l + b) T) under water, the waterplane wider by its four edges: l b + 2 (l + b) t.
    length, beam, height, coat = 0.1, 0.02, 0.03, 0.2e-3
    body = hull(shapes.box((length, beam, height), level=2), coat)
    draught = 0.0171
    found = body.at(UP, draught - height / 2)
    skin = length * beam + 2 * (length + beam) * draught
    assert found.volume == pytest.approx(length * beam * draught + coat * skin, rel=1e-12)
    assert found.cut.section.area == pytest.approx(length * beam + 2 * (length + beam) * coat, rel=1e-12)
    assert body.settled(UP, found.volume).cut.height == pytest.approx(draught - height / 2, abs=1e-13)


def test_a_coated_deck_awash_is_wetted_in_part() -> None:
    # The deck's coat comes under all at once; between, so much of it is wet as makes up the volume. B by hand: box,
    # bottom coat, side coats and a part of the deck's, each at its own middle.
    length, beam, height, coat = 0.1, 0.03, 0.02, 0.2e-3
    body = hull(shapes.box((length, beam, height), level=2), coat)
    solid, deck, sides = length * beam * height, coat * length * beam, coat * 2 * (length + beam) * height
    volume = solid + deck + sides + 0.3 * deck
    found = body.settled(UP, volume)
    assert found.volume == pytest.approx(volume, rel=1e-14)
    assert found.cut.height == pytest.approx(height / 2, abs=1e-12)
    assert found.centre == pytest.approx([0, 0, (0.3 - 1) * deck * height / 2 / volume], abs=1e-12)
    section = found.cut.section
    assert section.area == pytest.approx(length * beam + 2 * (length + beam) * coat, rel=1e-9)
    # A hair off the level the ribbon ends with the body instead of going on without end.
    aslant = body.at(np.array([0, 1e-9, 1.0]), height / 2 - 1e-12).cut.section
    assert section.area < aslant.area < 8 * section.area


@given(st.integers(0, 10_000), st.floats(0.002, 0.998))
def test_what_is_displaced_is_what_was_asked(seed: int, share: float) -> None:
    body = hull(shapes.lumpy(seed, level=2), 0.1e-3, 2e-8, np.array([0.0, 0.0, -0.05]))
    volume = body.point_volume + share * (body.volume - body.point_volume)
    found = body.settled(shapes.direction(seed), volume)
    assert found.volume == pytest.approx(volume, rel=1e-12)


def test_the_same_draught_from_any_start() -> None:
    body, up = hull(shapes.lumpy(4)), shapes.direction(1)
    volume = 0.3 * body.volume
    plain = body.settled(up, volume)
    for start in (-1e3, plain.cut.height - 0.01, plain.cut.height, plain.cut.height + 0.02, 1e3):
        assert body.settled(up, volume, start).cut.height == pytest.approx(plain.cut.height, abs=1e-12)


def test_a_kilometre_off(monkeypatch: pytest.MonkeyPatch) -> None:
    # Heights carry 1.1e-13 m there: the draught no better, but no worse either, and in as few cuts.
    surface, up = shapes.lumpy(6), shapes.direction(2)
    shift = np.array([1000.0, -1000.0, 1000.0])
    near, far = hull(surface), hull(surface.moved(shift=shift))
    cuts: list[float] = []
    cut = BlockIndex.cut

    def counted(index: BlockIndex, normal: Floats, height: float) -> Cut:
        cuts.append(height)
        return cut(index, normal, height)

    monkeypatch.setattr(BlockIndex, "cut", counted)
    here, there = near.settled(up, 0.6 * near.volume), far.settled(up, 0.6 * near.volume)
    assert len(cuts) < 14
    assert there.cut.height - shift @ up == pytest.approx(here.cut.height, abs=5e-13)
    np.testing.assert_allclose(there.centre - shift, here.centre, rtol=0, atol=1e-11)


@pytest.mark.parametrize("share", [0.0, -0.1, 1.0, 1.2])
def test_more_than_the_hull_holds_is_refused(share: float) -> None:
    body = hull(shapes.sphere(0.01, 2))
    with pytest.raises(ValueError, match="cannot be displaced"):
        body.settled(UP, share * body.volume)


def test_nothing_wet_has_no_centre() -> None:
    found = hull(shapes.sphere(0.01, 2)).at(UP, -1.0)
    assert found.volume == 0
    assert found.centre == pytest.approx(np.zeros(3))
