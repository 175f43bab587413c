"""The centre of buoyancy near one posture: found exactly in a few places, and between them by what they tell."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from meshlure.geometry.surface import Bools, Floats
from meshlure.physics.immersion import Hull
from meshlure.physics.potential import Potential, tangents

_STEPS = 40

_LONGEST = 0.15
"""rad. Longest step of the search for a place of rest."""

_STILL = 1e-5
"""rad. A step shorter than this ends it."""

_FARTHEST = 1.2
"""rad. Farther from the middle nothing is looked for: the bait has left the posture."""

_CLOSE = 1e-7
"""Share of the volume that may be missing where the hull is looked at."""


_PAIRS = ((0, 0), (0, 1), (0, 2), (1, 1), (1, 2), (2, 2))


@dataclass(frozen=True, eq=False)
class Look:
    """The hull cut in one place, a place being two turns of the up-direction, rad, and a share of volume.

    Attributes
    ----------
    place : (3,) array
        Turns from the direction in the middle, and the volume displaced over that in the middle, less one.
    centre : (3,) array, m
        Of buoyancy.
    slopes : (3, 3) array, m
        Its derivatives by the place's three numbers, as columns.
    height : float, m
        Of the water's surface.
    """

    place: Floats
    centre: Floats
    slopes: Floats
    height: float


@dataclass(frozen=True, eq=False)
class Locus:
    """Centres of buoyancy of one hull round one posture.

    Attributes
    ----------
    hull : Hull
        Of the skin alone, without what is under water in every posture.
    up : (3,) array
        Up-direction in the middle.
    volume : float, m3
        Displaced in the middle.
    looks : tuple of Look
        The one in the middle first.
    scale : (3,) array
        By which distances between places are measured.

    Notes
    -----
    A body floats at rest where the slope of n.(G - B(n, V)) along the sphere of up-directions n vanishes. B and its
    derivatives are found exactly by cutting the full mesh in some places: by the up-direction they are minus the
    waterplane's second moments over the volume (Dupin), by the volume the way from B to the waterplane's centroid over
    the volume. Elsewhere B is the mean of what each of these places tells, weighted by the sixth power of its nearness
    (Shepard's method): its value and slopes, and a curvature common to all that is fitted to how the slopes differ.
    Value and slopes are exact in each place.

    References
    ----------
    E. N. Gilbert (1991), How things float, American Mathematical Monthly 98(3).
    R. Franke and G. Nielson (1980), Smooth interpolation of large sets of scattered data, Int. J. Numer. Methods Eng.
    15(11).
    """

    hull: Hull
    up: Floats
    volume: float
    looks: tuple[Look, ...]
    scale: Floats

    @classmethod
    def at(cls, hull: Hull, up: Floats, volume: float) -> Locus:
        """Return what is known from the middle alone."""
        return cls(hull, up, volume, (_look(hull, up, volume, np.zeros(3), None),), np.ones(3))

    @property
    def capacity(self) -> float:
        """Volume, m3, at which the skin is wholly under water."""
        return self.hull.volume

    @cached_property
    def _curvature(self) -> Floats:
        """Second derivatives of the centre by the scaled places, (3, 3, 3) array, m: centre's axis, place, place."""
        curvature = np.zeros((3, 3, 3))
        if len(self.looks) <= 3:
            return curvature
        places = np.array([look.place for look in self.looks]) / self.scale
        slopes = np.array([look.slopes * self.scale for look in self.looks])
        apart = places - places.mean(axis=0)
        rows = np.zeros((len(places), 3, 3 + len(_PAIRS)))
        for axis in range(3):
            rows[:, axis, axis] = 1.0
        for number, (i, j) in enumerate(_PAIRS, 3):
            rows[:, i, number] += apart[:, j]
            if i != j:
                rows[:, j, number] += apart[:, i]
        wanted = slopes.transpose(0, 2, 1).reshape(-1, 3)
        # Where the places lie in a row, what they do not tell of the curvature is left at none.
        found = np.linalg.lstsq(rows.reshape(len(wanted), -1), wanted, rcond=1e-6)[0]
        for number, (i, j) in enumerate(_PAIRS, 3):
            curvature[:, i, j] = curvature[:, j, i] = found[number]
        return curvature

    @cached_property
    def _nodes(self) -> tuple[Floats, Floats, Floats]:
        """Scaled places, (k, 3), and what each tells beside the curvature: value at the middle, (k, 3), slopes."""
        places = np.array([look.place for look in self.looks]) / self.scale
        slopes = np.array([look.slopes * self.scale for look in self.looks])
        slopes = slopes - np.einsum("cij,kj->kci", self._curvature, places)
        centres = np.array([look.centre for look in self.looks]) - _bent(self._curvature, places)
        return places, centres - np.einsum("kij,kj->ki", slopes, places), slopes.reshape(-1, 9)

    def centres(self, places: Floats) -> tuple[Floats, Floats]:
        """Return the centres of buoyancy at (n, 3) places, (n, 3) array, m, and their slopes, (n, 3, 3) array."""
        known, values, slopes = self._nodes
        at = places / self.scale
        apart = np.maximum((at**2).sum(axis=1)[:, None] - 2 * at @ known.T + (known**2).sum(axis=1), 1e-8)
        weight = apart**-3
        weight /= weight.sum(axis=1)[:, None]
        mean = (weight @ slopes).reshape(-1, 3, 3)
        centre = weight @ values + np.einsum("nij,nj->ni", mean, at) + _bent(self._curvature, at)
        return centre, (mean + np.einsum("cij,nj->nci", self._curvature, at)) / self.scale

    def rests(self, gravity: Floats, volume: Floats) -> tuple[Floats, Bools]:
        """Return where bodies of this skin come to rest that differ in weight.

        Parameters
        ----------
        gravity : (n, 3) array, m
            Centres of gravity.
        volume : (n,) array, m3
            To be displaced by the skin, between 0 and its capacity.

        Returns
        -------
        places : (n, 3) array
        held : (n,) array of bool
            Whether a stable place of rest is near; where none is, the body leaves this posture.

        Notes
        -----
        Newton's method from the middle in steps of limited length, for all at once.
        """
        places = np.zeros((len(volume), 3))
        places[:, 2] = volume / self.volume - 1
        held = np.zeros(len(volume), dtype=np.bool_)
        moving = np.arange(len(volume))
        for _ in range(_STEPS):
            if not len(moving):
                break
            now = places[moving]
            centre, slopes = self.centres(now)
            n, turning = turned(self.up, now[:, :2])
            slope, stiff = _stiffness(n, turning, gravity[moving] - centre, slopes)
            step, firm = _newton(slope, stiff)
            length = np.linalg.norm(step, axis=1)
            places[moving, :2] += step * np.minimum(1.0, _LONGEST / np.maximum(length, 1e-30))[:, None]
            still = firm & (length < _STILL)
            held[moving[still]] = True
            moving = moving[~still & (np.linalg.norm(places[moving, :2], axis=1) < _FARTHEST)]
        return places, held

    def ups(self, places: Floats) -> Floats:
        """Return the up-directions at (n, 3) places, (n, 3) array."""
        return turned(self.up, places[:, :2])[0]

    def descended(self, gravity: Floats, volume: float) -> Floats:
        """Return the place of rest, (3,) array, that a descent on the full mesh reaches from the middle."""
        state = Potential(self.hull, gravity, volume, _STILL).descended(self.up, 0.2)
        return np.append(turns_to(self.up, state.up), volume / self.volume - 1)

    def looked(self, places: Floats, gravity: Floats, scale: Floats) -> tuple[Locus, float]:
        """Return the locus with more looks, and the farthest that the places of rest were off before, rad.

        Parameters
        ----------
        places : (n, 3) array
            Places of rest by what is known so far.
        gravity : (n, 3) array, m
            The centres of gravity that rest there.
        scale : (3,) array
            By which distances are to be measured from now on.

        Notes
        -----
        A place of rest is off by the step that Newton's method still makes with B and waterplane found exactly.
        """
        more, worst = [], 0.0
        for place, centre in zip(places, gravity, strict=True):
            near = min(self.looks, key=lambda look: float((((look.place - place) / scale) ** 2).sum()))
            look = _look(self.hull, self.up, self.volume, place, near)
            n, turning = turned(self.up, place[None, :2])
            slope, stiff = _stiffness(n, turning, (centre - look.centre)[None], look.slopes[None])
            heights, ways = np.linalg.eigh(stiff[0])
            worst = max(worst, float(np.linalg.norm(ways.T @ slope[0] / np.maximum(np.abs(heights), 1e-9))))
            more.append(look)
        return Locus(self.hull, self.up, self.volume, (*self.looks, *more), scale), worst


def _bent(curvature: Floats, places: Floats) -> Floats:
    return np.asarray(np.einsum("cij,ni,nj->nc", curvature, places, places) / 2)


def turns_to(up: Floats, direction: Floats) -> Floats:
    """Return the turns, (2,) array, rad, that lead from ``up`` to a direction."""
    flat = tangents(up).T @ direction
    length = float(np.linalg.norm(flat))
    angle = float(np.arctan2(length, up @ direction))
    return np.asarray(flat * (angle / length)) if length > 0 else np.zeros(2)


def _look(hull: Hull, up: Floats, volume: float, place: Floats, near: Look | None) -> Look:
    (n,), (turning,) = turned(up, place[None, :2])
    displaced = volume * (1 + float(place[2]))
    sunk = hull.settled(n, displaced, None if near is None else near.height, _CLOSE)
    section = sunk.cut.section
    by_volume = (section.centre - sunk.centre) / (1 + float(place[2]))
    slopes = np.column_stack([-section.second / displaced @ turning, by_volume])
    return Look(np.array(place), sunk.centre, slopes, sunk.cut.height)


def _stiffness(n: Floats, turning: Floats, apart: Floats, slopes: Floats) -> tuple[Floats, Floats]:
    """Slope of the energy by the two turns, (n, 2), m, and its own slope, (n, 2, 2)."""
    slope = np.einsum("nij,ni->nj", turning, apart)
    energy = np.einsum("ni,ni->n", n, apart)
    stiff = -np.einsum("nia,nib->nab", turning, slopes[:, :, :2])
    stiff = stiff - energy[:, None, None] * np.einsum("nia,nib->nab", turning, turning)
    return slope, (stiff + stiff.transpose(0, 2, 1)) / 2


def _newton(slope: Floats, stiff: Floats) -> tuple[Floats, Bools]:
    """Newton's steps, (n, 2), and where the energy curves upward; elsewhere the longest step down the slope."""
    a, b, d = stiff[:, 0, 0], stiff[:, 0, 1], stiff[:, 1, 1]
    det = a * d - b * b
    firm = (det > 0) & (a + d > 0)
    over = np.where(firm, det, 1.0)
    step = np.column_stack([b * slope[:, 1] - d * slope[:, 0], b * slope[:, 0] - a * slope[:, 1]]) / over[:, None]
    down = -slope * (_LONGEST / np.maximum(np.linalg.norm(slope, axis=1), 1e-30))[:, None]
    return np.where(firm[:, None], step, down), firm


def turned(up: Floats, turns: Floats) -> tuple[Floats, Floats]:
    """Return the directions reached from ``up`` by turns, (n, 2) array, rad, along its tangents.

    Returns
    -------
    directions : (n, 3) array
    derivatives : (n, 3, 2) array
        Of the directions by the turns.
    """
    flat = tangents(up)
    angle = np.linalg.norm(turns, axis=1)
    small = angle < 1e-4
    safe = np.where(small, 1.0, angle)
    sinc = np.where(small, 1 - angle**2 / 6, np.sin(safe) / safe)
    # Derivative of the sinc by the angle, over the angle.
    bend = np.where(small, -1 / 3 + angle**2 / 30, (np.cos(safe) - sinc) / safe**2)
    along = turns @ flat.T
    directions = np.cos(angle)[:, None] * up + sinc[:, None] * along
    derivatives = sinc[:, None, None] * (flat[None] - up[None, :, None] * turns[:, None, :])
    return directions, derivatives + bend[:, None, None] * along[:, :, None] * turns[:, None, :]
