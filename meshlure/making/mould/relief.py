"""Relief: a piece on the bench seen from above, as heights on a grid, to be pictured."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.columns import crossings
from meshlure.geometry.surface import Floats, Surface

CELLS: Final = 420
"""Cells along the piece's greatest extent."""


@dataclass(frozen=True, eq=False)
class Seen:
    """A piece seen from above.

    Attributes
    ----------
    heights : (i, j) array, m
        Topmost place over each cell along x and y; NaN beside the piece.
    pitch : float, m
    """

    heights: Floats
    pitch: float


def seen_from_above(surface: Surface) -> Seen:
    """Return the heights of a closed surface's upper side."""
    low, high = surface.bounds[:, :2]
    pitch = float((high - low).max()) / CELLS
    count = np.ceil((high - low) / pitch).astype(np.intp) + 2
    # Off the bounds' own lines, so that no column runs along a wall.
    origin = (low + high) / 2 - (count - 1) * (pitch / 2) + pitch * np.array([0.0137, 0.0085])
    met = crossings(surface, np.append(origin, 0.0), pitch, (1, 0, 2))
    heights = np.full(count, -np.inf)
    np.maximum.at(heights, (met.column, met.row), met.height * pitch)
    return Seen(np.where(np.isfinite(heights), heights, np.nan), pitch)
