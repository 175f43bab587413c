"""Meshes of bores: the cylinder's own volume, closed, and lying on each other where one goes on from another."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.solids import Solid
from meshlure.geometry.soundness import examine
from meshlure.making.chamber.barrel import barrel, pace, sleeve

BORE = Cylinder(np.array([0.01, -0.02, 0.03]), shapes.direction(3), 0.0301, 0.00275)


@pytest.mark.parametrize(("behind", "before"), [(0.0, 0.0), (0.0013, 0.0), (0.0, 0.0047), (0.01, 0.02)])
def test_a_barrel_holds_the_round_cylinder(behind: float, before: float) -> None:
    made = barrel(BORE, behind, before)
    length = BORE.length + behind + before
    moments = solid_moments(made)
    assert moments.amount == pytest.approx(np.pi * BORE.radius**2 * length, rel=1e-12)
    np.testing.assert_allclose(moments.centre, BORE.middle + (before - behind) / 2 * BORE.axis, atol=1e-9)
    assert [finding.code for finding in examine(made, "bore").findings] == []
    # Its skin stands no more than r/400 off the round one.
    off = made.vertices - BORE.middle
    rho = np.linalg.norm(off - (off @ BORE.axis)[:, None] * BORE.axis, axis=1)[:-2]
    assert rho.max() == pytest.approx(BORE.radius, rel=1 / 400)
    # Merging what is closer than a micrometre to a straight line leaves all but the caps as they are.
    assert len(Solid.of(made).simplified(1e-6).surface().faces) > 0.99 * len(made.faces)


def test_a_hole_that_goes_on_from_a_bore_lies_on_it() -> None:
    one, both = barrel(BORE), barrel(BORE, before=0.012)
    shared = {tuple(row) for row in np.round(one.vertices[:-2], 9)} & {tuple(row) for row in np.round(both.vertices, 9)}
    assert len(shared) == len(one.vertices) - 2
    # What the longer one has more is the cylinder beyond.
    more = Solid.of(both).less(Solid.of(one))
    assert more.volume == pytest.approx(np.pi * BORE.radius**2 * 0.012, rel=1e-6)


def test_a_sleeve_holds_what_is_between_two_cylinders() -> None:
    made = sleeve(BORE, 0.0025, pace(BORE.radius))
    assert solid_moments(made).amount == pytest.approx(np.pi * (BORE.radius**2 - 0.0025**2) * BORE.length, rel=1e-12)
    assert [finding.code for finding in examine(made, "tube").findings] == []
