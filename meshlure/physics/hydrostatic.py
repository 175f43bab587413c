"""Hydrostatic weighing: what a copy displaces, how dense it is, and which single cause explains the difference."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np


@dataclass(frozen=True)
class Weighing:
    """A bait weighed in air and in water, kg; in the water of a density, kg/m3.

    Attributes
    ----------
    dry : float, kg
    in_water : float, kg
        Hung wholly under water; negative where it pulls up.
    water : float, kg/m3
    """

    dry: float
    in_water: float
    water: float

    @property
    def volume(self) -> float:
        """Displaced, m3.

        Notes
        -----
        The lift of the air is neglected, as the standards do: it makes the volume 0.1% too small.

        References
        ----------
        ISO 1183-1:2019, method A; ASTM D792-20, method A.
        """
        return (self.dry - self.in_water) / self.water

    @property
    def density(self) -> float:
        """Of the whole bait, kg/m3: dry x water / (dry - in_water)."""
        return self.dry * self.water / (self.dry - self.in_water)


@dataclass(frozen=True)
class Lever:
    """One thing that may be otherwise than thought.

    Attributes
    ----------
    what : str
    unit : str
        That its change is told in.
    mass, reserve : float, kg
        What one unit of it adds to the mass and to the reserve.
    usual : (float, float)
        How far it strays below and above in common practice, in its unit.
    """

    what: str
    unit: str
    mass: float
    reserve: float
    usual: tuple[float, float]


@dataclass(frozen=True)
class Explanation:
    """How well one cause alone explains what was weighed.

    Attributes
    ----------
    lever : Lever
    change : float
        In the lever's unit, that fits the weighings best.
    left_mass, left_reserve : float or None, kg
        What is left of the differences; None of what was not weighed.
    share : float
        Of the differences' squares that it explains.
    likely : bool
        Whether such a change is usual, and explains all but what the scale's steps leave.
    """

    lever: Lever
    change: float
    left_mass: float | None
    left_reserve: float | None
    share: float
    likely: bool


def explained(
    levers: Sequence[Lever], mass: float | None, reserve: float | None, close: float
) -> tuple[Explanation, ...]:
    """Return how well each single cause explains weighings, the likeliest first.

    Parameters
    ----------
    levers : sequence of Lever
    mass, reserve : float or None, kg
        Weighed less predicted; None of what was not weighed.
    close : float, kg
        What may be left unexplained: the scale's own steps.

    Notes
    -----
    Least squares for one unknown: change = e.v/v.v with the differences e and what a unit does, v. With one weighing
    every cause that touches it explains it; two tell them apart.
    """
    known = np.array([value is not None for value in (mass, reserve)])
    wanted = np.array([0.0 if value is None else value for value in (mass, reserve)])
    if not known.any():
        return ()
    rows = []
    for lever in levers:
        does = np.where(known, [lever.mass, lever.reserve], 0.0)
        size = float(does @ does)
        if size == 0:
            continue
        change = float(wanted @ does) / size
        left = wanted - change * does
        total = float(wanted @ wanted)
        fits = bool((np.abs(left) <= close).all())
        rows.append(
            Explanation(
                lever,
                change,
                float(left[0]) if known[0] else None,
                float(left[1]) if known[1] else None,
                1.0 - float(left @ left) / total if total > 0 else 1.0,
                fits and -lever.usual[0] <= change <= lever.usual[1],
            )
        )
    return tuple(sorted(rows, key=lambda row: (not row.likely, -row.share)))
