"""Wire: the drag of hooks, rings, eyes and hangers, taken as lengths of round wire."""

from __future__ import annotations

import math
from enum import Enum
from typing import Final

WIRE_CD: Final = 1.1
"""Drag coefficient of round wire across the flow, on length x diameter: 1.0 at Reynolds numbers of 1e3 to 1e4, 1.2 at
1e4 to 2e5 (Hoerner, S. F. 1965: Fluid-Dynamic Drag, ch. 3, from memory)."""


BENT: Final = 3 * (math.pi / 2) / 11
"""Share of a treble's wire that its three bends take up, each half a ring as wide as the gape: a regular treble's wire
is eleven gapes long (shop experience, no source). What remains is shank and points, which lie along each other."""

ALONG_CD: Final = 0.035
"""Drag coefficient of wire along the flow, on length x diameter: its skin, pi x length x diameter, rubbed by a laminar
layer (Blasius, C_f 0.011 at the Reynolds number 1.5e4 of a shank)."""


class Lie(Enum):
    """How a wire lies to the flow; the value is the mean of |sin a|^3 over its length, a between wire and flow.

    Notes
    -----
    By the crossflow principle (Hoerner 1965, ch. 3, from memory) only the speed across a wire presses on it: the
    normal force goes with sin^2 a, its share along the flow with one more sin a.
    """

    ACROSS = 1.0
    """Square to the flow, or a ring seen face on."""
    ANYHOW = 3 * math.pi / 16
    """Every direction in space as likely as any other: bends, points and shank of a hook."""
    RING_EDGE_ON = 4 / (3 * math.pi)
    """A ring whose plane holds the flow; the shelter of its rear half is neglected."""
    TRAILING = BENT * 4 / (3 * math.pi) + (1 - BENT) * ALONG_CD / WIRE_CD
    """A treble that trails from its eye: shank and points along the flow, only rubbed, and the bends half rings whose
    planes hold the flow. A hook that swings by 20 degrees has the same within a quarter."""


def wire_drag_area(length: float, diameter: float, lie: Lie = Lie.ANYHOW) -> float:
    """Drag coefficient times area of a piece of round wire, m2.

    Parameters
    ----------
    length, diameter : float, m
    lie : Lie

    Notes
    -----
    1.1 x length x diameter x the lie's factor; for Reynolds numbers on the diameter from about 300 to 1e5, where the
    coefficient strays by 15%. Each wire is taken alone in the full speed.
    """
    if not (0 <= length < math.inf and 0 <= diameter < math.inf):
        raise ValueError(f"a wire's length and diameter are not negative and finite, not {length} m and {diameter} m")
    return WIRE_CD * length * diameter * lie.value


def eye_drag_area(silhouette: float) -> float:
    """Drag coefficient times area of eyes and hangers from their silhouette along the flow, m2.

    Parameters
    ----------
    silhouette : float, m2
        Area of the wire itself, the hole not counted.
    """
    return wire_drag_area(silhouette, 1.0, Lie.ACROSS)
