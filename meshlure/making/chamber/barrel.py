"""Meshes of bores: cylinders in short even facets, of the round cylinder's volume."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.surface import Floats, Ints, Surface

SIDES: Final = 48
"""Corners of every ring: its sides lie within r/470 of the round skin."""

_SLENDER: Final = 3.0
"""How many times longer along the bore than round it a facet may be."""


def pace(radius: float) -> float:
    """Return how far apart the rings of a bore of a radius, m, should stand, m."""
    return _SLENDER * 2 * np.pi * radius / SIDES


def barrel(cylinder: Cylinder, behind: float = 0.0, before: float = 0.0, apart: float | None = None) -> Surface:
    """Return a closed, outward mesh of a cylinder, lengthened beyond its ends.

    Parameters
    ----------
    cylinder : Cylinder
    behind, before : float, m
        By how much it goes on beyond its foot and its head, to where its axis points. Its own rings stay where they
        are, so that the meshes of a bore and of a hole drilled on from it lie on each other.
    apart : float, optional, m
        Greatest distance between rings; by default that of `pace`.

    Notes
    -----
    Rings of n corners, each turned by half a side against the one before. Where a hole comes out of a skin at a small
    angle, facets as long as the bore would be taken for a skin that curves as a whole; these are short, and stay when
    vertices closer than a micrometre to a straight line are merged. A layer of height h between two rings of
    circumscribed radius R holds h R^2 n/6 (sin(2 pi/n) + 4 cos^2(pi/(2 n)) sin(pi/n)), by the prismatoid formula; R is
    taken such that this is the round cylinder's. The corners stand out of it by r/940.
    """
    heights, first = _heights(cylinder, behind, before, apart or pace(cylinder.radius))
    rings = _rings(cylinder, cylinder.radius, heights, first)
    ends = cylinder.middle + heights[[0, -1], None] * cylinder.axis
    count, last = len(heights), (len(heights) - 1) * SIDES
    k = np.arange(SIDES)
    after = (k + 1) % SIDES
    foot, head = np.full(SIDES, count * SIDES), np.full(SIDES, count * SIDES + 1)
    caps = [np.column_stack([foot, after, k]), np.column_stack([head, last + k, last + after])]
    return Surface(np.concatenate([rings, ends]), np.concatenate([_wall(count, first), *caps]))


def sleeve(cylinder: Cylinder, inside: float, apart: float) -> Surface:
    """Return a closed, outward mesh of a tube.

    Parameters
    ----------
    cylinder : Cylinder
        Its outside.
    inside : float, m
        Radius of its hole, which leads from end to end.
    apart : float, m
        Greatest distance between rings.
    """
    heights, first = _heights(cylinder, 0.0, 0.0, apart)
    outer, inner = (_rings(cylinder, radius, heights, first) for radius in (cylinder.radius, inside))
    wall, k = _wall(len(heights), first), np.arange(SIDES)
    after, last, shift = (k + 1) % SIDES, (len(heights) - 1) * SIDES, len(outer)
    faces = [
        wall,
        wall[:, ::-1] + shift,
        np.column_stack([k, shift + k, after]),
        np.column_stack([after, shift + k, shift + after]),
        np.column_stack([last + k, last + after, shift + last + k]),
        np.column_stack([last + after, shift + last + after, shift + last + k]),
    ]
    return Surface(np.concatenate([outer, inner]), np.concatenate(faces))


def _heights(cylinder: Cylinder, behind: float, before: float, apart: float) -> tuple[Floats, int]:
    """Heights of the rings from the middle, m, and the number of the first, the cylinder's own foot being 0."""

    def steps(length: float) -> int:
        return int(np.ceil(length / apart - 1e-9))

    half, below, above = cylinder.length / 2, steps(behind), steps(before)
    own = np.linspace(-half, half, steps(cylinder.length) + 1)
    low = np.linspace(-half - behind, -half, below + 1)[:-1]
    high = np.linspace(half, half + before, above + 1)[1:]
    return np.concatenate([low, own, high]), -below


def _rings(cylinder: Cylinder, radius: float, heights: Floats, first: int) -> Floats:
    """Corners of all rings, the lowest first, (k, 3) array, m."""
    turn = np.pi / SIDES
    share = SIDES / 6 * (np.sin(2 * turn) + 4 * np.cos(turn / 2) ** 2 * np.sin(turn))
    angle = 2 * turn * np.arange(SIDES) + turn * ((first + np.arange(len(heights))) % 2)[:, None]
    one, other = cylinder.across
    circle = (
        radius * float(np.sqrt(np.pi / share)) * (np.cos(angle)[..., None] * one + np.sin(angle)[..., None] * other)
    )
    return np.asarray((circle + (cylinder.middle + heights[:, None] * cylinder.axis)[:, None]).reshape(-1, 3))


def _wall(rings: int, first: int) -> Ints:
    """Faces between the rings, outward."""
    k = np.arange(SIDES)
    after = (k + 1) % SIDES
    faces = []
    for ring in range(rings - 1):
        low, high = ring * SIDES, (ring + 1) * SIDES
        if (first + ring) % 2:
            # The lower ring is the turned one: its corner k stands between k and k + 1 of the upper.
            faces += [(low + k, low + after, high + after), (low + k, high + after, high + k)]
        else:
            faces += [(low + k, low + after, high + k), (low + after, high + after, high + k)]
    return np.concatenate([np.column_stack(face) for face in faces])
