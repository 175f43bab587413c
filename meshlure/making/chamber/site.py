"""The bait as a bore finds it: its skin, what lies in the way, and how it floats and flies without a chamber."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from meshlure.bait.composition import Composition, compose
from meshlure.bait.pieces import Bait, Role
from meshlure.bait.refusals import refuse
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.clearance import Boxes
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.samples import spread
from meshlure.geometry.stations import stations
from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.making.chamber.axes import Axes
from meshlure.physics.passage import Passage, passage
from meshlure.physics.repose import Vessel

_ON_AXIS = 0.05e-3
"""m. A body whose middle is this near to the drawing's own plane is drawn about that plane."""

_SPACING = 0.6e-3
"""m between points that stand for the skin in the search: distances come out right to about 0.03 mm."""

_MOST_POINTS = 30_000
"""About as many: larger bodies are looked at less finely."""


@dataclass(frozen=True, eq=False)
class Way:
    """What a bore must keep clear of.

    Attributes
    ----------
    points : (n, 3) array, m
        In the bore's axes, close together on every piece.
    of : (n,) array
        Number of the piece that each stands on.
    names : tuple of str
        Of the pieces.
    inner : tuple of Surface
        The same pieces as skins, in the bore's axes.
    """

    points: Floats
    of: Ints
    names: tuple[str, ...]
    inner: tuple[Surface, ...]


@dataclass(frozen=True, eq=False)
class Faces:
    """Faces by the balls round them.

    Attributes
    ----------
    corners : (n, 3, 3) array, m
    middle, radius : (n, 3) and (n,) arrays, m
    """

    corners: Floats
    middle: Floats
    radius: Floats

    @classmethod
    def of(cls, surfaces: Sequence[Surface]) -> Faces:
        """Return the faces of some surfaces."""
        corners = np.concatenate([np.zeros((0, 3, 3)), *(surface.corners for surface in surfaces)])
        middle = corners.mean(axis=1)
        return cls(corners, middle, np.sqrt(((corners - middle[:, None]) ** 2).sum(axis=2).max(axis=1, initial=0.0)))

    def points(self, start: Floats, end: Floats, radius: float, reach: float, spacing: float) -> Floats:
        """Return points on the faces near a stretch of a bore, (n, 3) array, m.

        Parameters
        ----------
        start, end : (3,) arrays, m
            Centres of its discs, tail first; the same twice for one disc.
        radius, reach : float, m
            Its own, and the distance from it within which points are wanted.
        spacing : float, m
            No place of the faces within reach is farther than this from a point.
        """
        corners = self.corners[_off(self.middle, start, end, radius) <= self.radius + reach]
        found = [corners.reshape(-1, 3)]
        while len(corners):
            sides = np.linalg.norm(np.roll(corners, -1, axis=1) - corners, axis=2)
            longest = sides.argmax(axis=1)
            row = np.arange(len(corners))
            first, second, other = (corners[row, (longest + step) % 3] for step in range(3))
            middle = (first + second) / 2
            # A face's longest side is wider than any way in it: beyond that from the disc none of it is near.
            wide = sides.max(axis=1)
            kept = (wide > spacing) & (_off(middle, start, end, radius) <= reach + wide)
            found.append(middle[kept])
            first, second, other, middle = first[kept], second[kept], other[kept], middle[kept]
            corners = np.concatenate(
                [np.stack([first, middle, other], axis=1), np.stack([middle, second, other], axis=1)]
            )
        points = np.concatenate(found)
        return np.asarray(points[_off(points, start, end, radius) <= reach])


def _off(points: Floats, start: Floats, end: Floats, radius: float) -> Floats:
    """Distances of points from a stretch of a bore, 0 within."""
    beyond = np.maximum(np.maximum(start[0] - points[:, 0], points[:, 0] - end[0]), 0.0)
    beside = np.maximum(np.hypot(points[:, 1] - start[1], points[:, 2] - start[2]) - radius, 0.0)
    return np.asarray(np.hypot(beyond, beside))


