"""What of a bait lies outside its body: pieces that stick out, hollows that are not closed, pieces that touch nothing."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from meshlure import tolerances
from meshlure.bait.overlaps import Filling, cubic, millimetres, place
from meshlure.bait.pieces import MeshPiece, Role
from meshlure.bait.relations import Relation
from meshlure.findings import Finding, Level
from meshlure.geometry.clearance import nearest
from meshlure.geometry.crossing import crossings
from meshlure.geometry.solids import Solid

_DEPTH_POINTS = 400
"""Vertices of an outside part of which the distance to the body is taken; enough to name how far it sticks out."""


def untouched(body: MeshPiece, pieces: Sequence[MeshPiece], relations: Mapping[str, Relation]) -> list[Finding]:
    """Return a stopping fault for every piece that is neither in the body nor within reach of it or of one that is."""
    held = [body] + [piece for piece in pieces if relations[piece.name] is not Relation.APART]
    loose = [piece for piece in pieces if relations[piece.name] is Relation.APART]
    while True:
        near = [piece for piece in loose if any(_near(other, piece) for other in held)]
        if not near:
            break
        held += near
        loose = [piece for piece in loose if piece not in near]
    findings = []
    for piece in loose:
        middle = piece.surface.bounds.mean(axis=0)
        apart = float(nearest(body.surface, _sample(piece.surface.vertices)).distance.min())
        findings.append(Finding(
            code="touches-nothing",
            level=Level.FAULT,
            piece=piece.name,
            message=f"'{piece.name}' touches nothing: it lies {apart * 1e3:.1f} mm from the body, round {millimetres(middle)} mm",
            where=((float(middle[0]), float(middle[1]), float(middle[2])),),
            advice="export it from the same CAD origin and in the same unit as the body, or leave it out",
            stops=True,
        ))
    return findings


def _near(other: MeshPiece, piece: MeshPiece) -> bool:
    gap = tolerances.TOUCH_GAP + max(piece.fit, other.fit)
    low, high = other.surface.bounds
    if (piece.surface.bounds[0] > high + gap).any() or (piece.surface.bounds[1] < low - gap).any():
        return False
    return len(crossings(other.surface, piece.surface, gap)) > 0


def _sample(vertices: np.ndarray) -> np.ndarray:
    return vertices[:: max(1, len(vertices) // _DEPTH_POINTS)]


def outside_findings(
    body: MeshPiece, pieces: Sequence[MeshPiece], filling: Filling, whole: Solid, outer: Solid, joined: Solid
) -> list[Finding]:
    """Return what is to be said of pieces that cross the body's skin.

    Parameters
    ----------
    body : MeshPiece
    pieces : sequence of MeshPiece
    filling : Filling
    whole : Solid
        The body without regard to hollows and inserts.
    outer, joined : Solid
        Body and pieces together, with and without their closed-off spaces filled.
    """
    findings = []
    for piece in pieces:
        if piece.role is Role.INSERT:
            findings += _sticking_out(body, piece, filling.solids[piece.name], whole)
    for space in filling.spaces:
        drawn = space.solid
        if space.flooded or drawn.empty:
            continue
        leak = drawn.less(outer)
        if leak.volume > tolerances.VOLUME_SHARE * drawn.volume:
            where = place(leak)
            findings.append(Finding(
                code="sealed-void-open",
                level=Level.FAULT,
                piece=space.name,
                message=f"'{space.name}' is called sealed, but reaches the outside: {cubic(leak.volume)} of it, "
                f"round {millimetres(where)} mm, is not closed off and is counted as water",
                where=(where,),
                advice="leave a wall between it and the skin, close it with a plug as an insert, or call it flooded",
            ))
    return findings


def _sticking_out(body: MeshPiece, piece: MeshPiece, solid: Solid, whole: Solid) -> list[Finding]:
    out = solid.less(whole)
    if out.volume <= tolerances.VOLUME_SHARE * solid.volume:
        return []
    where = place(out)
    reach = nearest(body.surface, _sample(out.surface().vertices))
    far = int(reach.distance.argmax())
    inside = solid.volume - out.volume
    share = f"{cubic(out.volume)} of '{piece.name}'"
    if inside <= tolerances.VOLUME_SHARE * solid.volume:
        return [Finding(
            code="sits-outside",
            level=Level.NOTE if piece.lip else Level.WARNING,
            piece=piece.name,
            message=f"all {cubic(solid.volume)} of '{piece.name}' lie outside the body's material, in a pocket drawn into it or "
            f"on its skin, round {millimetres(where)} mm; what is not closed off displaces water",
            where=(where,),
            advice="right for an insert in an open pocket or a glued-on part; else check its place",
        )]
    return [Finding(
        code="sticks-out",
        level=Level.NOTE if piece.lip else Level.WARNING,
        piece=piece.name,
        message=f"{share} stick out of the body, by up to {reach.distance[far] * 1e3:.1f} mm, round {millimetres(where)} mm; "
        "it displaces water there",
        where=(where,),
        advice="right for a lip, an eye or an exposed weight; else move it inward",
    )]
