"""How every insert and hollow of a bait meets its mould: in a seat of the rubber, in a slot, embedded, or later."""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum
from typing import Final

from meshlure.bait.meshpiece import solid_of
from meshlure.bait.pieces import Bait, MeshPiece, Role
from meshlure.bait.relations import Relation, relation
from meshlure.files.sections.inserts import InsertSection
from meshlure.geometry.offset import grown
from meshlure.geometry.solids import Solid
from meshlure.making.mould.bench import Bench

CLEARANCE: Final = 0.1e-3
"""m between a seat and the real piece in it, where the bait file says no fit: common practice, no source."""

_OUTSIDE: Final = 0.99
"""Share of a piece outside the body from which it lies in an open pocket or on the skin, and is put in later."""

_ROUNDING: Final = 1e-6
"""Share of a piece's volume that counts as nothing."""


class Holding(StrEnum):
    """What a mould does with a piece."""

    SEAT = "seat"
    """It reaches out of the body and lies in the rubber while the resin is poured."""
    SLOT = "slot"
    """It is glued in after casting: the mould forms its pocket."""
    PINNED = "pinned"
    """It lies inside, and pins in the rubber hold it."""
    EMBEDDED = "embedded"
    """It lies inside and is held by whoever pours, or by another piece."""
    LATER = "later"
    """It lies in an open pocket that the body is drawn with, or on the skin."""
    OPEN = "open"
    """A hollow that reaches the outside: the mould forms it."""
    HOLLOW = "hollow"
    """A closed hollow, which no pour can form."""


@dataclass(frozen=True, eq=False)
class Fitting:
    """One insert or hollow and its part in the mould.

    Attributes
    ----------
    piece : MeshPiece
    holding : Holding
    clearance : float, m
        Around a real piece in its seat; of a slot, its fit.
    shape : Solid
        On the bench: of a seat the seat, clearance and all; of a slot or an open hollow what is cut; of everything else
        the piece, scaled as the resin around it.
    drawn : Solid
        The piece itself, scaled as the resin around it.
    """

    piece: MeshPiece
    holding: Holding
    clearance: float
    shape: Solid
    drawn: Solid

    @property
    def makes(self) -> bool:
        """Whether it shows on the plug: as a seat, a slot or an open hollow."""
        return self.holding in {Holding.SEAT, Holding.SLOT, Holding.OPEN}


def fittings(bait: Bait, bench: Bench, body: Solid) -> list[Fitting]:
    """Return every insert and void of a bait as it meets the mould.

    Parameters
    ----------
    bait : Bait
    bench : Bench
    body : Solid
        On the bench, without regard to inserts.

    Notes
    -----
    What crosses the body's skin is cast in and has a seat, unless it is a lip or glued in: that gets a slot, or a seat
    where the bait file says ``pinned``.
    """
    stated = {insert.name: insert for insert in bait.plan.inserts}
    return [_fitting(piece, stated[piece.name], bait, bench, body) for piece in bait.pieces]


def _fitting(piece: MeshPiece, stated: InsertSection, bait: Bait, bench: Bench, body: Solid) -> Fitting:
    drawn = solid_of(bench.part(piece.surface), piece.name)
    holding = _holding(piece, stated, bait, drawn, body)
    if holding is Holding.SEAT:
        clearance = piece.fit or CLEARANCE
        seat = solid_of(grown(bench.seat(piece.surface), clearance), piece.name)
        return Fitting(piece, holding, clearance, seat, drawn)
    if holding is Holding.SLOT:
        return Fitting(
            piece, holding, piece.fit, solid_of(bench.part(grown(piece.surface, piece.fit)), piece.name), drawn
        )
    return Fitting(piece, holding, CLEARANCE if holding is Holding.PINNED else 0.0, drawn, drawn)


def _holding(piece: MeshPiece, stated: InsertSection, bait: Bait, drawn: Solid, body: Solid) -> Holding:
    lies = {relation(shell, bait.body.shells) for shell in piece.shells}
    out = 0.0
    if lies != {Relation.INSIDE}:
        beyond = drawn.less(body).volume
        out = 0.0 if beyond <= _ROUNDING * drawn.volume else beyond / drawn.volume
    if piece.role is Role.VOID:
        return Holding.OPEN if out else Holding.HOLLOW
    if not out:
        return Holding.PINNED if stated.pinned else Holding.EMBEDDED
    if out >= _OUTSIDE:
        return Holding.LATER
    glued = piece.lip or stated.glue is not None
    return Holding.SLOT if glued and not stated.pinned else Holding.SEAT
