"""A round cylinder as a formula: its volume, its moments, its ends."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.moments import Moments
from meshlure.geometry.surface import Floats

_UNIT = 1e-9
"""How far an axis's length may be from 1."""


@dataclass(frozen=True, eq=False)
class Cylinder:
    """A solid right circular cylinder.

    Attributes
    ----------
    middle : (3,) array, m
    axis : (3,) array
        Unit vector; either sense gives the same solid.
    length, radius : float, m
        Positive.

    Notes
    -----
    Arrays are set read-only.
    """

    middle: Floats
    axis: Floats
    length: float
    radius: float

    def __post_init__(self) -> None:
        middle, axis = np.array(self.middle, dtype=np.float64), np.array(self.axis, dtype=np.float64)
        if middle.shape != (3,) or axis.shape != (3,):
            raise ValueError(f"a cylinder takes a (3,) middle and a (3,) axis, not {middle.shape}, {axis.shape}")
        if not (abs(float(np.linalg.norm(axis)) - 1) <= _UNIT and self.length > 0 and self.radius > 0):
            raise ValueError(f"no cylinder: axis {axis}, length {self.length}, radius {self.radius}")
        middle.flags.writeable = False
        axis.flags.writeable = False
        object.__setattr__(self, "middle", middle)
        object.__setattr__(self, "axis", axis)

    @property
    def ends(self) -> Floats:
        """Centres of the end faces, (2, 3) array, m: the one that the axis points to first."""
        return self.middle + np.array([[0.5], [-0.5]]) * self.length * self.axis

    @property
    def across(self) -> Floats:
        """Two unit vectors square to the axis and to each other, (2, 3) array; with the axis third, right-handed."""
        pole = np.eye(3)[np.abs(self.axis).argmin()]
        first = np.cross(pole, self.axis)
        first /= np.linalg.norm(first)
        return np.stack([first, np.cross(self.axis, first)])

    @property
    def volume(self) -> float:
        """Volume, m3."""
        return float(np.pi * self.radius**2 * self.length)

    def moments(self) -> Moments:
        """Return the volume, m3, with its moments: L^2/12 of it along the axis, r^2/4 about each line across."""
        volume = self.volume
        along = np.outer(self.axis, self.axis)
        second = self.length**2 / 12 * along + self.radius**2 / 4 * (np.eye(3) - along)
        return Moments(volume, volume * self.middle, volume * second)

    def grown(self, radial: float, axial: float) -> Cylinder:
        """Return the cylinder with its radius and either end moved outward, m; negative moves inward."""
        return Cylinder(self.middle, self.axis, self.length + 2 * axial, self.radius + radial)
