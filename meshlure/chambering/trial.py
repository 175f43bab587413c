"""A chamber tried out: how the bait rests and flies with the balls at either end, and what it does when it leaks."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from math import radians
from typing import Final

import numpy as np

from meshlure import flying
from meshlure.bait.chambers import ENDS
from meshlure.flying import Flown
from meshlure.geometry.surface import Floats
from meshlure.making.chamber.option import CHAMBER, Option
from meshlure.making.chamber.site import Site
from meshlure.physics.buoyancy import Behaviour, behaviour, suspends_within
from meshlure.physics.posture import Attitude, attitude
from meshlure.physics.repose import Ends, Vessel

ROLLS: Final = radians(1.0)
"""rad. Least fall on which a ball is taken to roll: a coefficient of rolling resistance of 0.017 holds it on less. Hard
balls on hard plastic have about 0.01, from memory; a rough print, paint or a drop of water holds them on more."""


@dataclass(frozen=True, eq=False)
class Rested:
    """A bait at rest with its balls held at one end.

    Attributes
    ----------
    up : (3,) array or None
        None where it has no attitude of its own.
    angles : Attitude or None
    slope : float or None, rad
        By which the bore falls towards the nose as the bait lies.
    """

    up: Floats | None
    angles: Attitude | None
    slope: float | None

    @property
    def returns(self) -> bool:
        """Whether balls roll to the nose end, or stay there, by themselves."""
        return self.slope is not None and self.slope >= ROLLS


@dataclass(frozen=True, eq=False)
class Leak:
    """The bait with its chamber full of water.

    Attributes
    ----------
    reserve : float, kg
    state : Behaviour
    rested : Rested
        With the balls at the lower end.
    end : str
        That end.
    """

    reserve: float
    state: Behaviour
    rested: Rested
    end: str


@dataclass(frozen=True, eq=False)
class Trial:
    """What a chamber does.

    Attributes
    ----------
    option : Option
    shift : (3,) array, m
        By which the centre of gravity moves as the balls run aft.
    reserve : float, kg
    rested : mapping of Rested
        By end.
    """

    option: Option
    shift: Floats
    reserve: float
    rested: Mapping[str, Rested]

    @property
    def change(self) -> float:
        """Angle between the postures with the balls at either end, rad; 0 where one has none of its own."""
        nose, tail = (self.rested[end].up for end in ENDS)
        if nose is None or tail is None:
            return 0.0
        return float(np.arccos(np.clip(nose @ tail, -1.0, 1.0)))

    @property
    def returns(self) -> bool:
        """Whether the balls come back to the nose by themselves, the bait at rest with them at the tail."""
        return self.rested["tail"].returns


def rested(site: Site, option: Option, near: Trial | None = None) -> Trial:
    """Return how the bait rests with a chamber's balls at either end.

    Parameters
    ----------
    site : Site
    option : Option
    near : Trial, optional
        Of a chamber much like it, whose postures are followed, which is quicker; by default the bait is set down with
        its back up, as in the report.
    """
    vessel = option.vessel(site)
    starts = {end: None if near is None else near.rested[end].up for end in ENDS}
    found = {end: _rest(site, vessel, option, ends_of(site, end), starts[end]) for end in ENDS}
    ends = ends_of(site, "nose")
    mass = vessel.composition.mass(ends).amount
    reserve = vessel.hull(ends).volume * vessel.water - mass
    return Trial(option, option.shift(site), reserve, found)


def flown(site: Site, option: Option) -> dict[str, Flown]:
    """Return by end how the bait flies with the balls there."""
    return flying.flown(site.bait, option.composed(site), site.passage)


def leaked(site: Site, trial: Trial) -> Leak:
    """Return what a bait that was tried does once its chamber is full of water."""
    option = trial.option
    vessel = option.flooded(site)
    tried = {end: _rest(site, vessel, option, ends_of(site, end), trial.rested[end].up) for end in ENDS}
    # Both ends may hold, or none: then the nose, to which the bore was sloped.
    end = "tail" if not tried["nose"].returns and not tried["tail"].returns else "nose"
    ends = ends_of(site, end)
    displaced, mass = vessel.hull(ends).volume * vessel.water, vessel.composition.mass(ends).amount
    state = behaviour(displaced - mass, suspends_within(displaced, site.bait.plan.bait.suspends_within))
    return Leak(displaced - mass, state, tried[end], end)


def ends_of(site: Site, end: str) -> Ends:
    """Return the ends of all chambers: this one's as given, the others' held, or the lower one with the back up."""
    back = site.bait.frame.back
    others = {
        row.balls.chamber: row.balls.at or ("tail" if float(row.axis @ back) > 0 else "nose")
        for row in site.composition.rows
    }
    return others | {CHAMBER: end}


def _rest(site: Site, vessel: Vessel, option: Option, ends: Ends, start: Floats | None) -> Rested:
    repose = vessel.landed(ends) if start is None else vessel.reposed(ends, start)
    up = vessel.dangle(ends).hang.up if repose is None else repose.rest.state.up
    if up is None:
        return Rested(None, None, None)
    frame = site.bait.frame
    slope = float(np.arcsin(np.clip(-(option.bore.cut.axis @ up), -1.0, 1.0)))
    return Rested(up, attitude(up, frame.nose, frame.back, frame.side), slope)
