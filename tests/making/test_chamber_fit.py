"""The longest bores, against a box and spheroids of which they are known, and their walls by brute force."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
import shapes
from scipy.optimize import brentq, minimize_scalar
from workbench import bait, hardware, insert, void

from meshlure.geometry.surface import Surface
from meshlure.making.chamber.bore import Bore
from meshlure.making.chamber.fit import bores
from meshlure.making.chamber.grid import Grid
from meshlure.making.chamber.line import Rules
from meshlure.making.chamber.site import Site

MM = 1e-3
R = 2.75 * MM
"""Of the bore for a ball of 5 mm with 0.5 mm of clearance."""


def found(
    body: Surface, *pieces: Any, slope: float = 0.0, most: int = 1, rules: Rules | None = None, **keys: Any
) -> list[Bore]:
    site = Site.of(bait(body, *pieces, **keys), np.radians(slope))
    kept = rules or Rules(R, 1.2 * MM, 2.0 * MM, 1.0 * MM)
    return bores(site, Grid.of(site), kept, 7.5 * MM, most)


def longest(body: Surface, *pieces: Any, **keys: Any) -> Bore:
    (bore,) = found(body, *pieces, **keys)
    return bore


def test_in_a_box_the_end_walls_decide_and_the_bore_lies_in_the_middle() -> None:
    bore = longest(shapes.box((60 * MM, 20 * MM, 16 * MM)))
    assert bore.length == pytest.approx(56 * MM, abs=0.02 * MM)
    assert bore.ends == pytest.approx((2.0 * MM, 2.0 * MM), abs=0.01 * MM)
    # Nothing but the wall's thickness tells one height from another; least it is from the rims to the end faces.
    np.testing.assert_allclose(bore.cut.middle, 0, atol=0.2 * MM)
    assert bore.cut.middle[1] == 0.0
    assert bore.wall == pytest.approx(2.0 * MM, abs=0.01 * MM)
    np.testing.assert_allclose(bore.cut.axis, [-1, 0, 0], atol=1e-12)
    assert bore.nose_end[0] < bore.tail_end[0]


@pytest.mark.parametrize("height", [12.0, 11.0])
def test_a_sloping_bore_in_a_low_box_reaches_from_wall_to_wall(height: float) -> None:
    bore = longest(shapes.box((60 * MM, 20 * MM, height * MM)), slope=8.0)
    # The upper rim at the tail keeps its wall under the top, the lower one at the nose above the bottom:
    # L/2 sin s + r cos s + w = H/2.
    s = np.radians(8.0)
    assert bore.length == pytest.approx(2 * (height * MM / 2 - 1.2 * MM - R * np.cos(s)) / np.sin(s), abs=0.08 * MM)
    assert bore.wall == pytest.approx(1.2 * MM, abs=0.01 * MM)
    # It falls towards the nose.
    assert bore.nose_end[2] < bore.tail_end[2]
    assert np.degrees(np.arctan2(bore.tail_end[2] - bore.nose_end[2], bore.tail_end[0] - bore.nose_end[0])) == (
        pytest.approx(8.0, abs=1e-9)
    )


def to_spheroid(x: float, rho: float, a: float, b: float) -> float:
    """Distance from a point inside to a spheroid, by the ellipse through it: searched over its angle."""
    best = minimize_scalar(
        lambda t: (a * np.cos(t) - x) ** 2 + (b * np.sin(t) - rho) ** 2,
        bounds=(0, np.pi / 2),
        method="bounded",
        options={"xatol": 1e-12},
    )
    return float(np.sqrt(best.fun))


def test_the_longest_bore_in_a_spheroid() -> None:
    a, b, w = 40 * MM, 10 * MM, 1.2 * MM
    site = Site.of(bait(shapes.ellipsoid((a, b, b), 5), density=1.2), 0.0)
    grid = Grid.of(site)
    # The rim keeps the wall by its nearest place, the end face its own along the axis, shortest over the rim.
    by_wall = brentq(lambda x: to_spheroid(x, R, a, b) - w, 0, 0.99 * a)
    for end_wall in (1.2 * MM, 6.0 * MM):
        (bore,) = bores(site, grid, Rules(R, w, end_wall, 1.0 * MM), 7.5 * MM)
        by_end = a * np.sqrt(1 - (R / b) ** 2) - end_wall
        # Facets of this mesh lie up to 5 micrometres within the spheroid, along the axis four times that.
        assert bore.length == pytest.approx(2 * min(by_wall, by_end), abs=0.08 * MM)
        np.testing.assert_allclose(bore.cut.middle, 0, atol=0.05 * MM)
        assert bore.wall >= w - 2e-6
        assert bore.end_wall >= end_wall - 1.1e-6


def test_a_wire_is_kept_clear_of_and_told() -> None:
    wire = insert("wire", shapes.box((0.4 * MM, 18 * MM, 0.4 * MM), (5 * MM, 0, 0)), 7.8)
    bore = longest(shapes.box((60 * MM, 20 * MM, 9 * MM)), wire)
    # From the head wall to a millimetre before the wire: 30 - 2 + 4.8 - 1.
    assert bore.length == pytest.approx(31.8 * MM, abs=0.02 * MM)
    assert bore.clear == pytest.approx(1.0 * MM, abs=0.01 * MM)
    assert bore.nearest == "'wire'"
    assert bore.nose_end[0] == pytest.approx(-28 * MM, abs=0.02 * MM)


def test_hardware_and_voids_are_kept_clear_of() -> None:
    body = shapes.box((60 * MM, 12 * MM, 9 * MM))
    eye = [hardware("eye", 0.1, (5 * MM, 0, 0))]
    assert longest(body, hardware=eye).length == pytest.approx((28 + 5 - 1) * MM, abs=0.02 * MM)
    old = void("old chamber", shapes.box((20 * MM, 6 * MM, 6 * MM), (15 * MM, 0, 0)))
    assert longest(body, old).length == pytest.approx((28 + 5 - 1) * MM, abs=0.02 * MM)
    free = void("old chamber", shapes.box((20 * MM, 6 * MM, 6 * MM), (15 * MM, 0, 0)), free=True)
    assert longest(body, free).length == pytest.approx(56 * MM, abs=0.02 * MM)


def test_a_drill_needs_its_way_to_the_skin() -> None:
    body = shapes.box((60 * MM, 20 * MM, 9 * MM))
    # Nearer to the tail: drilled from there the bore is the short one, else the long one.
    wire = insert("wire", shapes.box((0.4 * MM, 18 * MM, 0.4 * MM), (15 * MM, 0, 0)), 7.8)
    keeps = {side: Rules(R, 1.2 * MM, 2.0 * MM, 1.0 * MM, side) for side in (0, 1, -1)}
    lengths = {side: longest(body, wire, rules=rules).length for side, rules in keeps.items()}
    assert lengths[0] == lengths[1] == pytest.approx((28 + 14.8 - 1) * MM, abs=0.02 * MM)
    assert lengths[-1] == pytest.approx((28 - 15.2 - 1) * MM, abs=0.02 * MM)


def test_it_leaves_the_mid_plane_only_where_that_is_worth_it() -> None:
    body = shapes.box((60 * MM, 20 * MM, 9 * MM))
    middle = longest(body, insert("pin", shapes.box((1 * MM, 1 * MM, 8 * MM), (25 * MM, 0, 0)), 7.8))
    assert middle.cut.middle[1] == 0.0
    assert middle.length == pytest.approx((28 + 24.5 - 1) * MM, abs=0.02 * MM)
    aside = longest(body, insert("pin", shapes.box((1 * MM, 1 * MM, 8 * MM), (0, 0, 0)), 7.8))
    assert aside.length == pytest.approx(56 * MM, abs=0.02 * MM)
    assert abs(aside.cut.middle[1]) >= 0.5 * MM + 1 * MM + R - 3e-6


def test_further_places_share_no_room() -> None:
    rows = found(shapes.box((60 * MM, 12 * MM, 24 * MM)), most=3)
    heights = sorted(bore.cut.middle[2] for bore in rows)
    assert len(heights) == 3
    assert np.diff(heights).min() >= 2 * R + 0.5 * MM


@pytest.mark.parametrize("seed", [1, 4])
def test_the_wall_against_brute_force(seed: int) -> None:
    body = shapes.lumpy(seed, 3, size=0.025)
    rows = found(body, slope=5.0, rules=Rules(1.5 * MM, 1.0 * MM, 1.5 * MM, 1.0 * MM))
    assert rows
    cut = rows[0].cut
    turn = 2 * np.pi * np.arange(240) / 240
    ring = cut.radius * (np.cos(turn)[:, None] * cut.across[0] + np.sin(turn)[:, None] * cut.across[1])
    along = np.linspace(-cut.length / 2, cut.length / 2, 200)
    side = (cut.middle + along[:, None, None] * cut.axis + ring).reshape(-1, 3)
    points = np.concatenate([side[:240], side[-240:], side[::31]])
    _, apart, _ = shapes.as_trimesh(Surface(body.vertices * 1e3, body.faces)).nearest.on_surface(points * 1e3)
    # Points some 0.3 mm apart on the side, and closer on its rims, see a wall at most a hundredth of a mm too thick.
    assert rows[0].wall <= apart.min() * MM + 2.1e-6
    assert rows[0].wall == pytest.approx(apart.min() * MM, abs=0.02 * MM)
    assert rows[0].wall >= 1.0 * MM - 2e-6


def test_a_bore_that_just_fits_is_found() -> None:
    # 10 mm less a bore of 6 leave 2 on either side, to the last micrometre.
    bore = longest(shapes.box((40 * MM, 10 * MM, 16 * MM)), rules=Rules(3 * MM, 2 * MM, 2 * MM, 1 * MM))
    assert bore.length == pytest.approx(36 * MM, abs=0.02 * MM)
    assert bore.wall == pytest.approx(2 * MM, abs=1.1e-6)
    assert not found(shapes.box((40 * MM, 9.99 * MM, 16 * MM)), rules=Rules(3 * MM, 2 * MM, 2 * MM, 1 * MM))
