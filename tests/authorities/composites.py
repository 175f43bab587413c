"""Small composite solids with curved, flat and cut faces, none of them lying along the axes. Lengths in mm."""

from __future__ import annotations

from cad.shapes import box, cut, cylinder, moved, sphere, torus
from OCP.TopoDS import TopoDS_Shape


def bored_box() -> TopoDS_Shape:
    """Return a block with a hole drilled through it off its middle, square to its top."""
    block = box((3.0, -4.0, 5.0), (40.0, 20.0, 12.0))
    return moved(cut(block, cylinder((14.0, 2.0, 0.0), (0, 0, 1), 3.5, 30.0)), (2.0, 1.0, -3.0), (1, 2, 3), 0.4)


def notched_ball() -> TopoDS_Shape:
    """Return a ball with a box cut out of its side."""
    ball = sphere((1.0, 2.0, 3.0), 10.0)
    return moved(cut(ball, box((4.0, 0.0, -2.0), (20.0, 6.0, 9.0))), (-4.0, 6.0, 2.0), (2, -1, 1), 0.7)


def cut_ring() -> TopoDS_Shape:
    """Return a ring with a slice taken off by a slanting plane."""
    slab = moved(box((-30.0, -30.0, 0.0), (60.0, 60.0, 20.0)), (0.0, 0.0, 1.0), (0, 1, 0), 0.25)
    return moved(cut(torus(12.0, 4.0), slab), (5.0, -3.0, 4.0), (1, 1, 0), 0.6)


COMPOSITES = {"bored_box": bored_box, "notched_ball": notched_ball, "cut_ring": cut_ring}
CHORDS = (0.2, 0.05, 0.0125)
"""Each is stored as facets at these chords, mm."""
