"""The floating minnow: a loft with eye sockets, one wire from nose to tail, a lead belly weight and a lip.

Drawn with the nose at x = 0, pointing along -x, and the back along +z. All lengths in mm.
"""

from __future__ import annotations

import math
from itertools import pairwise

from OCP.TopoDS import TopoDS_Shape

from cad.shapes import Point, arc, capsule, cut, line, loft, oval, plate, sphere
from cad.wires import Former, bent_wire, eye, eye_reach

SECTIONS = (  # x, half width, half depth, height of the middle
    (0.1, 0.70, 0.83, 0.95),
    (0.4, 1.40, 1.65, 0.95),
    (1.5, 2.65, 3.15, 0.85),
    (4.0, 4.05, 5.00, 0.65),
    (9.0, 5.45, 7.15, 0.30),
    (15.0, 6.40, 8.80, 0.05),
    (21.0, 6.85, 9.75, -0.15),  # gill plate
    (25.5, 6.60, 9.70, -0.20),  # shoulder behind it
    (33.0, 6.70, 9.85, -0.20),
    (45.0, 6.35, 9.25, 0.00),
    (58.0, 5.45, 7.80, 0.25),
    (70.0, 4.15, 5.95, 0.50),
    (80.0, 3.05, 4.55, 0.70),
    (87.0, 2.60, 4.00, 0.80),  # peduncle
    (92.0, 2.40, 4.05, 0.80),
    (94.2, 1.58, 2.80, 0.80),
    (94.8, 0.80, 1.42, 0.80),
)
LENGTH = 95.0
SOCKET, SOCKET_WIDTH, SOCKET_DEPTH = (10.5, 5.35, 2.6), 5.0, 0.8  # left dimple: middle of its rim on the skin

WIRE = 0.9
AXIS = 0.9  # height of the wire's eyes at nose and tail
EYE, GAP, SHOULDER, BEND = 2.4, 0.3, 1.5, 1.5  # inside of the eyes, clearance of their legs, bend radii
LINE_TIE: Point = (-2.0, 0.0, AXIS)
BELLY_EYE: Point = (41.0, 0.0, -11.4)
TAIL_EYE: Point = (97.0, 0.0, AXIS)

WEIGHT_AT: Point = (23.5, 0.0, -5.6)
WEIGHT_RADIUS, WEIGHT_LENGTH = 2.2, 11.0

LIP_ROOT, LIP_SLOPE, LIP_THICKNESS = (13.5, 0.0, -2.2), 40.0, 1.2
MOULDED_EYES: Point = (10.5, 0.0, 2.6)


def body() -> TopoDS_Shape:
    """Return the outside of the bait, drawn whole: the inserts take their own room."""
    ends = (0.0, 0.0, 0.95), (LENGTH, 0.0, 0.8)
    shape = loft(ends[0], [oval(*section) for section in SECTIONS], ends[1])
    radius = ((SOCKET_WIDTH / 2) ** 2 + SOCKET_DEPTH**2) / (2 * SOCKET_DEPTH)
    x, y, z = SOCKET
    out = y - SOCKET_DEPTH + radius
    return cut(shape, sphere((x, out, z), radius), sphere((x, -out, z), radius))


def wire() -> TopoDS_Shape:
    """Return the through-wire: line tie, belly hanger and tail eye bent from one length."""
    half, reach = (GAP + WIRE) / 2, eye_reach(EYE, WIRE, GAP, SHOULDER)
    keyhole, run = eye(EYE, WIRE, GAP, SHOULDER), AXIS - half
    parts = [at[0] + sign * reach for at, sign in ((LINE_TIE, 1), (TAIL_EYE, -1))]
    belly_x, drop = BELLY_EYE[0], run - BEND - (BELLY_EYE[2] + reach)
    former = Former((8.0, AXIS + half), 180.0)
    former.follow([("straight", 8.0 - parts[0], 0), *keyhole])
    former.follow([("straight", belly_x - half - BEND - parts[0], 0), ("bend", BEND, -90), ("straight", drop, 0)])
    former.follow([*keyhole, ("straight", drop, 0), ("bend", BEND, -90)])
    former.follow([("straight", parts[1] - (belly_x + half + BEND), 0), *keyhole, ("straight", 8.0, 0)])
    return bent_wire(former, WIRE, (0, 0, 0), (1, 0, 0), (0, 0, 1))


def belly_weight() -> TopoDS_Shape:
    """Return the lead slug, cast in low behind the shoulder."""
    return capsule(WEIGHT_AT, (1, 0, 0), WEIGHT_RADIUS, WEIGHT_LENGTH)


def lip() -> TopoDS_Shape:
    """Return the lip: a sheet tongue, its root deep in the chin, sloping forward and down."""
    slope = math.radians(LIP_SLOPE)
    down = (-math.cos(slope), -math.sin(slope))
    normal = (-math.sin(slope), math.cos(slope))

    def place(along: float, y: float) -> Point:
        low = along * down[0] - LIP_THICKNESS / 2 * normal[0], along * down[1] - LIP_THICKNESS / 2 * normal[1]
        return LIP_ROOT[0] + low[0], y, LIP_ROOT[2] + low[1]

    right = [place(0, -4), place(7.5, -4), place(9.5, -6.5), place(14, -7)]
    left = [(x, -y, z) for x, y, z in reversed(right)]
    corners = [*left, *right]
    edges = [line(a, b) for a, b in pairwise(corners)]
    edges.append(arc(right[-1], place(21, 0), left[0]))
    return plate(edges, (LIP_THICKNESS * normal[0], 0.0, LIP_THICKNESS * normal[1]))
