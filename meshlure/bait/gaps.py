"""The gap between an insert and its pocket: glue, sealed air, or water where it opens to the outside."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from meshlure import tolerances
from meshlure.bait.meshpiece import solid_of
from meshlure.bait.pieces import MeshPiece, Role
from meshlure.bait.wording import middle, place_text, volume_text
from meshlure.findings import Finding, Level
from meshlure.geometry.offset import grown
from meshlure.geometry.shells import split
from meshlure.geometry.solids import Solid
from meshlure.geometry.topology import paired


@dataclass(frozen=True, eq=False)
class Gapped:
    """The pieces of a bait with the gaps round them as pieces of their own.

    Attributes
    ----------
    pieces : tuple of MeshPiece
        The gaps first, so that every other piece takes its space from them; then the pieces as they were.
    findings : tuple of Finding
    """

    pieces: tuple[MeshPiece, ...]
    findings: tuple[Finding, ...]


def with_gaps(body: MeshPiece, pieces: Sequence[MeshPiece]) -> Gapped:
    """Return a bait's pieces with the gaps that their fits leave.

    Parameters
    ----------
    body : MeshPiece
    pieces : sequence of MeshPiece

    Notes
    -----
    A gap is the part in the body of the insert grown by its fit, as the pocket is cut, less every other piece. Glue
    fills it where it is named. Else it is sealed air where the pocket lies wholly in the body, and water where the
    pocket opens to the outside.
    """
    gaps: list[MeshPiece] = []
    findings: list[Finding] = []
    whole: Solid | None = None
    for piece in pieces:
        if piece.role is not Role.INSERT or piece.fit == 0:
            continue
        whole = whole or solid_of(body.surface, body.name)
        pocket = solid_of(grown(piece.surface, piece.fit), piece.name)
        inside = pocket.met(whole)
        if inside.empty:
            continue
        opens = pocket.volume - inside.volume > tolerances.VOLUME_SHARE * pocket.volume
        if opens and piece.glue is None:
            findings.append(_open(piece, inside.less(solid_of(piece.surface, piece.name))))
        gaps.append(_gap(piece, inside if opens else pocket, opens))
    if not gaps:
        return Gapped(tuple(pieces), ())
    names = tuple(gap.name for gap in gaps)
    return Gapped((*gaps, *(replace(piece, replaces=(*piece.replaces, *names)) for piece in pieces)), tuple(findings))


def _gap(piece: MeshPiece, space: Solid, opens: bool) -> MeshPiece:
    surface = space.surface()
    pairs = paired(surface)
    return MeshPiece(
        name=f"{'glue' if piece.glue else 'gap'} round {piece.name}",
        role=Role.VOID if piece.glue is None else Role.INSERT,
        surface=surface,
        pairs=pairs,
        shells=tuple(shell.surface for shell in split(surface, pairs)),
        substance=piece.glue,
        flooded=opens and piece.glue is None,
    )


def _open(piece: MeshPiece, gap: Solid) -> Finding:
    where = middle(gap)
    return Finding(
        code="gap-open",
        level=Level.WARNING,
        piece=piece.name,
        message=f"the gap round '{piece.name}', {volume_text(gap.volume)} about {place_text(where)}, is open to the "
        "outside and nothing is said to fill it: it is counted as water",
        where=(where,),
        advice='name what fills it beside fit: glue = "epoxy clear coat", or take the fit away where it is cast in',
    )
