"""Where in a body ballast has room: quickly on a grid of depths, and exactly for one place."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Final

import numpy as np

from meshlure.geometry.clearance import Boxes
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.field import Field, pitch_for
from meshlure.geometry.samples import spread
from meshlure.geometry.standoff import cylinder_standoff
from meshlure.geometry.surface import Bools, Floats, Surface
from meshlure.making.balance.ballast import BALL, FROM_BELLY, Ballast, Solid
from meshlure.making.balance.ground import Ground

if TYPE_CHECKING:
    from scipy.spatial import cKDTree

_VOXELS: Final = 300_000
"""Voxels in the box round the body: about half a millimetre for a bait of 95 mm."""

_EXACT: Final = 2e-6
"""m. How closely distances of one place are told."""

_SPREAD: Final = 0.3e-3
"""m. How far apart the points are that stand for a skin: a rod some millimetres from it is told its distance to a
hundredth."""

_CLOSE: Final = 0.1e-3
"""m. Steps along a rod's axis."""

_SHELL: Final = 0.35e-3
"""m. Steps over a rod's surface; halfway between two points it comes nearer by a hundredth of a millimetre."""

_NEXT_SLICE: Final = 1e3
"""m. A slice of the grid counts as so far from the next that distances stay within it."""

_SURE: Final = 0.05e-3
"""m. Held back for both, so that what seems to have room has it."""


@dataclass(frozen=True, eq=False)
class Left:
    """What is left around ballast in one place.

    Attributes
    ----------
    cover : float, m
        Least distance from its room to the body's skin; nothing is left where it is 0.
    cover_at : (3,) array, m
        On the skin.
    clear : float, m
        Least distance to the other inserts and to hardware; inf where there are none.
    """

    cover: float
    cover_at: Floats
    clear: float


