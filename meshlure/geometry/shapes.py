"""Meshes of cylinders and balls that enclose exactly the round solid's volume."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.surface import Floats, Surface

SIDES: Final = 96
"""Sides of a rod: its skin lies within r/2800 of the round one."""

FINENESS: Final = 4
"""Times that a ball's icosahedron is split: 5120 faces, its skin within r/1000 of the round one."""


def rod(cylinder: Cylinder, sides: int = SIDES) -> Surface:
    """Return a closed, outward prism of a cylinder's length and volume.

    Parameters
    ----------
    cylinder : Cylinder
    sides : int
        3 or more.

    Notes
    -----
    A regular polygon of n sides has the area n R^2 sin(2 pi/n)/2, so that R = r sqrt(2 pi/(n sin(2 pi/n))) gives it the
    circle's. Its edges stand out of the round skin by r pi^2/(3 n^2), the middles of its sides lie within by half of
    that (leading terms).
    """
    if sides < 3:
        raise ValueError(f"a rod takes 3 sides or more, not {sides}")
    turn = 2 * np.pi / sides
    reach = cylinder.radius * np.sqrt(turn / np.sin(turn))
    angle = turn * np.arange(sides)
    ring = reach * np.column_stack([np.cos(angle), np.sin(angle)]) @ cylinder.across
    head, foot = cylinder.ends
    k = np.arange(sides)
    after = (k + 1) % sides
    top, bottom = np.full(sides, 2 * sides), np.full(sides, 2 * sides + 1)
    faces = [
        (k, after, sides + after),
        (k, sides + after, sides + k),
        (bottom, after, k),
        (top, sides + k, sides + after),
    ]
    vertices = np.vstack([ring + foot, ring + head, head[None], foot[None]])
    return Surface(vertices, np.concatenate([np.column_stack(row) for row in faces]))


def ball(centre: Floats, diameter: float, fineness: int = FINENESS) -> Surface:
    """Return a closed, outward mesh of a ball, of the ball's volume.

    Parameters
    ----------
    centre : (3,) array, m
    diameter : float, m
    fineness : int
        Times that each face of an icosahedron is split in four, 0 or more: 20 * 4**fineness faces.

    Notes
    -----
    The split icosahedron lies within the ball; it is scaled about its centre to the ball's volume.
    """
    import trimesh

    # Made at radius 1: the library's own tolerances are lengths without a unit.
    made = trimesh.creation.icosphere(subdivisions=fineness, radius=1.0)
    unit = Surface(np.asarray(made.vertices), np.asarray(made.faces))
    scale = diameter * (np.pi / 6 / enclosed_volume(unit)) ** (1 / 3)
    return unit.moved(shift=np.asarray(centre, dtype=np.float64), scale=scale)
