"""Solids by the operations a CAD program offers: loft, revolve, primitive, join, cut. All lengths in mm."""

from __future__ import annotations

import math
from collections.abc import Sequence

from OCP.BRepAlgoAPI import BRepAlgoAPI_Common, BRepAlgoAPI_Cut, BRepAlgoAPI_Fuse
from OCP.BRepBuilderAPI import (
    BRepBuilderAPI_MakeEdge,
    BRepBuilderAPI_MakeFace,
    BRepBuilderAPI_MakeVertex,
    BRepBuilderAPI_MakeWire,
    BRepBuilderAPI_Transform,
)
from OCP.BRepCheck import BRepCheck_Analyzer
from OCP.BRepExtrema import BRepExtrema_DistShapeShape
from OCP.BRepOffsetAPI import BRepOffsetAPI_ThruSections
from OCP.BRepPrimAPI import (
    BRepPrimAPI_MakeBox,
    BRepPrimAPI_MakeCylinder,
    BRepPrimAPI_MakePrism,
    BRepPrimAPI_MakeRevol,
    BRepPrimAPI_MakeSphere,
    BRepPrimAPI_MakeTorus,
)
from OCP.GC import GC_MakeArcOfCircle
from OCP.gp import gp_Ax1, gp_Ax2, gp_Dir, gp_Elips, gp_Pnt, gp_Trsf, gp_Vec
from OCP.TopAbs import TopAbs_SHELL
from OCP.TopExp import TopExp_Explorer
from OCP.TopoDS import TopoDS_Shape, TopoDS_Wire

Point = tuple[float, float, float]


def _wire(edges: Sequence[BRepBuilderAPI_MakeEdge]) -> TopoDS_Wire:
    maker = BRepBuilderAPI_MakeWire()
    for edge in edges:
        maker.Add(edge.Edge())
    return maker.Wire()


def oval(x: float, half_width: float, half_depth: float, z: float) -> TopoDS_Wire:
    """Return an elliptic section across the x axis, its centre at height z."""
    if half_depth >= half_width:
        axes = gp_Ax2(gp_Pnt(x, 0, z), gp_Dir(1, 0, 0), gp_Dir(0, 0, 1))
        return _wire([BRepBuilderAPI_MakeEdge(gp_Elips(axes, half_depth, half_width))])
    axes = gp_Ax2(gp_Pnt(x, 0, z), gp_Dir(1, 0, 0), gp_Dir(0, 1, 0))
    return _wire([BRepBuilderAPI_MakeEdge(gp_Elips(axes, half_width, half_depth))])


def slab(y: float, half_width: float, half_depth: float, z: float, flat: float, ridge: float) -> TopoDS_Wire:
    """Return a flat-sided section across the y axis: straight flanks, a narrow straight ridge, quarter ovals between.

    `flat` is the share of the half depth that is straight, `ridge` the share of the half width.
    """
    zf, xr = flat * half_depth, ridge * half_width
    a, c = half_width - xr, half_depth - zf
    # the corners in turn, counter-clockwise seen from -y: centre signs and the angle where each quarter starts
    edges: list[BRepBuilderAPI_MakeEdge] = []
    for sx, sz in ((1, 1), (-1, 1), (-1, -1), (1, -1)):
        centre = gp_Pnt(sx * xr, y, z + sz * zf)
        flank = gp_Pnt(sx * half_width, y, z + sz * zf)
        top = gp_Pnt(sx * xr, y, z + sz * half_depth)
        start, end = (flank, top) if sx == sz else (top, flank)
        major, minor, along = (a, c, gp_Dir(1, 0, 0)) if a >= c else (c, a, gp_Dir(0, 0, 1))
        oval_corner = gp_Elips(gp_Ax2(centre, gp_Dir(0, -1, 0), along), major, minor)
        edges.append(BRepBuilderAPI_MakeEdge(oval_corner, start, end))
        following = gp_Pnt(-sx * xr, y, z + sz * half_depth) if sx == sz else gp_Pnt(sx * half_width, y, z - sz * zf)
        edges.append(BRepBuilderAPI_MakeEdge(end, following))
    return _wire(edges)


def loft(first: Point, sections: Sequence[TopoDS_Wire], last: Point) -> TopoDS_Shape:
    """Return the smooth solid through the sections, closed at a point on either end."""
    maker = BRepOffsetAPI_ThruSections(True, False, 1e-6)
    maker.AddVertex(BRepBuilderAPI_MakeVertex(gp_Pnt(*first)).Vertex())
    for section in sections:
        maker.AddWire(section)
    maker.AddVertex(BRepBuilderAPI_MakeVertex(gp_Pnt(*last)).Vertex())
    maker.Build()
    return sound(maker.Shape())


