"""The bait as it stands before ballast is placed: what stays, what it displaces, and where there is room."""

from __future__ import annotations

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
from meshlure.geometry.surface import Floats, Surface
from meshlure.making.altered import altered
from meshlure.making.balance.ballast import Ballast
from meshlure.physics.repose import Ends, Vessel


@dataclass(frozen=True, eq=False)
class Ground:
    """A bait without what may move.

    Attributes
    ----------
    bait : Bait
        Without the inserts that are free.
    bait_as_stated : Bait
        With them.
    freed : tuple of MeshPiece
        Those.
    composition : Composition
    vessel : Vessel
    tip : float, m
        Of the nose along the nose direction.
    """

    bait: Bait
    bait_as_stated: Bait
    freed: tuple[MeshPiece, ...]
    composition: Composition
    vessel: Vessel
    tip: float

    @classmethod
    def of(cls, bait: Bait, keep: bool = False) -> Ground:
        """Return the ground of a bait; with ``keep``, what is free stays too.

        Raises
        ------
        InputError
            Where what stays leaves a mass or a volume undefined, or the body has no one density.
        """
        if bait.plan.body.printed is not None:
            raise InputError(
                Fault(
                    what="nothing can be placed in printed walls with infill: what a pocket takes from them is unknown",
                    where="body.printed",
                    allowed="density or material",
                    next_step="weigh the print, state its density, and print a wall round the pocket as thick as its"
                    " cover",
                )
            )
        free = set() if keep else {insert.name for insert in bait.plan.inserts if insert.free}
        freed = tuple(piece for piece in bait.pieces if piece.name in free and piece.role is Role.INSERT)
        gone = {piece.name for piece in freed}
        stays = tuple(
            replace(piece, replaces=tuple(name for name in piece.replaces if name not in gone))
            for piece in bait.pieces
            if piece.name not in gone
        )
        files = tuple(
            file
            for piece, file in zip((bait.body, *bait.pieces), bait.files, strict=True)
            if piece.name not in gone or piece is bait.body
        )
        left = replace(bait, pieces=stays, files=files)
        composition = compose(left)
        refuse(
            composition.findings,
            {piece.name: str(file.path) for piece, file in zip((left.body, *stays), files, strict=True)},
        )
        index = BlockIndex.build(composition.skin.surface, composition.skin.thickness)
        vessel = Vessel(composition, index, bait.hardware, bait.frame, bait.water.density)
        tip = float((bait.body.surface.vertices @ bait.frame.nose).max())
        return cls(left, bait, freed, composition, vessel, tip)

    @property
    def frame(self) -> Frame:
        """The bait's directions."""
        return self.bait.frame

    @property
    def body_density(self) -> float:
        """Of the body's material, kg/m3."""
        assert self.bait.body.substance is not None
        return self.bait.body.substance.density

    @cached_property
    def skin(self) -> Boxes:
        """The body's own skin, to be asked for distances."""
        return Boxes.of(self.bait.body.surface)

    @cached_property
    def neighbours(self) -> tuple[Surface, ...]:
        """Skins of all that lies in the body already: inserts, voids, cavities."""
        hollows = self.bait.body.cavities
        return (*(piece.surface for piece in self.bait.pieces), *hollows)

    @cached_property
    def points(self) -> Floats:
        """Places of the hardware, (n, 3) array, m."""
        return np.array([item.at for item in self.bait.hardware]).reshape(-1, 3)

    @cached_property
    def others(self) -> Boxes | None:
        """The neighbours' skins, to be asked for distances; None where there are none."""
        if not self.neighbours:
            return None
        starts = np.cumsum([0, *(len(surface.vertices) for surface in self.neighbours)])
        faces = [surface.faces + start for surface, start in zip(self.neighbours, starts, strict=False)]
        return Boxes.of(
            Surface(np.concatenate([surface.vertices for surface in self.neighbours]), np.concatenate(faces))
        )

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
