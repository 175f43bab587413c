"""Space enclosed more than once, against boxes whose overlap is known."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.overcount import overcount


def test_two_cubes_that_share_a_corner() -> None:
    cubes = shapes.together(shapes.box((0.01,) * 3), shapes.box((0.01,) * 3, (0.005,) * 3))
    found = overcount(cubes)
    # Lines a two-hundredth of the extent apart miss or count whole rows at straight sides.
    assert found.summed == pytest.approx(2e-6, rel=0.02)
    assert found.twice == pytest.approx(0.125e-6, rel=0.05)
    # The shared cube reaches from the origin to 5 mm; every line through it is shared for 5 mm.
    assert found.where is not None
    assert all(0.0 <= value <= 0.005 for value in found.where)
    assert min(abs(value - 0.0025) for value in found.where) < 1e-9


def test_a_sound_body_and_a_cavity_enclose_nothing_twice() -> None:
    ball = shapes.sphere(0.01, 4)
    hollow = shapes.together(ball, shapes.sphere(0.004, 3).turned())
    for surface in (ball, hollow, shapes.lumpy(1), shapes.torus(0.02, 0.005, 16)):
        assert overcount(surface).twice == pytest.approx(0.0, abs=1e-15 * 1e-6)
        assert overcount(surface).where is None


def test_a_part_turned_inside_out_counts_too_little() -> None:
    apart = shapes.together(shapes.box((0.01,) * 3), shapes.box((0.01,) * 3, (0.03, 0.0, 0.0)).turned())
    found = overcount(apart)
    assert found.summed == pytest.approx(0.0, abs=1e-12)
    assert found.twice == pytest.approx(-1e-6, rel=0.02)


def test_the_place_and_the_size_of_a_body_change_nothing() -> None:
    cubes = shapes.together(shapes.box((0.01,) * 3), shapes.box((0.01,) * 3, (0.004, 0.003, 0.002)))
    here = overcount(cubes)
    there = overcount(cubes.moved(shift=np.array([3.0, -2.0, 1.0])))
    large = overcount(cubes.moved(scale=1000.0))
    assert there.twice == pytest.approx(here.twice, rel=1e-2)
    assert here.where is not None
    assert there.where is not None
    # 6 x 7 x 8 mm from (-1, -2, -3) mm are shared.
    for place, shift in ((here.where, 0.0), (there.where, np.array([3.0, -2.0, 1.0]))):
        within = np.array(place) - shift
        assert (within >= np.array([-1e-3, -2e-3, -3e-3]) - 1e-9).all()
        assert (within <= 5e-3 + 1e-9).all()
    assert large.twice == pytest.approx(here.twice * 1e9, rel=1e-2)
