"""What lies straight ahead of a bore's flat end: the thickness that the balls strike against, and a plug's length."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.clearance import Boxes
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.surface import Floats


@dataclass(frozen=True, eq=False)
class Ahead:
    """The nearest skin in a round end's own way.

    Attributes
    ----------
    distance : float, m
        Along the axis; infinite where nothing is ahead.
    place : (3,) array, m
        On the mesh.
    """

    distance: float
    place: Floats


def ahead(boxes: Boxes, cylinder: Cylinder, end: int) -> Ahead:
    """Return the least distance along the axis from one flat end of a cylinder to a mesh.

    Parameters
    ----------
    boxes : Boxes
        Of the mesh.
    cylinder : Cylinder
        With none of the mesh in it.
    end : int
        Which of `Cylinder.ends`: 0 the one that the axis points to, 1 the other.

    Notes
    -----
    Exact. Over the part of a triangle that lies in the disc's shadow the height is linear: it is least at a corner in
    the shadow, where a side enters it, or at the one place of its rim to which the triangle falls.
    """
    outward = cylinder.axis if end == 0 else -cylinder.axis
    rows = np.vstack([cylinder.across, outward])
    centre, radius = cylinder.ends[end], cylinder.radius
    # The box's ball round its middle decides which boxes can be met.
    middle, reach = ((boxes.low + boxes.high) / 2 - centre) @ rows.T, np.linalg.norm(boxes.high - boxes.low, axis=1) / 2
    met = (np.hypot(middle[:, 0], middle[:, 1]) <= radius + reach) & (middle[:, 2] > -cylinder.length / 2 - reach)
    triangles = (boxes.corners[met].reshape(-1, 3, 3) - centre) @ rows.T
    places = np.concatenate([triangles.reshape(-1, 3), _entries(triangles, radius), _fallen(triangles, radius)])
    shadow = np.hypot(places[:, 0], places[:, 1]) <= radius * (1 + 1e-9)
    places = places[shadow & (places[:, 2] > -cylinder.length / 2)]
    if not len(places):
        return Ahead(np.inf, centre)
    best = places[places[:, 2].argmin()]
    return Ahead(float(best[2]), np.asarray(best @ rows + centre))


def _entries(triangles: Floats, radius: float) -> Floats:
    """Where the triangles' sides go through the shadow's rim, (n, 3) array."""
    start = triangles.reshape(-1, 3)
    step = np.roll(triangles, -1, axis=1).reshape(-1, 3) - start
    a = (step[:, :2] ** 2).sum(axis=1)
    b = (start[:, :2] * step[:, :2]).sum(axis=1)
    c = (start[:, :2] ** 2).sum(axis=1) - radius**2
    root = b * b - a * c
    crosses = (root >= 0) & (a > 0)
    start, step, a, b, root = start[crosses], step[crosses], a[crosses], b[crosses], np.sqrt(root[crosses])
    share = np.concatenate([(-b - root) / a, (-b + root) / a])
    places = np.concatenate([start, start]) + share[:, None] * np.concatenate([step, step])
    return np.asarray(places[(share >= 0) & (share <= 1)])


def _fallen(triangles: Floats, radius: float) -> Floats:
    """The lowest place of the rim in each triangle's plane, where it lies in the triangle, (n, 3) array."""
    a, u, v = triangles[:, 0], triangles[:, 1] - triangles[:, 0], triangles[:, 2] - triangles[:, 0]
    normal = np.cross(u, v)
    upright = np.abs(normal[:, 2]) > 1e-12 * np.linalg.norm(normal, axis=1)
    a, u, v, normal = a[upright], u[upright], v[upright], normal[upright]
    rise = -normal[:, :2] / normal[:, 2:]
    steep = np.linalg.norm(rise, axis=1)
    foot = -radius * rise / np.where(steep > 0, steep, 1.0)[:, None]
    off = foot - a[:, :2]
    height = a[:, 2] + (rise * off).sum(axis=1)
    one = (off[:, 0] * v[:, 1] - off[:, 1] * v[:, 0]) / normal[:, 2]
    other = (u[:, 0] * off[:, 1] - u[:, 1] * off[:, 0]) / normal[:, 2]
    inside = (one >= 0) & (other >= 0) & (one + other <= 1)
    return np.asarray(np.column_stack([foot, height])[inside])
