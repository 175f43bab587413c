"""What facets leave out of a whole bait, against balls and cylinders by formula."""

from __future__ import annotations

import re

import numpy as np
import pytest
import shapes
from workbench import MM, bait, codes, insert, only, vector, void

from meshlure.bait.composition import compose
from meshlure.geometry.surface import Surface

FOUR_THIRDS_PI = 4 / 3 * np.pi


def ball(radius: float, level: int, at: tuple[float, float, float] = (0, 0, 0)) -> Surface:
    """Geodesic ball of a radius in mm."""
    return shapes.sphere(radius * MM, level).moved(shift=vector(*at))


def short(radius: float, level: int) -> float:
    """What the facets of a ball leave out, m3."""
    return float(FOUR_THIRDS_PI * (radius * MM) ** 3 - shapes.as_trimesh(ball(radius, level)).volume)


def test_a_slug_inside_replaces_body_where_its_facets_fall_short() -> None:
    found = compose(bait(ball(20, 4), insert("slug", ball(5, 2, (4, 0, 0)), 11.34))).deficit
    assert found.displaced == pytest.approx(short(20, 4), rel=0.03)
    assert found.mass == pytest.approx(short(20, 4) * 600 + short(5, 2) * (11340 - 600), rel=0.03)
    assert found.reserve(1000) == pytest.approx(found.displaced * 1000 - found.mass, rel=1e-12)


@pytest.mark.parametrize("kind", ["sealed", "flooded"])
def test_a_void_takes_body_away_and_water_where_it_floods(kind: str) -> None:
    found = compose(bait(ball(20, 4), void("chamber", ball(8, 3), kind))).deficit
    hollow = short(8, 3)
    assert found.mass == pytest.approx((short(20, 4) - hollow) * 600, rel=0.03)
    assert found.displaced == pytest.approx(short(20, 4) - (hollow if kind == "flooded" else 0), rel=0.03)


@pytest.mark.parametrize("kind", ["sealed", "flooded"])
def test_a_hollow_body_of_its_own_mesh(kind: str) -> None:
    made = compose(bait(shapes.together(ball(20, 4), ball(15, 4).turned()), cavities=kind))
    hollow = short(15, 4)
    assert made.deficit.mass == pytest.approx((short(20, 4) - hollow) * 600, rel=0.03)
    assert made.deficit.displaced == pytest.approx(short(20, 4) - (hollow if kind == "flooded" else 0), rel=0.03)


def test_a_bead_half_outside() -> None:
    # A small ball about a point of a box's face: outside it displaces more, inside it replaces body.
    box = shapes.box((0.08, 0.016, 0.02))
    half = short(5, 3) / 2
    found = compose(bait(box, insert("bead", ball(5, 3, (0, 0, 10)), 2.5))).deficit
    assert found.displaced == pytest.approx(half, rel=0.1)
    assert found.mass == pytest.approx(2 * half * 2500 - half * 600, rel=0.1)


def test_flat_pieces_leave_nothing_out() -> None:
    box = shapes.box((0.08, 0.016, 0.02))
    found = compose(bait(box, insert("slug", shapes.box((0.01, 0.004, 0.004)), 11.34))).deficit
    assert (found.displaced, found.mass) == pytest.approx((0, 0), abs=1e-15)


def test_a_coarse_body_is_told_with_volume_share_and_reserve() -> None:
    coarse = ball(20, 2)
    warning = only(compose(bait(coarse)).findings, "coarse-facets")
    missing = short(20, 2)
    numbers = [float(number) for number in re.findall(r"\d+\.\d+", warning.message)]
    # cm3, percent of the mesh's volume, grams of a body of 0.6 g/cm3, grams of reserve in water of 1 g/cm3.
    told = [missing * 1e6, 100 * missing / shapes.as_trimesh(coarse).volume, missing * 600e3, missing * 400e3]
    assert numbers == pytest.approx(told, rel=0.03)


def test_a_fine_body_is_not() -> None:
    assert short(20, 4) / shapes.as_trimesh(ball(20, 4)).volume < 0.005
    assert "coarse-facets" not in codes(compose(bait(ball(20, 4))).findings)


def test_the_smooth_bait_converges_faster_than_its_facets() -> None:
    # Mass and displaced volume of a ball with a slug and a cavity: facets by the square, smoothed by more.
    radius, raw, smooth = 20.0, [], []
    exact = FOUR_THIRDS_PI * 1e-9 * (600 * radius**3 + (11340 - 600) * 5**3 - 600 * 4**3)
    for level in (2, 3, 4):
        pieces = [insert("slug", ball(5, level, (8, 0, 0)), 11.34), void("chamber", ball(4, level, (-8, 0, 0)))]
        made = compose(bait(ball(radius, level), *pieces))
        raw.append(made.still_mass.amount - exact)
        smooth.append(raw[-1] + made.deficit.mass)
    assert shapes.order(raw) == pytest.approx([2, 2], abs=0.1)
    assert (shapes.order(smooth) > 3.5).all()
    assert abs(smooth[-1]) < abs(raw[-1]) / 100
