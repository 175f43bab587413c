"""Whether two states of rest are one posture: the same direction, or two places of the same neutral ring."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

import numpy as np

from meshlure import tolerances
from meshlure.geometry.surface import Floats
from meshlure.physics.potential import Potential, State, tangents

_LIKE = 0.1 * tolerances.NEUTRAL_HEIGHT
"""m. Energies closer than this are alike along a neutral ring."""

_LEVEL = 0.05
"""How far the heights of two directions over a common axis may differ for the two to lie on one ring round it."""

_PARALLEL = 0.1

_PLACES = (0.5, 0.29, 0.13)
"""Shares of the way between two states at which it is looked at: no regular section has all of them alike."""


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
        axis = np.cross(one.up, _unit(np.asarray(other.up - (other.up @ one.up) * one.up), tangents(one.up)[:, 0]))
        return all(abs(state.energy - one.energy) <= _LIKE for state in _between(potential, one, other, axis))
    axis_of_ring = _axis(one, other)
    if axis_of_ring is None:
        return False
    return all(_floor(state) <= one.energy + _LIKE for state in _between(potential, one, other, axis_of_ring))


def _floor(state: State) -> float:
    """Energy of the valley's floor beside a state on its side, m; infinite on a ridge."""
    heights, directions = state.modes()
    slope = float(directions[:, 1] @ state.lever)
    return state.energy - slope**2 / (2 * float(heights[1])) if heights[1] > 0 else np.inf


def _free_all_round(state: State) -> bool:
    return bool(np.abs(state.modes()[0]).max() < tolerances.NEUTRAL_HEIGHT)


def _axis(one: State, other: State) -> Floats | None:
    """Return the axis of the body round which two directions lie on one ring, free along it; None where there is none.

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
    return None if abs(axis @ (one.up - other.up)) > _LEVEL else np.asarray(axis)


def _between(potential: Potential, one: State, other: State, axis: Floats) -> Iterator[State]:
    """Yield states on the way round an axis from one direction to another."""
    along = (one.up @ axis) * axis
    arm = one.up - along
    quarter = np.cross(axis, arm)
    angle = float(np.arctan2(other.up @ quarter, other.up @ arm))
    for share in _PLACES:
        up = along + np.cos(share * angle) * arm + np.sin(share * angle) * quarter
        yield potential.at(np.asarray(up / np.linalg.norm(up)), one)


def _unit(vector: Floats, otherwise: Floats) -> Floats:
    """Unit vector along a vector, or along another where the first has next to no length."""
    length = float(np.linalg.norm(vector))
    return vector / length if length > _PARALLEL else np.asarray(otherwise / np.linalg.norm(otherwise))
