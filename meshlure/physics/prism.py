"""Prism: the drag of an endless body of one section that lies across the flow."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.physics.form import leading_bluffness
from meshlure.physics.friction import friction, laminar_friction
from meshlure.physics.layer import CLOSED_BEFORE, FACE_PRESSURE, ramp
from meshlure.physics.profile import Profile
from meshlure.physics.separation import LAMINAR_ANGLE, TRIPPED_ANGLE, attached_share, separation

SLENDER_SUCTION: Final = 0.5
BLUFF_SUCTION: Final = 1.2
TURNED_FROM: Final = math.radians(12)
TURNED_TO: Final = math.radians(35)
"""Suction behind a section that no corner of its face detaches: 0.5 where the flow is turned aside by less than 12
degrees before it leaves, 1.2 from 35 degrees on. Set by hand on White's table 7.2 (from memory): circle, ellipses 2, 4
and 8 times as deep as wide, half cylinder, wedges and rounded noses before flat bases, all laminar."""

TRIPPED_SUCTION: Final = 0.4
"""Suction where a turbulent layer leaves a smooth closing wall. Set by hand on the same table's turbulent circle (0.3)
and ellipses (0.2, 0.15, 0.1)."""

RECOVERY: Final = 1.5
"""Power of the open share of the width, squared, with which the suction counts: a wall that closes before the flow
leaves it raises the pressure in the wake. Set by hand on the same ellipses."""

_RUN: Final = (0.0, 0.3, 1.0, 1.5, 2.0, 3.0, 6.0, 10.0)
_SUCTION: Final = (1.2, 1.35, 1.4, 1.15, 0.92, 0.57, 0.35, 0.3)
"""Suction behind a sharp flat face over the run of body behind it, in widths: what the published drag of rectangles
less the face's 0.75 leaves (White, table 7.2, from memory)."""


@dataclass(frozen=True)
class PrismParts:
    """Parts of the drag coefficient of a section in one state of its layer, on its width.

    Attributes
    ----------
    friction, forebody, base : float
    trailing_bluffness : float
        Share of the width, squared, left open to the wake.
    arc_reynolds : float
        Reynolds number of the flow's way to the separation line.
    """

    friction: float
    forebody: float
    base: float
    trailing_bluffness: float
    arc_reynolds: float

    @property
    def cd(self) -> float:
        """Drag coefficient on the width."""
        return self.friction + self.forebody + self.base


def prism_parts(profile: Profile, reynolds_width: float, *, tripped: bool, transition: float = 0.0) -> PrismParts:
    """Parts of the drag coefficient of an endless body across the flow, for one state of its layer.

    Parameters
    ----------
    profile : Profile
        Of the section along the flow, its half width taken as the radius of a body of revolution.
    reynolds_width : float
        Speed x greatest width / kinematic viscosity.
    tripped : bool
    transition : float
        Reynolds number of the run at which a tripped layer turns.

    Notes
    -----
    The body of revolution's reading (`layer.layer_parts`) with the suction of a wake between two parallel edges.
    friction = C_f x way to separation on both sides/width x (1 + 2 width/length), C_f at that way's Reynolds number.
    forebody = 0.75 x leading bluffness. base = K a^1.5, a the share of the width, squared, that stays open. Behind a
    smooth front K goes from 0.5 to 1.2 with the angle by which the flow is turned aside where it leaves: that of the
    line from the foremost point, plus half the wall's own angle there. Where a turbulent layer leaves a wall that has
    closed, K is at most 0.4. Behind a flat face K falls with the run of wall behind it. Between fronts, in proportion
    to the bluffness.

    The dip and peak of rectangles 0.4 to 0.8 as deep as wide (up to 2.9, in two-dimensional flow only) are left out.

    References
    ----------
    White, F. M., Fluid Mechanics, table 7.2, after Hoerner (1965); Munson, B. R., Young, D. F. and Okiishi, T. H.,
    Fundamentals of Fluid Mechanics, fig. 9.19 and 9.28: all from memory.
    """
    bluff = leading_bluffness(profile)
    leaves = separation(profile, TRIPPED_ANGLE if tripped else LAMINAR_ANGLE)
    width = profile.diameter
    arc_reynolds = reynolds_width * leaves.arc / width
    coefficient = friction(arc_reynolds, transition) if tripped else laminar_friction(arc_reynolds)
    rubbed = max(leaves.arc - float(profile.radius[0]), 0.0)
    rubbing = coefficient * 2 * rubbed / width * (1 + 2 * width / max(profile.length, width))
    pressing = FACE_PRESSURE * bluff

    run = leaves.parallel_run / width
    detached = bluff * (1 - min(1.0, run / 3))
    turned = math.atan2(width / 2, max(leaves.station, 1e-12)) + 0.5 * _slope_where_it_leaves(profile, tripped)
    smooth = SLENDER_SUCTION + (BLUFF_SUCTION - SLENDER_SUCTION) * ramp(turned, TURNED_FROM, TURNED_TO)
    if tripped:
        attached = min(1.0, (1 - leaves.trailing_bluffness) / CLOSED_BEFORE) * (1 - detached)
        smooth = (1 - attached) * smooth + attached * min(smooth, TRIPPED_SUCTION)
    sharp = float(np.interp(run, _RUN, _SUCTION))
    suction = (1 - bluff) * smooth + bluff * sharp
    open_share = detached + (1 - detached) * leaves.trailing_bluffness
    return PrismParts(rubbing, pressing, suction * open_share**RECOVERY, open_share, arc_reynolds)


def _slope_where_it_leaves(profile: Profile, tripped: bool) -> float:
    """Angle of the wall to the flow where the flow leaves it, positive outwards, rad."""
    attached = attached_share(profile, TRIPPED_ANGLE if tripped else LAMINAR_ANGLE)
    girth = 2 * np.sqrt(math.pi * np.maximum(profile.area, 1e-12 * profile.greatest_area))
    slope = np.arctan(profile.area_slope / girth)
    leaving = -np.diff(attached, append=0.0)
    return float(leaving @ slope / max(float(leaving.sum()), 1e-12))
