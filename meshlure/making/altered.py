"""A bait with something put into its body or taken out of it, weighed by sums alone: what displaces stays as it was."""

from __future__ import annotations

from collections.abc import Collection, Sequence
from dataclasses import replace

import numpy as np

from meshlure.bait.chambers import BallRow
from meshlure.bait.composition import Composition, Part
from meshlure.bait.pieces import Bait, MeshPiece, Role
from meshlure.bait.relations import Relation, relation
from meshlure.geometry.moments import NOTHING, Moments, solid_moments

_WHOLE = 1e-9
"""Share of an insert's volume that rounding may cost: with less left to it, it shares its room."""


def altered(
    composition: Composition, taken: Moments, parts: Sequence[Part] = (), rows: Sequence[BallRow] = ()
) -> Composition:
    """Return a composition in which things lie wholly inside the body's own material.

    Parameters
    ----------
    composition : Composition
        Whose body has one density throughout.
    taken : Moments, m3
        Of the body's material that makes room.
    parts : sequence of Part
        What lies there instead; sealed air needs none.
    rows : sequence of BallRow
        Balls that run there.

    Notes
    -----
    Exact where all of ``taken`` is body material: mass and first and second moments are sums. The skin, the facets'
    deficit and the findings are those of the bait as it was.
    """
    body, *others = composition.parts
    assert body.role is Role.BODY
    assert body.substance is not None
    volume = body.volume - taken.amount
    mass = body.mass - taken * body.substance.density
    left = replace(body, volume=volume, mass=mass, centre=mass.centre)
    return replace(composition, parts=(left, *others, *parts), rows=(*composition.rows, *rows))


def lifted(bait: Bait, composition: Composition, names: Collection[str]) -> Composition | None:
    """Return a bait's composition without some of its inserts, body in their place; None where no sums tell it.

    Parameters
    ----------
    bait : Bait
    composition : Composition
        Of the bait with them.
    names : collection of str

    Notes
    -----
    Exact where each lies wholly in the body's own material, whole, with no gap, and nothing in it or in its place: the
    skin is then the same without them. Everything else has to be put together anew.
    """
    gone = [piece for piece in bait.pieces if piece.name in names]
    parts = {part.name: part for part in composition.parts if part.role is Role.INSERT}
    if bait.body.cavities or not all(_is_plain(piece, bait, parts.get(piece.name)) for piece in gone):
        return None
    stays = tuple(part for part in composition.parts if part.role is not Role.INSERT or part.name not in names)
    room = sum((solid_moments(piece.surface) for piece in gone), NOTHING)
    return altered(replace(composition, parts=stays), NOTHING - room)


def _is_plain(piece: MeshPiece, bait: Bait, part: Part | None) -> bool:
    """Whether a piece lies wholly in the body's material and takes nothing else's room."""
    if part is None or piece.role is not Role.INSERT or piece.cavities or piece.fit or piece.replaces:
        return False
    others = [other for other in bait.pieces if other is not piece]
    if any(piece.name in other.replaces or (other.role is Role.VOID and _near(piece, other)) for other in others):
        return False
    whole = solid_moments(piece.surface).amount
    if abs(part.volume - whole) > _WHOLE * whole:
        return False
    return all(relation(shell, bait.body.shells) is Relation.INSIDE for shell in piece.shells)


def _near(one: MeshPiece, other: MeshPiece) -> bool:
    low = np.maximum(one.surface.bounds[0], other.surface.bounds[0])
    high = np.minimum(one.surface.bounds[1], other.surface.bounds[1])
    return bool((low <= high).all())
