"""The topwater stick: turned round, sphere-nosed, with one lead slug off the axis.

Drawn as it stands in the lathe: tail tip at z = 0, nose tip at z = 110, back along +y. All lengths in mm.
"""

from __future__ import annotations

import math

from OCP.TopoDS import TopoDS_Shape

from cad.shapes import Point, arc, capsule, line, revolve

LENGTH = 110.0
NOSE_RADIUS, TAIL_RADIUS = 7.5, 4.5
FLANK_RADIUS = 500.0  # of the long arc that touches both end spheres

WEIGHT_AT: Point = (0.8, -2.6, 34.0)  # 0.8 mm off the seam: the drill wandered
WEIGHT_RADIUS, WEIGHT_LENGTH = 2.4, 18.0

LINE_TIE: Point = (0.0, 0.0, 112.0)
BELLY_EYE: Point = (0.0, -10.3, 74.0)
TAIL_EYE: Point = (0.0, 0.0, -2.0)


def profile() -> tuple[tuple[float, float], tuple[float, float], tuple[float, float]]:
    """Return (z, r) where nose sphere and flank meet, where the flank meets the tail sphere, and the flank's centre."""
    z_nose, z_tail = LENGTH - NOSE_RADIUS, TAIL_RADIUS
    to_nose, to_tail = FLANK_RADIUS - NOSE_RADIUS, FLANK_RADIUS - TAIL_RADIUS
    z = (z_nose**2 - z_tail**2 - to_nose**2 + to_tail**2) / (2 * (z_nose - z_tail))
    r = -math.sqrt(to_nose**2 - (z - z_nose) ** 2)

    def touch(z_end: float, to_end: float) -> tuple[float, float]:
        return z + (z_end - z) * FLANK_RADIUS / to_end, r - r * FLANK_RADIUS / to_end

    return touch(z_nose, to_nose), touch(z_tail, to_tail), (z, r)


def body() -> TopoDS_Shape:
    """Return the turned blank."""
    nose, tail, (z, r) = profile()

    def on_sphere(end: tuple[float, float], middle: float, radius: float, pole: float) -> tuple[float, float]:
        half = (math.atan2(end[1], end[0] - middle) + pole) / 2
        return middle + radius * math.cos(half), radius * math.sin(half)

    def place(point: tuple[float, float]) -> Point:
        return point[1], 0.0, point[0]

    tips = place((LENGTH, 0.0)), place((0.0, 0.0))
    edges = [
        arc(tips[0], place(on_sphere(nose, LENGTH - NOSE_RADIUS, NOSE_RADIUS, 0.0)), place(nose)),
        arc(place(nose), place((z, r + FLANK_RADIUS)), place(tail)),
        arc(place(tail), place(on_sphere(tail, TAIL_RADIUS, TAIL_RADIUS, math.pi)), tips[1]),
        line(tips[1], tips[0]),
    ]
    return revolve(edges, (0, 0, 0), (0, 0, 1))


def slug() -> TopoDS_Shape:
    """Return the lead slug that trims the stick and keeps its belly down."""
    return capsule(WEIGHT_AT, (0, 0, 1), WEIGHT_RADIUS, WEIGHT_LENGTH)