@dataclass(frozen=True, eq=False)
class Site:
    """A bait without the chamber that is to be replaced.

    Attributes
    ----------
    bait : Bait
        Without free voids and the balls in them.
    replaced : tuple of str
        Names of those voids.
    composition : Composition
    vessel : Vessel
    axes : Axes
    """

    bait: Bait
    replaced: tuple[str, ...]
    composition: Composition
    vessel: Vessel
    axes: Axes

    @classmethod
    def of(cls, bait: Bait, slope: float) -> Site:
        """Return the site of a bait for bores of a slope, rad.

        Raises
        ------
        InputError
            Where what stays leaves a mass or a volume undefined.
        """
        plan = bait.plan
        free = {insert.name for insert in plan.inserts if insert.free}
        gone = tuple(piece.name for piece in bait.pieces if piece.role is Role.VOID and piece.name in free)
        left = without(bait, gone)
        composition = compose(left)
        pieces = zip((left.body, *left.pieces), left.files, strict=True)
        refuse(composition.findings, {piece.name: str(file.path) for piece, file in pieces})
        index = BlockIndex.build(composition.skin.surface, composition.skin.thickness)
        vessel = Vessel(composition, index, left.hardware, left.frame, left.water.density)
        middle = solid_moments(left.body.surface).centre
        aside = float(middle @ left.frame.side)
        if abs(aside) < _ON_AXIS:
            middle = middle - aside * left.frame.side
        return cls(left, gone, composition, vessel, Axes.of(left.frame, slope, middle))

    @cached_property
    def skin(self) -> Surface:
        """The body's skin in the bore's axes."""
        return self.axes.laid(self.bait.body.surface)

    @cached_property
    def boxes(self) -> Boxes:
        """The body's skin, to be asked for exact distances, mesh coordinates."""
        return Boxes.of(self.bait.body.surface)

    @cached_property
    def others(self) -> tuple[tuple[str, Boxes], ...]:
        """Everything else in the body by name, to be asked for exact distances, mesh coordinates."""
        return tuple((name, Boxes.of(surface)) for name, surface in self._inner)

    @cached_property
    def spacing(self) -> float:
        """Distance between the points that stand for the skin, m."""
        return max(_SPACING, float(np.sqrt(2 * self.skin.area / _MOST_POINTS)))

    @cached_property
    def points(self) -> Floats:
        """Points that stand for the skin, (n, 3) array, m, in the bore's axes."""
        return _thinned(spread(self.skin, self.spacing), self.spacing / 2)

    @cached_property
    def skin_faces(self) -> Faces:
        """The skin's faces, to be looked at more closely."""
        return Faces.of((self.skin,))

    @cached_property
    def other_faces(self) -> Faces:
        """The faces of everything else."""
        return Faces.of(self.way.inner)

    @cached_property
    def way(self) -> Way:
        """Everything else in the body, in the bore's axes."""
        inner = tuple(self.axes.laid(surface) for _, surface in self._inner)
        clouds = [_thinned(spread(surface, self.spacing), self.spacing / 2) for surface in inner]
        clouds += [self.axes.local(item.at[None]) for item in self.bait.hardware]
        names = [name for name, _ in self._inner] + [f"'{item.name}'" for item in self.bait.hardware]
        of = np.repeat(np.arange(len(clouds)), [len(cloud) for cloud in clouds])
        return Way(np.concatenate([np.zeros((0, 3)), *clouds]), of, tuple(names), inner)

    @property
    def _inner(self) -> list[tuple[str, Surface]]:
        """What takes room in the body already."""
        named = [(f"'{piece.name}'", piece.surface) for piece in self.bait.pieces]
        owners = (self.bait.body, *self.bait.pieces)
        return named + [(f"a cavity of '{owner.name}'", cavity) for owner in owners for cavity in owner.cavities]

    @cached_property
    def passage(self) -> Passage:
        """What the drag needs: a chamber inside changes nothing of it."""
        skin, frame = self.composition.skin, self.bait.frame
        index = self.vessel.index if skin.outer is skin.surface else BlockIndex.build(skin.outer)
        cuts = stations(index, frame.nose, (frame.side, frame.back))
        return passage(skin, self.bait.hardware, frame, cuts, index)

    def emptied(self) -> Site:
        """Return the same site with nothing in a bore's way but the skin."""
        body = replace(self.bait.body, cavities=())
        return replace(self, bait=replace(self.bait, body=body, pieces=(), hardware=(), files=self.bait.files[:1]))

    @property
    def body_density(self) -> float:
        """Of the body's material, kg/m3."""
        assert self.bait.body.substance is not None
        return self.bait.body.substance.density


def _thinned(points: Floats, cell: float) -> Floats:
    """One of the points in each cell of a grid."""
    cells = np.floor(points / cell).astype(np.int64)
    cells -= cells.min(axis=0)
    wide = cells.max(axis=0) + 1
    # One number a cell: rows are sorted far more slowly.
    which = np.unique((cells[:, 0] * wide[1] + cells[:, 1]) * wide[2] + cells[:, 2], return_index=True)[1]
    return np.asarray(points[np.sort(which)])


def without(bait: Bait, gone: tuple[str, ...]) -> Bait:
    """Return a bait without some inserts and the balls in them."""
    if not gone:
        return bait
    stays = tuple(
        replace(piece, replaces=tuple(name for name in piece.replaces if name not in gone))
        for piece in bait.pieces
        if piece.name not in gone
    )
    kept = (True, *(piece.name not in gone for piece in bait.pieces))
    return replace(
        bait,
        pieces=stays,
        balls=tuple(row for row in bait.balls if row.chamber not in gone),
        files=tuple(file for file, stay in zip(bait.files, kept, strict=True) if stay),
    )
