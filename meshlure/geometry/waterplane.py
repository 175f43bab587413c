"""A plane's cut through a closed surface: what lies below it, and the section with its moments."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from meshlure.geometry.surface import Floats


@dataclass(frozen=True, eq=False)
class Section:
    """A plane section's area and moments.

    Attributes
    ----------
    area : float, m2
    centre : (3,) array, m
        Centroid in mesh coordinates; the middle of the cut points where there is no area.
    second : (3, 3) array, m4
        Integral of x x^T over the section about its centroid; no component along the normal.
    perimeter : float, m
        Length of all its boundaries.
    """

    area: float
    centre: Floats
    second: Floats
    perimeter: float


@dataclass(frozen=True, eq=False)
class Cut:
    """What lies below a plane.

    Attributes
    ----------
    normal : (3,) array
        Unit normal of the plane, away from the part below.
    height : float, m
        The plane is ``normal . x = height``.
    volume : float, m3
        Enclosed volume below the plane, without coat.
    moment : (3,) array, m4
        Its first moment about the mesh origin.
    coat_volume, coat_moment : float, m3, and (3,) array, m4
        The same of a thin coat on the faces.
    start, end : (k, 3) arrays, m
        The section's boundary as directed segments, the solid to their left seen from above.
    ribbon : (k,) array, m, or None
        Width of the coat's own section along each segment.
    """

    normal: Floats
    height: float
    volume: float
    moment: Floats
    coat_volume: float
    coat_moment: Floats
    start: Floats
    end: Floats
    ribbon: Floats | None = None

    @cached_property
    def section(self) -> Section:
        """Area, centroid, second moments and perimeter of the section by Green's theorem, a coat's section included.

        Notes
        -----
        Each segment spans a signed triangle with a point of the plane. A coat adds a thin ribbon along the boundary.
        """
        return self._section(self.ribbon)

    @cached_property
    def bare_section(self) -> Section:
        """The section of the solid alone, without a coat."""
        return self.section if self.ribbon is None else self._section(None)

    def _section(self, ribbon: Floats | None) -> Section:
        if not len(self.start):
            return Section(0.0, self.normal * self.height, np.zeros((3, 3)), 0.0)
        middle = (self.start.mean(axis=0) + self.end.mean(axis=0)) / 2
        p, q = self.start - middle, self.end - middle
        (px, py, pz), (qx, qy, qz), n = p.T, q.T, self.normal
        weight = ((py * qz - pz * qy) * n[0] + (pz * qx - px * qz) * n[1] + (px * qy - py * qx) * n[2]) / 2
        length = np.linalg.norm(q - p, axis=1)
        s = p + q
        area = float(weight.sum())
        first = weight @ s / 3
        second = (_second(weight, p) + _second(weight, q) + _second(weight, s)) / 12
        if ribbon is not None:
            strip = ribbon * length
            area += float(strip.sum())
            first = first + strip @ s / 2
            second = second + (_second(strip, p) + _second(strip, q) + _second(strip, s)) / 6
        if area <= 0:
            return Section(0.0, middle, np.zeros((3, 3)), float(length.sum()))
        offset = first / area
        return Section(area, middle + offset, second - area * np.outer(offset, offset), float(length.sum()))

    def extents(self, *directions: Floats) -> tuple[float, ...]:
        """Return the section's extent along each given direction, m; 0 where there is no section."""
        if not len(self.start):
            return (0.0,) * len(directions)
        return tuple(float(np.ptp(self.start @ direction)) for direction in directions)


def _second(weight: Floats, points: Floats) -> Floats:
    """Sum of weight x x^T, (3, 3)."""
    return np.asarray((points * weight[:, None]).T @ points)
