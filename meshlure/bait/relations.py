"""How a piece lies to the body: apart, in it, around it, or crossing its skin; asked shell by shell."""

from __future__ import annotations

from collections.abc import Sequence
from enum import StrEnum

import numpy as np

from meshlure.geometry.crossing import meets
from meshlure.geometry.shells import winding_number
from meshlure.geometry.surface import Surface


class Relation(StrEnum):
    """Where a surface lies to another one."""

    APART = "apart"
    INSIDE = "inside"
    AROUND = "around"
    CROSSING = "crossing"


def relation(shell: Surface, others: Sequence[Surface]) -> Relation:
    """Return where one closed shell lies to the shells of another piece.

    Parameters
    ----------
    shell : Surface
        Hangs together.
    others : sequence of Surface
        Each hangs together; the outward skin of one piece.

    Notes
    -----
    Exact up to the margin of the triangle test, which counts touching as crossing; where no triangles meet,
    one vertex decides by its winding number.
    """
    found = {_relation(shell, other) for other in others}
    for first in (Relation.CROSSING, Relation.INSIDE, Relation.AROUND):
        if first in found:
            return first
    return Relation.APART


def _relation(shell: Surface, other: Surface) -> Relation:
    low, high = np.maximum(shell.bounds[0], other.bounds[0]), np.minimum(shell.bounds[1], other.bounds[1])
    if (low > high).any():
        return Relation.APART
    if meets(other, shell):
        return Relation.CROSSING
    if winding_number(other, shell.vertices[shell.faces[0, 0]]) > 0.5:
        return Relation.INSIDE
    if winding_number(shell, other.vertices[other.faces[0, 0]]) > 0.5:
        return Relation.AROUND
    return Relation.APART
