"""Profile: a body's sections along the flow, counted from the end that leads."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from typing import Final

import numpy as np

from meshlure.geometry.stations import Stations
from meshlure.geometry.surface import Floats

WINDOW: Final = 0.05
"""Half width of the fit that takes the slope of the area curve, as a share of the length: wider than the facets of a
mesh of usual fineness, narrower than a tail."""


@dataclass(frozen=True, eq=False)
class Profile:
    """A body's sections along the flow, counted from the end that leads.

    Attributes
    ----------
    x : (n,) array, m
        Distance from the leading end, ascending, within 0 to `length`.
    area : (n,) array, m2
    perimeter : (n,) array, m
    length : float, m
    elongation : float
        Long over short axis of the ellipse with the largest section's second moments, at least 1; 1 for round and
        square silhouettes, a rectangle's own aspect.
    steepness : (n,) array or None
        sin^2 of the angle between flow and skin, its mean over what the section grows by from the station before to
        each one; None takes the sections for circles about one axis.
    """

    x: Floats
    area: Floats
    perimeter: Floats
    length: float
    elongation: float = 1.0
    steepness: Floats | None = None

    def __post_init__(self) -> None:
        arrays = {name: np.array(getattr(self, name), dtype=np.float64) for name in ("x", "area", "perimeter")}
        if any(values.shape != arrays["x"].shape or values.ndim != 1 for values in arrays.values()):
            raise ValueError("a profile takes three arrays (n,) of one length")
        if arrays["x"].size < 9 or not all(np.isfinite(values).all() for values in arrays.values()):
            raise ValueError("a profile takes at least 9 stations of finite numbers")
        if not (np.diff(arrays["x"]) > 0).all() or arrays["x"][0] < 0 or arrays["x"][-1] > self.length:
            raise ValueError("a profile's stations ascend from its leading end within its length")
        if (arrays["area"] < 0).any() or (arrays["perimeter"] < 0).any() or not arrays["area"].any():
            raise ValueError("a profile's areas and perimeters are not negative and not all zero")
        if not 1.0 <= self.elongation < math.inf:
            raise ValueError(f"a profile's elongation is at least 1, not {self.elongation}")
        if self.steepness is not None:
            arrays["steepness"] = np.array(self.steepness, dtype=np.float64)
            if arrays["steepness"].shape != arrays["x"].shape or not (np.abs(arrays["steepness"] - 0.5) <= 0.5).all():
                raise ValueError("a profile's steepness lies between 0 and 1 at every station")
        for name, values in arrays.items():
            values.flags.writeable = False
            object.__setattr__(self, name, values)

    @classmethod
    def from_stations(
        cls,
        stations: Stations,
        *,
        leads_low: bool,
        filled: float = 1.0,
        facing: Callable[[Floats], tuple[Floats, Floats]] | None = None,
    ) -> Profile:
        """Return the sections counted from the low end of the axis, or from the high end.

        Parameters
        ----------
        stations : Stations
            Their lateral directions along the greatest section's own axes.
        leads_low : bool
            True where the end with the lesser position along the axis goes first.
        filled : float
            Share to which holes of the sections count as filled: a hollow in a face stands full of dead fluid, a hole
            right through does not.
        facing : callable, optional
            What the faces turn ahead up to given distances from the leading end, plain and by steepness, as
            `geometry.steepness.facing_ahead`. Left out, the sections are taken for circles.
        """
        order = slice(None) if leads_low else slice(None, None, -1)
        x = (stations.position - stations.low if leads_low else stations.high - stations.position)[order]
        area = (stations.area + filled * (stations.filled - stations.area))[order]
        perimeter = (stations.perimeter + filled * (stations.girth - stations.perimeter))[order]
        axes = sorted(float(axis) for axis in stations.spread[stations.area.argmax()])
        elongation = axes[1] / axes[0] if axes[0] > 0 else 1.0
        steepness = None if facing is None else _steepness(area, *facing(x))
        return cls(x, area, perimeter, stations.length, elongation, steepness)

    @classmethod
    def of_revolution(cls, radius: Callable[[Floats], Floats], length: float, count: int = 121) -> Profile:
        """Return the sections of a body of revolution, the outermost ones a ten-thousandth inside the ends.

        Parameters
        ----------
        radius : callable
            Radius (n,), m, at distances (n,), m, from the leading end.
        length : float, m
        count : int
        """
        x = np.linspace(1e-4 * length, (1 - 1e-4) * length, count)
        r = np.asarray(radius(x), dtype=np.float64)
        return cls(x, math.pi * r**2, 2 * math.pi * r, length)

    def reversed(self) -> Profile:
        """Return the same body with its other end leading."""
        return Profile(self.length - self.x[::-1], self.area[::-1], self.perimeter[::-1], self.length, self.elongation)

    @cached_property
    def greatest_area(self) -> float:
        """Area of the largest section, m2."""
        return float(self.area.max())

    @cached_property
    def diameter(self) -> float:
        """Diameter of the circle that has the largest section's area, m."""
        return 2 * math.sqrt(self.greatest_area / math.pi)

    @cached_property
    def radius(self) -> Floats:
        """Radius of the circle that has each section's area, (n,) array, m."""
        return np.sqrt(self.area / math.pi)

    @cached_property
    def skin(self) -> Floats:
        """Wetted area of the flank between neighbouring stations, (n - 1,) array, m2.

        Notes
        -----
        Integral of perimeter x sqrt(1 + (dr/dx)^2) with r the equivalent radius; exact for truncated cones. A face
        normal to the flow has no flank and is left out.
        """
        return (self.perimeter[1:] + self.perimeter[:-1]) / 2 * np.hypot(np.diff(self.x), np.diff(self.radius))

    @cached_property
    def area_slope(self) -> Floats:
        """Slope of the area along the axis, (n,) array, m.

        Notes
        -----
        Local quadratic least squares with tricube weights (Cleveland, W. S. 1979, J. Amer. Stat. Assoc. 74). The area
        of a cone, a spheroid or a cylinder is a quadratic of x, so the fit adds no error there; the steps that facets
        put into the slope are averaged out.
        """
        reach = max(WINDOW * self.length, 3.5 * float(np.diff(self.x).max()))
        u = (self.x[None, :] - self.x[:, None]) / reach
        near = np.clip(1 - np.abs(u * u * u), 0, None)
        power = near * near * near
        moments, right = [], []
        for order in range(5):
            moments.append(power.sum(axis=1))
            if order < 3:
                right.append(power @ self.area)
            power = power * u
        normal = np.array([[moments[i + j] for j in range(3)] for i in range(3)]).transpose(2, 0, 1)
        return np.asarray(np.linalg.solve(normal, np.array(right).T[..., None])[:, 1, 0] / reach, dtype=np.float64)


def _steepness(area: Floats, shown: Floats, weighted: Floats) -> Floats:
    """Mean steepness of what the section grows by between stations; what grows without a face is a hollow's mouth."""
    growth = np.diff(np.maximum.accumulate(area), prepend=0.0)
    shown, weighted = np.diff(shown, prepend=0.0), np.diff(weighted, prepend=0.0)
    mouth = np.maximum(growth - shown, 0.0)
    whole = np.maximum(shown + mouth, 1e-12 * float(area.max()))
    return np.asarray(np.clip((weighted + mouth) / whole, 0.0, 1.0))
