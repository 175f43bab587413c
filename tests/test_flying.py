"""Throws that a bait file may ask for and that cannot be: one message each, never a flight without end."""

from __future__ import annotations

from dataclasses import replace
from functools import cache
from math import radians
from typing import Any

import pytest
from studied import FOLDER

import meshlure
from meshlure.bait.composition import Composition, compose
from meshlure.bait.pieces import Bait
from meshlure.errors import InputError
from meshlure.files.sections.cast import Sinker
from meshlure.flying import flight, flown, launch, line_pull
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.stations import stations
from meshlure.physics.areas import silhouettes
from meshlure.physics.passage import Passage, passage
from meshlure.tolerances import GRAVITY


@cache
def _minnow() -> tuple[Bait, Composition, Passage]:
    bait = meshlure.read_bait(FOLDER / "minnow/minnow_coarse.toml")
    composition = compose(bait)
    frame, index = bait.frame, BlockIndex.build(composition.skin.outer)
    cuts = stations(index, frame.nose, (frame.side, frame.back))
    return bait, composition, passage(composition.skin, bait.hardware, frame, cuts, index)


def thrown(**cast: Any) -> Bait:
    bait = _minnow()[0]
    assumed = tuple(key for key in bait.plan.cast.assumed if key not in cast)
    return replace(bait, plan=replace(bait.plan, cast=replace(bait.plan.cast, assumed=assumed, **cast)))


def test_a_line_that_would_hold_the_bait_up_is_refused() -> None:
    _, composition, way = _minnow()
    weight = composition.mass({}).amount * GRAVITY
    for share in (0.91, 5.0):
        with pytest.raises(InputError, match=r"cast\.line_pull.*hold the bait up"):
            flown(thrown(line_pull=share * weight), composition, way)
    assert flown(thrown(line_pull=0.89 * weight), composition, way)["still"].flight.path.distance > 0


@pytest.mark.parametrize(
    "cast", [{"height": 0.0, "angle": 0.0}, {"height": 0.0, "angle": radians(-20)}, {"wind": -60.0}]
)
def test_a_throw_that_gets_nowhere_is_refused(cast: dict[str, float]) -> None:
    _, composition, way = _minnow()
    bait = thrown(**cast)
    seen = silhouettes(composition.skin.outer, composition.skin.outer_pairs, bait.frame, ())
    with pytest.raises(InputError, match="does not come down ahead"):
        flight(bait, composition, way, seen, 1.3e-5, 0.0, None)


def test_a_sinker_settles_the_speed() -> None:
    # A heavy ball of 22 mm hardly feels the air: a little faster than in a vacuum, where 45 degrees from a height h
    # reach R at v^2 = g R/(1 + h/R).
    bait = thrown(speed=None, sinker=Sinker(0.060, 0.022, 38.4), angle=radians(45), height=2.0, line_pull=0.0)
    bare = (GRAVITY * 38.4 / (1 + 2.0 / 38.4)) ** 0.5
    assert bare < launch(bait, 0.012) < 1.06 * bare


@pytest.mark.parametrize(
    ("sinker", "said"),
    [
        (Sinker(0.02, 0.015, 400.0), "could not have flown"),
        (Sinker(0.001, 0.008, 20.0), "hold the sinker up"),
    ],
)
def test_a_sinker_that_could_not_is_refused(sinker: Sinker, said: str) -> None:
    with pytest.raises(InputError, match=said):
        launch(thrown(speed=None, sinker=sinker, line_pull=0.03), 0.012)


def test_the_limits_of_the_verdict_can_be_set() -> None:
    _, composition, way = _minnow()
    ours = flown(thrown(), composition, way)["still"].flight.bearing
    assert ours.verdict == "tumbles"
    assert ours.trim is not None
    wide = flown(thrown(sways_within=ours.trim + 0.01), composition, way)["still"].flight.bearing
    assert wide.verdict == "sways"


def test_a_pull_that_nobody_stated_never_holds_a_light_bait_up() -> None:
    bait = _minnow()[0]
    assert "line_pull" in bait.plan.cast.assumed
    assert line_pull(bait, 0.0119) == pytest.approx(0.03)
    assert line_pull(bait, 0.002) == pytest.approx(0.3 * 0.002 * GRAVITY)
