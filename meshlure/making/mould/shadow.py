"""The shadow of a solid along the pull: where columns go through it, and what rubber they hold at a parting height."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.columns import crossings
from meshlure.geometry.surface import Bools, Floats, Ints, Surface

_BORDER: Final = 2
"""Columns on every side beyond the bounds."""

_OFF: Final = 0.0137
"""Share of a pitch by which the columns stand off the bounds' own lines, so that none runs along a drawn wall."""

MOST: Final = 400_000
"""Columns of a grid; a finer pitch than they allow is made coarser."""

ALIKE: Final = 1e-4
"""Share of the solid's volume by which two parting heights may differ in what they trap, and count as alike."""


@dataclass(frozen=True, eq=False)
class Shadow:
    """Columns along z through a solid.

    Attributes
    ----------
    origin : (2,) array, m
        x and y of the first column.
    pitch : float, m
        Between columns.
    shape : two int
        Columns along x and along y.
    cell : (n,) array
        Columns that meet the solid: x place times columns along y, plus y place.
    bottom, top : (n,) arrays, m
        Lowest and highest place of the solid in each.
    gap_low, gap_high : (g,) arrays, m
        Ends of the hollows between parts of the solid that one column goes through.
    gap_cell : (g,) array
        Their columns.
    """

    origin: Floats
    pitch: float
    shape: tuple[int, int]
    cell: Ints
    bottom: Floats
    top: Floats
    gap_low: Floats
    gap_high: Floats
    gap_cell: Ints

    @classmethod
    def of(cls, surface: Surface, pitch: float) -> Shadow:
        """Return the columns through a closed, outward surface, at least about ``pitch`` (m) apart."""
        low, high = surface.bounds[:, :2]
        span = high - low
        pitch = max(pitch, float(np.sqrt(np.prod(span) / MOST)))
        count = np.ceil(span / pitch).astype(np.intp) + 2 * _BORDER
        origin = (low + high) / 2 - (count - 1) * (pitch / 2) + _OFF * pitch * np.array([1.0, 0.618])
        met = crossings(surface, np.append(origin, 0.0), pitch, (1, 0, 2))
        cell = met.column * count[1] + met.row
        order = np.lexsort((met.height, cell))
        cell, height, sign = cell[order], met.height[order] * pitch, met.sign[order]
        around = np.cumsum(sign)
        start, end = np.flatnonzero((around == 1) & (sign == 1)), np.flatnonzero((around == 0) & (sign == -1))
        owner, low_ends, high_ends = cell[start], height[start], height[end]
        first = np.flatnonzero(np.append(True, owner[1:] != owner[:-1])) if len(owner) else np.empty(0, dtype=np.intp)
        last = np.append(first[1:], len(owner)) - 1 if len(owner) else first
        inner = np.flatnonzero(owner[1:] == owner[:-1]) if len(owner) else first
        return cls(
            origin,
            pitch,
            (int(count[0]), int(count[1])),
            owner[first],
            low_ends[first],
            high_ends[last],
            high_ends[inner],
            low_ends[inner + 1],
            owner[inner],
        )

    @property
    def covered(self) -> Bools:
        """Whether the solid lies over each column, (x, y) array."""
        mask = np.zeros(self.shape[0] * self.shape[1], dtype=np.bool_)
        mask[self.cell] = True
        return mask.reshape(self.shape)

    def trapped(self, height: float) -> float:
        """Rubber, m3, that a parting plane at a height, m, leaves between parts of the solid or it and the plane.

        Notes
        -----
        A place outside the solid and above the plane is trapped if the solid stands above it: the half that holds it is
        pulled up. Below the plane likewise downwards. A hollow between two parts is trapped at any height.
        """
        ends = np.maximum(self.bottom - height, 0.0).sum() + np.maximum(height - self.top, 0.0).sum()
        return float((ends + (self.gap_high - self.gap_low).sum()) * self.pitch**2)

    def best_height(self, middle: float, volume: float) -> float:
        """Return the height, m, of the parting plane that traps least; ``middle`` where that is as good.

        Parameters
        ----------
        middle : float, m
            The height to be preferred.
        volume : float, m3
            Of the solid.

        Notes
        -----
        With b and t the ends of a column, what it traps below b or above t is (abs(b - h) + abs(t - h) - (t - b))/2,
        so the sum over columns is least at the median of all ends.
        """
        ends = np.sort(np.concatenate([self.bottom, self.top]))
        if not len(ends):
            return middle
        low, high = ends[len(ends) // 2 - 1], ends[len(ends) // 2]
        best = float(np.clip(middle, low, high))
        return middle if self.trapped(middle) - self.trapped(best) <= ALIKE * volume else best

    def cells_of(self, points: Floats) -> Ints:
        """Return the column nearest to each of (n, 2) points, m, as places along x and y, (n, 2) array, kept inside."""
        place = np.rint((np.asarray(points) - self.origin) / self.pitch).astype(np.intp)
        return np.asarray(np.clip(place, 0, np.array(self.shape) - 1))

    def thickness(self, point: Floats) -> float:
        """Return the solid's extent along z at the column nearest to a (2,) point, m; 0 beside the solid."""
        i, j = self.cells_of(np.asarray(point)[None])[0]
        found = np.flatnonzero(self.cell == i * self.shape[1] + j)
        return float(self.top[found[0]] - self.bottom[found[0]]) if len(found) else 0.0
