"""Layer: the parts of an axial body's drag while its layer is laminar or turbulent, and which of them to expect.

The estimate reads station curves only: friction ahead of the separation line, pressure on the leading end, suction on
what stays open to the wake, or the pressure of a tail that closes. Every switch between cases is a ramp, so that no
result jumps under a small change of shape or speed. The constants were set with the published table in sight: agreement
with that table calibrates, it does not prove.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Final

from meshlure.physics.form import fineness, leading_bluffness
from meshlure.physics.friction import NATURAL_TRANSITION, friction, laminar_friction
from meshlure.physics.plate import normal_plate_cd
from meshlure.physics.profile import Profile
from meshlure.physics.separation import LAMINAR_ANGLE, TRIPPED_ANGLE, separation

FACE_PRESSURE: Final = 0.75
"""Mean pressure coefficient on a flat face and, times sin^2 of the angle, on a conical nose (Hoerner, S. F. 1965:
Fluid-Dynamic Drag, ch. 3, from memory: 0.75 to 0.8)."""

CUP_GAIN: Final = (1.38 - 1.17) / FACE_PRESSURE
"""Rise of the face's pressure when it is cupped as deep as a hemisphere; fitted on a hemispherical cup (1.38, open
side first) against the flat face of a disc or a hemisphere (1.17)."""

WAKE_SUCTION: Final = 0.22
WAKE_SUCTION_TURNED: Final = 0.19
"""Suction coefficient of a free wake, K = 0.22 + 0.19 sin(phi), with tan(phi) = greatest radius over the run to the
separation line. Chosen by hand with every row of the published table in sight; its cones, disc, hemisphere and laminar
spheres decide. The developers' comparison refits this pair with REATTACHMENT, CLOSED_BEFORE and both closing angles of
`separation`, a family of rows left out each time: its rows then come out within 0.34 in |ln ratio|, median 0.063."""

REATTACHMENT: Final = 1.6
"""Diameters behind a sharp leading edge at which the flow is back on the wall; chosen with the table's
cylinders end on (length over diameter 0.5 to 4) in sight."""

BASE_FACTOR: Final = 0.029
"""Hoerner's base suction 0.029/sqrt(C_fB), C_fB the drag of the body ahead of its base on the base's area (Hoerner
1965, ch. 3; also in Mandell, G. K. 1973, eq. 125)."""

CLOSED_BEFORE: Final = 0.1
"""Share of the greatest section that a turbulent layer must have closed before it leaves a smooth wall for the whole of
the pressure recovery to count; less counts in proportion. Ours, chosen with the table's tripped sphere, which closes
0.13, and tripped oblate spheroid, which closes 0.08, in sight."""

TAIL_CLOSES: Final = 0.05
"""Trailing bluffness from which on no pressure drag of a closed tail is counted; below it in proportion."""

SMOOTH_FRONT: Final = 0.1
SHARP_FRONT: Final = 0.5
"""Leading bluffness up to which a front is smooth (the layer may stay laminar), and from which on its edge trips."""


@dataclass(frozen=True)
class LayerParts:
    """Parts of the drag coefficient in one state of the layer, on the area of the largest section.

    Attributes
    ----------
    friction, forebody, base, tail : float
        Either `base` or `tail` is zero: the greater counts.
    trailing_bluffness : float
        Share of the largest section left open to the wake.
    arc_reynolds : float
        Reynolds number of the flow's way along the surface to the separation line.
    """

    friction: float
    forebody: float
    base: float
    tail: float
    trailing_bluffness: float
    arc_reynolds: float

    @property
    def cd(self) -> float:
        """Drag coefficient on the largest section."""
        return self.friction + self.forebody + self.base + self.tail


def ramp(value: float, low: float, high: float) -> float:
    """Smooth share, 0 up to `low`, 1 from `high` on."""
    t = min(max((value - low) / (high - low), 0.0), 1.0)
    return t * t * (3 - 2 * t)


def front_trips(profile: Profile) -> float:
    """Share to which the leading edge itself trips the layer: 0 for a smooth front, 1 for a sharp one."""
    return ramp(leading_bluffness(profile), SMOOTH_FRONT, SHARP_FRONT)


def turns_by_itself(arc_reynolds: float) -> float:
    """Share to which a smooth laminar layer has turned turbulent by itself, ramped around a Reynolds number of 5e5.

    Parameters
    ----------
    arc_reynolds : float
        Of the way to where a turbulent layer leaves: a laminar one that left earlier turns on its way, and comes back
        to a wall that closes gently.
    """
    return ramp(math.log(arc_reynolds / NATURAL_TRANSITION), -math.log(1.5), math.log(1.5))


def layer_parts(
    profile: Profile, reynolds_diameter: float, *, tripped: bool, transition: float = 0.0, cup: float = 0.0
) -> LayerParts:
    """Parts of the drag coefficient of a body along the flow, for one state of its layer.

    Parameters
    ----------
    profile : Profile
    reynolds_diameter : float
        Speed x equivalent diameter of the largest section / kinematic viscosity.
    tripped : bool
        True for a turbulent layer, False for one that stays laminar up to where it leaves.
    transition : float
        Reynolds number of the run at which a tripped layer turns; 0 at the leading end.
    cup : float
        Depth of a cupped face, 0 flat to 1 hemispherical (`meshlure.physics.cup`).

    Notes
    -----
    friction = C_f S_w/A (1 + 1.5/f^1.5), C_f at the arc up to separation, the bracket Hoerner's overspeed with f not
    below 1. forebody = 0.75 x leading bluffness. base = K a_s with a_s the trailing bluffness; K lies between the
    suction of a free wake and, by the share to which a turbulent layer is attached ahead of the base, Hoerner's. A
    layer is attached there when it had 1.6 diameters of body behind the shoulder, or when it is turbulent and leaves
    a smooth closing wall. What a sharp front leaves detached sees no closing tail. tail = 7/f^3 C_f S_w/A (Hoerner)
    where a turbulent layer follows a closing tail. The greater of base and tail counts.

    References
    ----------
    Hoerner, S. F. (1965): Fluid-Dynamic Drag, ch. 3 and 6 (from memory).
    """
    if not 0 < reynolds_diameter < math.inf:
        raise ValueError(f"a Reynolds number is positive and finite, not {reynolds_diameter}")
    diameter, area, slenderness = profile.diameter, profile.greatest_area, fineness(profile)
    bluff = leading_bluffness(profile)
    leaves = separation(profile, TRIPPED_ANGLE if tripped else LAMINAR_ANGLE)
    arc_reynolds = reynolds_diameter * leaves.arc / diameter
    coefficient = friction(arc_reynolds, transition) if tripped else laminar_friction(arc_reynolds)
    flank = coefficient * leaves.wetted_area / area
    rubbing = flank * (1 + 1.5 / max(slenderness, 1.0) ** 1.5)
    pressing = FACE_PRESSURE * bluff * (1 + CUP_GAIN * cup)

    reattached = min(1.0, leaves.parallel_run / (REATTACHMENT * diameter))
    detached = bluff * (1 - reattached)
    open_share = detached + (1 - detached) * leaves.trailing_bluffness

    turned = diameter / 2 / math.hypot(diameter / 2, leaves.station)
    elongated = normal_plate_cd(profile.elongation) - normal_plate_cd(1.0)
    free = WAKE_SUCTION + (WAKE_SUCTION_TURNED + elongated) * turned
    attached = 0.0
    if tripped:
        closed = min(1.0, (1 - leaves.trailing_bluffness) / CLOSED_BEFORE)
        attached = max(closed * (1 - detached), reattached)
    filled = min(free, BASE_FACTOR * math.sqrt(open_share / (rubbing + pressing)))
    base = ((1 - attached) * free + attached * filled) * open_share

    closes = max(0.0, 1 - leaves.trailing_bluffness / TAIL_CLOSES) * (1 - detached) if tripped else 0.0
    tail = 7 / slenderness**3 * flank * closes
    base, tail = (base, 0.0) if base >= tail else (0.0, tail)
    return LayerParts(rubbing, pressing, base, tail, open_share, arc_reynolds)
