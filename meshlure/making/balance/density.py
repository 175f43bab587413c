"""The body's density that meets a target with the ballast as it stands."""

from __future__ import annotations

from dataclasses import dataclass, replace

from meshlure.bait.reweighed import reweighed
from meshlure.making.balance.aim import Aim
from meshlure.making.balance.ground import Ground
from meshlure.making.balance.outcome import Outcome, outcome


@dataclass(frozen=True, eq=False)
class Dense:
    """A body's density that meets a reserve.

    Attributes
    ----------
    density : float, kg/m3
        Not positive where no body would be light enough.
    outcome : Outcome or None
        Of the bait with that density.
    """

    density: float
    outcome: Outcome | None


def density_for(ground: Ground, goal: Aim) -> Dense:
    """Return the body's density with which the bait has the reserve of an aim.

    Parameters
    ----------
    ground : Ground
        With every insert in its place.
    goal : Aim
        The posture is what it will be: it is no unknown here.

    Notes
    -----
    The displaced water less the reserve is the mass of the whole; what is not body is known, and the rest is the
    body's, over its own volume.
    """
    ends = ground.ends(goal.up)
    displaced = ground.vessel.hull(ends).volume * ground.vessel.water
    body = ground.composition.parts[0]
    others = ground.mass(ends).amount - body.mass.amount
    density = (displaced - goal.reserve - others) / body.volume
    if density <= 0:
        return Dense(density, None)
    assert body.substance is not None
    composition = reweighed(ground.composition, {body.name: density / body.substance.density})
    return Dense(density, outcome(replace(ground.vessel, composition=composition), goal, ends))
