"""The bore's own directions: along it towards the nose, to the bait's left, and square to both."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.geometry.surface import Floats, Surface


@dataclass(frozen=True, eq=False)
class Axes:
    """Coordinates in which every bore of one slope runs along x.

    Attributes
    ----------
    rows : (3, 3) array
        Unit vectors in mesh coordinates: along the bore towards the nose, to the bait's left, upward.
    origin : (3,) array, m
        Mesh coordinates of the zero, in the body's mid-plane: a body far from the origin loses no digits.
    """

    rows: Floats
    origin: Floats

    @classmethod
    def of(cls, frame: Frame, slope: float, origin: Floats) -> Axes:
        """Return the axes of bores that fall towards the nose by an angle, rad, the bait level."""
        along = np.cos(slope) * frame.nose - np.sin(slope) * frame.back
        upward = np.sin(slope) * frame.nose + np.cos(slope) * frame.back
        return cls(np.array([along, frame.side, upward]), np.asarray(origin, dtype=np.float64))

    @property
    def along(self) -> Floats:
        """Unit vector along the bore towards the nose, mesh coordinates."""
        return np.asarray(self.rows[0])

    def local(self, points: Floats) -> Floats:
        """Return (n, 3) points of the mesh in these axes, m."""
        return np.asarray((points - self.origin) @ self.rows.T)

    def mesh(self, points: Floats) -> Floats:
        """Return (..., 3) points in these axes as mesh coordinates, m."""
        return np.asarray(points @ self.rows + self.origin)

    def laid(self, surface: Surface) -> Surface:
        """Return a surface in these axes."""
        return Surface(self.local(surface.vertices), surface.faces)
