"""Solids whose mass properties have a closed form: they show how the kernel integrates, and with which signs.

Each entry gives the B-rep and its exact volume, centre and inertia tensor about the centre (products negated), which
are the textbook moments of a block, a ball and a ring, turned by R as R I R^T, and the integral over a turned blank.
"""

from __future__ import annotations

import math
from collections.abc import Callable

import numpy as np
from cad import stick
from cad.masses import Amount
from cad.shapes import box, moved, sphere, torus
from numpy.typing import NDArray
from OCP.TopoDS import TopoDS_Shape
from scipy.integrate import quad


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


def stick_body() -> tuple[TopoDS_Shape, Amount]:
    """Blank of the topwater stick, by quadrature of its discs: V = pi int r2, I_axis = pi/2 int r4.

    Across the axis I = pi int r2 (z2 + r2/4) about the centre. The radius is that of a ball, a long arc and a ball.
    """
    nose, tail, (middle, below) = stick.profile()

    def radius(z: float) -> float:
        if z > nose[0]:
            return math.sqrt(stick.NOSE_RADIUS**2 - (z - stick.LENGTH + stick.NOSE_RADIUS) ** 2)
        if z < tail[0]:
            return math.sqrt(stick.TAIL_RADIUS**2 - (z - stick.TAIL_RADIUS) ** 2)
        return below + math.sqrt(stick.FLANK_RADIUS**2 - (z - middle) ** 2)

    def along(of: Callable[[float], float]) -> float:
        parts = ((0.0, tail[0]), (tail[0], nose[0]), (nose[0], stick.LENGTH))
        return math.fsum(quad(of, a, b, epsabs=0.0, epsrel=1e-13)[0] for a, b in parts) * math.pi

    mass = along(lambda z: radius(z) ** 2)
    centre = along(lambda z: z * radius(z) ** 2) / mass
    across = along(lambda z: radius(z) ** 2 * ((z - centre) ** 2 + radius(z) ** 2 / 4))
    inertia = np.diag([across, across, along(lambda z: radius(z) ** 4 / 2)])
    return stick.body(), Amount(mass, np.array([0.0, 0.0, centre]), inertia)


CLOSED_FORMS = {"turned_block": turned_block, "ball": ball, "turned_ring": turned_ring, "stick_body": stick_body}
