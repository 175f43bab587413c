"""Form: how slender a body is, how bluntly its leading end meets the flow, how much skin it has for its volume."""

from __future__ import annotations

import math
from typing import Final

import numpy as np

from meshlure.physics.profile import Profile

__all__ = ["Profile", "fineness", "largest_section", "leading_bluffness", "shoulder_station", "sphericity"]

EDGE_RING: Final = 1.0 / 3.0
"""Outer share of a section in which the slope of the surface ahead of it is read: wide enough for the facets of a mesh
to average out."""

EDGE_PLACE: Final = 23.0 / 24.0
"""Share of a section's area at which that slope is then taken: near its edge, and so that a hemisphere has 1/24, which
with the 0.75 of a disc's face is the few hundredths measured on hemispherical heads."""

_CELLS: Final = 32

SHOULDER_RELIEF: Final = 3.0
"""Thrust of the shoulder behind a face, per share of the greatest section still to grow, in units of a face's pressure.
Set
(2 was tried first) to the 0.2 that remains of a flat face whose edges are rounded to a tenth of the diameter (Hoerner,
S. F. 1965: Fluid-Dynamic Drag, ch. 3, from memory)."""

SHOULDER_RADIUS: Final = 0.9
"""Share of the greatest radius from which a body begins to count as having reached its full section."""


def fineness(profile: Profile) -> float:
    """Length over the equivalent diameter of the largest section."""
    return profile.length / profile.diameter


def largest_section(profile: Profile) -> tuple[float, float]:
    """Distance of the largest section from the leading end, m, and its area, m2.

    Notes
    -----
    Of a run of equal sections (to a thousandth of the area) the middle is given.
    """
    level = np.flatnonzero(profile.area >= 0.999 * profile.greatest_area)
    return float(profile.x[level[[0, -1]]].mean()), profile.greatest_area


def leading_bluffness(profile: Profile) -> float:
    """Share of a flat face's pressure drag that the leading end feels, 0 (fine or well rounded) to 1 (flat).

    Notes
    -----
    At a section of area A the surface ahead of it is read ring by ring, each where the body first reaches its area:
    sin^2 of the surface's angle to the flow over the outermost third of A, fitted by a straight line (least squares)
    and taken at 23/24 of A. That is 1 for a flat face, sin^2 h for a cone of half angle h, 1/24 for a hemisphere.
    With a = A/A_max, the bluffness is the greatest value over all sections of a x fit - 3 (1 - a): the last term is
    the thrust of the shoulder that still grows behind, so that a sharp face somewhat smaller than the body's largest
    section fades from the count with no jump. Neighbouring lobes of a waisted body count by what the later one adds
    to the earlier.

    The sin^2 law of noses that meet the body at an angle is Hoerner's (1965, ch. 3, from memory); the fit in place of
    one slope, and the relief, are ours.
    """
    area = np.concatenate([[0.0], np.maximum.accumulate(profile.area)])
    x = np.concatenate([[0.0], profile.x])
    sine_squared = profile.steepness
    if sine_squared is None:
        rise, run = np.diff(np.sqrt(area / math.pi)), np.diff(x)
        sine_squared = rise**2 / np.maximum(rise**2 + run**2, np.finfo(float).tiny)
    total = np.concatenate([[0.0], np.cumsum(sine_squared * np.diff(area))])
    grows = np.concatenate([[True], np.diff(area) > 0])
    share = np.linspace(0.5, 1.0, 251)
    edges = 1 - EDGE_RING + EDGE_RING * np.linspace(0, 1, _CELLS + 1)
    reached = np.interp(share[:, None] * edges * area[-1], area[grows], total[grows])
    slopes = np.diff(reached, axis=1) / (share[:, None] * np.diff(edges) * area[-1])
    middles = (edges[1:] + edges[:-1]) / 2
    spread = middles - middles.mean()
    tilt = slopes @ spread / (spread @ spread)
    fitted = np.clip(slopes.mean(axis=1) + tilt * (EDGE_PLACE - middles.mean()), 0, 1)
    return float(np.max(fitted * share - SHOULDER_RELIEF * (1 - share)))


def shoulder_station(profile: Profile) -> float:
    """Distance from the leading end at which the body has reached its full section, m.

    Notes
    -----
    The mean of the distances at which the radius first reaches each share from 0.9 to 1 of its greatest value.
    """
    reached = np.sqrt(np.maximum.accumulate(profile.area) / profile.greatest_area)
    missing = np.clip((1 - reached) / (1 - SHOULDER_RADIUS), 0, 1)
    return float(np.trapezoid(missing, profile.x) + missing[0] * profile.x[0])


def sphericity(volume: float, surface: float) -> float:
    """Surface of the sphere of equal volume over the body's surface, 1 for a sphere.

    Parameters
    ----------
    volume : float, m3
    surface : float, m2

    Raises
    ------
    ValueError
        Where either is not positive.

    References
    ----------
    Wadell, H. (1935): Volume, shape, and roundness of quartz particles. J. Geology 43 (from memory).
    """
    if not (volume > 0 and surface > 0):
        raise ValueError(f"sphericity takes a positive volume and surface, not {volume} and {surface}")
    return float(math.pi ** (1 / 3) * (6 * volume) ** (2 / 3) / surface)
