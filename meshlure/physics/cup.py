"""Cup: how hollow a leading face is."""

from __future__ import annotations

import math
from typing import Final

import numpy as np

from meshlure.geometry.relief import Relief
from meshlure.geometry.surface import Bools, Floats

LEVELS: Final = 32

TIPS: Final = (0.0, math.tan(math.radians(12)), math.tan(math.radians(24)))
"""Slopes by which the body is tipped in eight directions to see whether its face then holds more: a hollow face is
often cut slanting."""

WALLED: Final = 0.85
"""Share of the hemisphere over the body's own greatest section that a cup holds within a wall of a fortieth of its
width: measured cups had walls."""

DRAIN: Final = 0.02
"""Share of what is seen that a hole right through must take up for the hollow to run out by it."""


def held_volume(seen: Relief) -> float:
    """Return what the end towards the eye would hold if it pointed upwards and were filled, m3.

    Parameters
    ----------
    seen : Relief
        Along the direction that leads.

    Notes
    -----
    At each of 32 levels, the cells of the relief that lie open below the level and are shut off from its rim by cells
    that stand above it. The body is tipped over by 12 and 24 degrees each way, and the most that it holds counts. The
    flanks of a nose may be concave without holding anything.
    """
    depth = np.pad(seen.depth, 1, constant_values=np.inf)
    inside = np.isfinite(depth)
    # Holes right through: what is open on all levels yet shut off from the rim.
    rim = np.zeros_like(inside)
    rim[0, 0] = True
    through = ~inside & ~_run_off(~inside[None], rim)[0]
    if np.count_nonzero(through) <= DRAIN * np.count_nonzero(inside):
        # Too small for the hollow to run out: as deep as it gets.
        depth = np.where(through, depth[inside].max(), depth)
        inside |= through
    rows, columns = (np.arange(n) * seen.step for n in depth.shape)
    most = 0.0
    for slope in TIPS:
        for turn in np.arange(8 if slope else 1) * math.pi / 4:
            sheared = depth + slope * (math.cos(turn) * columns[None, :] + math.sin(turn) * rows[:, None])
            most = max(most, _held(sheared, inside, seen.step))
    return most


def _held(depth: Floats, inside: Bools, step: float) -> float:
    """Volume held above a relief at its own tilt."""
    low, high = float(depth[inside].min()), float(depth[inside].max())
    pitch = (high - low) / LEVELS
    levels = low + pitch * (np.arange(LEVELS) + 0.5)
    below = depth[None] > levels[:, None, None]
    return float(np.count_nonzero(below & ~_run_off(below, ~inside))) * pitch * step**2


def _run_off(below: Bools, drains: Bools) -> Bools:
    """Cells of each level, (levels, r, c), from which water finds a way to a drain, (r, c)."""
    from scipy.ndimage import label

    plane = np.zeros((3, 3, 3), dtype=np.int8)
    plane[1] = [[0, 1, 0], [1, 1, 1], [0, 1, 0]]
    names, count = label(below, structure=plane)
    free = np.zeros(count + 1, dtype=np.bool_)
    free[np.unique(names[:, drains])] = True
    free[0] = False
    return np.asarray(free[names])


def cup_depth(volume: float, section_area: float) -> float:
    """Hollow of a leading face against a hemispherical cup as wide as the body, 0 flat to 1.

    Parameters
    ----------
    volume : float, m3
        What the face holds (`held_volume`).
    section_area : float, m2
        Of the largest section.

    Notes
    -----
    The share of a hemisphere's volume that a cup with walls holds. A hollow deeper than that presses no harder:
    pressure cannot exceed stagnation, so the value stays at 1.
    """
    if not (0 <= volume < math.inf and 0 < section_area < math.inf):
        raise ValueError(f"no cup of {volume} m3 in a section of {section_area} m2")
    radius = math.sqrt(section_area / math.pi)
    return min(1.0, volume / (WALLED * 2 / 3 * math.pi * radius**3))
