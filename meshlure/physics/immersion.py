"""A hull in water: what lies below the surface at a given up-direction, and the draught at a given displacement."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.surface import Floats
from meshlure.geometry.waterplane import Cut

_ROUNDS = 60


@dataclass(frozen=True, eq=False)
class Immersed:
    """A hull cut by one water surface.

    Attributes
    ----------
    cut : Cut
        Of the hull's skin.
    volume : float, m3
        Displaced, coat and hanging hardware included.
    centre : (3,) array, m
        Centre of buoyancy, mesh coordinates.
    """

    cut: Cut
    volume: float
    centre: Floats

    @property
    def up(self) -> Floats:
        """Upward normal of the water, (3,) array."""
        return self.cut.normal


@dataclass(frozen=True, eq=False)
class Hull:
    """What displaces water: a closed skin with its coat, and points that are under water in every posture.

    Attributes
    ----------
    index : BlockIndex
        Of the skin, with the coat's thickness where there is one.
    point_volume : float, m3
        Of hardware that hangs below.
    point_moment : (3,) array, m4
        Its first moment about the mesh origin.
    """

    index: BlockIndex
    point_volume: float
    point_moment: Floats

    @property
    def volume(self) -> float:
        """Displaced when wholly under water, m3."""
        return self.index.volume + self.index.coat_volume + self.point_volume

    @property
    def centre(self) -> Floats:
        """Centre of buoyancy when wholly under water, (3,) array, m."""
        return (self.index.moment + self.index.coat_moment + self.point_moment) / self.volume

    def at(self, up: Floats, height: float) -> Immersed:
        """Return the hull cut by the water surface ``up . x = height``."""
        cut = self.index.cut(up, height)
        volume = cut.volume + cut.coat_volume + self.point_volume
        moment = cut.moment + cut.coat_moment + self.point_moment
        return Immersed(cut, volume, moment / volume if volume > 0 else np.zeros(3))

    def settled(self, up: Floats, volume: float, start: float | None = None, close: float = 1e-13) -> Immersed:
        """Return the hull sunk so far that it displaces a given volume.

        Parameters
        ----------
        up : (3,) array
            Upward normal of the water.
        volume : float, m3
            More than the points' own and less than the whole hull's.
        start : float, m, optional
            Height of the water surface to start from.
        close : float
            Share of the volume that may be left missing.

        Raises
        ------
        ValueError
            If no height of the water gives that volume.

        Notes
        -----
        Newton's method (the waterplane's area is the derivative) inside a bracket that shrinks with every cut. Where a
        coated face lies in the water's surface the volume jumps by that face's coat; it is then wetted in part.
        """
        if not self.point_volume < volume < self.volume:
            raise ValueError(f"{volume * 1e6:.4g} cm3 cannot be displaced: the hull holds {self.volume * 1e6:.4g} cm3")
        # Heights relative to the index's origin keep a far-off bait's digits.
        middle = float(self.index.origin @ up)
        reach = self._reach(up)
        low, high = middle - reach, middle + reach
        height = middle if start is None or not low < start < high else start
        best = self.at(up, height)
        for _ in range(_ROUNDS):
            missing = volume - best.volume
            if abs(missing) <= close * volume:
                return best
            low, high = (height, high) if missing > 0 else (low, height)
            area = best.cut.section.area
            step = missing / area if area > 0 else np.inf
            if abs(step) <= 2 * np.spacing(abs(height)):
                # Far from the origin of the coordinates a height has too few digits to come closer.
                return best
            wished = height + step
            height = wished if low < wished < high else (low + high) / 2
            if not low < height < high:
                break
            best = self.at(up, height)
        return self._awash(up, low, high, volume)

    def _awash(self, up: Floats, low: float, high: float, volume: float) -> Immersed:
        """Return the hull where its volume jumps: the coat of a face lying in the water's surface is wetted in part."""
        under, over = self.at(up, low), self.at(up, high)
        share = (volume - under.volume) / (over.volume - under.volume)
        moment = (1 - share) * under.volume * under.centre + share * over.volume * over.centre
        return Immersed(under.cut, volume, moment / volume)

    def _reach(self, up: Floats) -> float:
        groups = self.index.groups
        return float((np.abs(groups.middle @ up) + groups.half @ np.abs(up)).max()) * (1 + 1e-9) + 1e-12
