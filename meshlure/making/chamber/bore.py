"""A bore found: where it lies, and what it leaves around it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.standoff import cylinder_standoff, side_standoff
from meshlure.geometry.surface import Floats
from meshlure.making.chamber.ahead import ahead
from meshlure.making.chamber.site import Site


@dataclass(frozen=True, eq=False)
class Bore:
    """The room that is cut for a chamber, with its distances found exactly.

    Attributes
    ----------
    cut : Cylinder
        Its axis points to the bait's nose.
    wall : float, m
        Least distance from its side to the body's skin.
    wall_at : (3,) array, m
        Where on the skin.
    ends : (float, float), m
        Body material straight ahead of the nose's and of the tail's end face, at its thinnest.
    clear : float, m
        Least distance to anything else in the body; infinite where there is nothing.
    nearest : str or None
        What that is.
    nearest_at : (3,) array, m
        Where on it; the bore's middle where there is nothing.
    """

    cut: Cylinder
    wall: float
    wall_at: Floats
    ends: tuple[float, float]
    clear: float
    nearest: str | None
    nearest_at: Floats

    @property
    def length(self) -> float:
        """Length, m."""
        return self.cut.length

    @property
    def end_wall(self) -> float:
        """The thinner of both end walls, m."""
        return min(self.ends)

    @property
    def nose_end(self) -> Floats:
        """Centre of the end face towards the nose, m."""
        return np.asarray(self.cut.ends[0])

    @property
    def tail_end(self) -> Floats:
        """Centre of the end face towards the tail, m."""
        return np.asarray(self.cut.ends[1])


def measured(site: Site, cut: Cylinder) -> Bore:
    """Return a bore with its distances to the skin and to all else, found exactly."""
    side = side_standoff(site.boxes, cut)
    nose, tail = (ahead(site.boxes, cut, end).distance for end in (0, 1))
    near = nearest_other(site, cut)
    return Bore(cut, side.distance, side.place, (nose, tail), near.distance, near.name, near.at)


def shortened(cut: Cylinder, nose: float, tail: float) -> Cylinder:
    """Return a cylinder with its ends moved inward, m."""
    middle = cut.middle + (tail - nose) / 2 * cut.axis
    return replace(cut, middle=middle, length=cut.length - nose - tail)


@dataclass(frozen=True, eq=False)
class Neighbour:
    """What lies nearest to a cylinder.

    Attributes
    ----------
    distance : float, m
        Infinite where there is nothing.
    name : str or None
    at : (3,) array, m
        Where on it.
    """

    distance: float
    name: str | None
    at: Floats


def nearest_other(site: Site, cylinder: Cylinder) -> Neighbour:
    """Return which of the other pieces and the hardware lies nearest to a cylinder's skin."""
    best = Neighbour(np.inf, None, cylinder.middle)
    for item in site.bait.hardware:
        found = _from_point(item.at, cylinder)
        if found < best.distance:
            best = Neighbour(found, f"'{item.name}'", item.at)
    half = np.abs(cylinder.axis) * cylinder.length / 2 + cylinder.radius
    for name, boxes in site.others:
        # By the boxes round both it cannot be nearer than this.
        low, high = boxes.low.min(axis=0), boxes.high.max(axis=0)
        gaps = np.maximum(np.maximum(low - (cylinder.middle + half), (cylinder.middle - half) - high), 0.0)
        if float(np.linalg.norm(gaps)) >= best.distance:
            continue
        standoff = cylinder_standoff(boxes, cylinder)
        if standoff.distance < best.distance:
            best = Neighbour(standoff.distance, name, standoff.place)
    return best


def distances(site: Site, cylinders: Sequence[Cylinder]) -> list[tuple[str, float]]:
    """Return by name how far every other piece is from the nearest of some solid cylinders, m; 0 where it is in one."""
    found = []
    for name, boxes in site.others:
        apart = min(cylinder_standoff(boxes, cylinder).distance for cylinder in cylinders)
        corner = boxes.corners[0, 0, 0]
        within = any(_from_point(corner, cylinder) == 0 for cylinder in cylinders)
        found.append((name, 0.0 if within else apart))
    points = ((f"'{item.name}'", item.at) for item in site.bait.hardware)
    return found + [(name, min(_from_point(at, cylinder) for cylinder in cylinders)) for name, at in points]


def _from_point(point: Floats, cylinder: Cylinder) -> float:
    """Distance from a point to a solid cylinder, m; 0 within."""
    off = point - cylinder.middle
    along = float(off @ cylinder.axis)
    beside = max(float(np.linalg.norm(off - along * cylinder.axis)) - cylinder.radius, 0.0)
    return float(np.hypot(max(abs(along) - cylinder.length / 2, 0.0), beside))
