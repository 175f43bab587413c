"""Passes between resting postures against closed forms, and against a flood of energies in a fine net of directions."""

from __future__ import annotations

import heapq
from collections.abc import Sequence

import numpy as np
import pytest
import shapes
from afloat import UP, Afloat, angle_between
from scipy.spatial import cKDTree

from meshlure.geometry.surface import Floats
from meshlure.physics.barrier import Barrier, barriers
from meshlure.physics.landscape import Landscape
from meshlure.physics.posture import Rest, spread_directions

NOSE = np.array([-1.0, 0, 0])


def found(body: Afloat, rests: Sequence[Rest]) -> list[Barrier]:
    passes = barriers(body.rough, body.potential, rests, NOSE)
    assert all(barrier is not None for barrier in passes)
    return [barrier for barrier in passes if barrier is not None]


def log_energies(share: float) -> dict[str, float]:
    """U of a square log of side 1 at its equilibria; derived in closed form for s <= 1/2.

    Flat (1 - s)/2; edge up 1/sqrt 2 - 2 sqrt(s)/3; aslant with the water across opposite sides, t = tan of the tilt,
    t^2 = 12 s (1 - s) - 2: cos (flat + t^2/(24 s)); across neighbouring sides at p and q from the corner.
    """
    energies = {"flat": (1 - share) / 2, "edge": 1 / np.sqrt(2) - 2 * np.sqrt(share) / 3}
    square = 12 * share * (1 - share) - 2
    if 0 < square <= 0.25:
        energies["aslant"] = (energies["flat"] + square / (24 * share)) / np.sqrt(1 + square)
    elif 0.25 < share < 9 / 32:
        root = np.sqrt(2.25 - 8 * share)
        p, q = (1.5 + root) / 2, (1.5 - root) / 2
        energies["aslant"] = ((1 / p + 1 / q) / 2 - 2 / 3) / np.hypot(1 / p, 1 / q)
    return energies


@pytest.mark.parametrize("share", [0.1, 0.22, 0.24, 0.265, 0.3, 0.5])
def test_a_square_log_rolls_over_its_lowest_pass(share: float) -> None:
    side = 0.02
    body = Afloat(shapes.box((0.12, side, side), level=2), share)
    rests = body.rests()
    exact = {name: side * energy for name, energy in log_energies(share).items()}
    rest, *passes = sorted(exact.values())
    assert rests[0].state.energy == pytest.approx(rest, rel=1e-12)
    for barrier, posture in zip(found(body, rests), rests, strict=True):
        assert barrier.settled
        assert barrier.rise == pytest.approx(passes[0] - rest, rel=1e-6)
        assert barrier.rise == pytest.approx(body.at(barrier.over).energy - posture.state.energy, rel=1e-9)
        assert abs(barrier.over[0]) < 1e-4


@pytest.mark.parametrize("zeta", [-0.4, 0.3, 0.8])
def test_an_ellipsoid_tips_over_its_middle_axis(zeta: float) -> None:
    # U on each axis is that axis times (1 - zeta^2)^2/(4 (2/3 + zeta - zeta^3/3)): a stretched ball, in closed form.
    semi = (0.05, 0.014, 0.011)
    share = 0.5 + 0.75 * zeta - zeta**3 / 4
    exact = (semi[1] - semi[2]) * (1 - zeta**2) ** 2 / (4 * (2 / 3 + zeta - zeta**3 / 3))
    body = Afloat(shapes.ellipsoid(semi, 6), share)
    for barrier in found(body, body.rests()):
        assert barrier.settled
        assert barrier.rise == pytest.approx(exact, rel=0.01)
        assert angle_between(np.abs(barrier.over), np.array([0, 1.0, 0])) < 0.01


def test_a_bait_with_one_posture_only_has_nowhere_to_go() -> None:
    body = Afloat(shapes.sphere(0.02, 4), 0.6, np.array([0, 0, -0.003]))
    rests = body.rests()
    assert len(rests) == 1
    assert barriers(body.rough, body.potential, rests, NOSE) == (None,)
    assert barriers(body.rough, body.potential, (), NOSE) == ()


def least_highest(body: Afloat, rests: Sequence[Rest]) -> Floats:
    """Least rise on a way from each posture to any other, over 12,000 directions each joined to its six nearest.

    Prim's way of growing one tree (R. C. Prim 1957) from every posture, on energies of the body itself.
    """
    ups = np.array([rest.state.up for rest in rests])
    net = np.vstack([spread_directions(12_000), ups])
    energies = Landscape.of(body.potential, 10**9).energies(net)
    near = np.argsort(-ups @ net.T, axis=1)[:, :7]
    neighbours = np.asarray(cKDTree(net).query(net, 9)[1])
    links: list[set[int]] = [set(row[1:].tolist()) for row in neighbours]
    for node, row in enumerate(neighbours):
        for other in row[1:].tolist():
            links[other].add(node)
    for number, row in enumerate(near):
        for other in row.tolist():
            links[12_000 + number].add(other)
            links[other].add(12_000 + number)
    rises = []
    for number in range(len(rests)):
        start = 12_000 + number
        edge, seen, top = [(float(energies[start]), start)], {start}, -np.inf
        while True:
            height, node = heapq.heappop(edge)
            top = max(top, height)
            if node >= 12_000 and node != start:
                break
            for other in links[node] - seen:
                seen.add(other)
                heapq.heappush(edge, (float(energies[other]), other))
        rises.append(top - float(energies[start]))
    return np.array(rises)


