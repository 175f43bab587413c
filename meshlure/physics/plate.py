"""Plates: the drag of a flat plate square to the flow or inclined to it, such as a lip."""

from __future__ import annotations

import math
from typing import Final

import numpy as np

SQUARE_PLATE: Final = 1.13
"""Drag coefficient of a square plate normal to the flow: mean of 1.06 (Eiffel 1910/11) and 1.17 to 1.20 (textbooks)."""

_ASPECT: Final = (1.0, 1.5, 3.0, 6.0, 10.0, 14.6, 20.0, 30.0, 41.5, 50.0)
_RATIO: Final = (1.0, 1.04, 1.07, 1.10, 1.145, 1.25, 1.34, 1.40, 1.435, 1.47)
ENDLESS_PLATE: Final = 2.0
"""Drag coefficient of an endless plate normal to the flow (White, F. M., Fluid Mechanics, table 7.2, from memory)."""

PEAK_ANGLE: Final = math.radians(37)
"""rad. Angle at which a square plate's normal force is greatest (Eiffel 1910/11)."""

PEAK_GAIN: Final = 0.47
"""Share by which the peak stands above a square plate's force at 90 degrees: almost a half (Eiffel 1910/11)."""


def _checked_aspect(aspect: float) -> float:
    if not 0 < aspect < math.inf:
        raise ValueError(f"a plate's aspect is positive and finite, not {aspect}")
    return aspect


def normal_plate_cd(aspect: float) -> float:
    """Drag coefficient of a plate square to the flow, on its area.

    Parameters
    ----------
    aspect : float
        Long side over short side; a value below 1 is taken for its inverse.

    Notes
    -----
    Eiffel's ratios to the square plate at aspects 1 to 50, interpolated over the inverse of the aspect, and 2.0 for
    an endless plate. Sharp edges, Reynolds number above about 1e3.

    References
    ----------
    Eiffel, G. (1910/11): La résistance de l'air et l'aviation. White, F. M., Fluid Mechanics, table 7.3 (2.0, memory).
    """
    aspect = max(_checked_aspect(aspect), 1 / aspect)
    inverse = [0.0, *(1 / a for a in reversed(_ASPECT))]
    value = [ENDLESS_PLATE, *(SQUARE_PLATE * r for r in reversed(_RATIO))]
    return float(np.interp(1 / aspect, inverse, value))


def inclined_plate_cn(aspect: float, angle: float) -> float:
    """Normal-force coefficient of a thin plate at an angle to the flow, on its area.

    Parameters
    ----------
    aspect : float
        Span across the flow over chord.
    angle : float, rad
        Between plate and flow, 0 to pi/2.

    Notes
    -----
    Up to 20 degrees the suction analogy, K_p sin a cos a + pi sin^2 a, with Helmbold's slope for K_p; beyond 40
    degrees the value square to the flow, raised around 37 degrees as Eiffel found for square plates; between them a
    smooth blend. Plates wider than long stall earlier, taken as with one over the root of the aspect, and the rise
    fades for plates far from square, where no peak was found: both of these are ours.

    References
    ----------
    Polhamus, E. C. (1966): NASA TN D-3767. Helmbold, H. B. (1942): slope 2 pi AR/(2 + sqrt(AR^2 + 4)). Both from
    memory. Eiffel, G. (1910/11): La résistance de l'air et l'aviation (peak at 37 degrees, almost 1.5 times).
    """
    _checked_aspect(aspect)
    if not 0 <= angle <= math.pi / 2:
        raise ValueError(f"a plate stands at 0 to 90 degrees to the flow, not at {math.degrees(angle)}")
    sine, cosine = math.sin(angle), math.cos(angle)
    slope = 2 * math.pi * aspect / (2 + math.sqrt(aspect**2 + 4))
    attached = slope * sine * cosine + math.pi * sine**2
    squareness = math.exp(-(math.log(aspect) ** 2))
    away = (angle - PEAK_ANGLE) / math.radians(15)
    stalled = normal_plate_cd(aspect) * (1 + PEAK_GAIN * squareness * math.exp(-(away**2)))
    t = min(max((math.degrees(angle) * math.sqrt(max(aspect, 1.0)) - 20) / 20, 0.0), 1.0)
    share = t * t * (3 - 2 * t)
    return (1 - share) * attached + share * stalled


def lip_drag_area(area: float, aspect: float, angle: float) -> float:
    """Drag coefficient times area of a lip taken as a flat plate, m2.

    Parameters
    ----------
    area : float, m2
        Of one side, beyond the body's outline.
    aspect : float
        Span across the flow over chord.
    angle : float, rad
        Between the lip's face and the flow, 0 to pi/2.

    Notes
    -----
    The normal force projected on the flow, C_N sin a x area. The body behind, which shelters or is sheltered, is
    neglected, and so is the friction along the plate.
    """
    if not 0 <= area < math.inf:
        raise ValueError(f"a lip's area is not negative and finite, not {area} m2")
    return area * inclined_plate_cn(aspect, angle) * math.sin(angle)
