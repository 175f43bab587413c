"""Places of rest by the locus of centres of buoyancy, against descents on the full mesh and a closed form."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from afloat import UP, Afloat, angle_between
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from meshlure.geometry.surface import Floats
from meshlure.physics.immersion import Hull
from meshlure.physics.locus import Locus, turned, turns_to
from meshlure.physics.potential import Potential


def afloat(seed: int) -> tuple[Hull, Floats, Floats, float]:
    """A lumpy body at rest: hull, up, centre of gravity, volume displaced."""
    body = Afloat(shapes.lumpy(seed), 0.6)
    state = body.potential.descended(UP)
    return body.hull, state.up, body.centre, body.potential.volume


@settings(max_examples=5, deadline=None)
@given(st.integers(0, 1000))
def test_bodies_a_little_heavier_and_shifted(seed: int) -> None:
    hull, up, centre, volume = afloat(seed)
    random = np.random.default_rng(seed)
    # Shifts that turn it by some degrees.
    least = float(Potential(hull, centre, volume).at(up).modes()[0][0])
    assume(least > 0.3e-3)
    gravity = centre + random.normal(size=(60, 3)) * 0.07 * least
    volumes = volume * (1 + 0.02 * random.normal(size=60))
    locus = Locus.at(hull, up, volume)
    for batch in range(3):
        places, held = locus.rests(gravity, volumes)
        chosen = np.flatnonzero(held)[6 * batch : 6 * batch + 6]
        locus, miss = locus.looked(places[chosen], gravity[chosen], np.maximum(places[held].std(axis=0), 1e-6))
    places, held = locus.rests(gravity, volumes)
    assert held.mean() > 0.9
    for number in np.flatnonzero(held)[-4:]:
        exact = Potential(hull, gravity[number], float(volumes[number]), 1e-7).descended(up, 0.1)
        off = angle_between(exact.up, locus.ups(places[number : number + 1])[0])
        assert off < 0.05 * np.linalg.norm(places[number, :2]) + np.radians(0.2)
    assert miss < 0.1


def test_slope_and_value_are_exact_where_it_was_looked() -> None:
    hull, up, centre, volume = afloat(3)
    place = np.array([0.1, -0.15, 0.03])
    locus, _ = Locus.at(hull, up, volume).looked(place[None], centre[None], np.ones(3))
    found, slopes = locus.centres(place[None])
    ((n,), _) = turned(up, place[None, :2])
    exact = hull.settled(n, volume * 1.03)
    np.testing.assert_allclose(found[0], exact.centre, atol=1e-9)
    # Against differences of centres found by cutting the mesh again.
    for axis, step in enumerate(np.eye(3) * 1e-4):
        ends = []
        for sign in (1, -1):
            at = place + sign * step
            ((m,), _) = turned(up, at[None, :2])
            ends.append(hull.settled(m, volume * (1 + at[2])).centre)
        np.testing.assert_allclose(slopes[0][:, axis], (ends[0] - ends[1]) / 2e-4, atol=2e-5)
        assert np.linalg.norm(slopes[0][:, axis]) > 1e-3


def test_turns_lead_there_and_back() -> None:
    random = np.random.default_rng(0)
    up = shapes.direction(5)
    turns = random.normal(size=(20, 2)) * np.array([[1e-6], [1e-3], [0.3], [1.0]]).repeat(5, axis=0)
    directions, slopes = turned(up, turns)
    np.testing.assert_allclose(np.linalg.norm(directions, axis=1), 1.0, rtol=1e-12)
    np.testing.assert_allclose([turns_to(up, n) for n in directions], turns, atol=1e-12, rtol=1e-9)
    for axis in range(2):
        step = np.eye(2)[axis] * 1e-6
        by_difference = (turned(up, turns + step)[0] - turned(up, turns - step)[0]) / 2e-6
        np.testing.assert_allclose(slopes[:, :, axis], by_difference, atol=1e-8)
    # The angle between is the turn's length.
    assert angle_between(up, directions[12]) == pytest.approx(np.linalg.norm(turns[12]), rel=1e-9)


def test_a_body_that_cannot_stay_is_not_held() -> None:
    # A cube with its centre of gravity raised far above: no stable place is near.
    body = Afloat(shapes.box((0.02, 0.02, 0.02), level=2), 0.5, np.array([0.0, 0.0, -0.006]))
    hull, volume = body.hull, body.potential.volume
    state = body.potential.descended(UP)
    locus = Locus.at(hull, state.up, volume)
    _, held = locus.rests(np.array([[0.0, 0.0, -0.006], [0.0005, 0.0, 0.012]]), np.full(2, volume))
    assert list(held) == [True, False]
