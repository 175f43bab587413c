"""What balls do to a bait, by hand: shift, hanging angle, reserve, and the chamber full of water."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import numpy as np
import pytest
import shapes
from workbench import bait, balls, void

from meshlure.bait.pieces import Substance
from meshlure.chambering.ranking import WEIGHTS, ranked
from meshlure.chambering.trial import Trial, leaked, rested
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.shapes import rod
from meshlure.making.chamber.bore import measured
from meshlure.making.chamber.needs import Choice, Lining, Needs
from meshlure.making.chamber.option import CHAMBER, Option
from meshlure.making.chamber.site import Site
from meshlure.physics.buoyancy import Behaviour
from meshlure.physics.posture import attitude

MM, G = 1e-3, 1e-3
STEEL = Substance("steel", 7800.0, 7800.0, 7800.0, "", assumed=False)
BRASS = Substance("brass", 8500.0, 8500.0, 8500.0, "", assumed=False)
SIZE = np.array([60, 14, 20]) * MM
SLOPE = np.radians(8.0)
AXIS = np.array([-np.cos(SLOPE), 0, -np.sin(SLOPE)])
BORE = Cylinder(np.array([3 * MM, 0, -4 * MM]), AXIS, 30 * MM, 3 * MM)


def site(density: float = 1.2, **keys: Any) -> Site:
    return Site.of(bait(shapes.box(SIZE.tolist()), density=density, **keys), SLOPE)


def option(here: Site, count: int = 2, lining: Lining | None = None) -> Option:
    return Option(Choice(5 * MM, count, STEEL), measured(here, BORE), lining, None)


def by_hand(density: float, end: str, count: int = 2, tube: float = 0.0) -> tuple[float, np.ndarray[Any, Any]]:
    """Mass, kg, and centre of gravity, m, of box less bore plus balls, plus a brass tube of a wall."""
    box, hole = SIZE.prod() * density * 1e3, np.pi * BORE.radius**2 * BORE.length * density * 1e3
    brass = np.pi * (BORE.radius**2 - (BORE.radius - tube) ** 2) * BORE.length * 8500.0
    ball = np.pi / 6 * (5 * MM) ** 3 * 7800.0
    steps = (BORE.length / 2 - (np.arange(count) + 0.5) * 5 * MM) * (1 if end == "nose" else -1)
    places = BORE.middle + steps[:, None] * AXIS
    mass = box - hole + brass + count * ball
    return mass, ((brass - hole) * BORE.middle + ball * places.sum(axis=0)) / mass


@pytest.mark.parametrize(("count", "tube"), [(1, 0.0), (3, 0.0), (2, 0.3 * MM)])
def test_mass_centre_and_shift_by_hand(count: int, tube: float) -> None:
    here = site()
    made = option(here, count, Lining(BRASS, tube) if tube else None)
    found = rested(here, made)
    centres = {}
    for end in ("nose", "tail"):
        mass, centres[end] = by_hand(1.2, end, count, tube)
        weighed = made.composed(here).mass({CHAMBER: end})
        assert weighed.amount == pytest.approx(mass, rel=1e-12)
        np.testing.assert_allclose(weighed.centre, centres[end], atol=1e-12)
    np.testing.assert_allclose(found.shift, centres["tail"] - centres["nose"], atol=1e-12)
    assert np.linalg.norm(found.shift) == pytest.approx(made.choice.mass * made.travel / mass, rel=1e-12)
    assert found.reserve == pytest.approx(SIZE.prod() * 1000 - mass, rel=1e-9)


def test_it_hangs_with_its_weight_below_its_bulk() -> None:
    here = site()
    found = rested(here, option(here, 1, Lining(BRASS, 0.4 * MM)))
    for end, rest in found.rested.items():
        _, centre = by_hand(1.2, end, 1, 0.4 * MM)
        # The box's own middle, 0, is the centre of buoyancy: up is the way to it.
        assert rest.angles is not None
        assert rest.angles.nose_up == pytest.approx(np.arctan2(centre[0], -centre[2]), abs=1e-9)
        assert rest.angles.lean == pytest.approx(0.0, abs=1e-9)
        # The bore falls towards the nose by its own slope less what the nose is up.
        assert rest.slope == pytest.approx(SLOPE - rest.angles.nose_up, abs=1e-9)
        assert rest.returns == (rest.angles.nose_up <= SLOPE - np.radians(1.0))
    turns = [rest.angles.nose_up for rest in found.rested.values() if rest.angles is not None]
    assert found.change == pytest.approx(abs(turns[0] - turns[1]), abs=1e-9)


def test_it_weighs_as_a_drawn_chamber_does() -> None:
    here = site(0.6)
    ours = rested(here, option(here)).rested
    drawn = bait(
        shapes.box(SIZE.tolist()), void("bore", rod(BORE, 96)), balls=[balls("bore", 5 * MM, 2, 7.8)], density=0.6
    )
    other = Site.of(drawn, SLOPE)
    for end in ("nose", "tail"):
        theirs = other.vessel.reposed({"bore": end}, drawn.frame.back)
        assert theirs is not None
        up = theirs.rest.state.up
        angles = attitude(up, drawn.frame.nose, drawn.frame.back, drawn.frame.side)
        own = ours[end].angles
        assert own is not None
        assert angles.nose_up == pytest.approx(own.nose_up, abs=1e-5)


@pytest.mark.parametrize(("density", "state"), [(1.2, Behaviour.SINKS), (0.5, Behaviour.FLOATS)])
def test_full_of_water_it_displaces_the_bore_less_and_the_balls_more(density: float, state: Behaviour) -> None:
    here = site(density)
    made = option(here)
    found = leaked(here, rested(here, made))
    hollow, two = np.pi * BORE.radius**2 * BORE.length, 2 * np.pi / 6 * (5 * MM) ** 3
    mass, _ = by_hand(density, "nose")
    assert found.reserve == pytest.approx((SIZE.prod() - hollow + two) * 1000 - mass, rel=1e-9)
    assert found.state is state


def test_the_score_is_the_weighted_sum() -> None:
    here = site()
    asked = Needs((), 1 * MM, 2.5 * MM, 2 * MM, 1 * MM, SLOPE, "none", None)
    trials = [rested(here, option(here, count)) for count in (1, 2)]
    rows = ranked(trials, asked)
    assert [row.trial.option.choice.count for row in rows] == [2, 1]
    most = max(np.linalg.norm(trial.shift) for trial in trials)
    for row in rows:
        trial: Trial = row.trial
        wall = min(trial.option.bore.wall / (1.5 * 2.5 * MM), 1.0)
        by_sum = WEIGHTS["shift"] * np.linalg.norm(trial.shift) / most
        by_sum += WEIGHTS["posture"] * max(0.0, 1 - np.degrees(trial.change) / 10) + WEIGHTS["wall"] * wall
        assert row.score == pytest.approx(by_sum + WEIGHTS["returns"] * trial.returns, rel=1e-12)
    assert sum(WEIGHTS.values()) == pytest.approx(1.0)


def test_balls_of_other_chambers_stay_where_they_are() -> None:
    old = void("old", rod(replace(BORE, middle=np.array([3 * MM, 0, 5 * MM]), length=12 * MM), 48))
    here = Site.of(
        bait(shapes.box(SIZE.tolist()), old, balls=[balls("old", 5 * MM, 1, 7.8, at="tail")], density=1.2), SLOPE
    )
    made = option(here)
    found = rested(here, made)
    mass = made.composed(here).mass({"old": "tail", CHAMBER: "nose"}).amount
    assert np.linalg.norm(found.shift) == pytest.approx(made.choice.mass * made.travel / mass, rel=1e-12)
