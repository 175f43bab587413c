"""Ballast as formulas: what it weighs, what it takes from the body, and the meshes that are drawn of it.

Authorities: volumes and moments of cylinders and balls (any handbook of mechanics), the general mesh library's volumes.
"""

from __future__ import annotations

from math import pi

import numpy as np
import pytest
import shapes

from meshlure.bait.pieces import Substance
from meshlure.making.balance.ballast import BALL, EMBEDDED, FROM_BELLY, ROD, Ballast, Kind

MM = 1e-3
NOSE, BACK = np.array([-1.0, 0.0, 0.0]), np.array([0.0, 0.0, 1.0])
BODY = 600.0
"""kg/m3."""


def of(density: float) -> Substance:
    return Substance("metal", density, density, density, "by hand", assumed=False)


LEAD, EPOXY = of(11340.0), of(1150.0)


def kind(shape: str, fit: float = 0.0, glue: Substance | None = None, count: int = 1, pocket: str = EMBEDDED) -> Kind:
    return Kind(LEAD, shape, 5 * MM, count, pocket, fit, glue)


def rod(length: float, diameter: float) -> float:
    """m3."""
    return pi / 4 * diameter**2 * length


def test_a_rod_adds_itself_less_the_body_it_replaces() -> None:
    # 18 mm of 5 mm lead: 353.4 mm3, 4.008 g, in the place of 0.212 g of body.
    assert kind(ROD).net(18 * MM, BODY) == pytest.approx(rod(18 * MM, 5 * MM) * (11340 - 600), rel=1e-12)
    assert kind(ROD).net(18 * MM, BODY) == pytest.approx(3.796e-3, abs=5e-7)


@pytest.mark.parametrize("glue", [None, EPOXY])
def test_a_rod_with_a_gap(glue: Substance | None) -> None:
    own, pocket = rod(18 * MM, 5 * MM), rod(18.4 * MM, 5.4 * MM)
    filled = 0.0 if glue is None else 1150.0
    net = own * 11340 + (pocket - own) * filled - pocket * 600
    assert kind(ROD, 0.2 * MM, glue).net(18 * MM, BODY) == pytest.approx(net, rel=1e-12)


@pytest.mark.parametrize(("fit", "glue"), [(0.0, None), (0.2 * MM, None), (0.2 * MM, EPOXY)])
@pytest.mark.parametrize("net", [0.5e-3, 4e-3])
def test_the_length_gives_the_net_mass_back(fit: float, glue: Substance | None, net: float) -> None:
    made = kind(ROD, fit, glue)
    assert made.net(made.length_for(net, BODY), BODY) == pytest.approx(net, rel=1e-12)


def test_a_hand_cut_length() -> None:
    # 3.5 g over (11340 - 600) kg/m3 x 19.635 mm2.
    assert kind(ROD).length_for(3.5e-3, BODY) == pytest.approx(3.5e-3 / (10740 * pi / 4 * 25e-6), rel=1e-12)


def test_balls_touch_in_a_drilled_hole_and_have_a_wall_between_them_else() -> None:
    row = Ballast.balls(kind(BALL, 0.1 * MM, count=3), np.zeros(3), NOSE)
    # 5 mm balls, pockets of 5.2 mm, half a millimetre of wall between these.
    assert row.kind.spacing == pytest.approx(5.7 * MM)
    assert [float(piece.middle @ NOSE) for piece in row.pieces()] == pytest.approx([-5.7 * MM, 0.0, 5.7 * MM])
    drilled = Ballast.balls(kind(BALL, 0.1 * MM, count=3, pocket=FROM_BELLY), np.zeros(3), BACK)
    assert drilled.kind.spacing == pytest.approx(5 * MM)
    assert drilled.taken().amount == pytest.approx(rod(15.2 * MM, 5.2 * MM), rel=1e-12)


def test_moments_of_a_rod() -> None:
    # About its middle: m L^2/12 along, m r^2/4 across (any handbook of mechanics).
    middle = np.array([30.0, 1.0, -4.0]) * MM
    mass = Ballast(kind(ROD), 18 * MM, middle, NOSE).mass()
    assert mass.centre == pytest.approx(middle)
    along, across = mass.amount * (18 * MM) ** 2 / 12, mass.amount * (2.5 * MM) ** 2 / 4
    assert mass.second == pytest.approx(np.diag([along, across, across]), rel=1e-9)


def test_moments_of_balls_in_a_row() -> None:
    # Each m d^2/20 about its own middle (2/5 m r^2 about an axis is two of these), and the far ones by Steiner.
    mass = Ballast.balls(kind(BALL, count=2), np.zeros(3), NOSE).mass()
    one = pi / 6 * (5 * MM) ** 3 * 11340
    assert mass.amount == pytest.approx(2 * one)
    own = 2 * one * (5 * MM) ** 2 / 20
    assert mass.second == pytest.approx(np.diag([own + 2 * one * (2.75 * MM) ** 2, own, own]), rel=1e-9)


@pytest.mark.parametrize("count", [1, 3])
def test_meshes_have_the_true_volume(count: int) -> None:
    row = Ballast.balls(kind(BALL, 0.2 * MM, count=count), np.array([1.0, 2.0, 3.0]), NOSE)
    for surface in row.surfaces():
        assert shapes.as_trimesh(surface).is_watertight
        assert shapes.as_trimesh(surface).volume == pytest.approx(pi / 6 * (5 * MM) ** 3, rel=1e-6)
    for surface in row.rooms():
        assert shapes.as_trimesh(surface).volume == pytest.approx(pi / 6 * (5.4 * MM) ** 3, rel=1e-6)
    cut = Ballast(kind(ROD, 0.2 * MM), 7 * MM, np.zeros(3), BACK)
    assert [shapes.as_trimesh(s).volume for s in cut.surfaces()] == pytest.approx([rod(7 * MM, 5 * MM)], rel=1e-9)
    assert [shapes.as_trimesh(s).volume for s in cut.rooms()] == pytest.approx([rod(7.4 * MM, 5.4 * MM)], rel=1e-9)


def test_the_hole_begins_where_the_room_ends() -> None:
    upright = Ballast(kind(ROD, 0.2 * MM, pocket=FROM_BELLY), 6 * MM, np.array([0.0, 0.0, -2 * MM]), BACK)
    hole = upright.drill(-10 * MM)
    assert hole is not None
    # Room from 1.2 to -5.2 mm, so the hole from there to -10.
    assert sorted(end[2] / MM for end in hole.ends) == pytest.approx([-10.0, -5.2])
    assert hole.radius == pytest.approx(2.7 * MM)
    assert Ballast(kind(ROD), 6 * MM, np.zeros(3), NOSE).drill(-10 * MM) is None


def test_glue_is_what_is_between_room_and_rod() -> None:
    parts = Ballast(kind(ROD, 0.2 * MM, EPOXY), 18 * MM, np.zeros(3), NOSE).parts()
    assert [part.name for part in parts] == ["ballast", "glue round ballast"]
    gap = rod(18.4 * MM, 5.4 * MM) - rod(18 * MM, 5 * MM)
    assert parts[1].mass.amount == pytest.approx(gap * 1150, rel=1e-9)
    assert len(Ballast(kind(ROD, 0.2 * MM), 18 * MM, np.zeros(3), NOSE).parts()) == 1
