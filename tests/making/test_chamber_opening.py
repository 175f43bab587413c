"""Holes that balls go in by, and their plugs, against boxes in which their volumes are known."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from workbench import bait, insert

from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.solids import Solid
from meshlure.making.chamber.bore import measured
from meshlure.making.chamber.opening import TIGHT, at_end, from_belly, hole
from meshlure.making.chamber.site import Site

MM = 1e-3
R = 2.5 * MM
BODY = shapes.box((60 * MM, 12 * MM, 20 * MM))
BORE = Cylinder(np.array([2 * MM, 0, 1 * MM]), np.array([-1.0, 0, 0]), 40 * MM, R)
"""From x = -18 to 22 mm, 12 mm behind the nose's face and 8 before the tail's; its underside at z = -1.5 mm."""

SITE = Site.of(bait(BODY, density=1.2), 0.0)
DISC = np.pi * R**2


@pytest.mark.parametrize(("side", "plug"), [("nose", 12 * MM), ("tail", 8 * MM)])
def test_a_hole_from_an_end_is_closed_by_a_plug_of_that_length(side: str, plug: float) -> None:
    opening = at_end(SITE, measured(SITE, BORE), side)
    assert opening.plug == pytest.approx(plug, abs=1e-9)
    whole = Solid.of(BODY)
    taken, closes = hole(whole, BORE, opening)
    body = whole.less(taken)
    assert whole.volume - body.volume == pytest.approx(DISC * (40 * MM + plug), rel=1e-9)
    assert closes.volume == pytest.approx(np.pi * (R + TIGHT) ** 2 * plug, rel=1e-9)
    # With the plug in, the bore alone is left, closed off: the plug laps into the wall all round.
    closed = body.joined(closes)
    assert closed.volume == pytest.approx(60 * 12 * 20 * MM**3 - DISC * 40 * MM, rel=1e-9)
    assert sorted(part.volume > 0 for part in closed.parts()) == [False, True]
    # It ends in the skin, and begins at the end face.
    low, high = closes.surface().bounds[:, 0]
    assert (low, high) == pytest.approx((-30 * MM, -18 * MM) if side == "nose" else (22 * MM, 30 * MM), abs=1e-9)


def test_a_hole_from_the_belly_is_closed_likewise() -> None:
    opening = from_belly(SITE, measured(SITE, BORE), 2 * MM, 1 * MM)
    assert opening is not None
    # From the bore's underside, 1.5 mm below the middle, to the belly.
    assert opening.plug == pytest.approx(8.5 * MM, abs=1e-9)
    whole = Solid.of(BODY)
    taken, closes = hole(whole, BORE, opening)
    # Half a Steinmetz solid, 16 r^3/3 in all, is in both the bore and the hole from the axis down.
    below = DISC * 11 * MM - 8 / 3 * R**3
    assert taken.met(whole).volume == pytest.approx(DISC * 40 * MM + below, rel=2e-4)
    assert closes.volume == pytest.approx(below, rel=0.01)
    closed = whole.less(taken).joined(closes)
    assert closed.volume == pytest.approx(whole.volume - DISC * 40 * MM, rel=1e-5)
    assert len(closed.parts()) >= 2


def test_a_hole_from_the_belly_makes_way_for_what_lies_there() -> None:
    def opened(at: float, long: float) -> Cylinder | None:
        weight = shapes.box((long * MM, 4 * MM, 2 * MM), (at * MM, 0, -6 * MM))
        site = Site.of(bait(BODY, insert("weight", weight, 11.3), density=1.2), 0.0)
        found = from_belly(site, measured(site, BORE), 2 * MM, 1 * MM)
        return None if found is None else found.drill

    # Half a bore from either end face, unless the weight is there; then as near to one as it lets.
    for at, long, place in ((-16, 4, 19.5), (20, 4, -15.5), (2, 24, 19.5)):
        drill = opened(at, long)
        assert drill is not None
        assert abs(drill.middle[0] - 2 * MM) == pytest.approx(abs(place - 2) * MM, abs=1e-9)
    between = opened(10, 30)
    assert between is not None
    assert -15.51 * MM <= between.middle[0] <= (10 - 15 - 2.5 - 1) * MM
    assert opened(2, 40) is None


def test_a_plug_shorter_than_the_end_wall_is_none() -> None:
    low = Cylinder(np.array([2 * MM, 0, -6 * MM]), np.array([-1.0, 0, 0]), 40 * MM, R)
    assert from_belly(SITE, measured(SITE, low), 1.4 * MM, 1 * MM) is not None
    assert from_belly(SITE, measured(SITE, low), 1.6 * MM, 1 * MM) is None


def test_a_forked_tail_is_drilled_only_as_far_as_the_fork() -> None:
    fork = Solid.of(shapes.box((5 * MM, 14 * MM, 22 * MM), (26 * MM, 0, 0)))
    forked = Solid.of(BODY).less(fork.met(Solid.of(shapes.box((5 * MM, 14 * MM, 10 * MM), (26 * MM, 0, 1 * MM)))))
    site = Site.of(bait(forked.surface(), density=1.2), 0.0)
    opening = at_end(site, measured(site, BORE), "tail")
    assert opening.plug == pytest.approx(1.5 * MM, abs=1e-9)
    taken, closes = hole(forked, BORE, opening)
    assert forked.met(taken).volume == pytest.approx(DISC * 41.5 * MM, rel=1e-6)
    assert closes.surface().bounds[1, 0] == pytest.approx(23.5 * MM, abs=1e-9)