def arc(start: Point, middle: Point, end: Point) -> BRepBuilderAPI_MakeEdge:
    """Return the circular edge through three points."""
    return BRepBuilderAPI_MakeEdge(GC_MakeArcOfCircle(gp_Pnt(*start), gp_Pnt(*middle), gp_Pnt(*end)).Value())


def line(start: Point, end: Point) -> BRepBuilderAPI_MakeEdge:
    """Return the straight edge between two points."""
    return BRepBuilderAPI_MakeEdge(gp_Pnt(*start), gp_Pnt(*end))


def revolve(edges: Sequence[BRepBuilderAPI_MakeEdge], at: Point, axis: Point) -> TopoDS_Shape:
    """Return the solid of a closed half profile turned once round the axis."""
    face = BRepBuilderAPI_MakeFace(_wire(edges)).Face()
    return sound(BRepPrimAPI_MakeRevol(face, gp_Ax1(gp_Pnt(*at), gp_Dir(*axis))).Shape())


def plate(edges: Sequence[BRepBuilderAPI_MakeEdge], by: Point) -> TopoDS_Shape:
    """Return the prism of a flat closed outline."""
    return sound(BRepPrimAPI_MakePrism(BRepBuilderAPI_MakeFace(_wire(edges)).Face(), gp_Vec(*by)).Shape())


def box(corner: Point, sizes: Point) -> TopoDS_Shape:
    """Return a block along the axes, `corner` its lowest."""
    return BRepPrimAPI_MakeBox(gp_Pnt(*corner), *sizes).Shape()


def torus(ring: float, tube: float) -> TopoDS_Shape:
    """Return a ring round the z axis, its middle line of radius `ring`."""
    return BRepPrimAPI_MakeTorus(ring, tube).Shape()


def sphere(centre: Point, radius: float) -> TopoDS_Shape:
    """Return a ball."""
    return BRepPrimAPI_MakeSphere(gp_Pnt(*centre), radius).Shape()


def cylinder(start: Point, axis: Point, radius: float, length: float) -> TopoDS_Shape:
    """Return a round bar that begins at `start`."""
    return BRepPrimAPI_MakeCylinder(gp_Ax2(gp_Pnt(*start), gp_Dir(*axis)), radius, length).Shape()


def capsule(middle: Point, axis: Point, radius: float, length: float) -> TopoDS_Shape:
    """Return a round bar with hemispherical ends, `length` over all."""
    half = length / 2 - radius
    x, y, z = middle
    along = math.hypot(*axis)
    ux, uy, uz = (part / along for part in axis)
    ends = [(x + s * half * ux, y + s * half * uy, z + s * half * uz) for s in (-1, 1)]
    bar = cylinder(ends[0], axis, radius, 2 * half)
    return join(join(bar, sphere(ends[0], radius)), sphere(ends[1], radius))


def moved(shape: TopoDS_Shape, shift: Point = (0, 0, 0), axis: Point = (0, 0, 1), angle: float = 0.0) -> TopoDS_Shape:
    """Return the shape turned by `angle` rad about an axis through the origin, then shifted."""
    turn, push = gp_Trsf(), gp_Trsf()
    turn.SetRotation(gp_Ax1(gp_Pnt(0, 0, 0), gp_Dir(*axis)), angle)
    push.SetTranslation(gp_Vec(*shift))
    return BRepBuilderAPI_Transform(shape, push.Multiplied(turn), True).Shape()


def join(a: TopoDS_Shape, b: TopoDS_Shape) -> TopoDS_Shape:
    """Return the union."""
    return sound(BRepAlgoAPI_Fuse(a, b).Shape())


def cut(a: TopoDS_Shape, *tools: TopoDS_Shape) -> TopoDS_Shape:
    """Return `a` less every tool; `a` may be a solid or bare faces."""
    for tool in tools:
        a = sound(BRepAlgoAPI_Cut(a, tool).Shape())
    return a


def shared(a: TopoDS_Shape, b: TopoDS_Shape) -> TopoDS_Shape:
    """Return the intersection."""
    return BRepAlgoAPI_Common(a, b).Shape()


def skin(solid: TopoDS_Shape) -> TopoDS_Shape:
    """Return the outside of a solid as bare faces."""
    return TopExp_Explorer(solid, TopAbs_SHELL).Current()


def gap_between(a: TopoDS_Shape, b: TopoDS_Shape) -> float:
    """Least distance between two solids."""
    return float(BRepExtrema_DistShapeShape(a, b).Value())


def gap_to_skin(inside: TopoDS_Shape, body: TopoDS_Shape) -> float:
    """Least distance from a solid to the body's skin: its cover, where it lies inside."""
    return gap_between(inside, skin(body))


def sound(shape: TopoDS_Shape) -> TopoDS_Shape:
    """Return the shape if the kernel's own check finds no fault in it."""
    if shape.IsNull() or not BRepCheck_Analyzer(shape).IsValid():
        raise ValueError("the kernel built a faulty shape")
    return shape
