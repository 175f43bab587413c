"""Righting curves: the arm with which a floating bait turns back, over heel sideways and fore-aft."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Floats
from meshlure.physics.posture import horizontal
from meshlure.physics.potential import Potential, State


@dataclass(frozen=True, eq=False)
class Righting:
    """One righting curve.

    Attributes
    ----------
    plane : str
        sideways (heel towards the bait's own right counts positive) or fore_aft (nose up counts positive).
    heel : (n,) array, rad
        From the posture it starts at.
    arm : (n,) array, m
        Derivative of the energy by the heel: positive where it turns against a positive heel.
    """

    plane: str
    heel: Floats
    arm: Floats


HEELS = np.radians(np.concatenate([np.arange(-180, -60, 10), np.arange(-60, 61, 5), np.arange(70, 181, 10)]))


def righting(potential: Potential, state: State, nose: Floats, side: Floats) -> tuple[Righting, Righting]:
    """Return the righting curves of a resting posture, sideways and fore-aft.

    Parameters
    ----------
    potential : Potential
        Of the bait at its floating displacement.
    state : State
        The posture at heel 0.
    nose, side : (3,) arrays
        The bait's directions; side points to its own left.

    Notes
    -----
    Displacement is held, and so is the other tilt: the bait turns about one horizontal axis. In the water-plane
    theory of ships this is the arm GZ with fixed trim.
    """
    along = horizontal(nose, state.up)
    left = np.cross(state.up, along)
    left = left if left @ side >= 0 else -left
    curves = []
    pitches = HEELS[np.abs(HEELS) <= np.pi / 2 + 1e-9]
    for plane, towards, heels in (("sideways", left, HEELS), ("fore_aft", along, pitches)):
        near = state
        arms = np.empty(len(heels))
        # From the posture outwards both ways, so that each draught starts from its neighbour's.
        middle = int(np.argmin(np.abs(heels)))
        for order in (range(middle, len(heels)), range(middle, -1, -1)):
            near = state
            for k in order:
                up = np.cos(heels[k]) * state.up + np.sin(heels[k]) * towards
                near = potential.at(up, near)
                arms[k] = (np.cos(heels[k]) * towards - np.sin(heels[k]) * state.up) @ near.lever
        curves.append(Righting(plane, heels, arms))
    return curves[0], curves[1]
