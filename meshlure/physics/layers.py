"""A thin layer over a body's own skin: how much it holds and where, all round, under water, and on either flank."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.bait.composition import Skin
from meshlure.geometry.surface import Floats

_AT_ONCE = 65536
"""Faces worked on at a time."""


@dataclass(frozen=True, eq=False)
class Layers:
    """Volume of a layer with its first moment, per metre of thickness, m2 and m3.

    Attributes
    ----------
    whole : (4,) array
        Over all the body's own skin.
    wet : (4,) array
        Over what of it is under water at rest.
    flanks : (4,) array
        Over the left flank, less the same over the right one.
    wet_flanks : (4,) array
        Under water.
    """

    whole: Floats
    wet: Floats
    flanks: Floats
    wet_flanks: Floats


def layers(skin: Skin, side: Floats, up: Floats | None, height: float | None) -> Layers:
    """Return what a thin layer on a body's skin adds.

    Parameters
    ----------
    skin : Skin
    side : (3,) array
        Towards the bait's left.
    up : (3,) array or None
    height : float or None, m
        Of the water's surface along ``up``; None where all is under water.

    Notes
    -----
    A face is wet whose middle is, and belongs to the flank that it looks to.
    """
    sums = np.zeros((4, 4))
    surface = skin.surface
    own = np.flatnonzero(skin.own)
    for at in range(0, len(own), _AT_ONCE):
        faces = own[at : at + _AT_ONCE]
        normals = surface.double_areas[faces]
        area = np.sqrt(np.einsum("ij,ij->i", normals, normals)) / 2
        middle = surface.vertices.take(surface.faces[faces], axis=0).sum(axis=1) / 3
        held = np.column_stack([area, area[:, None] * middle])
        below = np.ones(len(faces), bool) if up is None or height is None else middle @ up < height
        flank = np.sign(normals @ side)
        for row, weight in enumerate((np.ones(len(faces)), below, flank, flank * below)):
            sums[row] += weight @ held
    return Layers(*sums)