@dataclass(frozen=True, eq=False)
class Room:
    """The room in a body for ballast.

    Attributes
    ----------
    ground : Ground
    cover, keep_clear : float, m
        Least distance to the skin, and to other pieces and hardware.
    between : (float, float) or None, m
        From the nose.
    """

    ground: Ground
    cover: float
    keep_clear: float
    between: tuple[float, float] | None

    @cached_property
    def turn(self) -> Floats:
        """Rows nose, side, back: mesh coordinates into the grid's, (3, 3) array."""
        frame = self.ground.frame
        return np.stack([frame.nose, frame.side, frame.back])

    @cached_property
    def depths(self) -> Field:
        """Depth under the skin on a grid along nose, side and back."""
        surface = self.ground.bait.body.surface.moved(rotation=self.turn)
        return Field.of(surface, pitch_for(surface, _VOXELS))

    @cached_property
    def _skin_points(self) -> cKDTree[None]:
        return _tree([self.ground.bait.body.surface])

    @cached_property
    def _other_points(self) -> cKDTree[None] | None:
        """Points of the other pieces' skins, and the hardware's; None where there are none."""
        if not self.ground.neighbours and not len(self.ground.points):
            return None
        return _tree(self.ground.neighbours, self.ground.points)

    @cached_property
    def _apart(self) -> Floats:
        """Distance from every voxel that is inside to the nearest other piece or hardware, m; inf elsewhere."""
        depths = self.depths
        apart = np.full(depths.values.shape, np.inf)
        if self._other_points is None:
            return apart
        within = depths.places(depths.inside) @ self.turn
        far = np.asarray(self._other_points.query(within)[0])
        for field in self._other_fields:
            far[field.at(within) > 0] = 0.0
        apart[depths.inside] = far
        return apart

    def _roomy(self, radius: float) -> Bools:
        """Voxels about which a ball of a radius keeps its distances, by the grid."""
        slack = self.depths.pitch / 2
        wide = self.depths.values >= radius + self.cover - slack
        return np.asarray(wide & (self._apart >= radius + self.keep_clear - slack))

    def _discs(self, radius: float, along: int) -> Bools:
        """Voxels about which a disc of a radius, square to an axis of the grid, keeps its distances."""
        return np.asarray(self._widths(along) >= radius - self.depths.pitch / 2)

    def _widths(self, along: int) -> Floats:
        """Radius of the largest disc about every voxel that keeps its distances, m."""
        from scipy.ndimage import distance_transform_edt

        if along not in self._known_widths:
            slack, pitch = self.depths.pitch / 2, self.depths.pitch
            sure = (self.depths.values >= self.cover - slack) & (self._apart >= self.keep_clear - slack)
            sampling = np.where(np.arange(3) == along, _NEXT_SLICE, pitch)
            self._known_widths[along] = np.asarray(distance_transform_edt(sure, sampling=sampling)) - pitch / 2
        return self._known_widths[along]

    @cached_property
    def _known_widths(self) -> dict[int, Floats]:
        return {}

    def _bored(self, radius: float) -> Bools:
        """Voxels from which a hole of a radius straight down to the belly stays clear of all else."""
        blocked = self.depths.inside & (self._apart < radius + self.keep_clear - self.depths.pitch / 2)
        return np.asarray(~np.logical_or.accumulate(blocked, axis=2))

    def places(self, ballast: Ballast) -> Floats:
        """Return middles at which ballast has room by the grid, (n, 3) array, m, mesh coordinates.

        Notes
        -----
        A rod is a stack of discs, a row of balls one of balls. The grid errs by half a voxel either way.
        """
        kind, along = ballast.kind, 2 if ballast.kind.pocket == FROM_BELLY else 0
        radius = kind.diameter / 2 + kind.fit
        free = self._roomy(radius) if kind.shape == BALL else self._discs(radius, along)
        if kind.pocket == FROM_BELLY:
            free &= self._bored(radius)
        if kind.shape == BALL:
            steps = (np.arange(kind.count) - (kind.count - 1) / 2) * kind.spacing
        else:
            half = max(ballast.length / 2 + kind.fit - self.depths.pitch / 2, 0.0)
            steps = np.linspace(-half, half, 2 * int(np.ceil(half / self.depths.pitch)) + 1)
        middle = np.ones_like(free)
        for shift in np.unique(np.round(steps / self.depths.pitch).astype(np.intp)):
            middle &= _shifted(free, int(shift), along)
        places = self.depths.places(middle)
        reach = (ballast.length / 2 + kind.fit) if along == 0 else radius
        kept = self._allowed(places[:, 0], reach)
        return np.asarray(places[kept] @ self.turn)

    def _allowed(self, along: Floats, reach: float) -> Bools:
        """Whether ballast that reaches so far either way lies within the stretch that is allowed."""
        if self.between is None:
            return np.ones(len(along), dtype=np.bool_)
        behind = self.ground.tip - along
        return np.asarray((behind - reach >= self.between[0] - 1e-9) & (behind + reach <= self.between[1] + 1e-9))

    def left(self, ballast: Ballast) -> Left:
        """Return exactly what is left around ballast, to some micrometres."""
        skin = [_standoff(self.ground.skin, piece) for piece in ballast.room()]
        cover, place = min(skin, key=lambda found: found[0])
        clear = np.inf
        if self.ground.others is not None:
            clear = min(_standoff(self.ground.others, piece)[0] for piece in ballast.room())
        if len(self.ground.points):
            clear = min(clear, *(float(_to_points(piece, self.ground.points).min()) for piece in ballast.room()))
        return Left(cover, place, clear)

    def holds(self, ballast: Ballast) -> bool:
        """Tell whether ballast that lies in the body surely keeps every distance.

        Notes
        -----
        Points stand for the skins, and others for the ballast where its axis alone does not settle it: every place of a
        rod is within its radius of its axis. A twentieth of a millimetre is held back for that.
        """
        along = np.array([float(ballast.middle @ self.ground.frame.nose)])
        kind = ballast.kind
        reach = (kind.diameter if kind.pocket == FROM_BELLY else ballast.length) / 2 + kind.fit
        if not self._allowed(along, reach).all():
            return False
        pieces = ballast.room()
        if not self._within(np.concatenate([_axis(piece) for piece in pieces])):
            return False
        return self._keeps(self._skin_points, pieces, self.cover) and (
            self._other_points is None or self._keeps(self._other_points, pieces, self.keep_clear)
        )

    def _within(self, points: Floats) -> bool:
        """Whether points lie in the body and in no other piece, by the grids: distances alone do not tell the side."""
        deep = self.depths.at(points @ self.turn.T).min() > 0
        return bool(deep and all(field.at(points).max() < 0 for field in self._other_fields))

    @cached_property
    def _other_fields(self) -> tuple[Field, ...]:
        return tuple(Field.of(surface, pitch_for(surface, _VOXELS)) for surface in self.ground.neighbours)

    @staticmethod
    def _keeps(tree: cKDTree[None], pieces: Sequence[Solid], distance: float) -> bool:
        for piece in pieces:
            if _clear(tree, _axis(piece), piece.radius + distance + _SURE):
                continue
            if not isinstance(piece, Cylinder) or not _clear(tree, _shell(piece), distance + _SURE):
                return False
        return True

    def longest(self, ballast: Ballast) -> float:
        """Return the length of the longest rod of a kind that has room anywhere, m, by the grid; 0 where none has."""
        kind, along = ballast.kind, 2 if ballast.kind.pocket == FROM_BELLY else 0
        radius = kind.diameter / 2 + kind.fit
        free = self._discs(radius, along)
        if kind.pocket == FROM_BELLY:
            free &= self._bored(radius)
        elif self.between is not None:
            places = self.depths.origin[0] + self.depths.pitch * np.arange(free.shape[0])
            free &= self._allowed(places, 0.0)[:, None, None]
        run = np.zeros(np.delete(free.shape, along), dtype=np.intp)
        best = 0
        for layer in np.moveaxis(free, along, 0):
            run = np.where(layer, run + 1, 0)
            best = max(best, int(run.max()))
        return max(best * self.depths.pitch - 2 * kind.fit, 0.0)


