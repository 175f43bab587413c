"""Cup: how hollow a leading face is."""

from __future__ import annotations

import math

FRONT: float = 0.2
"""Share of the length, from the leading end, in which a hollow counts as a cupped face."""


def cup_depth(missing_volume: float, section_area: float, front_length: float) -> float:
    """Hollow of a leading face against a hemispherical cup as wide as the body, 0 flat to 1.

    Parameters
    ----------
    missing_volume : float, m3
        What the convex hull of the leading part holds beyond the solid.
    section_area : float, m2
        Of the largest section.
    front_length : float, m
        Length of the leading part, a fifth of the body.

    Notes
    -----
    The volume is counted against that of a hemispherical hollow within the same length. A hollow deeper than that
    presses no harder: pressure cannot exceed stagnation, so the value stays at 1.
    """
    if not (0 <= missing_volume < math.inf and section_area > 0 and front_length > 0):
        raise ValueError(f"no cup of {missing_volume} m3 in a section of {section_area} m2 over {front_length} m")
    radius = math.sqrt(section_area / math.pi)
    depth = min(front_length, radius)
    return min(1.0, missing_volume / (math.pi * (radius**2 * depth - depth**3 / 3)))
