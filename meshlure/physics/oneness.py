"""Whether two states of rest are one posture: the same direction, or two places of the same neutral ring."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from meshlure import tolerances
from meshlure.geometry.surface import Floats
from meshlure.physics.potential import Potential, State, tangents

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
        if state.up @ other.up >= cosine or _linked(potential, state, other):
            return number
    return None


def _linked(potential: Potential, one: State, other: State) -> bool:
    """Whether two neutral states are joined by a way on which the energy does not change."""
    if abs(one.energy - other.energy) > _LIKE or free_direction(one) is None or free_direction(other) is None:
        return False
    if _free_all_round(one) and _free_all_round(other):
        # As an even ball is; any way will do.
        halfway = _unit(one.up + other.up, tangents(one.up)[:, 0])
        return bool(abs(potential.at(halfway, one).energy - one.energy) <= _LIKE)
    halfway_round = _halfway_round(one, other)
    if halfway_round is None:
        return False
    between = potential.at(halfway_round, one)
    heights, directions = between.modes()
    if heights[1] <= 0:
        return False
    # The valley's floor, where the halfway point lies on its side.
    slope = float(directions[:, 1] @ between.lever)
    return bool(abs(between.energy - slope**2 / (2 * heights[1]) - one.energy) <= _LIKE)


def _free_all_round(state: State) -> bool:
    return bool(np.abs(state.modes()[0]).max() < tolerances.NEUTRAL_HEIGHT)


def _halfway_round(one: State, other: State) -> Floats | None:
    """Return the direction halfway between two on a ring round some axis of the body; None where no ring holds both.

    Two rings may be mirror images, one nose up and one nose down, with equal energies and stiffnesses.
    """
    first, second = free_direction(one), free_direction(other)
    if first is None or second is None:
        return None
    axis = np.cross(first, second)
    if np.linalg.norm(axis) < _PARALLEL:
        # On opposite sides of a ring the free directions are parallel; the axis is square to the way across too.
        axis = np.cross(first, one.up - other.up)
    axis = axis / np.linalg.norm(axis)
    if abs(axis @ (one.up - other.up)) > _LEVEL:
        return None
    flat, facing = (up - (up @ axis) * axis for up in (one.up, other.up))
    half = _unit(flat + facing, np.cross(axis, flat)) * np.linalg.norm(flat)
    return _unit((one.up @ axis) * axis + half, one.up)


def _unit(vector: Floats, otherwise: Floats) -> Floats:
    """Unit vector along a vector, or along another where the first has next to no length."""
    length = float(np.linalg.norm(vector))
    return vector / length if length > _PARALLEL else np.asarray(otherwise / np.linalg.norm(otherwise))
