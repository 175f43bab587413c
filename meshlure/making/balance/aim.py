"""What the ballast must do: how much mass it must add, and on which line its middle must lie."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.sections.target import TargetSection
from meshlure.geometry.surface import Floats
from meshlure.making.balance.asked import placed
from meshlure.making.balance.ground import Ground
from meshlure.physics.buoyancy import Behaviour, behaviour, suspends_within
from meshlure.physics.immersion import Hull
from meshlure.physics.potential import tangents
from meshlure.tolerances import NEUTRAL_HEIGHT

_SAME_DRY = 6
"""Rounds after which the hooks that leave the water must have settled."""

_RANGES = {
    Behaviour.FLOATS: "a reserve of more than",
    Behaviour.SUSPENDS: "a reserve within",
    Behaviour.SINKS: "a reserve below minus",
}


@dataclass(frozen=True, eq=False)
class Aim:
    """A target in the bait's own terms.

    Attributes
    ----------
    up : (3,) array
        Direction of up in the posture wanted, mesh coordinates.
    reserve : float, kg
        Wanted; positive floats.
    sink : float or None, m/s
        Speed wanted, where the reserve is to be found by it.
    nose_up, lean : float, rad
    assumed : tuple of str
        Angles that were not stated and stand at 0.
    """

    up: Floats
    reserve: float
    sink: float | None
    nose_up: float
    lean: float
    assumed: tuple[str, ...]

    @property
    def floats(self) -> bool:
        """Whether the posture wanted is one afloat."""
        return self.reserve > 0

    def with_reserve(self, reserve: float) -> Aim:
        """Return the same posture with another reserve, kg."""
        return replace(self, reserve=reserve)


def aim(ground: Ground, target: TargetSection) -> Aim:
    """Return what a target means for a bait.

    Raises
    ------
    InputError
        Where the reserve asked for is none of the behaviour asked for, or more than the bait displaces, or nothing says
        what the ballast may weigh.
    """
    stated_as = placed(ground.bait, f"target.{'reserve' if target.submerged is None else 'submerged'}")
    frame = ground.frame
    nose_up, lean = target.nose_up or 0.0, target.lean or 0.0
    across = np.cos(lean) * frame.back + np.sin(lean) * frame.side
    up = np.sin(nose_up) * frame.nose + np.cos(nose_up) * across
    displaced = ground.vessel.hull(ground.ends(up)).volume * ground.vessel.water
    threshold = suspends_within(displaced, ground.bait.plan.bait.suspends_within)
    if target.reserve is not None:
        reserve = target.reserve
    elif target.submerged is not None:
        reserve = (1 - target.submerged) * displaced
    elif target.behaviour is None and target.sink is None:
        # Only a posture is asked for: the reserve stays what it is.
        if not ground.freed and target.vary == "ballast":
            raise InputError(
                Fault(
                    "nothing says what the ballast may weigh",
                    placed(ground.bait, "target"),
                    "a posture alone, and no insert that may move",
                    "reserve or submerged, or an insert with free = true, whose place the ballast takes",
                    "add reserve = '1.2 g', or free = true beside the ballast that is there",
                )
            )
        ends = ground.ends(up)
        reserve = displaced - ground.stated.composition.mass(ends).amount
    else:
        # A sinking bait's reserve is found by its speed; until then a hundredth of what it displaces.
        reserve = 0.0 if target.sink is None else -0.01 * displaced
    if reserve >= displaced:
        raise InputError(
            Fault(
                "the reserve asked for is more than the whole bait displaces",
                stated_as,
                f"{reserve * 1e3:.4g} g",
                f"less than {displaced * 1e3:.4g} g",
                "ask for less",
            )
        )
    found = behaviour(reserve, threshold)
    wanted = target.behaviour
    if wanted is not None and target.sink is None and found != Behaviour(wanted):
        raise InputError(
            Fault(
                f"with that reserve the bait {found.value}",
                stated_as,
                f"behaviour {wanted!r}, reserve {reserve * 1e3:.3g} g",
                f"{_RANGES[Behaviour(wanted)]} {threshold * 1e3:.2g} g; within that of none it suspends",
                "change behaviour or reserve, or state [bait] suspends_within",
            )
        )
    assumed = tuple(name for name in ("nose_up", "lean") if getattr(target, name) is None)
    return Aim(up, reserve, target.sink, nose_up, lean, assumed)


@dataclass(frozen=True, eq=False)
class Line:
    """Where the middle of the ballast must lie.

    Attributes
    ----------
    foot : (3,) array, m
        A point of it.
    up : (3,) array
        Its direction, that of up in the posture wanted.
    """

    foot: Floats
    up: Floats

    def at(self, height: float) -> Floats:
        """Return the point of it at a height along up, m."""
        return self.foot + (height - float(self.foot @ self.up)) * self.up

    def off(self, places: Floats) -> Floats:
        """Return the offsets of (..., 3) places from it, square to up, m."""
        apart = np.asarray(places) - self.foot
        return np.asarray(apart - (apart @ self.up)[..., None] * self.up)


@dataclass(frozen=True, eq=False)
class _Afloat:
    """The bait of one mass held in the posture wanted.

    Attributes
    ----------
    centre : (3,) array, m
        Of buoyancy.
    waterplane : (3, 3) array, m
        Its second moments over the displaced volume; none under water.
    """

    centre: Floats
    waterplane: Floats


class Lines:
    """The lines for one aim, by the mass that the ballast adds.

    Parameters
    ----------
    ground : Ground
    goal : Aim

    Notes
    -----
    Afloat at the up-direction wanted, the draught follows from the mass, and with it the centre of buoyancy; at rest
    the centre of gravity of the whole lies straight above or below it. What stays is known, so the ballast's centre
    lies on a line along up: its height is free, and sets the stability alone. Under water the same holds with the
    centre of buoyancy of the whole. Hooks whose eyes leave the water are counted dry, as in the postures.
    """

    def __init__(self, ground: Ground, goal: Aim) -> None:
        self._ground, self._goal = ground, goal
        self.ends = ground.ends(goal.up)
        self.base = ground.mass(self.ends)
        self._known: dict[float, _Afloat] = {}

    @property
    def net(self) -> float:
        """Mass that the ballast must add, kg, for the reserve wanted."""
        displaced = self._ground.vessel.hull(self.ends).volume * self._ground.vessel.water
        return displaced - self._goal.reserve - self.base.amount

    def line(self, net: float) -> Line:
        """Return the line for ballast that adds a mass, kg, positive."""
        whole = self.base.amount + net
        foot = (whole * self._afloat(whole).centre - self.base.first) / net
        return Line(foot, self._goal.up)

    def tilts(self, net: float, places: Floats) -> Floats:
        """Return by how much the posture misses with ballast at (n, 3) places, (n,) array, rad, to first order.

        Notes
        -----
        The moment of the ballast's offset from its line over the metacentric heights in the posture wanted; half a turn
        where that posture would not be stable.
        """
        line, whole, up = self.line(net), self.base.amount + net, self._goal.up
        afloat, plane = self._afloat(whole), tangents(up)
        height = (self.base.first @ up + net * (places @ up)) / whole - float(afloat.centre @ up)
        stiff = (plane.T @ afloat.waterplane @ plane)[None] - height[:, None, None] * np.eye(2)
        steady = np.linalg.eigvalsh(stiff)[:, 0] > NEUTRAL_HEIGHT
        arm = line.off(places) @ plane * (net / whole)
        safe = np.where(steady[:, None, None], stiff, np.eye(2))
        turn = np.linalg.norm(np.linalg.solve(safe, arm[..., None])[..., 0], axis=1)
        return np.where(steady, np.minimum(turn, np.pi), np.pi)

    def _afloat(self, mass: float) -> _Afloat:
        key = round(mass, 7)
        if key not in self._known:
            self._known[key] = self._solved(mass)
        return self._known[key]

    def _solved(self, mass: float) -> _Afloat:
        vessel, up, volume = self._ground.vessel, self._goal.up, mass / self._ground.vessel.water
        hull: Hull = vessel.hull(self.ends)
        if not self._goal.floats or volume >= hull.volume:
            return _Afloat(hull.centre, np.zeros((3, 3)))
        dry: frozenset[str] = frozenset()
        places: Mapping[str, Floats] = {item.name: item.at for item in vessel.hardware if item.volume > 0}
        for _ in range(_SAME_DRY):
            immersed = vessel.hull(self.ends, sorted(dry)).settled(up, volume, close=1e-9)
            out = frozenset(name for name, at in places.items() if float(at @ up) > immersed.cut.height)
            if out <= dry or volume >= vessel.hull(self.ends, sorted(dry | out)).volume:
                break
            dry |= out
        return _Afloat(immersed.centre, immersed.cut.section.second / immersed.volume)
