"""Separation: where the flow leaves the closing part of a body, and how much of the section stays open to the wake."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.surface import Floats
from meshlure.physics.form import shoulder_station
from meshlure.physics.profile import Profile

LAMINAR_ANGLE: Final = math.radians(7)
"""rad. Closing angle at which a laminar layer leaves a smooth wall; spheres show 0 to 10 degrees (Achenbach, E. 1972:
J. Fluid Mech. 54, from memory: separation 80 to 85 degrees from the nose). Both angles were chosen with the published
table in sight: its laminar spheres and spheroids decide this one."""

TRIPPED_ANGLE: Final = math.radians(21)
"""rad. Closing angle at which a turbulent layer leaves; boat-tails stay attached to about 22 degrees (Mair, W. A. 1969:
Aeronautical Quarterly 20, from memory), spheres show 20 to 30 (Achenbach 1972, from memory). The table's tripped
spheres and spheroids decide."""

ANGLE_SPREAD: Final = 0.3
"""Every angle within this share of the nominal one is taken as equally likely, and the result averaged over them."""

RECEDES: Final = 0.25
"""Share of the greatest radius by which a wall may lie further in than that radius before a flow that left a sharp edge
ahead no longer finds it; less counts in proportion. Ours."""

WAIST_FULL: Final = 0.8
"""A section behind a waist that is this share of the greatest or less no longer catches the flow that left ahead."""


@dataclass(frozen=True)
class Separation:
    """What lies ahead of the line where the flow leaves the body.

    Attributes
    ----------
    station : float, m
        Distance of that line from the leading end.
    trailing_bluffness : float
        Area of the section there over the greatest section: 1 for a flat base, near 0 for a fine tail.
    wetted_area : float, m2
        Skin of the flank ahead of it.
    arc : float, m
        Way of the flow along the surface, from the axis over the face to that line.
    parallel_run : float, m
        Length of wall between shoulder and separation on which a flow that left a sharp edge ahead can settle.
    """

    station: float
    trailing_bluffness: float
    wetted_area: float
    arc: float
    parallel_run: float


def attached_share(profile: Profile, angle: float) -> Floats:
    """Share of all closing angles within 30% of the given one at which the flow is still attached, (n,) array.

    Notes
    -----
    Ahead of the last section that is as large as the greatest nothing counts as closing: a waist between two equal
    lobes is bridged. The bridge fades as the later lobe falls from the greatest area to eight tenths of it, and where
    the waist is shallower than a fiftieth of the greatest area.
    """
    area, greatest = profile.area, profile.greatest_area
    later = np.maximum.accumulate(area[::-1])[::-1]
    girth = 2 * np.sqrt(math.pi * np.maximum(area, 1e-12 * greatest))
    closing = np.arctan(np.clip(-profile.area_slope / girth, 0, None))
    holds = np.clip(((1 + ANGLE_SPREAD) * angle - closing) / (2 * ANGLE_SPREAD * angle), 0, 1)
    catches = np.clip((later / greatest - WAIST_FULL) / (1 - WAIST_FULL), 0, 1)
    bridged = catches**2 * (3 - 2 * catches) * np.clip((later - area) / (0.02 * greatest), 0, 1)
    # What leaves ahead of a waist is caught behind it, from wherever it left.
    caught = np.maximum.accumulate(bridged[::-1])[::-1]
    return np.minimum.accumulate(holds + (1 - holds) * caught)


def separation(profile: Profile, angle: float) -> Separation:
    """Return where the flow leaves a body whose layer holds up to a closing angle.

    Parameters
    ----------
    profile : Profile
    angle : float, rad
        LAMINAR_ANGLE, TRIPPED_ANGLE or a value between.

    Notes
    -----
    The flow leaves at the first station behind the largest section that closes more steeply than the angle, else at
    the end of the body. Everything returned is the mean over all angles within 30% of the nominal one: with the share
    w(x) of those angles at which the flow is still attached at x, the station is the integral of w dx, the wetted
    area that of w dS, and so on, so that nothing jumps when the shape changes a little.
    """
    if not 0 < angle < math.pi / 2:
        raise ValueError(f"the closing angle lies between 0 and 90 degrees, not at {math.degrees(angle)}")
    attached = attached_share(profile, angle)
    between = (attached[1:] + attached[:-1]) / 2
    run = np.diff(profile.x)
    later = np.maximum.accumulate(profile.area[::-1])[::-1]
    ends = profile.x[0] * attached[0] + (profile.length - profile.x[-1]) * attached[-1]
    station = float((between * run).sum() + ends)
    inward = 1 - profile.radius / (profile.diameter / 2)
    receded = np.clip(inward / RECEDES, 0, 1) * (np.arange(inward.size) > profile.area.argmax())
    lost = float((between * run * (receded[1:] + receded[:-1]) / 2).sum())
    return Separation(
        station=station,
        trailing_bluffness=float(1 + (between * np.diff(later)).sum() / profile.greatest_area),
        wetted_area=float((between * profile.skin).sum()),
        arc=float(profile.radius[0] + (between * np.hypot(run, np.diff(profile.radius))).sum()),
        parallel_run=max(station - shoulder_station(profile) - lost, 0.0),
    )
