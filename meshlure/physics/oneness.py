"""Whether two states of rest are one posture: the same direction, or two places of the same neutral ring."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from meshlure import tolerances
from meshlure.geometry.surface import Floats
from meshlure.physics.potential import Potential, State

_LIKE = 0.1 * tolerances.NEUTRAL_HEIGHT
"""m. Energies closer than this are alike along a neutral ring."""

_LEVEL = 0.05
"""How far the heights of two directions over a common axis may differ for the two to lie on one ring round it."""

_PARALLEL = 0.1


def free_direction(state: State) -> Floats | None:
    """Return the tangent direction in which a state is free, its metacentric height next to none, or None."""
    heights, directions = state.modes()
    return np.asarray(directions[:, 0]) if heights[0] < tolerances.NEUTRAL_HEIGHT else None


def among(potential: Potential, state: State, others: Sequence[State], cosine: float) -> int | None:
    """Return the number of the first of several postures that a state is the same as, None where there is none.

    Parameters
    ----------
    potential : Potential
        That the states belong to.
    state : State
    others : sequence of State
    cosine : float
        Of the angle within which two directions are the same.
    """
    for number, other in enumerate(others):
        if state.up @ other.up >= cosine or _one_ring(potential, state, other):
            return number
    return None


def _one_ring(potential: Potential, one: State, other: State) -> bool:
    """Whether two neutral states lie on one ring of equal energy round some axis of the body.

    Two rings may be mirror images, one nose up and one nose down, with equal energies and stiffnesses; so the ring
    through both is looked at halfway between them.
    """
    first, second = free_direction(one), free_direction(other)
    if first is None or second is None or abs(one.energy - other.energy) > _LIKE:
        return False
    axis = np.cross(first, second)
    if np.linalg.norm(axis) < _PARALLEL:
        # On opposite sides of a ring the free directions are parallel; the axis is square to the way across too.
        axis = np.cross(first, one.up - other.up)
    axis = axis / np.linalg.norm(axis)
    if abs(axis @ (one.up - other.up)) > _LEVEL:
        return False
    flat = [up - (up @ axis) * axis for up in (one.up, other.up)]
    half = flat[0] + flat[1]
    if np.linalg.norm(half) < _PARALLEL * np.linalg.norm(flat[0]):
        half = np.cross(axis, flat[0])
    half = half * (np.linalg.norm(flat[0]) / np.linalg.norm(half))
    middle = (one.up @ axis) * axis + half
    between = potential.at(middle / np.linalg.norm(middle), one)
    heights, directions = between.modes()
    slope = directions.T @ between.lever
    if heights[1] <= 0:
        # Both states may be free all round, as a ball is.
        return abs(between.energy - one.energy) <= _LIKE and bool(abs(heights).max() < tolerances.NEUTRAL_HEIGHT)
    # The valley's floor, where the halfway point lies on its side.
    floor = between.energy - slope[1] ** 2 / (2 * heights[1])
    return bool(abs(floor - one.energy) <= _LIKE)
