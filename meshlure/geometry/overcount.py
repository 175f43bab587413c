"""Overcount: space that a surface encloses more than once, which sums over its faces count more than once."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.findings import Point
from meshlure.geometry.columns import crossings
from meshlure.geometry.surface import Surface

_COLUMNS: Final = 40_000
"""Lines through the surface, about."""


@dataclass(frozen=True)
class Overcount:
    """What a closed surface encloses, by how often it winds round it.

    Attributes
    ----------
    summed : float, m3
        Integral of the winding number: what sums over the faces give.
    enclosed : float, m3
        Space that the surface winds round more than zero times, each part once.
    where : Point or None
        The middle of the longest stretch of a line that is wound round more than once, or the wrong way, m.
    """

    summed: float
    enclosed: float
    where: Point | None = None

    @property
    def twice(self) -> float:
        """Volume, m3, that sums count too much (or too little, where a part is turned inside out)."""
        return self.summed - self.enclosed


def overcount(surface: Surface) -> Overcount:
    """Return what a closed surface encloses and what sums over its faces make of it, both along the same lines.

    Parameters
    ----------
    surface : Surface
        Closed, consistently wound; it may cross itself.

    Notes
    -----
    Some ten thousand parallel lines along the least extent are followed through the faces; along each the winding
    number steps by one where it goes in or out. Lengths along the lines are exact; the difference is good to some
    percent where the fold is some tens of lines wide (the lines are a two-hundredth of the body apart).
    """
    size = surface.bounds[1] - surface.bounds[0]
    along = int(np.argmin(size))
    order = ((along + 2) % 3, (along + 1) % 3, along)
    pitch = float(np.sqrt(size[order[0]] * size[order[1]] / _COLUMNS))
    # Off the vertices by a share of the pitch that no drawing has.
    origin = surface.bounds[0] + pitch * 0.4142
    met = crossings(surface, origin, pitch, order)
    if not len(met.row):
        return Overcount(0.0, 0.0)
    by_line = np.lexsort((met.height, met.column, met.row))
    row, column = met.row[by_line], met.column[by_line]
    height, sign = met.height[by_line], met.sign[by_line]
    wound = np.cumsum(sign)[:-1]
    same = (row[1:] == row[:-1]) & (column[1:] == column[:-1])
    length = np.where(same, np.diff(height), 0.0)
    cell = pitch**3
    wrong = np.where((wound > 1) | (wound < 0), length, 0.0)
    where: Point | None = None
    if len(wrong) and wrong.max() > 0:
        longest = int(wrong.argmax())
        place = np.empty(3)
        place[list(order)] = row[longest], column[longest], height[longest] + length[longest] / 2
        x, y, z = (float(value) for value in origin + pitch * place)
        where = (x, y, z)
    return Overcount(float((wound * length).sum()) * cell, float(length[wound > 0].sum()) * cell, where)
