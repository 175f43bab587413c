"""A lip taken as a flat plate: its area, aspect and angle to the flow from its mesh."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.moments import solid_moments
from meshlure.geometry.outline import outline
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import paired


@dataclass(frozen=True, eq=False)
class LipPlate:
    """The plate that a lip stands for.

    Attributes
    ----------
    normal : (3,) array
        Unit vector square to its face.
    centre : (3,) array, m
    area : float, m2
        Of one side.
    aspect : float
        Span across the flow over chord.
    angle : float, rad
        Between its face and the flow, 0 to pi/2.
    axes, sizes : (2, 3) array and (2,) array, m
        Two directions in its face at right angles, and the sides along them of the rectangle that it stands for.
    """

    normal: Floats
    centre: Floats
    area: float
    aspect: float
    angle: float
    axes: Floats
    sizes: Floats

    def extent(self, direction: Floats) -> Floats:
        """Return the plate's extent along directions in its face, (n,) array, m: that of the ellipse on its sides."""
        return np.asarray(np.sqrt(((direction @ self.axes.T) ** 2 * self.sizes**2).sum(axis=1)))


def lip_plate(surface: Surface, flow: Floats) -> LipPlate:
    """Return the plate that a lip's part outside the body stands for.

    Parameters
    ----------
    surface : Surface
        Closed, of the part outside.
    flow : (3,) array
        Unit vector along which the body moves.

    Notes
    -----
    The face is square to the axis of greatest moment of inertia, its area the silhouette seen along that axis. The
    span is the area's equivalent rectangle's side across the flow, from the extents along and across it.
    """
    moments = solid_moments(surface)
    _, axes = np.linalg.eigh(moments.inertia)
    normal = axes[:, 2]
    seen = outline(surface, paired(surface), normal)
    across = np.cross(normal, flow)
    length = float(np.linalg.norm(across))
    # A plate square to the flow has no direction along it: its long axis then counts as its span.
    across = across / length if length > 1e-6 else axes[:, 0]
    along = np.cross(across, normal)
    span, chord = float(np.ptp(surface.vertices @ across)), float(np.ptp(surface.vertices @ along))
    angle = float(np.arcsin(min(1.0, abs(float(normal @ flow)))))
    axes = np.array([across, along])
    return LipPlate(normal, moments.centre, seen.area, span / chord, angle, axes, np.array([span, chord]))
