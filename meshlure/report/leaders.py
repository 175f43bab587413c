"""Where names stand around a drawing, and how their leaders run: no text on text, no leader across another.

Every length is in mm of paper. Names stand in a row above the drawing and in a row below it. A leader drops from its
name to the outer rail, crosses to the inner rail, and drops from there to the thing named. On both rails leaders keep
the same order and in the two drops they are upright, so no two can cross.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np

APART = 1.1
"""mm between two leaders that drop side by side."""
GAP = 2.2
"""mm between two names in a row."""


@dataclass(frozen=True)
class Named:
    """A thing in a drawing that wants its name beside it: the name's lines, its width, and where the leader ends."""

    lines: tuple[str, ...]
    width: float
    x: float
    y: float


@dataclass(frozen=True)
class Placed:
    """A name with its place: which row, the middle of its text, and where its leader meets the inner rail."""

    named: Named
    above: bool
    text_x: float
    drop_x: float


def spread(wanted: Sequence[float], widths: Sequence[float], low: float, high: float, gap: float) -> list[float] | None:
    """Return middles of boxes in one row, in order and apart, with the least sum of squared moves.

    Parameters
    ----------
    wanted : sequence, ascending
        Where each box would like its middle.
    widths : sequence
        How wide each box is.
    low, high : float
        The ends of the row.
    gap : float
        Least room between two boxes.

    Returns
    -------
    list of float or None
        None where the row is too short.

    Notes
    -----
    With the boxes' own widths taken off, "in order and apart" is "not falling": isotonic regression by pooling of
    adjacent violators (Barlow, Bartholomew, Bremner & Brunk 1972), whose answer may simply be cut at the row's ends.
    """
    if not wanted:
        return []
    offsets = np.concatenate([[0.0], np.cumsum([(a + b) / 2 + gap for a, b in pairwise(widths)])])
    first, last = low + widths[0] / 2, high - widths[-1] / 2 - float(offsets[-1])
    if last < first:
        return None
    pools: list[tuple[float, int]] = []
    for value in np.asarray(wanted, dtype=float) - offsets:
        mean, count = float(value), 1
        while pools and pools[-1][0] > mean:
            before, members = pools.pop()
            mean, count = (mean * count + before * members) / (count + members), count + members
        pools.append((mean, count))
    level = np.concatenate([np.full(count, mean) for mean, count in pools])
    return [float(x) for x in np.clip(level, first, last) + offsets]


def arrange(things: Sequence[Named], middle: float, low: float, high: float) -> list[Placed] | None:
    """Return a place for every name, or None where the two rows cannot hold them.

    A thing above the drawing's middle is named above where there is room, else below; the fuller row gives to the
    emptier one what lies nearest to the middle.
    """
    room = high - low
    rows: tuple[list[Named], list[Named]] = ([], [])
    for thing in things:
        rows[thing.y > middle].append(thing)
    below, above = rows
    while True:
        loads = [sum(t.width for t in row) + GAP * max(len(row) - 1, 0) for row in (below, above)]
        full = 0 if loads[0] > loads[1] else 1
        giver, taker = rows[full], rows[1 - full]
        movable = [t for t in giver if loads[1 - full] + t.width + GAP < loads[full]]
        if loads[full] <= 0.8 * room or not movable:
            break
        nearest = min(movable, key=lambda t: (abs(t.y - middle), t.x, t.lines))
        giver.remove(nearest)
        taker.append(nearest)
    placed: list[Placed] = []
    for row, is_above in ((above, True), (below, False)):
        order = sorted(row, key=lambda t: (t.x, t.y, t.lines))
        texts = spread([t.x for t in order], [t.width for t in order], low, high, GAP)
        drops = spread([t.x for t in order], [0.0] * len(order), low, high, APART)
        if texts is None or drops is None:
            return None
        placed += [Placed(t, is_above, text, drop) for t, text, drop in zip(order, texts, drops, strict=True)]
    return placed
