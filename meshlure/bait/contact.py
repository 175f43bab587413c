"""Contact: whether every part of every piece is held by the body, or by a piece that is."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from meshlure import tolerances
from meshlure.bait.pieces import MeshPiece
from meshlure.bait.relations import Relation, relation
from meshlure.bait.wording import place_text
from meshlure.findings import Finding, Level
from meshlure.geometry.clearance import nearest
from meshlure.geometry.crossing import meets
from meshlure.geometry.surface import Surface

_SAMPLED = 200
"""Vertices of a loose part of which the distance to the body is taken, to name how far off it lies."""


def untouched(
    body: MeshPiece, pieces: Sequence[MeshPiece], relations: Mapping[str, Sequence[Relation]]
) -> list[Finding]:
    """Return a stopping fault for every part that is neither in the body nor within reach of it or of one that is.

    Parameters
    ----------
    body : MeshPiece
    pieces : sequence of MeshPiece
    relations : mapping
        By piece name, where each of its shells lies to the body.
    """
    held: list[tuple[MeshPiece, Surface]] = [(body, shell) for shell in body.shells]
    loose: list[tuple[MeshPiece, Surface]] = []
    for piece in pieces:
        for shell, lies in zip(piece.shells, relations[piece.name], strict=True):
            (loose if lies is Relation.APART else held).append((piece, shell))
    while True:
        near = [part for part in loose if any(_near(other, part) for other in held)]
        if not near:
            break
        held += near
        loose = [part for part in loose if not any(part is other for other in near)]
    return [_untouched(body, piece, shell) for piece, shell in loose]


def _near(other: tuple[MeshPiece, Surface], part: tuple[MeshPiece, Surface]) -> bool:
    gap = tolerances.TOUCH_GAP + max(part[0].fit, other[0].fit)
    low, high = other[1].bounds
    if (part[1].bounds[0] > high + gap).any() or (part[1].bounds[1] < low - gap).any():
        return False
    return meets(other[1], part[1], gap) or relation(part[1], [other[1]]) is not Relation.APART


def _untouched(body: MeshPiece, piece: MeshPiece, shell: Surface) -> Finding:
    x, y, z = (float(value) for value in shell.bounds.mean(axis=0))
    step = max(1, len(shell.vertices) // _SAMPLED)
    apart = float(nearest(body.surface, shell.vertices[::step]).distance.min())
    what = f"'{piece.name}'" if len(piece.shells) == 1 else f"a part of '{piece.name}'"
    return Finding(
        code="touches-nothing",
        level=Level.FAULT,
        piece=piece.name,
        message=f"{what} touches nothing: it lies {apart * 1e3:.1f} mm from the body, about {place_text((x, y, z))}",
        where=((x, y, z),),
        advice="export it from the same CAD origin and in the same unit as the body, or leave it out",
        stops=True,
    )
