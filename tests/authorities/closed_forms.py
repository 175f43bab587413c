"""Solids whose mass properties have a closed form: they show how the kernel integrates, and with which signs.

Each entry gives the B-rep and its exact volume, centre and inertia tensor about the centre (products negated), which
are the textbook moments of a block, a ball and a ring, turned by R as R I R^T.
"""

from __future__ import annotations

import math

import numpy as np
from cad.masses import Amount
from cad.shapes import box, moved, sphere, torus
from numpy.typing import NDArray
from OCP.TopoDS import TopoDS_Shape


def rotation(axis: tuple[float, float, float], angle: float) -> NDArray[np.float64]:
    """Rotation matrix after Rodrigues."""
    x, y, z = np.array(axis) / np.linalg.norm(axis)
    cross = np.array([[0, -z, y], [z, 0, -x], [-y, x, 0]])
    return np.asarray(np.eye(3) + math.sin(angle) * cross + (1 - math.cos(angle)) * cross @ cross)


def turned_block() -> tuple[TopoDS_Shape, Amount]:
    """Block a x b x c: I = m/12 (b2 + c2, c2 + a2, a2 + b2), turned, so that all products differ from zero."""
    a, b, c = 4.0, 10.0, 25.0
    axis, angle, shift = (1.0, 2.0, 3.0), 0.7, (5.0, -7.0, 11.0)
    turn, mass = rotation(axis, angle), a * b * c
    own = np.diag([b * b + c * c, c * c + a * a, a * a + b * b]) * mass / 12
    centre = turn @ np.array([a / 2, b / 2, c / 2]) + np.array(shift)
    return moved(box((0, 0, 0), (a, b, c)), shift, axis, angle), Amount(mass, centre, turn @ own @ turn.T)


def ball() -> tuple[TopoDS_Shape, Amount]:
    """Ball: I = 2/5 m r2."""
    radius, centre = 6.0, (1.0, -2.0, 3.0)
    mass = 4 / 3 * math.pi * radius**3
    return sphere(centre, radius), Amount(mass, np.array(centre), np.eye(3) * 0.4 * mass * radius**2)


def turned_ring() -> tuple[TopoDS_Shape, Amount]:
    """Ring: m = 2 pi2 R r2, I_axis = m (R2 + 3/4 r2), I_across = m (R2/2 + 5/8 r2)."""
    ring, tube = 12.0, 4.0
    axis, angle, shift = (2.0, -1.0, 1.0), 1.1, (3.0, 4.0, -5.0)
    turn, mass = rotation(axis, angle), 2 * math.pi**2 * ring * tube**2
    across = ring**2 / 2 + 5 / 8 * tube**2
    own = np.diag([across, across, ring**2 + 0.75 * tube**2]) * mass
    return moved(torus(ring, tube), shift, axis, angle), Amount(mass, np.array(shift), turn @ own @ turn.T)


CLOSED_FORMS = {"turned_block": turned_block, "ball": ball, "turned_ring": turned_ring}
