"""Copies of a bait drawn by lot: each doubt strays on its own, within its own spread."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Protocol

import numpy as np

from meshlure.geometry.surface import Floats
from meshlure.physics.changes import Changes
from meshlure.physics.stance import Stance

COUNT = 10_000
SEED = 20_240_607
DEVIATIONS = 2.0
"""Standard deviations that an end of a doubt stands for: about one copy in twenty strays farther."""

PERCENTS = (2.5, 16.0, 50.0, 84.0, 97.5)


class Spread(Protocol):
    """A doubt by what its two ends do."""

    @property
    def under(self) -> Changes:
        """The bait at the end where its reserve is low."""

    @property
    def over(self) -> Changes:
        """The bait at the end where its reserve is high."""

    @property
    def most(self) -> tuple[float, float]:
        """As many times this end as the cause can go at all, under and over."""


def drawn(spreads: Sequence[Spread], water: float, count: int = COUNT, seed: int = SEED) -> Changes:
    """Return what becomes of copies of a bait, one a row.

    Parameters
    ----------
    spreads : sequence of Spread
    water : float, kg/m3
    count, seed : int

    Notes
    -----
    Every doubt strays on its own, normally distributed with its end as two standard deviations, each side by its own
    end; where a cause can go no farther (a coat gone altogether) the distribution is cut off there. What it does is in
    proportion.
    """
    from scipy.special import ndtr, ndtri

    random = np.random.default_rng(seed)
    sums = {name: np.zeros((count, 4)) for name in ("mass", "volume", "wet")}
    for spread in spreads:
        least, most = ndtr(-DEVIATIONS * spread.most[0]), ndtr(DEVIATIONS * spread.most[1])
        strays = ndtri(random.uniform(least, most, count)) / DEVIATIONS
        up, down = np.maximum(strays, 0.0)[:, None], np.maximum(-strays, 0.0)[:, None]
        for name, total in sums.items():
            total += up * getattr(spread.over, name) + down * getattr(spread.under, name)
    return Changes(sums["mass"], sums["volume"], sums["wet"], np.ones(count), np.full(count, water))


@dataclass(frozen=True, eq=False)
class Draws:
    """Copies of a bait.

    Attributes
    ----------
    reserve : (n,) array, kg
    nose_up, lean : (n,) arrays, rad
        nan where the copy left the posture, or where the angle has no meaning.
    """

    reserve: Floats
    nose_up: Floats
    lean: Floats

    @classmethod
    def of(cls, stance: Stance, lot: Changes) -> Draws:
        """Return the copies of a bait in a posture."""
        nose_up, lean = stance.angles(stance.ups(lot))
        return cls(stance.reserve(lot), nose_up, lean)

    def percentiles(self, values: Floats) -> Floats | None:
        """Return the values at `PERCENTS` of those that have one, None where none has."""
        known = values[~np.isnan(values)]
        return np.percentile(known, PERCENTS) if len(known) else None