@pytest.mark.parametrize("seed", range(5))
def test_against_a_flood_of_energies_in_a_fine_net(seed: int) -> None:
    # The net's ways lie a little above the pass itself, never below it but for the net's own energies (1e-6 m).
    body = Afloat(shapes.lumpy(seed, level=2, depth=0.5), 0.55)
    rests = body.rests()
    if len(rests) < 2:
        pytest.skip("one posture")
    rises = least_highest(body, rests)
    for barrier, rest, net in zip(found(body, rests), rests, rises, strict=True):
        assert barrier.settled
        assert barrier.rise - 2e-6 <= net <= barrier.rise * 1.03 + 5e-6
        # A critical point that is lower along one way only.
        top = body.at(barrier.over)
        assert np.linalg.norm(top.lever) < 1e-5
        assert top.modes()[0][0] < 0 < top.modes()[0][1]
        assert top.energy - rest.state.energy == pytest.approx(barrier.rise, rel=1e-9)


@pytest.mark.parametrize(("seed", "share"), [(17, 0.08), (3, 0.3), (9, 0.9)])
def test_no_barrier_is_higher_than_the_straight_way_to_any_other_posture(seed: int, share: float) -> None:
    # The highest energy on the great circle to another posture bounds the pass from above. The first body has a second
    # hollow nine degrees beside the first, too shallow for a coarse grid to see.
    body = Afloat(shapes.lumpy(seed, level=4, depth=0.9), share)
    rests = body.rests()
    assert len(rests) > 1
    for number, (barrier, rest) in enumerate(zip(found(body, rests), rests, strict=True)):
        for other in (*rests[:number], *rests[number + 1 :]):
            ways = [rest.state.up + s * (other.state.up - rest.state.up) for s in np.linspace(0.02, 0.98, 25)]
            highest = max(body.at(way).energy for way in ways if np.linalg.norm(way) > 0.1)
            assert barrier.rise <= max(highest, other.state.energy) - rest.state.energy + 1e-7


def test_a_posture_settled_with_a_hook_dry_is_measured_with_it_wet_as_the_pass_is() -> None:
    surface = shapes.lumpy(6, level=3)
    wet, dry = Afloat(surface, 0.55, None, 0.0, 5e-8, (0.0, 0.02, 0.0)), Afloat(surface, 0.55)
    for barrier, rest in zip(barriers(wet.rough, wet.potential, dry.rests(), NOSE), dry.rests(), strict=True):
        assert barrier is not None
        assert barrier.rise == pytest.approx(wet.at(barrier.over).energy - wet.at(rest.state.up).energy, rel=1e-6)


def test_barriers_turn_with_the_bait() -> None:
    surface, turn = shapes.lumpy(6, level=3), shapes.turn(6)
    body, moved = Afloat(surface, 0.55), Afloat(surface.moved(turn, np.array([0.1, 0.2, 0.3])), 0.55)
    here = sorted(barrier.rise for barrier in found(body, body.rests()))
    passes = barriers(moved.rough, moved.potential, moved.rests(turn @ UP), turn @ NOSE)
    assert sorted(barrier.rise for barrier in passes if barrier is not None) == pytest.approx(here, rel=1e-5)


def test_where_no_saddle_settles_the_grid_gives_an_upper_bound(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("meshlure.physics.barrier._pass", lambda *_: None)
    body = Afloat(shapes.box((0.12, 0.02, 0.02), level=2), 0.1)
    energies = log_energies(0.1)
    exact = 0.02 * (energies["edge"] - energies["flat"])
    for barrier in found(body, body.rests()):
        assert not barrier.settled
        assert exact * (1 - 1e-9) <= barrier.rise < exact * 1.05


def test_nose_up_and_nose_down_of_a_round_body_are_parted_by_a_ring_of_passes() -> None:
    # By a scan over the tilt of the axis, to which alone a round body's energy belongs.
    body = Afloat(shapes.cylinder(0.02, 0.034, 96, 12), 0.25)
    rests = body.rests()
    tilts = np.radians(np.linspace(0, 180, 181))
    energies = np.array([body.at(np.array([np.sin(t), 0, np.cos(t)])).energy for t in tilts])
    rest = energies.min()
    exact = energies[60:121].max() - rest
    for barrier in found(body, rests):
        assert barrier.rise == pytest.approx(exact, rel=0.02)
