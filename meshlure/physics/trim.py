"""Trim: at which angles a bait in flight meets the air without turning, and how far it swings about them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Final

import numpy as np

from meshlure.geometry.surface import Floats

STEADY_TRIM: Final = np.radians(20.0)
"""rad. A stable trim this close to the leading end flies steadily; our limit."""

SWAYS_TO: Final = np.radians(60.0)
"""rad. Beyond it a swing is a tumble; our limit."""

DISTURBED: Final = np.radians(30.0)
"""rad off the leading end: the start that a well must hold, for a bait does not leave the rod straight; our limit."""


@dataclass(frozen=True)
class Limits:
    """What separates the verdicts.

    Attributes
    ----------
    steady : float, rad
        A stable trim this close to the leading end flies steadily.
    sways : float, rad
        A trim or a swing up to here sways, beyond it tumbles.
    start : float, rad
        Off the leading end: the start that a well must hold.
    """

    steady: float = float(STEADY_TRIM)
    sways: float = float(SWAYS_TO)
    start: float = float(DISTURBED)


OURS: Final = Limits()

STEP: Final = float(np.radians(1.0))
"""rad between the angles of a moment curve."""

_NOUGHT: Final = 1e-9
"""Share of the greatest moment that counts as none."""


@dataclass(frozen=True, eq=False)
class MomentCurve:
    """Turning moment about the centre of gravity in one plane, over the angle from nose first.

    Attributes
    ----------
    plane : str
        pitch or yaw.
    angle : (n,) array, rad
        From -pi to pi by `STEP`; positive where the bait moves towards its back (pitch) or its left side (yaw).
    moment : (n,) array, N m
        Positive lessens the angle.
    inertia : float, kg m2
        About the axis that it turns on.
    force : (n,) array, N
        Across the bait in that plane, towards its back or its left side.
    """

    plane: str
    angle: Floats
    moment: Floats
    inertia: float
    force: Floats

    def moved(self, shift: float) -> MomentCurve:
        """Return the curve with the centre of gravity so much nearer the nose, m; the inertia is kept."""
        return replace(self, moment=self.moment - shift * self.force)

    @cached_property
    def work(self) -> Floats:
        """Work against the moment from the first angle on, (n,) array, J; the angles where it is least are stable."""
        steps = (self.moment[1:] + self.moment[:-1]) / 2 * np.diff(self.angle)
        return np.concatenate([[0.0], np.cumsum(steps)])

    @cached_property
    def trims(self) -> tuple[Trim, ...]:
        """Every angle without moment, ascending.

        Notes
        -----
        The first and the last angle are the same direction; an end that the curve crosses there, as every bait alike
        on both sides does tail first, is found once.
        """
        moment, angle = self.moment[:-1].copy(), self.angle
        moment[np.abs(moment) <= _NOUGHT * np.abs(moment).max()] = 0.0
        after = np.roll(moment, -1)
        slopes = (after - np.roll(moment, 1)) / (2 * STEP)
        found = []
        for k in np.flatnonzero((moment == 0) | (moment * after < 0)):
            share = float(moment[k] / (moment[k] - after[k])) if moment[k] else 0.0
            slope = float((1 - share) * slopes[k] + share * slopes[(k + 1) % len(slopes)])
            found.append(Trim(float(angle[k]) + share * STEP, slope > 0, slope))
        return tuple(found)

    def from_end(self, end: str) -> Floats:
        """Return the angles counted from an end, rad, between -pi and pi."""
        return np.asarray(_wrapped(self.angle - (0.0 if end == "nose" else np.pi)))

    def nearest_trim(self, end: str) -> Trim | None:
        """Return the stable trim nearest to an end, None where there is none."""
        stable = [trim for trim in self.trims if trim.stable]
        return min(stable, key=lambda trim: abs(trim.from_end(end))) if stable else None

    def swing(self, end: str, start: float = DISTURBED) -> float:
        """Return how far from an end the bait swings when let go at an angle from it, on the worse side, rad.

        Notes
        -----
        Without damping: it swings over all angles that hold no more work than its start; pi where nothing stops it.
        """
        offset = self.from_end(end)
        order = np.argsort(offset)
        angle, work = offset[order], self.work[order]
        # Going round by pi the work may not close: a mean moment remains; it is spread evenly, and is small.
        worst = 0.0
        for side in (-start, start):
            level = float(np.interp(side, angle, work)) + 1e-15
            inside = work <= level
            at = int(np.argmin(np.abs(angle - side)))
            inside[at] = True
            low = at
            while low > 0 and inside[low - 1]:
                low -= 1
            high = at
            while high < len(angle) - 1 and inside[high + 1]:
                high += 1
            if low == 0 or high == len(angle) - 1:
                return float(np.pi)
            worst = max(worst, abs(float(angle[low])), abs(float(angle[high])))
        return worst


@dataclass(frozen=True)
class Trim:
    """An angle without moment.

    Attributes
    ----------
    angle : float, rad
        From nose first.
    stable : bool
    slope : float, N m/rad
        Of the moment that lessens the angle.
    """

    angle: float
    stable: bool
    slope: float

    def from_end(self, end: str) -> float:
        """Return the angle from an end, rad, between -pi and pi."""
        return float(_wrapped(np.array(self.angle - (0.0 if end == "nose" else np.pi))))


def _wrapped(angle: Floats) -> Floats:
    return (angle + np.pi) % (2 * np.pi) - np.pi


VERDICTS: Final = ("steady", "sways", "tumbles")


@dataclass(frozen=True)
class Bearing:
    """How a bait flies with one end first.

    Attributes
    ----------
    end : str
    verdict : str
        steady, sways or tumbles.
    trim : float or None, rad
        Of the plane that is farther off, from the end.
    swing : float, rad
        Of the wider plane, from a start 30 degrees off.
    """

    end: str
    verdict: str
    trim: float | None
    swing: float


def bearing(curves: Sequence[MomentCurve], end: str, limits: Limits = OURS) -> Bearing:
    """Return how a bait flies with an end first, by the worse of its planes.

    Notes
    -----
    With our limits: steady, a stable trim within 20 degrees of the end, whose well holds a start 30 degrees off;
    sways, a stable trim or a swing between 20 and 60 degrees; tumbles, anything else.
    """
    worst, trim, swing = 0, 0.0, 0.0
    trimmed = True
    for curve in curves:
        nearest = curve.nearest_trim(end)
        away = np.pi if nearest is None else abs(nearest.from_end(end))
        far = curve.swing(end, limits.start)
        if away <= limits.steady and far <= limits.sways:
            grade = 0
        elif away <= limits.sways or far <= limits.sways:
            grade = 1
        else:
            grade = 2
        worst, swing = max(worst, grade), max(swing, far)
        trimmed = trimmed and nearest is not None
        trim = max(trim, away)
    return Bearing(end, VERDICTS[worst], trim if trimmed else None, swing)


def leading(curves: Sequence[MomentCurve], limits: Limits = OURS) -> Bearing:
    """Return the bearing of the end that leads: the steadier one, the deeper well where both fly alike.

    Notes
    -----
    Depth of a well: least rise of the work between the end and broadside, in the softer plane.
    """
    bearings = [bearing(curves, end, limits) for end in ("nose", "tail")]
    grades = [VERDICTS.index(b.verdict) for b in bearings]
    if grades[0] != grades[1]:
        return bearings[int(np.argmin(grades))]
    depths = [min(_rise(curve, b.end) for curve in curves) for b in bearings]
    return bearings[int(np.argmax(depths))]


def _rise(curve: MomentCurve, end: str) -> float:
    """Work that it takes to turn from an end to broadside, on the easier side, J."""
    offset = curve.from_end(end)
    order = np.argsort(offset)
    work = np.interp([-np.pi / 2, 0.0, np.pi / 2], offset[order], curve.work[order])
    return float(min(work[0], work[2]) - work[1])
