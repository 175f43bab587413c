"""Small changes of a bait, many at once: what is added in weight and in displacement, and where."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Bools, Floats, Ints

NOTHING = np.zeros(4)


def load(amount: float, place: Floats) -> Floats:
    """Return an amount with its first moment about the mesh origin, (4,) array."""
    return np.concatenate([[amount], amount * np.asarray(place, dtype=np.float64)])


def moved(amount: float, way: Floats) -> Floats:
    """Return what an amount does that is moved by (3,) m, (4,) array: no more of it, but another first moment."""
    return np.concatenate([[0.0], amount * np.asarray(way, dtype=np.float64)])


@dataclass(frozen=True, eq=False)
class Changes:
    """Changes of one bait, one a row.

    Attributes
    ----------
    mass : (n, 4) array, kg and kg m
        Added mass with its first moment; negative where something is taken off.
    volume : (n, 4) array, m3 and m4
        Added displacement, the bait wholly under water.
    wet : (n, 4) array, m3 and m4
        The part of it that is under water at rest.
    scale : (n,) array
        By which skin and places have grown; masses and ``volume`` are those of the grown bait at the places before.
    water : (n,) array, kg/m3
    """

    mass: Floats
    volume: Floats
    wet: Floats
    scale: Floats
    water: Floats

    def __len__(self) -> int:
        return len(self.scale)

    def taken(self, rows: Bools | Ints | slice) -> Changes:
        """Return some of the rows."""
        return Changes(self.mass[rows], self.volume[rows], self.wet[rows], self.scale[rows], self.water[rows])

    @classmethod
    def joined(cls, parts: Sequence[Changes]) -> Changes:
        """Return the rows of several as one."""
        return cls(
            *(np.concatenate([getattr(p, name) for p in parts]) for name in ("mass", "volume", "wet", "scale", "water"))
        )

    @classmethod
    def one(
        cls,
        water: float,
        mass: Floats = NOTHING,
        volume: Floats = NOTHING,
        wet: Floats | None = None,
        scale: float = 1.0,
    ) -> Changes:
        """Return one change; all of its volume is wet where nothing else is said."""
        under = volume if wet is None else wet
        return cls(mass[None], volume[None], under[None], np.array([scale]), np.array([water]))
