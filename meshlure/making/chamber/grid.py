"""A first look for bores on a grid of depths: every line of voxels along the bore's direction at once."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TypeVar

import numpy as np
from numpy.typing import NDArray

from meshlure.geometry.field import Field, pitch_for
from meshlure.geometry.surface import Bools, Floats
from meshlure.making.chamber.line import Rules
from meshlure.making.chamber.site import Site

Small = NDArray[np.float32]
Values = TypeVar("Values", NDArray[np.float32], NDArray[np.int16])

_VOXELS = 600_000
"""About as many in the body's bounds: voxels of 0.35 mm in a bait of 95 mm, which take a tenth of a second."""

_FAR = 1.0
"""m. Stands for the distance to what is not there."""

_SLACK = 0.5
"""Pitches by which a depth of the grid may be too small without a bore being given up for it."""


@dataclass(frozen=True, eq=False)
class Look:
    """The longest stretch of one line of voxels.

    Attributes
    ----------
    place : (2,) array, m
        Where the line stands, y and z.
    start, end : float, m
        Tail and nose end along it.
    """

    place: Floats
    start: float
    end: float

    @property
    def length(self) -> float:
        """Length, m."""
        return self.end - self.start


@dataclass(frozen=True, eq=False)
class Grid:
    """Depths under the skin and distances to all else, in the bore's axes.

    Attributes
    ----------
    field : Field
    apart : (i, j, k) array, m
        Distance to the nearest other piece; 0 in it.
    """

    field: Field
    apart: Small

    @classmethod
    def of(cls, site: Site) -> Grid:
        """Return the grid of a site."""
        field = Field.of(site.skin, pitch_for(site.skin, _VOXELS))
        return cls(field, _apart(field, site))

    def inside(self, place: Floats, along: float) -> bool:
        """Whether a place of a line lies inside the body."""
        return bool(self.field.at(np.array([[along, *place]]))[0] > 0)

    def emptied(self) -> Grid:
        """Return the same grid with nothing in a bore's way but the skin."""
        return replace(self, apart=np.full_like(self.apart, _FAR))

    def looks(self, rules: Rules) -> list[Look]:
        """Return every line of voxels with its longest stretch, the longest first.

        Notes
        -----
        A bore's side stands for a ring of points, its discs for rings in rings; what the grid cannot tell, half a
        voxel, is decided in the bore's favour.
        """
        pitch = self.field.pitch
        slack = _SLACK * pitch
        inside = self.field.inside
        rings = _rings(rules.radius, pitch)
        side = _between(self.field.values.astype(np.float32), rings[0])
        clear = _least(self.apart, rings) >= rules.clear - slack
        ahead, behind = (_least(steps, rings) for steps in (_steps(inside), _steps(inside[::-1])[::-1]))
        # Where the wall is thicker than the bore is wide the ring alone would let the skin into it.
        run = (side >= rules.wall - slack) & clear & (ahead > 0)
        # A voxel of a length is left half a voxel before its end.
        deep = rules.end_wall / pitch + 0.5 - _SLACK
        if rules.opens:
            run &= _clear_to_skin(clear, ahead > 0, rules.opens)
        start, end = _stretches(run, behind >= deep, ahead >= deep)
        return self._looks(start, end)

    def _looks(self, start: NDArray[np.int64], end: NDArray[np.int64]) -> list[Look]:
        field, length = self.field, end - start
        rows = np.argwhere(length > 0)
        middle = field.values[(start + end)[length > 0] // 2, rows[:, 0], rows[:, 1]]
        # Of equal lengths the one that lies deepest: a voxel of length is worth more than any depth.
        order = np.lexsort((-middle, -length[length > 0]))
        found = []
        for j, k in rows[order]:
            place = field.origin[1:] + field.pitch * np.array([j, k])
            low, high = (float(field.origin[0] + field.pitch * which[j, k]) for which in (start, end))
            found.append(Look(place, low, high))
        return found


def _apart(field: Field, site: Site) -> Small:
    """Distance of every voxel to the nearest of what lies in the way, m."""
    from scipy.ndimage import distance_transform_edt

    way = site.way
    if not len(way.points):
        return np.full(field.values.shape, _FAR, dtype=np.float32)
    taken = np.zeros(field.values.shape, dtype=np.bool_)
    cells = np.rint((way.points - field.origin) / field.pitch).astype(np.intp)
    held = ((cells >= 0) & (cells < taken.shape)).all(axis=1)
    taken[tuple(cells[held].T)] = True
    for surface in way.inner:
        taken |= _within(field, surface.bounds, Field.of(surface, field.pitch))
    if not taken.any():
        return np.full(taken.shape, _FAR, dtype=np.float32)
    return np.asarray(distance_transform_edt(~taken, sampling=field.pitch), dtype=np.float32)


def _within(field: Field, bounds: Floats, own: Field) -> Bools:
    """Which voxels have their middle in a piece."""
    inside = np.zeros(field.values.shape, dtype=np.bool_)
    low = np.clip(np.floor((bounds[0] - field.origin) / field.pitch).astype(int), 0, inside.shape)
    high = np.clip(np.ceil((bounds[1] - field.origin) / field.pitch).astype(int) + 1, 0, inside.shape)
    if (low >= high).any():
        return inside
    block = tuple(slice(a, b) for a, b in zip(low, high, strict=True))
    cells = np.stack(np.meshgrid(*(np.arange(a, b) for a, b in zip(low, high, strict=True)), indexing="ij"), axis=-1)
    depth = own.at(field.origin + field.pitch * cells.reshape(-1, 3))
    inside[block] = (depth > 0).reshape(cells.shape[:3])
    return inside


def _rings(radius: float, pitch: float) -> list[Floats]:
    """Points of a disc across the bore by rings, the rim first, each an (n, 2) array in pitches."""
    count = max(1, int(np.ceil(radius / pitch / 2)))
    rings = []
    for step in range(count, 0, -1):
        reach = radius / pitch * step / count
        angle = 2 * np.pi * np.arange(n := max(8, int(np.ceil(2 * np.pi * reach / 2)))) / n
        rings.append(reach * np.column_stack([np.cos(angle), np.sin(angle)]))
    return [*rings, np.zeros((1, 2))]


def _between(values: Small, ring: Floats) -> Small:
    """Least of values about every voxel over points beside it, straight between the four voxels round each."""
    least = np.full(values.shape, np.inf, dtype=np.float32)
    wide, pad, rows, columns = _padded(values, ring)
    for y, z in ring:
        j, k = int(np.floor(y)), int(np.floor(z))
        here = np.zeros(values.shape, dtype=np.float32)
        for dj, dk, share in _corners(y - j, z - k):
            top, left = pad + j + dj, pad + k + dk
            here += np.float32(share) * wide[:, top : top + rows, left : left + columns]
        np.minimum(least, here, out=least)
    return least


def _least(values: Values, rings: list[Floats]) -> Values:
    """Least of values about every voxel over the voxels nearest to points beside it."""
    least = values.copy()
    points = np.unique(np.rint(np.concatenate(rings)).astype(np.intp), axis=0)
    wide, pad, rows, columns = _padded(values, points)
    for j, k in points:
        np.minimum(least, wide[:, pad + j : pad + j + rows, pad + k : pad + k + columns], out=least)
    return least


def _padded(values: Values, points: NDArray[np.generic]) -> tuple[Values, int, int, int]:
    pad = int(np.ceil(float(np.abs(points).max(initial=0.0)))) + 2
    _, rows, columns = values.shape
    return np.pad(values, ((0, 0), (pad, pad), (pad, pad)), mode="edge"), pad, rows, columns


def _steps(inside: Bools) -> NDArray[np.int16]:
    """By how many voxels one may go along every line before the body ends, 0 where one is outside."""
    steps = np.zeros(inside.shape, dtype=np.int16)
    for i in range(len(inside) - 2, -1, -1):
        steps[i] = np.where(inside[i], steps[i + 1] + 1, 0)
    return steps


def _corners(u: float, v: float) -> list[tuple[int, int, float]]:
    shares = [(0, 0, (1 - u) * (1 - v)), (1, 0, u * (1 - v)), (0, 1, (1 - u) * v), (1, 1, u * v)]
    return [corner for corner in shares if corner[2] > 1e-9]


def _clear_to_skin(clear: Bools, inside: Bools, opens: int) -> Bools:
    """Whether from a voxel on towards the opening everything is clear as long as it is inside."""
    fine = (clear | ~inside)[::opens]
    rest = np.logical_and.accumulate(fine[::-1], axis=0)[::-1]
    return np.asarray(rest[::opens])


def _stretches(run: Bools, starts: Bools, ends: Bools) -> tuple[NDArray[np.int64], NDArray[np.int64]]:
    """First and last voxel of every line's longest stretch that may be covered, with room for both end walls."""
    shape = run.shape[1:]
    first = np.full(shape, -1)
    start, end = np.zeros(shape, dtype=np.int64), np.zeros(shape, dtype=np.int64)
    for i in range(len(run)):
        first = np.where(run[i], first, -1)
        first = np.where(run[i] & starts[i] & (first < 0), i, first)
        longer = run[i] & ends[i] & (first >= 0) & (i - first > end - start)
        start, end = np.where(longer, first, start), np.where(longer, i, end)
    return start, end
