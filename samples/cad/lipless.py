"""The lipless sinker: a deep flat-sided loft with a sealed ball chamber, a lead keel and three wire hangers.

Drawn with the nose at y = 0, pointing along +y, and the back along +z; the flanks face +x and -x. All lengths in mm.
"""

from __future__ import annotations

import math

from OCP.TopoDS import TopoDS_Shape

from cad.shapes import Point, cylinder, line, loft, plate, slab
from cad.wires import Former, bent_wire, eye, eye_reach

SECTIONS = (  # y, half width, half depth, height of the middle
    (-0.12, 0.75, 0.98, -3.45),
    (-0.5, 1.50, 1.95, -3.40),
    (-2.0, 2.70, 3.95, -3.00),
    (-5.0, 3.75, 6.40, -2.30),
    (-10.0, 4.65, 9.00, -1.25),
    (-17.0, 5.25, 11.20, -0.45),
    (-25.0, 5.45, 12.10, 0.00),
    (-34.0, 5.30, 11.40, 0.20),
    (-43.0, 4.75, 9.50, 0.30),
    (-51.0, 3.95, 7.10, 0.35),
    (-58.0, 3.05, 4.90, 0.40),
    (-62.0, 2.45, 3.90, 0.40),
    (-64.2, 1.50, 2.50, 0.40),
    (-64.8, 0.75, 1.27, 0.40),
)
LENGTH = 65.0
FLAT, RIDGE = 0.40, 0.12  # straight share of the flank and of the ridge

BORE, CHAMBER_LENGTH = 5.5, 25.5  # four balls of 5 mm, 5 mm of travel and half a millimetre of play
CHAMBER_AT: Point = (0.0, -27.0, 1.2)
CHAMBER_SLOPE = 6.0  # degrees, nose end lower, so that the balls come back after the cast

KEEL_HALF_WIDTH = 2.4
KEEL = ((-11.5, -4.6), (-24.5, -5.4), (-23.5, -9.0), (-13.0, -7.4))  # y, z

WIRE, EYE, GAP, SHOULDER, BEND = 0.8, 2.2, 0.3, 1.4, 1.2
LINE_TIE: Point = (0.0, -18.0, 12.9)
BELLY_EYE: Point = (0.0, -29.5, -13.7)
TAIL_EYE: Point = (0.0, -66.7, 0.4)


def body() -> TopoDS_Shape:
    """Return the outside of the bait."""
    sections = [slab(y, half_width, half_depth, z, FLAT, RIDGE) for y, half_width, half_depth, z in SECTIONS]
    return loft((0.0, 0.0, -3.5), sections, (0.0, -LENGTH, 0.4))


def chamber() -> TopoDS_Shape:
    """Return the room of the balls, a bore with flat ends."""
    slope = math.radians(CHAMBER_SLOPE)
    along = (0.0, -math.cos(slope), math.sin(slope))
    start = [middle - CHAMBER_LENGTH / 2 * part for middle, part in zip(CHAMBER_AT, along, strict=True)]
    return cylinder((start[0], start[1], start[2]), along, BORE / 2, CHAMBER_LENGTH)


def keel() -> TopoDS_Shape:
    """Return the lead bar low in the belly."""
    corners = [(-KEEL_HALF_WIDTH, y, z) for y, z in KEEL]
    edges = [line(a, b) for a, b in zip(corners, [*corners[1:], corners[0]], strict=True)]
    return plate(edges, (2 * KEEL_HALF_WIDTH, 0.0, 0.0))


def hanger(at: Point, out: Point, along: Point, leg: float) -> TopoDS_Shape:
    """Return a bent wire with its eye at `at`, opening `out` of the skin, its two feet spread `along` the body."""
    half, reach = (GAP + WIRE) / 2, eye_reach(EYE, WIRE, GAP, SHOULDER)
    former = Former((half + BEND + 1.0, -reach - leg - BEND), 180.0)
    former.follow([("straight", 1.0, 0), ("bend", BEND, -90), ("straight", leg, 0), *eye(EYE, WIRE, GAP, SHOULDER)])
    former.follow([("straight", leg, 0), ("bend", BEND, -90), ("straight", 1.0, 0)])
    return bent_wire(former, WIRE, at, along, out)


def line_tie() -> TopoDS_Shape:
    """Return the wire on the back that the line is tied to."""
    return hanger(LINE_TIE, (0, 0, 1), (0, 1, 0), 3.0)


def belly_hanger() -> TopoDS_Shape:
    """Return the wire of the front hook."""
    return hanger(BELLY_EYE, (0, 0, -1), (0, 1, 0), 3.0)


def tail_hanger() -> TopoDS_Shape:
    """Return the wire of the rear hook."""
    return hanger(TAIL_EYE, (0, -1, 0), (0, 0, 1), 5.0)
