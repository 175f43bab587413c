"""Where in a body ballast has room: quickly on a grid of depths, and exactly for one place."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Final

import numpy as np

from meshlure.files.sections.ballast import BallastSection
from meshlure.geometry.clearance import Boxes
from meshlure.geometry.containment import inside
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.field import Field, pitch_for
from meshlure.geometry.samples import spread
from meshlure.geometry.standoff import TOLERANCE, clears, solid_standoff
from meshlure.geometry.surface import Bools, Floats
from meshlure.making.balance.ballast import BALL, FROM_BELLY, Ballast, Solid
from meshlure.making.balance.ground import Ground

_VOXELS: Final = 300_000
"""Voxels in the box round the body: about half a millimetre for a bait of 95 mm."""

_NEXT_SLICE: Final = 1e3
"""m. A slice of the grid counts as so far from the next that distances stay within it."""

_FAR: Final = 1.0
"""m. Stands for the distance to what is not there."""


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
        Least distance from its room, or the hole to it, to the other inserts and to hardware; inf where there are none.
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

    @classmethod
    def of(cls, ground: Ground, stated: BallastSection) -> Room:
        """Return the room that a [ballast] leaves."""
        return cls(ground, stated.cover, stated.keep_clear, stated.between)

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
    def _apart(self) -> Floats:
        """Distance from every voxel to the nearest other piece or hardware, m, by the grid."""
        from scipy.ndimage import distance_transform_edt

        field = self.depths
        taken = np.zeros(field.values.shape, dtype=np.bool_)
        within = np.argwhere(field.inside)
        middles = field.origin + field.pitch * within
        clouds = [self.ground.points @ self.turn.T]
        for piece in self.ground.neighbours:
            surface = piece.moved(rotation=self.turn)
            clouds.append(spread(surface, field.pitch))
            held = Field.of(surface, field.pitch).at(middles) > 0
            taken[tuple(within[held].T)] = True
        cells = np.rint((np.concatenate(clouds) - field.origin) / field.pitch).astype(np.intp)
        taken[tuple(cells[((cells >= 0) & (cells < taken.shape)).all(axis=1)].T)] = True
        if not taken.any():
            return np.full(taken.shape, _FAR)
        return np.asarray(distance_transform_edt(~taken, sampling=field.pitch))

    def _balls(self, radius: float, slack: float) -> Bools:
        """Voxels about which a ball of a radius keeps its distances."""
        wide = self.depths.values >= radius + self.cover - slack
        return np.asarray(wide & (self._apart >= radius + self.keep_clear - slack))

    def _discs(self, radius: float, along: int, slack: float) -> Bools:
        """Voxels about which a disc of a radius, square to an axis of the grid, keeps its distances."""
        return np.asarray(self._widths(along, slack) >= radius - slack)

    def _widths(self, along: int, slack: float) -> Floats:
        """Radius of the largest disc about every voxel that keeps its distances, m."""
        from scipy.ndimage import distance_transform_edt

        known = self._known_widths
        if (along, slack) not in known:
            pitch = self.depths.pitch
            free = (self.depths.values >= self.cover - slack) & (self._apart >= self.keep_clear - slack)
            sampling = np.where(np.arange(3) == along, _NEXT_SLICE, pitch)
            known[along, slack] = np.asarray(distance_transform_edt(free, sampling=sampling)) - pitch / 2
        return known[along, slack]

    @cached_property
    def _known_widths(self) -> dict[tuple[int, float], Floats]:
        return {}

    def _bored(self, radius: float, slack: float) -> Bools:
        """Voxels from which a hole of a radius straight down to the belly stays clear of all else."""
        blocked = self.depths.inside & (self._apart < radius + self.keep_clear - slack)
        return np.asarray(~np.logical_or.accumulate(blocked, axis=2))

    def _free(self, ballast: Ballast, slack: float) -> tuple[Bools, int]:
        """Voxels that a part of the ballast may lie about, and the axis of the grid along which it is stacked."""
        kind = ballast.kind
        along, radius = (2 if kind.pocket == FROM_BELLY else 0), kind.diameter / 2 + kind.fit
        free = self._balls(radius, slack) if kind.shape == BALL else self._discs(radius, along, slack)
        return (free & self._bored(radius, slack) if kind.pocket == FROM_BELLY else free), along

    def places(self, ballast: Ballast, sure: bool = False) -> Floats:
        """Return middles at which ballast has room by the grid, (n, 3) array, m, mesh coordinates.

        Parameters
        ----------
        ballast : Ballast
        sure : bool
            The grid errs by about a voxel either way: whether what it cannot tell counts as no room.

        Notes
        -----
        A rod is a stack of discs, a row of balls one of balls.
        """
        kind, pitch = ballast.kind, self.depths.pitch
        slack = (-0.5 if sure else 0.5) * pitch
        free, along = self._free(ballast, slack)
        if kind.shape == BALL:
            steps = (np.arange(kind.count) - (kind.count - 1) / 2) * kind.spacing
            middle = np.logical_and.reduce([_shifted(free, int(np.rint(step / pitch)), along) for step in steps])
        else:
            middle = _runs(free, int(np.rint(max(ballast.length / 2 + kind.fit - slack, 0.0) / pitch)), along)
        places = self.depths.places(middle)
        return np.asarray(places[self._allowed(places[:, 0], _reach(ballast))] @ self.turn)

    def _allowed(self, along: Floats, reach: float) -> Bools:
        """Whether ballast that reaches so far either way lies within the stretch that is allowed."""
        if self.between is None:
            return np.ones(len(along), dtype=np.bool_)
        behind = self.ground.tip - along
        return np.asarray((behind - reach >= self.between[0] - 1e-9) & (behind + reach <= self.between[1] + 1e-9))

    def left(self, ballast: Ballast) -> Left:
        """Return what is left around ballast that lies in the body, to some micrometres."""
        cover, place = min((_standoff(self.ground.skin, piece) for piece in ballast.room()), key=lambda found: found[0])
        clear = np.inf
        for piece in self._ways(ballast):
            if self.ground.others is not None:
                clear = min(clear, _standoff(self.ground.others, piece)[0])
            clear = min(clear, float(_to_points(piece, self.ground.points).min(initial=np.inf)))
        return Left(cover, place, clear)

    def holds(self, ballast: Ballast) -> bool:
        """Tell whether ballast in its place lies in the body, in no other piece, and keeps every distance."""
        along = np.array([float(ballast.middle @ self.ground.frame.nose)])
        if not self._allowed(along, _reach(ballast)).all():
            return False
        pieces = ballast.room()
        middles = np.stack([piece.middle for piece in pieces])
        if not inside(self.ground.skin, middles).all():
            return False
        if not all(_clears(self.ground.skin, piece, self.cover) for piece in pieces):
            return False
        others, ways = self.ground.others, self._ways(ballast)
        if any((_to_points(piece, self.ground.points) < self.keep_clear).any() for piece in ways):
            return False
        return others is None or (
            not inside(others, middles).any() and all(_clears(others, piece, self.keep_clear) for piece in ways)
        )

    def _ways(self, ballast: Ballast) -> tuple[Solid, ...]:
        """What must keep clear of other pieces: the room, and the hole to it."""
        hole = ballast.drill(self.ground.lowest)
        return ballast.room() if hole is None else (*ballast.room(), hole)

    def longest(self, ballast: Ballast, sure: bool = False) -> float:
        """Return the length of the longest rod of a kind that has room anywhere, m, by the grid; 0 where none has.

        What is sure is as in `places`.
        """
        kind, slack = ballast.kind, (-0.5 if sure else 0.5) * self.depths.pitch
        free, along = self._free(ballast, slack)
        if self.between is not None:
            places = self.depths.origin[0] + self.depths.pitch * np.arange(free.shape[0])
            free &= self._allowed(places, 0.0 if along == 0 else kind.diameter / 2 + kind.fit)[:, None, None]
        run = np.zeros(np.delete(free.shape, along), dtype=np.intp)
        best = 0
        for layer in np.moveaxis(free, along, 0):
            run = np.where(layer, run + 1, 0)
            best = max(best, int(run.max()))
        return max((best - 1) * self.depths.pitch + 2 * slack - 2 * kind.fit, 0.0)


def _reach(ballast: Ballast) -> float:
    """How far ballast with its gap reaches either way along the nose, m."""
    kind = ballast.kind
    return (kind.diameter if kind.pocket == FROM_BELLY else ballast.length) / 2 + kind.fit


def _shifted(free: Bools, steps: int, axis: int) -> Bools:
    """The mask read so many voxels farther along an axis; nothing beyond the border is free."""
    moved = np.zeros_like(free)
    there, here = np.moveaxis(free, axis, 0), np.moveaxis(moved, axis, 0)
    count = len(here)
    if abs(steps) < count:
        here[max(-steps, 0) : count - max(steps, 0)] = there[max(steps, 0) : count - max(-steps, 0)]
    return moved


def _runs(free: Bools, reach: int, axis: int) -> Bools:
    """Voxels that are free with as many on either side along an axis."""
    whole = np.zeros_like(free)
    there, here = np.moveaxis(free, axis, 0), np.moveaxis(whole, axis, 0)
    wide = 2 * reach + 1
    if wide <= len(there):
        held = np.concatenate(
            [np.zeros((1, *there.shape[1:]), dtype=np.int32), np.cumsum(there, axis=0, dtype=np.int32)]
        )
        here[reach : len(here) - reach] = held[wide:] - held[:-wide] == wide
    return whole


def _standoff(boxes: Boxes, piece: Solid) -> tuple[float, Floats]:
    """Distance from a piece to a mesh, m, and its place there."""
    if isinstance(piece, Cylinder):
        found = solid_standoff(boxes, piece)
        return found.distance, found.place
    near = boxes.nearest(piece.middle[None])
    return max(float(near.distance[0]) - piece.radius, 0.0), near.place[0]


def _clears(boxes: Boxes, piece: Solid, distance: float) -> bool:
    """Whether a mesh comes no nearer to a piece than a distance, m."""
    if isinstance(piece, Cylinder):
        return clears(boxes, piece, distance)
    return bool(boxes.nearest(piece.middle[None]).distance[0] >= piece.radius + distance - TOLERANCE)


def _to_points(piece: Solid, points: Floats) -> Floats:
    """Distance from a piece to points outside it, (n,) array, m; 0 inside."""
    apart = points - piece.middle
    if not isinstance(piece, Cylinder):
        return np.asarray(np.maximum(np.linalg.norm(apart, axis=1) - piece.radius, 0.0))
    along = apart @ piece.axis
    out = np.linalg.norm(apart - along[:, None] * piece.axis, axis=1) - piece.radius
    return np.asarray(np.hypot(np.maximum(out, 0.0), np.maximum(np.abs(along) - piece.length / 2, 0.0)))
