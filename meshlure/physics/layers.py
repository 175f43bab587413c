"""A thin layer over a body's own skin: how much it holds and where, all round, under water, and on either flank."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.bait.composition import Skin
from meshlure.geometry.surface import Floats

_AT_ONCE = 8192
"""Faces worked on at a time, so that their numbers stay in the processor's cache."""


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
    surface, normals = skin.surface, skin.surface.double_areas
    for at in range(0, len(skin.own), _AT_ONCE):
        part = slice(at, at + _AT_ONCE)
        across = normals[part].T
        area = np.sqrt(across[0] ** 2 + across[1] ** 2 + across[2] ** 2) / 2 * skin.own[part]
        corners = surface.vertices.take(surface.faces[part], axis=0)
        middle = (corners[:, 0] + corners[:, 1] + corners[:, 2]).T / 3
        held = np.concatenate([area[None], area * middle])
        below = np.ones(len(area)) if up is None or height is None else (up @ middle < height).astype(np.float64)
        flank = np.sign(side @ across)
        sums += np.stack([np.ones(len(area)), below, flank, flank * below]) @ held.T
    return Layers(*sums)
