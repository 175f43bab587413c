"""What levels a bait, by the statics of a floating box: the moment of what is moved or added, over nothing else."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from workbench import bait, insert, vector

from meshlure.bait.composition import compose
from meshlure.bait.pieces import Bait
from meshlure.geometry.blocks import BlockIndex
from meshlure.physics.levelling import ballast_move, weight_for_level
from meshlure.physics.repose import Vessel

LENGTH, WIDTH, DEPTH = 0.08, 0.03, 0.02


def afloat(*, at: float = 8.0, aside: float = 0.0) -> tuple[Bait, Vessel]:
    """A box of 0.6 g/cm3 with a cube of lead of 5 mm, low in it, so many mm behind its middle and to one side."""
    cube = shapes.box(tuple(vector(5, 5, 5)), tuple(vector(at, aside, -6)))
    made = bait(shapes.box((LENGTH, WIDTH, DEPTH)), insert("slug", cube, 11.34))
    composition = compose(made)
    index = BlockIndex.build(composition.skin.surface)
    return made, Vessel(composition, index, (), made.frame, made.water.density)


def test_ballast_goes_back_to_the_middle() -> None:
    made, vessel = afloat(at=8.0)
    # Level, a box's centre of buoyancy lies under its middle: nose is -x, so the slug goes 8 mm towards it.
    move = ballast_move(vessel, {}, made.frame.back, made.frame.nose)
    assert move is not None
    assert move.piece == "slug"
    assert move.by == pytest.approx(8e-3, rel=1e-6)


def test_ballast_goes_back_to_the_plane_of_nose_and_back() -> None:
    made, vessel = afloat(at=0.0, aside=1.5)
    move = ballast_move(vessel, {}, made.frame.back, made.frame.side)
    assert move is not None
    assert move.by == pytest.approx(-1.5e-3 * float(np.sign(made.frame.side[1])), rel=1e-6)


def test_a_weight_at_the_nose_makes_up_for_ballast_behind() -> None:
    made, vessel = afloat(at=8.0)
    weight = weight_for_level(vessel, {}, made.frame.back, (0.03, -0.03))
    assert weight is not None
    # 125 mm3 of lead for body, 8 mm behind the middle, against a weight 30 mm before it.
    assert weight.net == pytest.approx(125e-9 * (11340 - 600) * 8 / 30, rel=1e-6)
    whole = LENGTH * WIDTH * DEPTH * 1000 - vessel.composition.still_mass.amount
    assert weight.reserve == pytest.approx(whole - weight.net, rel=1e-9)


def test_a_bait_that_would_sink_is_offered_no_weight() -> None:
    made, vessel = afloat(at=38.0 - 2.5)
    heavy = weight_for_level(vessel, {}, made.frame.back, (1e-4, -1e-4))
    assert heavy is None


def test_a_wanted_angle_is_held_once_the_slug_has_moved() -> None:
    made, vessel = afloat(at=0.0)
    up = np.sin(np.radians(1)) * made.frame.nose + np.cos(np.radians(1)) * made.frame.back
    move = ballast_move(vessel, {}, up, made.frame.nose)
    assert move is not None
    moved, other = afloat(at=-move.by * 1e3)
    found = other.reposed({}, moved.frame.back)
    assert found is not None
    assert float(found.rest.state.up @ moved.frame.nose) == pytest.approx(np.sin(np.radians(1)), abs=1e-6)
