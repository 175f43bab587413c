"""The longest bore on one straight line, from points that stand for the skin and for what lies in the way."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Floats


@dataclass(frozen=True)
class Rules:
    """Distances that a bore must keep, m.

    Attributes
    ----------
    radius : float
        Of the room that is cut.
    wall, end_wall : float
        From the skin: of its side to any of it, of an end face to what lies straight ahead.
    clear : float
        From everything else.
    opens : int
        1 where it is drilled on to the skin towards the nose, -1 towards the tail, 0 where its ends stay closed.
    """

    radius: float
    wall: float
    end_wall: float
    clear: float
    opens: int = 0

    @property
    def reach(self) -> float:
        """How far from its axis anything can matter, m."""
        return self.radius + max(self.wall, self.end_wall, self.clear)


@dataclass(frozen=True, eq=False)
class Cloud:
    """Points near a line, in the bore's axes.

    Attributes
    ----------
    skin, others : (n, 3) arrays, m
        On the skin, and on what lies in the way.
    """

    skin: Floats
    others: Floats

    def near(self, place: Floats, reach: float) -> Cloud:
        """Return the points within a reach of the line through a place, (2,) array of y and z, m."""

        def kept(points: Floats) -> Floats:
            return np.asarray(points[((points[:, 1:] - place) ** 2).sum(axis=1) <= reach**2])

        return Cloud(kept(self.skin), kept(self.others))

    def joined(self, other: Cloud) -> Cloud:
        """Return the points of both."""
        return Cloud(np.concatenate([self.skin, other.skin]), np.concatenate([self.others, other.others]))


@dataclass(frozen=True)
class Run:
    """The stretch of a line that a bore can take, m along it.

    Attributes
    ----------
    start, end : float
        Tail and nose end; not in order where nothing fits, and then the shortfall tells by how much.
    """

    start: float
    end: float

    @property
    def length(self) -> float:
        """Length, m; not positive where nothing fits."""
        return self.end - self.start


def longest(cloud: Cloud, rules: Rules, place: Floats, seed: float) -> Run:
    """Return the longest bore on a line that covers one place of it.

    Parameters
    ----------
    cloud : Cloud
    rules : Rules
    place : (2,) array, m
        Where the line stands, y and z.
    seed : float, m
        Place along it.

    Notes
    -----
    A point of the skin at x along the line and rho off it is nearer than w to the ring of radius r at t where
    |t - x| < sqrt(w^2 - (rho - r)^2): a stretch of the line that no bore may cover. What lies in the way forbids
    likewise, its distance taken to the whole disc. Skin that stands in the disc's own way, rho < r, is an end: there
    the bore keeps its end wall along the line. With every point known the answer is exact; with points a distance d
    apart it is too long by about d^2/(6 w) over the skin's slope.
    """
    low, high = _forbidden(cloud, rules, place)
    inside = (low < seed) & (seed < high)
    if inside.any():
        deepest = float(np.minimum(seed - low[inside], high[inside] - seed).max())
        return Run(seed, seed - deepest)
    start = float(high[high <= seed].max(initial=-np.inf))
    end = float(low[low >= seed].min(initial=np.inf))
    if not (np.isfinite(start) and np.isfinite(end)):
        return Run(seed, seed)
    run = Run(start, end)
    return run if _reaches_out(cloud, rules, place, run) else Run(seed, seed)


def _forbidden(cloud: Cloud, rules: Rules, place: Floats) -> tuple[Floats, Floats]:
    """Stretches of the line that no bore may cover: where each begins and where it ends."""
    skin, off = _within(cloud.skin, place, rules.radius + rules.wall)
    beside = rules.wall**2 - (off - rules.radius) ** 2
    beside = np.where(off < rules.radius, np.maximum(beside, rules.end_wall**2), beside)
    others, off = _within(cloud.others, place, rules.radius + rules.clear)
    around = rules.clear**2 - np.maximum(off - rules.radius, 0.0) ** 2
    # What passes through the disc itself lets no bore through, even where it need not keep clear.
    around = np.where(off < rules.radius, np.maximum(around, 1e-12), around)
    x = np.concatenate([skin, others])
    half = np.sqrt(np.maximum(np.concatenate([beside, around]), 0.0))
    return x - half, x + half


def _within(points: Floats, place: Floats, reach: float) -> tuple[Floats, Floats]:
    """Places along a line and distances off it of the points within a reach of it."""
    squared = (points[:, 1] - place[0]) ** 2 + (points[:, 2] - place[1]) ** 2
    near = np.flatnonzero(squared < reach**2)
    return points[near, 0], np.sqrt(squared[near])


def _reaches_out(cloud: Cloud, rules: Rules, place: Floats, run: Run) -> bool:
    """Whether the drill gets through from the skin to the bore without coming near to anything."""
    if not rules.opens or not len(cloud.others):
        return True
    middle = (run.start + run.end) / 2
    ahead = rules.opens * (_within(cloud.skin, place, rules.radius)[0] - middle)
    through = ahead[ahead > 0]
    if not len(through):
        return True
    way = rules.opens * (_within(cloud.others, place, rules.radius + rules.clear)[0] - middle)
    return not bool(((way > 0) & (way < _first_out(through) + rules.clear)).any())


def _first_out(through: Floats) -> float:
    """How far the drill must go until all of it is out: to the end of the first stretch of skin across its disc."""
    ordered = np.sort(through)
    gaps = np.flatnonzero(np.diff(ordered) > 2e-3)
    return float(ordered[gaps[0]] if len(gaps) else ordered[-1])
