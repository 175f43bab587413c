"""The bait as it stands before ballast is placed: what stays, what it displaces, and where there is room."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from meshlure.bait.composition import Composition, compose
from meshlure.bait.pieces import Bait, Frame, MeshPiece, Role
from meshlure.bait.refusals import refuse
from meshlure.errors import Fault, InputError
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.clearance import Boxes
from meshlure.geometry.moments import Moments
from meshlure.geometry.offset import grown
from meshlure.geometry.surface import Floats, Surface
from meshlure.making.altered import altered, lifted
from meshlure.making.balance.ballast import Ballast
from meshlure.physics.repose import Ends, Vessel

_BEYOND = 1e-3
"""m. How far below the body a hole from the belly begins."""

_PRINTED = Fault(
    what="nothing can be placed in printed walls with infill: what a pocket takes from them is unknown",
    where="body.printed",
    allowed="density or material",
    next_step="weigh the print, state its density, and print a wall round the pocket as thick as its cover",
)


@dataclass(frozen=True, eq=False)
class Ground:
    """A bait without what may move.

    Attributes
    ----------
    bait : Bait
        Without the inserts that are free.
    freed : tuple of MeshPiece
        Those.
    vessel : Vessel
        The bait without them.
    stated : Vessel
        The bait as its file has it.
    """

    bait: Bait
    freed: tuple[MeshPiece, ...]
    vessel: Vessel
    stated: Vessel

    @classmethod
    def of(cls, bait: Bait, keep: bool = False) -> Ground:
        """Return the ground of a bait; with ``keep``, what is free stays too.

        Raises
        ------
        InputError
            Where what stays leaves a mass or a volume undefined, or the body has no one density.
        """
        if bait.plan.body.printed is not None:
            raise InputError(_PRINTED)
        stated = _vessel(bait, _composed(bait))
        free = {insert.name for insert in bait.plan.inserts if insert.free and not keep}
        freed = tuple(piece for piece in bait.pieces if piece.name in free and piece.role is Role.INSERT)
        if not freed:
            return cls(bait, (), stated, stated)
        gone = frozenset(piece.name for piece in freed)
        left = _without(bait, gone)
        lighter = lifted(bait, stated.composition, gone)
        vessel = _vessel(left, _composed(left)) if lighter is None else replace(stated, composition=lighter)
        return cls(left, freed, vessel, stated)

    @property
    def frame(self) -> Frame:
        """The bait's directions."""
        return self.bait.frame

    @property
    def composition(self) -> Composition:
        """The bait without what is free, put together."""
        return self.vessel.composition

    @property
    def body_density(self) -> float:
        """Of the body's material, kg/m3."""
        assert self.bait.body.substance is not None
        return self.bait.body.substance.density

    @cached_property
    def tip(self) -> float:
        """Of the nose along the nose direction, m."""
        return float((self.bait.body.surface.vertices @ self.frame.nose).max())

    @cached_property
    def length(self) -> float:
        """Of the body, nose to tail, m."""
        return float(np.ptp(self.bait.body.surface.vertices @ self.frame.nose))

    @cached_property
    def lowest(self) -> float:
        """A height along the back that lies surely below the body, m."""
        return float((self.bait.body.surface.vertices @ self.frame.back).min()) - _BEYOND

    @cached_property
    def skin(self) -> Boxes:
        """The body's own skin, to be asked for distances."""
        return Boxes.of(self.bait.body.surface)

    @cached_property
    def neighbours(self) -> tuple[Surface, ...]:
        """Skins of all that takes room in the body already: inserts with their gaps, voids, cavities."""
        pockets = (grown(piece.surface, piece.fit) for piece in self.bait.pieces)
        return (*pockets, *self.bait.body.cavities)

    @cached_property
    def points(self) -> Floats:
        """Places of the hardware, (n, 3) array, m."""
        return np.array([item.at for item in self.bait.hardware]).reshape(-1, 3)

    @cached_property
    def others(self) -> Boxes | None:
        """The neighbours' skins, to be asked for distances; None where there are none."""
        if not self.neighbours:
            return None
        return Boxes.of(together(self.neighbours))

    def ends(self, up: Floats) -> Ends:
        """Return where the balls lie in a posture: at the lower end, unless the bait file holds them."""
        return {
            row.balls.chamber: row.balls.at or ("tail" if float(row.axis @ up) > 0 else "nose")
            for row in self.composition.rows
        }

    def mass(self, ends: Ends) -> Moments:
        """Return the mass of what stays, kg."""
        return self.composition.mass(ends)

    def with_ballast(self, ballast: Ballast) -> Vessel:
        """Return the bait with ballast in its body, ready to be put into water."""
        return replace(self.vessel, composition=altered(self.composition, ballast.taken(), ballast.parts()))

    def from_nose(self, place: Floats) -> float:
        """Return how far behind the nose tip a place is, m."""
        return self.tip - float(place @ self.frame.nose)


def together(surfaces: Sequence[Surface]) -> Surface:
    """Return several surfaces as one, which may overlap."""
    starts = np.cumsum([0, *(len(surface.vertices) for surface in surfaces)])
    faces = [surface.faces + start for surface, start in zip(surfaces, starts, strict=False)]
    return Surface(np.concatenate([surface.vertices for surface in surfaces]), np.concatenate(faces))


def _composed(bait: Bait) -> Composition:
    composition = compose(bait)
    pieces = zip((bait.body, *bait.pieces), bait.files, strict=True)
    refuse(composition.findings, {piece.name: str(file.path) for piece, file in pieces})
    return composition


def _vessel(bait: Bait, composition: Composition) -> Vessel:
    index = BlockIndex.build(composition.skin.surface, composition.skin.thickness)
    return Vessel(composition, index, bait.hardware, bait.frame, bait.water.density)


def _without(bait: Bait, gone: frozenset[str]) -> Bait:
    stays = tuple(
        replace(piece, replaces=tuple(name for name in piece.replaces if name not in gone))
        for piece in bait.pieces
        if piece.name not in gone
    )
    kept = (True, *(piece.name not in gone for piece in bait.pieces))
    return replace(bait, pieces=stays, files=tuple(file for file, stay in zip(bait.files, kept, strict=True) if stay))
