"""The potential of a floating body: its derivatives, an independent minimiser of it, and what must not change it."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from afloat import UP, Afloat, angle_between
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import brentq, minimize

from meshlure.geometry.surface import Floats, Surface
from meshlure.physics.posture import Rest, spread_directions
from meshlure.physics.potential import tangents

SEEDS = st.integers(0, 10_000)


def energy_by_slices(surface: Surface, gravity: Floats, share: float, up: Floats) -> float:
    """U by trimesh's capped slices, the draught by bisection of their volume (scipy): no code of ours."""
    mesh = shapes.as_trimesh(surface)
    heights = surface.vertices @ up
    volume = share * mesh.volume

    def missing(level: float) -> float:
        return float(mesh.slice_plane(up * level, -up, cap=True).volume - volume)

    span = np.ptp(heights)
    level = brentq(missing, heights.min() + 1e-3 * span, heights.max() - 1e-3 * span, xtol=1e-8 * span)
    return float(up @ (gravity - mesh.slice_plane(up * level, -up, cap=True).center_mass))


@pytest.mark.parametrize("seed", [0, 4])
def test_against_an_independent_minimiser(seed: int) -> None:
    # Energies by the general mesh library over 32 spread directions; from each that lies lower than its six neighbours
    # Nelder-Mead (scipy) goes down on them. What it finds is what the search finds, no more and no less.
    surface, share = shapes.lumpy(seed, level=1, depth=0.5), 0.6
    body = Afloat(surface, share)
    rests = body.rests()

    def energy(angles: Floats) -> float:
        return energy_by_slices(surface, body.centre, share, pointing(angles))

    ways = spread_directions(32)
    heights = np.array([energy_by_slices(surface, body.centre, share, up) for up in ways])
    np.testing.assert_allclose([body.at(up).energy for up in ways], heights, rtol=1e-7)
    neighbours = np.argsort(-ways @ ways.T, axis=1)[:, 1:7]
    reached = set()
    for up in ways[heights < heights[neighbours].min(axis=1)]:
        start = np.array([np.arccos(up[2]), np.arctan2(up[1], up[0])])
        simplex = start + np.array([[0.0, 0.0], [0.15, 0.0], [0.0, 0.15]])
        found = minimize(
            energy,
            start,
            method="Nelder-Mead",
            options={
                "initial_simplex": simplex,
                "xatol": 3e-4,
                "fatol": 1e-9,
                "maxfev": 100,
            },
        )
        number = int(np.argmin([angle_between(pointing(found.x), rest.state.up) for rest in rests]))
        assert angle_between(pointing(found.x), rests[number].state.up) < 2e-3
        assert found.fun == pytest.approx(rests[number].state.energy, rel=1e-6)
        reached.add(number)
    assert reached == set(range(len(rests)))


def pointing(angles: Floats) -> Floats:
    polar, turn = angles
    return np.array([np.sin(polar) * np.cos(turn), np.sin(polar) * np.sin(turn), np.cos(polar)])


@given(SEEDS)
def test_lever_and_stiffness_are_the_energys_derivatives(seed: int) -> None:
    # Central differences along and across great circles, with a coat and a hanging hook.
    body = Afloat(shapes.lumpy(seed, level=3), 0.6, None, 0.1e-3, 3e-8, (0.0, 0.0, -0.04))
    state = body.at(shapes.direction(seed))
    plane = tangents(state.up)
    step = 1e-3

    def energy(x: float, y: float) -> float:
        turn = plane @ np.array([x, y])
        angle = np.linalg.norm(turn)
        return body.at(np.cos(angle) * state.up + (np.sin(angle) / angle if angle else 1.0) * turn).energy

    slope = np.array([energy(step, 0) - energy(-step, 0), energy(0, step) - energy(0, -step)]) / (2 * step)
    lever = float(np.linalg.norm(state.lever))
    np.testing.assert_allclose(plane.T @ state.lever, slope, rtol=0, atol=1e-4 * lever + 1e-8)
    middle = energy(0, 0)
    straight = [energy(step, 0) - 2 * middle + energy(-step, 0), energy(0, step) - 2 * middle + energy(0, -step)]
    crossed = (energy(step, step) - energy(step, -step) - energy(-step, step) + energy(-step, -step)) / 4
    second = np.array([[straight[0], crossed], [crossed, straight[1]]]) / step**2
    stiffness = plane.T @ state.stiffness @ plane
    np.testing.assert_allclose(stiffness, second, rtol=0, atol=3e-3 * np.abs(stiffness).max())


def same_rests(one: tuple[Rest, ...], other: tuple[Rest, ...], turn: Floats) -> None:
    assert len(one) == len(other)
    for rest in one:
        nearest = min(other, key=lambda r: angle_between(turn @ rest.state.up, r.state.up))
        assert angle_between(turn @ rest.state.up, nearest.state.up) < 1e-6
        assert nearest.state.energy == pytest.approx(rest.state.energy, rel=1e-9)
        np.testing.assert_allclose(nearest.state.modes()[0], rest.state.modes()[0], rtol=1e-5)


@settings(max_examples=5)
@given(SEEDS)
def test_postures_turn_with_the_bait_and_do_not_mind_its_numbering(seed: int) -> None:
    surface, turn = shapes.lumpy(seed, level=2), shapes.turn(seed)
    shift = np.random.default_rng(seed).normal(size=3)
    body = Afloat(surface, 0.55)
    moved = Afloat(shapes.shuffled(surface.moved(turn, shift), seed), 0.55)
    rests = body.rests()
    same_rests(rests, moved.rests(turn @ UP), turn)
    for rest in rests:
        assert rest.state.immersed.volume == pytest.approx(body.potential.volume, rel=1e-12)
        # G and B on one vertical.
        assert np.linalg.norm(rest.state.lever) < 1e-9
        assert rest.state.modes()[0][0] > 0


def test_a_bait_a_kilometre_off_rests_the_same() -> None:
    surface, shift = shapes.lumpy(3, level=4), np.array([1000.0, -1000.0, 1000.0])
    same_rests(Afloat(surface, 0.6).rests(), Afloat(surface.moved(shift=shift), 0.6).rests(), np.eye(3))


def test_postures_of_a_fine_mesh_are_settled_on_it_and_not_on_its_coarse_copy() -> None:
    # 20,480 faces against the 3,000 of the copy: still exact to its own equilibrium.
    body = Afloat(shapes.lumpy(5, level=5), 0.6)
    for rest in body.rests():
        assert np.linalg.norm(rest.state.lever) < 1e-10
        assert rest.state.immersed.volume == pytest.approx(body.potential.volume, rel=1e-12)


@pytest.mark.parametrize("seed", range(3))
def test_sensitivity_is_what_a_moved_centre_of_gravity_does(seed: int) -> None:
    # Moving G by d along a principal tilt turns the bait by -d/GM: solved again with G moved by 10 micrometres.
    surface = shapes.lumpy(seed, level=3)
    body = Afloat(surface, 0.6)
    rest = body.rests()[0]
    heights, directions = rest.state.modes()
    for height, way in zip(heights, directions.T, strict=True):
        step = 1e-5
        shifted = [Afloat(surface, 0.6, body.centre + s * step * way).potential for s in (1, -1)]
        ups = [potential.descended(rest.state.up, 0.1).up for potential in shifted]
        assert (ups[0] - ups[1]) @ way / (2 * step) == pytest.approx(-1 / height, rel=5e-3)
