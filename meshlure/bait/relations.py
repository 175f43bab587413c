"""How two closed surfaces lie to each other: apart, one in the other, or crossing."""

from __future__ import annotations

from enum import StrEnum

import numpy as np

from meshlure.geometry.crossing import crossings
from meshlure.geometry.shells import winding_number
from meshlure.geometry.surface import Surface


class Relation(StrEnum):
    """Where a surface lies to another one."""

    APART = "apart"
    INSIDE = "inside"
    AROUND = "around"
    CROSSING = "crossing"


def relation(piece: Surface, other: Surface) -> Relation:
    """Return where a closed piece lies to another closed surface.

    Notes
    -----
    Exact up to the margin of the triangle test, which counts touching as crossing; where no triangles meet,
    one vertex decides by its winding number.
    """
    low, high = np.maximum(piece.bounds[0], other.bounds[0]), np.minimum(piece.bounds[1], other.bounds[1])
    if (low > high).any():
        return Relation.APART
    if len(crossings(other, piece)):
        return Relation.CROSSING
    if winding_number(other, piece.corners[0, 0]) > 0.5:
        return Relation.INSIDE
    if winding_number(piece, other.corners[0, 0]) > 0.5:
        return Relation.AROUND
    return Relation.APART
