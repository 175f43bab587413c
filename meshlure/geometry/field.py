"""A grid of depths under a closed skin: quick, approximate, made to search with before anything exact is asked."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.columns import crossings
from meshlure.geometry.surface import Bools, Floats, Ints, Surface

DIAGONAL: Final = float(np.sqrt(3.0))
"""Length of a voxel's diagonal over its pitch."""

_MOST = 1 << 27
"""Voxels beyond which a grid is refused: a gigabyte of depths."""

_BORDER = 4
"""Voxels along each side beyond what the bounds need, so that the outermost middles lie outside."""


@dataclass(frozen=True, eq=False)
class Field:
    """Approximate depths under a skin, m, at the middles of cubic voxels; positive inside.

    Attributes
    ----------
    origin : (3,) array, m
        Middle of the first voxel.
    pitch : float, m
    values : (i, j, k) array, m
        Voxels along x, y, z. All on the border are negative.

    Notes
    -----
    A value is the distance to the next middle on the other side of the skin less half a pitch. It is never more than
    half a pitch too low, and at most `slack` too high wherever a ball as wide as a voxel's diagonal can touch the skin
    from the other side; on smooth skins it is off by less than half a pitch either way. A wall or a slit thinner than
    that ball may be missed. Where no middle lies inside at all, every value is minus half a pitch.
    """

    origin: Floats
    pitch: float
    values: Floats

    @classmethod
    def of(cls, surfaces: Surface | Sequence[Surface], pitch: float) -> Field:
        """Return the depths inside closed surfaces.

        Parameters
        ----------
        surfaces : Surface or sequence of Surface
            Closed, consistently wound, outward, cavities inward; several may overlap and count together.
        pitch : float, m
            Side of a voxel.

        Raises
        ------
        ValueError
            A pitch that is not positive, or so small that more than 134 million voxels would be needed.

        Notes
        -----
        A voxel is inside where its middle is wound round more than zero times: by counting the faces that a column of
        middles enters less those it leaves. Distances are exact Euclidean distance transforms between voxels.

        References
        ----------
        C. R. Maurer, R. Qi, V. Raghavan (2003), A linear time algorithm for computing exact Euclidean distance
        transforms of binary images in arbitrary dimensions, IEEE Trans. Pattern Anal. 25(2) (from memory).
        """
        from scipy.ndimage import distance_transform_edt

        origin, inside = filled(surfaces, pitch)
        if not inside.any():
            return cls(origin, float(pitch), np.full(inside.shape, -pitch / 2))
        values = np.asarray(distance_transform_edt(inside, sampling=pitch))
        values -= np.asarray(distance_transform_edt(~inside, sampling=pitch))
        values -= np.where(inside, pitch / 2, -pitch / 2)
        return cls(origin, float(pitch), values)

    @property
    def slack(self) -> float:
        """How much too high a value may be, m: a voxel's diagonal less half a pitch."""
        return (DIAGONAL - 0.5) * self.pitch

    @property
    def inside(self) -> Bools:
        """Which voxels have their middle inside, (i, j, k) array."""
        return np.asarray(self.values > 0)

    def places(self, chosen: Bools) -> Floats:
        """Return the middles of chosen voxels, (n, 3) array, m, in the grid's order.

        Parameters
        ----------
        chosen : (i, j, k) array of bool
        """
        return self.origin + self.pitch * np.argwhere(chosen)

    def at(self, points: Floats) -> Floats:
        """Return the depths at (n, 3) points, m, as an (n,) array, m.

        Notes
        -----
        Trilinear between middles, which may be off by up to half a diagonal more at a ridge of the depths, and by much
        less elsewhere. Beyond the grid the depth at its border less the way there, always negative.
        """
        from scipy.ndimage import map_coordinates

        cells = (np.asarray(points, dtype=np.float64).reshape(-1, 3) - self.origin) / self.pitch
        held = np.clip(cells, 0.0, np.array(self.values.shape) - 1.0)
        beyond = self.pitch * np.sqrt(((cells - held) ** 2).sum(axis=1))
        return np.asarray(map_coordinates(self.values, held.T, order=1, mode="nearest") - beyond)


def pitch_for(surface: Surface, voxels: float) -> float:
    """Return the pitch, m, at which a surface's bounds hold about so many voxels."""
    size = surface.bounds[1] - surface.bounds[0]
    return float((np.prod(size) / voxels) ** (1 / 3))


def filled(surfaces: Surface | Sequence[Surface], pitch: float) -> tuple[Floats, Bools]:
    """Return the middle of the first voxel, (3,) m, and which voxels lie inside, (i, j, k) array; as `Field.of`."""
    some = (surfaces,) if isinstance(surfaces, Surface) else tuple(surfaces)
    bounds = np.stack([surface.bounds for surface in some])
    low, high = bounds[:, 0].min(axis=0), bounds[:, 1].max(axis=0)
    if not (pitch > 0 and float(np.prod((high - low) / pitch + _BORDER)) < _MOST):
        raise ValueError(f"a pitch of {pitch} m suits no body that reaches from {low} to {high} m")
    shape = np.ceil((high - low) / pitch).astype(np.intp) + _BORDER
    origin = (low + high) / 2 - (shape - 1) * (pitch / 2)
    return origin, occupied(some, origin, pitch, shape)


def occupied(surfaces: Sequence[Surface], origin: Floats, pitch: float, shape: Ints) -> Bools:
    """Return which voxels of a grid have their middle inside closed surfaces, (i, j, k) array.

    Parameters
    ----------
    surfaces : sequence of Surface
        As in `Field.of`; the grid holds them all.
    origin : (3,) array, m
        Middle of the first voxel.
    pitch : float, m
    shape : (3,) array of int
        Voxels along x, y, z.
    """
    # Columns along the longest side are the fewest.
    along = int(np.argmax(shape))
    order = ((along + 2) % 3, (along + 1) % 3, along)
    turned = shape[list(order)]
    steps = np.zeros(int(np.prod(turned)), dtype=np.int32)
    for surface in surfaces:
        met = crossings(surface, origin, pitch, order)
        first = np.ceil(met.height).astype(np.intp)
        np.add.at(steps, (met.row * turned[1] + met.column) * turned[2] + first, met.sign)
    wound = np.cumsum(steps.reshape(turned), axis=2, dtype=np.int32)
    return np.ascontiguousarray((wound > 0).transpose(np.argsort(order)))
