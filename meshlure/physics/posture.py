"""Resting postures: every way in which a bait can float at rest, and how it hangs when it is under water."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure import tolerances
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.clusters import coarse, matched
from meshlure.geometry.surface import Floats, Surface
from meshlure.physics.immersion import Hull
from meshlure.physics.oneness import among, free_direction
from meshlure.physics.potential import Potential, State, tangents

STARTS = 36
"""Starts of the search, spread evenly over the sphere of up-directions."""

_ROUGH = 1e-4
"""rad. Precision of the search on the coarse copy; the full mesh settles the rest."""

_BOWL = np.cos(np.radians(1.0))
"""A descent this near to a minimum found before, in the bowl round it, ends there; two minima nearer count as one."""

_SAME = np.cos(np.radians(0.05))


@dataclass(frozen=True, eq=False)
class Rest:
    """One stable resting posture of a floating bait.

    Attributes
    ----------
    state : State
    share : float
        Share of the starts that came to rest here; it is no probability.
    upright : bool
        Reached from back up, as after a good landing.
    """

    state: State
    share: float
    upright: bool

    @property
    def neutral(self) -> Floats | None:
        """Tangent direction of ``up`` in which the posture is free: its metacentric height is next to none."""
        return free_direction(self.state)


def spread_directions(count: int) -> Floats:
    """Return directions spread evenly over the sphere, (count, 3) array.

    References
    ----------
    R. Swinbank and R. J. Purser (2006), Fibonacci grids, Q. J. R. Meteorol. Soc. 132.
    """
    k = np.arange(count) + 0.5
    polar = np.arccos(1 - 2 * k / count)
    turn = np.pi * (1 + np.sqrt(5)) * k
    return np.column_stack([np.cos(turn) * np.sin(polar), np.sin(turn) * np.sin(polar), np.cos(polar)])


def resting(hull: Hull, surface: Surface, centre: Floats, volume: float, back: Floats) -> tuple[Rest, ...]:
    """Return every stable resting posture of a floating bait, the lowest energy first.

    Parameters
    ----------
    hull : Hull
        What displaces water.
    surface : Surface
        The skin that ``hull`` was indexed from, for a coarse copy.
    centre : (3,) array, m
        Centre of gravity.
    volume : float, m3
        Displaced at rest: mass over the water's density; less than the hull's.
    back : (3,) array
        Direction out of the bait's back.

    Notes
    -----
    Descent on the potential from spread starts runs on a copy of a few thousand triangles at the same submerged
    share; what it finds is settled on the full mesh, from where a coarse minimum that was none walks on.
    A basin narrower than about 20 degrees can be missed.
    """
    full = Potential(hull, centre, volume)
    rough = coarse_potential(hull, surface, centre, volume)
    found: list[State] = []
    hits: list[int] = []
    for up in spread_directions(STARTS):
        state = rough.descended(up, known=lambda state: _settling(state, found))
        known = among(rough, state, found, _BOWL)
        if known is None:
            found.append(state)
            hits.append(1)
        else:
            hits[known] += 1
    settled: list[State] = []
    shares: list[float] = []
    for state, hit in zip(found, hits, strict=True):
        rest = full.descended(state.up, 0.1)
        known = among(full, rest, settled, _SAME)
        if known is None:
            settled.append(rest)
            shares.append(hit / STARTS)
        else:
            shares[known] += hit / STARTS
    first = _landed(full, rough, back)
    upright = among(full, first, settled, _SAME)
    if upright is None:
        settled.append(first)
        shares.append(0.0)
        upright = len(settled) - 1
    rests = [Rest(s, share, k == upright) for k, (s, share) in enumerate(zip(settled, shares, strict=True))]
    return tuple(sorted(rests, key=lambda rest: rest.state.energy))


def landed(hull: Hull, surface: Surface, centre: Floats, volume: float, back: Floats) -> State:
    """Return the posture that a floating bait comes to rest in from back up, as after a good landing.

    Takes what `resting` takes.
    """
    return _landed(Potential(hull, centre, volume), coarse_potential(hull, surface, centre, volume), back)


def _landed(full: Potential, rough: Potential, back: Floats) -> State:
    return full.descended(rough.descended(back, 0.2).up, 0.1)


def coarse_potential(hull: Hull, surface: Surface, centre: Floats, volume: float) -> Potential:
    """Return the potential of a coarse copy of the same volume and centroid, sunk to the same share."""
    index = hull.index
    small = BlockIndex.build(matched(coarse(surface), index.volume, index.moment / index.volume))
    rough = Hull(small, hull.point_volume, hull.point_moment)
    share = (volume - hull.point_volume) / (hull.volume - hull.point_volume)
    return Potential(rough, centre, share * small.volume + hull.point_volume, _ROUGH)


def _settling(state: State, found: list[State]) -> bool:
    """Whether a descent has walked into a minimum found before: near it, and in the bowl round it."""
    return any(state.up @ other.up >= _BOWL for other in found) and bool(state.modes()[0][0] > 0)


@dataclass(frozen=True, eq=False)
class Hanging:
    """How a bait hangs wholly under water, where it sinks or suspends.

    Attributes
    ----------
    up : (3,) array or None
        From the centre of gravity to that of buoyancy; None where they meet and there is no preferred attitude.
    stiffness : float, m
        Distance between the two centres, the metacentric height of every tilt.
    """

    up: Floats | None
    stiffness: float


def hanging(hull: Hull, centre: Floats) -> Hanging:
    """Return the attitude in which a submerged bait has no turning moment: buoyancy straight above gravity."""
    apart = hull.centre - centre
    length = float(np.linalg.norm(apart))
    return Hanging(None if length < tolerances.CENTRES_MEET else apart / length, length)


@dataclass(frozen=True)
class Attitude:
    """The angles of a bait in the water.

    Attributes
    ----------
    nose_up : float, rad
        Of the nose above the horizontal.
    lean : float or None, rad
        Positive towards the bait's own right; None with the nose within 5 degrees of the vertical.
    """

    nose_up: float
    lean: float | None


def attitude(up: Floats, nose: Floats, back: Floats, side: Floats) -> Attitude:
    """Return the angles that an up-direction means for a bait's nose, back and (left) side."""
    nose_up = float(np.arcsin(np.clip(nose @ up, -1.0, 1.0)))
    if nose_is_vertical(up, nose):
        return Attitude(nose_up, None)
    return Attitude(nose_up, float(np.arctan2(side @ up, back @ up)))


def nose_is_vertical(up: Floats, nose: Floats) -> bool:
    """Whether the nose is so near the vertical that it has no lean."""
    return bool(abs(nose @ up) > np.cos(np.radians(tolerances.NOSE_VERTICAL)))


def horizontal(direction: Floats, up: Floats) -> Floats:
    """Return the unit vector of a direction's part along the water; any horizontal one where it has none."""
    flat = direction - (direction @ up) * up
    length = float(np.linalg.norm(flat))
    return flat / length if length > 1e-9 else np.asarray(tangents(up)[:, 0])
