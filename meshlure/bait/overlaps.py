"""Inserts and hollows among themselves: what is left to each once later pieces have taken their space."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from meshlure import tolerances
from meshlure.bait.hollows import Space, cavities, hollow_findings, left_hollow
from meshlure.bait.meshpiece import solid_of
from meshlure.bait.pieces import MeshPiece, Role
from meshlure.bait.wording import middle, place_text, volume_text
from meshlure.findings import Finding, Level
from meshlure.geometry.solids import Solid


@dataclass(frozen=True, eq=False)
class Filling:
    """Everything inside a bait that is not the body's own material.

    Attributes
    ----------
    solids : dict of Solid
        By insert name: the space that is left to it.
    taken : frozenset of str
        Names of inserts that have lost space to others.
    spaces : tuple of Space
        Voids and cavities, less all that is solid in them.
    drawn : tuple of Solid
        The same as drawn.
    findings : tuple of Finding
    """

    solids: dict[str, Solid]
    taken: frozenset[str]
    spaces: tuple[Space, ...]
    drawn: tuple[Solid, ...]
    findings: tuple[Finding, ...]

    def everything(self) -> Solid | None:
        """Return the joined space of all inserts and hollows, None where there are none."""
        every = [*self.solids.values(), *(space.solid for space in self.spaces)]
        return every[0].joined(*every[1:]) if every else None

    def flooded(self) -> Solid | None:
        """Return the joined flooded hollows, None where nothing floods."""
        wet = [space.solid for space in self.spaces if space.flooded and not space.solid.empty]
        return wet[0].joined(*wet[1:]) if wet else None


def fill(body: MeshPiece, pieces: Sequence[MeshPiece]) -> Filling:
    """Return what is left to each insert and hollow of a bait.

    Parameters
    ----------
    body : MeshPiece
        For its own cavities.
    pieces : sequence of MeshPiece
        Inserts and voids in the bait file's order.

    Notes
    -----
    Two solid inserts may share space only where the later one says so. A solid in a hollow is solid whatever the order,
    but a void that says so, or lies wholly inside an earlier insert, is hollowed out of it. Of two hollows the later
    one takes the shared space, and a flooded one floods a sealed one that it opens into.
    """
    findings: list[Finding] = []
    drawn = {piece.name: _drawn(piece) for piece in pieces}
    left: dict[str, Solid] = {}
    taken: set[str] = set()
    before: list[MeshPiece] = []
    for later in pieces:
        own = drawn[later.name]
        for earlier in before:
            shared = _shared(earlier, later, left[earlier.name], own)
            if shared is None:
                continue
            inside = later.role is Role.VOID and _is_all_of(shared, own)
            if earlier.name in later.replaces or inside:
                left[earlier.name] = left[earlier.name].less(own)
                taken.add(earlier.name)
                findings += _replaced(earlier, later, left[earlier.name], shared)
            elif later.role is Role.INSERT:
                findings.append(_unsaid(earlier, later, shared))
        if later.role is Role.INSERT:
            left[later.name] = own
            before.append(later)
    hollows = [*cavities((body, *pieces))]
    voids = [piece for piece in pieces if piece.role is Role.VOID]
    hollows += [Space(void.name, None, drawn[void.name], void.flooded, drawn[void.name].volume) for void in voids]
    spaces, floods = left_hollow(hollows, tuple(left.values()))
    findings += [*floods, *hollow_findings(hollows, spaces, left)]
    return Filling(left, frozenset(taken), spaces, tuple(space.solid for space in hollows), tuple(findings))


def _drawn(piece: MeshPiece) -> Solid:
    solid = solid_of(piece.surface, piece.name)
    return solid.less(*(solid_of(cavity, piece.name) for cavity in piece.cavities)) if piece.cavities else solid


def _is_all_of(shared: Solid, own: Solid) -> bool:
    return abs(own.volume - shared.volume) <= tolerances.VOLUME_SHARE * own.volume


def _shared(earlier: MeshPiece, later: MeshPiece, left: Solid, own: Solid) -> Solid | None:
    a, b = earlier.surface.bounds, later.surface.bounds
    if (np.maximum(a[0], b[0]) > np.minimum(a[1], b[1])).any():
        return None
    shared = left.met(own)
    return shared if shared.volume > tolerances.VOLUME_SHARE * min(left.volume, own.volume) else None


def _replaced(earlier: MeshPiece, later: MeshPiece, left: Solid, shared: Solid) -> list[Finding]:
    where = middle(shared)
    if left.volume <= tolerances.VOLUME_SHARE * shared.volume:
        return [
            Finding(
                code="nothing-left",
                level=Level.WARNING,
                piece=earlier.name,
                message=f"nothing is left of '{earlier.name}': '{later.name}' takes all its space",
                where=(where,),
                advice="leave it out, or let the larger one come first and the smaller one replace it",
            )
        ]
    if earlier.name in later.replaces:
        return []
    return [
        Finding(
            code="hollowed-out",
            level=Level.NOTE,
            piece=earlier.name,
            message=f"'{later.name}' lies wholly inside '{earlier.name}', {volume_text(shared.volume)} round "
            f"{place_text(where)}, and is hollowed out of it",
            where=(where,),
            advice=f"say replaces = [\"{earlier.name}\"] beside '{later.name}' if it is meant, else move it",
        )
    ]


def _unsaid(earlier: MeshPiece, later: MeshPiece, shared: Solid) -> Finding:
    where = middle(shared)
    return Finding(
        code="inserts-overlap",
        level=Level.FAULT,
        piece=later.name,
        message=f"'{later.name}' and '{earlier.name}' share {volume_text(shared.volume)} at {place_text(where)}, "
        "so it is undefined which of them weighs there",
        where=(where,),
        advice=f"move them apart in CAD, or say replaces = [\"{earlier.name}\"] beside '{later.name}' if it takes that "
        "space",
        stops=True,
    )
