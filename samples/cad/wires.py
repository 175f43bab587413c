"""Bent wire: a round bar swept along the straights and bends a wire former would be set to. Lengths in mm."""

from __future__ import annotations

import math
from collections.abc import Sequence

from OCP.BRepBuilderAPI import BRepBuilderAPI_MakeEdge, BRepBuilderAPI_MakeFace, BRepBuilderAPI_MakeWire
from OCP.BRepOffsetAPI import BRepOffsetAPI_MakePipe
from OCP.gp import gp_Ax2, gp_Circ, gp_Dir, gp_Pnt
from OCP.TopoDS import TopoDS_Shape

from cad.shapes import Point, arc, line, sound

Step = tuple[str, float, float]
"""("straight", length, 0), or ("bend", radius of the wire's middle line, angle in degrees, + to the left)."""


def eye(inside: float, wire: float, gap: float, shoulder: float) -> list[Step]:
    """Return the bends of a keyhole eye whose two legs lie side by side.

    `inside` is the clear diameter, `gap` the clearance between the legs, `shoulder` the bend radius where the legs
    part. The wire must arrive on the first axis side of the eye's middle line, half a leg spacing off it.
    """
    loop, half = (inside + wire) / 2, (gap + wire) / 2
    part = math.degrees(math.acos((half + shoulder) / (loop + shoulder)))
    return [("bend", shoulder, -part), ("bend", loop, 180 + 2 * part), ("bend", shoulder, -part)]


def eye_reach(inside: float, wire: float, gap: float, shoulder: float) -> float:
    """Distance from where the legs part to the middle of the eye."""
    loop, half = (inside + wire) / 2, (gap + wire) / 2
    return math.sqrt((loop + shoulder) ** 2 - (half + shoulder) ** 2)


class Former:
    """Follows a plane wire from bend to bend; `at` and `heading` are coordinates on the two plane axes."""

    def __init__(self, start: tuple[float, float], heading_degrees: float) -> None:
        self.at = start
        self.heading = math.radians(heading_degrees)
        self.length = 0.0
        self.pieces: list[tuple[tuple[float, float], ...]] = []

    def follow(self, steps: Sequence[Step]) -> Former:
        """Add straights and bends."""
        for kind, size, degrees in steps:
            if kind == "straight":
                self._straight(size)
            else:
                self._bend(size, math.radians(degrees))
        return self

    def _straight(self, length: float) -> None:
        end = (self.at[0] + length * math.cos(self.heading), self.at[1] + length * math.sin(self.heading))
        self.pieces.append((self.at, end))
        self.at, self.length = end, self.length + length

    def _bend(self, radius: float, angle: float) -> None:
        side = math.copysign(1.0, angle)
        centre = (
            self.at[0] - side * radius * math.sin(self.heading),
            self.at[1] + side * radius * math.cos(self.heading),
        )

        def after(part: float) -> tuple[float, float]:
            turned = self.heading + part * angle
            return centre[0] + side * radius * math.sin(turned), centre[1] - side * radius * math.cos(turned)

        self.pieces.append((self.at, after(0.5), after(1.0)))
        self.at, self.heading, self.length = after(1.0), self.heading + angle, self.length + radius * abs(angle)


def bent_wire(former: Former, diameter: float, origin: Point, first: Point, second: Point) -> TopoDS_Shape:
    """Return the wire as a solid, its plane laid through `origin` along the two unit axes."""

    def place(point: tuple[float, float]) -> Point:
        u, v = point
        x, y, z = (o + u * f + v * s for o, f, s in zip(origin, first, second, strict=True))
        return x, y, z

    path = BRepBuilderAPI_MakeWire()
    for piece in former.pieces:
        points = [place(point) for point in piece]
        edge = arc(*points) if len(points) == 3 else line(*points)
        path.Add(edge.Edge())
    begin, onward = former.pieces[0][0], former.pieces[0][1]
    u, v = onward[0] - begin[0], onward[1] - begin[1]
    along = gp_Dir(*(u * f + v * s for f, s in zip(first, second, strict=True)))
    rim = BRepBuilderAPI_MakeEdge(gp_Circ(gp_Ax2(gp_Pnt(*place(begin)), along), diameter / 2)).Edge()
    disc = BRepBuilderAPI_MakeFace(BRepBuilderAPI_MakeWire(rim).Wire()).Face()
    return sound(BRepOffsetAPI_MakePipe(path.Wire(), disc).Shape())
