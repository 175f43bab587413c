"""How a drawing larger than a sheet is cut into windows, and where: mm of paper along one way."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

LAP = 5.0
"""mm that two neighbouring sheets both show on either side of a join."""
SEARCH = 0.4
"""Share of a window's length in which a place without words is looked for."""


@dataclass(frozen=True)
class Window:
    """What one sheet shows of a drawing along one way.

    Attributes
    ----------
    low, high : float
        What is visible.
    first, last : float
        What is the sheet's own: of what both neighbours show, the part up to the join. Words stand on the sheet that
        owns their place.
    number : int
        Of the window, from 0 on; its last join is the first of the next.
    """

    low: float
    high: float
    first: float
    last: float
    number: int = 0


def windows(length: float, room: float, words: Sequence[tuple[float, float]] = ()) -> list[Window]:
    """Return the windows that show a length, each no longer than the room.

    Parameters
    ----------
    length, room : float
        Of the drawing and of a sheet.
    words : sequence of (float, float)
        From where to where words stand; a join is put where it crosses none, if there is such a place.
    """
    if room <= 4 * LAP:
        raise ValueError(f"a window of {room:g} mm has no room for its joins")
    joins = [0.0]
    while length - max(joins[-1] - LAP, 0.0) > room:
        farthest = max(joins[-1] - LAP, 0.0) + room - LAP
        nearest = max(farthest - SEARCH * room, joins[-1] + 3 * LAP)
        tried = [farthest - step for step in range(int(farthest - nearest) + 1)]
        free = (x for x in tried if not any(low - LAP < x < high + LAP for low, high in words))
        joins.append(next(free, farthest))
    ends = [*joins[1:], length]
    return [
        Window(max(first - LAP, 0.0), min(last + LAP, length), first, last, number)
        for number, (first, last) in enumerate(zip(joins, ends, strict=True))
    ]