def _shifted(free: Bools, steps: int, axis: int) -> Bools:
    """The mask read so many voxels farther along an axis; nothing beyond the border is free."""
    moved = np.zeros_like(free)
    there, here = np.moveaxis(free, axis, 0), np.moveaxis(moved, axis, 0)
    count = len(here)
    if abs(steps) < count:
        here[max(-steps, 0) : count - max(steps, 0)] = there[max(steps, 0) : count - max(-steps, 0)]
    return moved


def _standoff(boxes: Boxes, piece: Solid) -> tuple[float, Floats]:
    if isinstance(piece, Cylinder):
        found = cylinder_standoff(boxes, piece, _EXACT)
        return found.distance, found.place
    near = boxes.nearest(piece.middle[None])
    return max(float(near.distance[0]) - piece.radius, 0.0), near.place[0]


def _axis(piece: Solid) -> Floats:
    """Points along a piece's axis, (n, 3) array, m; a ball's middle."""
    if not isinstance(piece, Cylinder):
        return piece.middle[None]
    count = int(np.ceil(piece.length / _CLOSE)) + 1
    return np.asarray(piece.middle + np.linspace(-0.5, 0.5, count)[:, None] * piece.length * piece.axis)


def _shell(piece: Cylinder) -> Floats:
    """Points all over a cylinder's surface, (n, 3) array, m."""
    around = 2 * np.pi * np.arange(n := max(12, int(2 * np.pi * piece.radius / _SHELL))) / n
    circle = np.column_stack([np.cos(around), np.sin(around)]) @ piece.across
    heights = np.linspace(-0.5, 0.5, max(2, int(piece.length / _SHELL) + 1)) * piece.length
    side = (heights[:, None, None] * piece.axis + piece.radius * circle).reshape(-1, 3)
    rings = np.linspace(0.0, piece.radius, max(2, int(piece.radius / _SHELL)))[:-1]
    ends = (rings[:, None, None] * circle).reshape(-1, 3)
    half = piece.length / 2 * piece.axis
    return np.asarray(piece.middle + np.concatenate([side, ends + half, ends - half]))


def _clear(tree: cKDTree[None], points: Floats, distance: float) -> bool:
    """Whether no point of a tree is nearer than a distance, m."""
    return bool(np.isinf(np.asarray(tree.query(points, distance_upper_bound=distance)[0])).all())


def _tree(surfaces: Sequence[Surface], further: Floats | None = None) -> cKDTree[None]:
    """Points spread over surfaces, one in a cell, and further ones."""
    from scipy.spatial import cKDTree

    points = np.concatenate([np.zeros((0, 3)), *(spread(surface, _SPREAD) for surface in surfaces)])
    cells = np.floor(points / _SPREAD).astype(np.int64)
    cells -= cells.min(axis=0, initial=0)
    span = cells.max(axis=0, initial=0) + 1
    one = np.unique((cells[:, 0] * span[1] + cells[:, 1]) * span[2] + cells[:, 2], return_index=True)[1]
    points = points[one]
    return cKDTree(points if further is None else np.concatenate([points, further]))


def _to_points(piece: Solid, points: Floats) -> Floats:
    """Distance from a piece to points outside it, (n,) array, m; 0 inside."""
    apart = points - piece.middle
    if not isinstance(piece, Cylinder):
        return np.asarray(np.maximum(np.linalg.norm(apart, axis=1) - piece.radius, 0.0))
    along = apart @ piece.axis
    out = np.linalg.norm(apart - along[:, None] * piece.axis, axis=1) - piece.radius
    return np.asarray(np.hypot(np.maximum(out, 0.0), np.maximum(np.abs(along) - piece.length / 2, 0.0)))
